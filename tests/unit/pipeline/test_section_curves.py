"""The curves of one section agree with the slow solution section by section, and with a run."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
import yaml
from end_to_end.projects import replaced, write_project
from reference.closure_profile import share_of_closure
from reference.ground_curve import GroundCurve
from reference.sections import section_results
from unit.plugin.strangers import own_points

from tunnelcalc.curves import curves_at
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.one_section import position_at
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.section_curves import PEAK, RESIDUAL, RING, SectionCurves

REGISTRY = load_plugins(own_points())
SILTSTONE, GOUGE, SANDSTONE = "57", "135", "20"


def curves_of(folder: Path, at: str, name: str | None = None) -> SectionCurves:
    return curves_at(read_project(folder, REGISTRY), REGISTRY, at, name)


def reference_of(folder: Path, at: str):
    """The results and the curve of the section, by integrating the governing equations."""
    project = read_project(folder, REGISTRY)
    ground = project.ground.take(slice(position_at(project, at), position_at(project, at) + 1))
    row = {name: column[0] for name, column in ground.items()}
    found = section_results(row, yaml.safe_load((folder / "project.yaml").read_text()))
    section = found.section
    curve = GroundCurve(
        p0=section["in_situ_stress_mpa"],
        sci=row["intact_strength_mpa"],
        mb=section["mb"],
        s=section["s"],
        a=section["a"],
        modulus=section["deformation_modulus_mpa"],
        nu=row["poisson_ratio"],
        psi_deg=row["dilation_deg"],
    )
    return found, curve


@pytest.fixture(scope="module")
def folder(tmp_path_factory):
    return write_project(tmp_path_factory.mktemp("curves") / "project")


@pytest.fixture(scope="module")
def two_cases(tmp_path_factory):
    """The siltstone under a horizontal stress far from the vertical one."""
    folder = write_project(tmp_path_factory.mktemp("two") / "project")
    replaced("units.csv", "siltstone,25.5,0.9", "siltstone,25.5,1.6")(folder)
    return folder


# independent calculation: the governing equations integrated by scipy (tests/reference)
@pytest.mark.parametrize("at", [SANDSTONE, SILTSTONE])
def test_the_ground_reaction_is_that_of_the_governing_equations(folder, at):
    ground = curves_of(folder, at).governing.ground
    _, curve = reference_of(folder, at)
    assert ground.critical_pressure_mpa == pytest.approx(curve.critical_pressure, rel=1e-9)
    for index in range(0, ground.support_pressure_mpa.size - 1, 7):
        plastic, closure = curve.at(float(ground.support_pressure_mpa[index]))
        assert ground.closure_mm[index] == pytest.approx(3000 * closure, rel=1e-8)
        assert ground.plastic_radius_m[index] == pytest.approx(3 * plastic, rel=1e-8)


def test_the_closure_profile_is_that_of_the_reference(folder):
    curves = curves_of(folder, SILTSTONE)
    profile, ground = curves.governing.profile, curves.governing.ground
    plastic = float(ground.plastic_radius_m[0])
    expected = [share_of_closure(x, 3.0, plastic) for x in profile.distance_m.tolist()]
    np.testing.assert_allclose(profile.closure_share, expected, rtol=1e-12)
    np.testing.assert_allclose(
        profile.closure_mm, np.array(expected) * ground.free_closure_mm, rtol=1e-12
    )


@pytest.mark.parametrize("name", ["light", "heavy"])
def test_support_and_ground_rest_where_the_reference_finds_it(folder, name):
    curves = curves_of(folder, SILTSTONE, name)
    found, _ = reference_of(folder, SILTSTONE)
    (row,) = (row for row in found.classes if row["support_class"] == name)
    support = curves.governing.support
    assert support.rest_pressure_mpa == pytest.approx(row["support_pressure_mpa"], rel=1e-8)
    assert support.rest_closure_mm == pytest.approx(row["supported_closure_mm"], rel=1e-8)
    radius = row["supported_plastic_radius_m"]
    assert support.rest_plastic_radius_m == pytest.approx(radius, rel=1e-8)
    first = min(element.installation_closure_mm for element in support.elements)
    assert first == pytest.approx(row["installation_closure_mm"], rel=1e-8)


def test_the_state_at_rest_lies_on_every_line(folder):
    curves = curves_of(folder, SILTSTONE, "heavy")
    ground, support = curves.governing.ground, curves.governing.support
    at = np.flatnonzero(ground.support_pressure_mpa == support.rest_pressure_mpa)
    assert ground.closure_mm[at] == pytest.approx(support.rest_closure_mm, rel=1e-12)
    on_sum = np.interp(support.rest_closure_mm, support.closure_mm, support.pressure_mpa)
    assert on_sum == pytest.approx(support.rest_pressure_mpa, rel=1e-9)
    shares = 0.0
    for element in support.elements:
        on_line = np.interp(support.rest_closure_mm, element.closure_mm, element.pressure_mpa)
        assert on_line == pytest.approx(element.rest_pressure_mpa, rel=1e-9)
        shares += element.rest_pressure_mpa
    assert shares == pytest.approx(support.rest_pressure_mpa, rel=1e-12)


def test_an_element_is_followed_from_installation_to_beyond_its_capacity(folder):
    for element in curves_of(folder, SILTSTONE, "heavy").governing.support.elements:
        capacity = element.capacity_mpa
        np.testing.assert_allclose(element.pressure_mpa, [0, capacity, 1.2 * capacity])
        assert element.closure_mm[0] == element.installation_closure_mm
        moved_m = np.diff(element.closure_mm) / 1000
        stiffness = element.stiffness_mpa_per_m
        np.testing.assert_allclose(np.diff(element.pressure_mpa), moved_m * stiffness, rtol=1e-12)
        assert element.capacity_closure_mm == pytest.approx(element.closure_mm[1], rel=1e-12)


def test_both_stress_cases_are_there_where_stresses_are_far_from_equal(two_cases):
    curves = curves_of(two_cases, SILTSTONE)
    assert [case.stress_case for case in curves.cases] == ["mean", "larger"]
    mean, larger = (case.ground.in_situ_stress_mpa for case in curves.cases)
    # vertical (75 + 3) m x 25.5 kN/m3; common practice, no source
    assert (mean, larger) == pytest.approx((1.989 * 1.3, 1.989 * 1.6))
    assert curves.governing_case == "larger"
    assert curves.governing is curves.cases[1]
    closures = [case.ground.free_closure_mm for case in curves.cases]
    assert closures[1] > closures[0]


def test_a_class_is_the_required_one_unless_named_or_none_is_adequate(folder):
    assert curves_of(folder, SANDSTONE).support_class == "light"
    assert curves_of(folder, SILTSTONE).support_class == "heavy"
    assert curves_of(folder, SILTSTONE, "light").support_class == "light"
    without = curves_of(folder, GOUGE)
    assert (without.required_class, without.support_class) == ("none_adequate", "heavy")


def test_the_envelope_is_the_criterion_in_both_spaces(folder):
    curves = curves_of(folder, SILTSTONE)
    _, curve = reference_of(folder, SILTSTONE)
    (envelope,) = curves.envelopes
    minor, major = envelope.minor_stress_mpa, envelope.major_stress_mpa
    assert (envelope.of, envelope.curved) == (PEAK, True)
    assert minor[0] == pytest.approx(-curve.s * curve.sci / curve.mb)
    assert minor[-1] == envelope.confinement_mpa
    for s3, s1 in zip(minor[1:].tolist(), major[1:].tolist(), strict=True):
        assert s1 == pytest.approx(s3 + curve.deviator(s3), rel=1e-12)
    # Each point lies on its Mohr circle, and no circle reaches beyond the curve: it is touched.
    middle, radius = (major + minor) / 2, (major - minor) / 2
    normal, shear = envelope.normal_stress_mpa, envelope.shear_stress_mpa
    np.testing.assert_allclose((normal - middle) ** 2 + shear**2, radius**2, rtol=1e-10, atol=1e-15)
    for index in range(5, minor.size - 5, 5):
        beyond = np.hypot(normal - middle[index], shear) - radius[index]
        assert np.min(beyond) > -1e-12


def test_the_line_of_the_envelope_is_the_equivalent_one(folder):
    found, _ = reference_of(folder, SILTSTONE)
    (envelope,) = curves_of(folder, SILTSTONE).envelopes
    friction = math.radians(found.section["friction_angle_deg"])
    cohesion = found.section["cohesion_mpa"]
    slope = (1 + math.sin(friction)) / (1 - math.sin(friction))
    start = 2 * cohesion * math.cos(friction) / (1 - math.sin(friction))
    np.testing.assert_allclose(
        envelope.line_major_stress_mpa, start + slope * envelope.minor_stress_mpa, rtol=1e-8
    )
    np.testing.assert_allclose(
        envelope.line_shear_stress_mpa,
        cohesion + envelope.normal_stress_mpa * math.tan(friction),
        rtol=1e-8,
    )


def test_the_largest_difference_of_the_line_is_a_point(folder):
    (envelope,) = curves_of(folder, SILTSTONE).envelopes
    difference = np.abs(envelope.line_major_stress_mpa - envelope.major_stress_mpa)
    (at,) = (k for k, mark in envelope.marks.items() if "largest_difference" in mark.split(";"))
    assert difference[at] == np.max(difference)
    relative = np.where(envelope.minor_stress_mpa >= 0, difference / envelope.major_stress_mpa, 0)
    (at,) = (k for k, mark in envelope.marks.items() if "largest_relative_difference" in mark)
    assert relative[at] == np.max(relative)


def test_residual_strength_and_a_disturbed_ring_have_envelopes_of_their_own(tmp_path):
    folder = write_project(tmp_path / "project")
    with (folder / "project.yaml").open("a") as stream:
        stream.write("methods:\n  ground_reaction: hoek_brown_disturbed_ring\n")
    text = (folder / "units.csv").read_text().splitlines()
    more = ("residual_gsi,disturbed_thickness_m", "40,1", "20,1", "8,1")
    units = "\n".join(f"{line},{new}" for line, new in zip(text, more, strict=True))
    (folder / "units.csv").write_text(units.replace("62,0,", "62,0.8,") + "\n")
    envelopes = curves_of(folder, SANDSTONE).envelopes
    assert [envelope.of for envelope in envelopes] == [PEAK, RESIDUAL, RING]
    strong, *weaker = (envelope.major_stress_mpa[-1] for envelope in envelopes)
    assert all(weak < strong for weak in weaker)
    assert all(np.all(np.isnan(e.line_major_stress_mpa)) for e in envelopes[1:])


def test_a_ring_as_strong_as_the_mass_is_not_shown(tmp_path):
    folder = write_project(tmp_path / "project")
    with (folder / "project.yaml").open("a") as stream:
        stream.write("methods:\n  ground_reaction: hoek_brown_disturbed_ring\n")
    text = (folder / "units.csv").read_text().splitlines()
    more = ("disturbed_thickness_m", "1", "1", "1")
    units = "\n".join(f"{line},{new}" for line, new in zip(text, more, strict=True))
    # The sandstone is not disturbed, the siltstone is.
    (folder / "units.csv").write_text(units.replace("7,35,0,", "7,35,0.8,") + "\n")
    assert [e.of for e in curves_of(folder, SANDSTONE).envelopes] == [PEAK]
    assert [e.of for e in curves_of(folder, SILTSTONE).envelopes] == [PEAK, RING]


def test_a_straight_criterion_is_its_own_line(tmp_path):
    folder = write_project(tmp_path / "project")
    with (folder / "project.yaml").open("a") as stream:
        stream.write(
            "methods:\n  strength: mohr_coulomb\n"
            "  ground_reaction: mohr_coulomb_perfectly_plastic\n"
        )
    text = (folder / "units.csv").read_text().splitlines()
    more = ("cohesion_mpa,friction_angle_deg", "3,40", "0.5,0", "0.1,20")
    units = "\n".join(f"{line},{new}" for line, new in zip(text, more, strict=True))
    (folder / "units.csv").write_text(units + "\n")
    (envelope,) = curves_of(folder, SANDSTONE).envelopes
    assert not envelope.curved
    expected = 3 + envelope.normal_stress_mpa * math.tan(math.radians(40))
    np.testing.assert_allclose(envelope.shear_stress_mpa, expected, rtol=1e-12)
    # Without friction the shear strength is the cohesion whatever the stress.
    (envelope,) = curves_of(folder, SILTSTONE).envelopes
    np.testing.assert_allclose(envelope.shear_stress_mpa, 0.5, rtol=1e-12)


def test_what_cannot_be_computed_is_named(tmp_path):
    folder = write_project(tmp_path / "project")
    replaced("ground.csv", "gouge,200", "gouge,9000")(folder)
    replaced("units.csv", "gouge,22,,3,8,12,0", "gouge,22,,0.2,4,5,1")(folder)
    curves = curves_of(folder, GOUGE)
    assert curves.unknown == (("ground reaction", "no closure that can be computed"),)
    assert math.isnan(curves.governing.support.rest_closure_mm)
    assert len(curves.envelopes) == 1
