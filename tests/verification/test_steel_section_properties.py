"""Area and second moment of area of rolled sections, by integration over the height.

An independent calculation: the width at each height, with circular fillets, integrated by scipy;
and, where it is installed, a general-purpose finite-element library for cross-sections.
"""

import math

import numpy as np
import pytest
from scipy.integrate import quad
from tunnelcalc_steel_sets.sections_table import packaged_text, read_sections

SECTIONS = list(read_sections(packaged_text()).values())
SOME = [s for s in SECTIONS if s.designation in ("IPE 100", "IPE 300", "HEA 200", "HEM 300")]


def integrated(section):
    """Area and second moment of area from the width at each height."""
    half, flange = section.height_mm / 2, section.flange_thickness_mm
    radius, web = section.root_radius_mm, section.web_thickness_mm
    inner = half - flange

    def width(y):
        into = max(y - (inner - radius), 0)
        return web + 2 * (radius - math.sqrt(max(radius**2 - into**2, 0)))

    area = section.width_mm * flange
    inertia = section.width_mm * (half**3 - inner**3) / 3
    for low, high in ((0, inner - radius), (inner - radius, inner)):
        area += quad(width, low, high, epsabs=0, epsrel=1e-12)[0]
        inertia += quad(lambda y: width(y) * y**2, low, high, epsabs=0, epsrel=1e-12)[0]
    return 2 * area, 2 * inertia


@pytest.mark.parametrize("section", SECTIONS, ids=lambda s: s.designation)
def test_area_and_second_moment_are_those_of_the_outline(section):
    area, inertia = integrated(section)
    assert section.area_mm2 == pytest.approx(area, rel=1e-10)
    assert section.inertia_mm4 == pytest.approx(inertia, rel=1e-10)


@pytest.mark.parametrize("section", SOME, ids=lambda s: s.designation)
def test_a_finite_element_library_agrees(section):
    """64 chords a fillet: too much area by 0.02 % of the fillets'."""
    library = pytest.importorskip("sectionproperties.pre.library")
    analysis = pytest.importorskip("sectionproperties.analysis")
    geometry = library.i_section(
        d=section.height_mm,
        b=section.width_mm,
        t_f=section.flange_thickness_mm,
        t_w=section.web_thickness_mm,
        r=section.root_radius_mm,
        n_r=64,
    ).create_mesh(mesh_sizes=[0.0])
    found = analysis.Section(geometry)
    found.calculate_geometric_properties()
    assert found.get_area() == pytest.approx(section.area_mm2, rel=1e-4)
    assert np.isclose(found.get_ic()[0], section.inertia_mm4, rtol=1e-4)
