"""Composite section of concrete and steel against strips under one plane strain.

Independent calculation: concrete rectangle and steel of three plates are cut in thin strips; hoop
strain and curvature that give the thrust and the moment follow from a linear solve, the stresses
at the faces from them. Where it is installed, a general-purpose finite-element library for
cross-sections does the same. Steel is laid over the concrete, so that areas overlap as in the
published method.
"""

import numpy as np
import pytest
from tunnelcalc_composite_lining.composite_section import (
    shotcrete_part,
    steel_part,
)
from tunnelcalc_composite_lining.interaction import (
    faces,
    moment_capacity_mnm_per_m,
)

THICKNESS, CONCRETE_MODULUS, NU = 0.25, 22_000.0, 0.2
HEIGHT, WIDTH, WEB, FLANGE, SPACING, STEEL_MODULUS = 0.16, 0.16, 0.008, 0.013, 1.2, 200_000.0
STRIPS = 200_000
ONE = np.ones(1)
CLEAR = HEIGHT - 2 * FLANGE
AREA = 2 * WIDTH * FLANGE + CLEAR * WEB
INERTIA = (WIDTH * HEIGHT**3 - (WIDTH - WEB) * CLEAR**3) / 12

PARTS = (
    shotcrete_part(
        "shotcrete",
        thickness_m=THICKNESS,
        modulus_mpa=CONCRETE_MODULUS * ONE,
        poisson_ratio=NU,
        compressive_strength_mpa=25 * ONE,
        tensile_strength_mpa=2 * ONE,
    ),
    steel_part(
        "steel",
        area_m2=AREA * ONE,
        inertia_m4=INERTIA * ONE,
        depth_m=HEIGHT,
        spacing_m=SPACING,
        modulus_mpa=STEEL_MODULUS * ONE,
        poisson_ratio=0.0,
        yield_strength_mpa=235 * ONE,
    ),
)


def strips():
    """Height, area times modulus of thin strips of both materials, for a metre of tunnel."""

    def cut(depth, width):
        edges = np.linspace(-depth / 2, depth / 2, STRIPS + 1)
        middle = (edges[1:] + edges[:-1]) / 2
        return middle, width(middle) * np.diff(edges)

    y_c, a_c = cut(THICKNESS, np.ones_like)
    y_s, a_s = cut(HEIGHT, lambda y: np.where(np.abs(y) > CLEAR / 2, WIDTH, WEB) / SPACING)
    stiffness = (a_c * CONCRETE_MODULUS / (1 - NU**2), a_s * STEEL_MODULUS)
    return np.concatenate([y_c, y_s]), np.concatenate(stiffness)


def face_stresses(thrust, moment):
    """Largest and least stress of concrete and of steel, compression positive."""
    y, ea = strips()
    system = [[ea.sum(), (ea * y).sum()], [(ea * y).sum(), (ea * y**2).sum()]]
    strain, curvature = np.linalg.solve(system, [thrust, moment])
    concrete = (
        CONCRETE_MODULUS / (1 - NU**2) * (strain + curvature * THICKNESS / 2 * np.array([1, -1]))
    )
    return concrete, STEEL_MODULUS * (strain + curvature * HEIGHT / 2 * np.array([1, -1]))


@pytest.mark.parametrize(("thrust", "moment"), [(1.0, 0.0), (0.0, 0.05), (2.0, 0.1), (-0.3, 0.02)])
def test_face_stresses_are_those_of_plane_strips(thrust, moment):
    stresses = [s for part in face_stresses(thrust, moment) for s in part]
    signs = (1, -1, 1, -1)
    found = [limit.thrust * thrust + limit.moment * moment for limit in faces(PARTS, 1.0)]
    for limit, sign, stress in zip(found, signs, stresses, strict=True):
        assert limit[0] == pytest.approx(sign * stress, rel=1e-8, abs=1e-9)


@pytest.mark.parametrize("thrust", [-0.3, 0.0, 1.0, 4.0])
def test_at_the_capacity_one_face_is_at_its_strength(thrust):
    capacity = moment_capacity_mnm_per_m(thrust * ONE, PARTS, 1.0)[0]
    concrete, steel = face_stresses(thrust, capacity)
    used = (concrete[0] / 25, -concrete[1] / 2, steel[0] / 235, -steel[1] / 235)
    assert max(used) == pytest.approx(1.0, rel=1e-8)


def test_a_finite_element_library_finds_the_same_stresses():
    """Bars without Poisson effect, each material a geometry of its own beside the other."""
    library = pytest.importorskip("sectionproperties.pre.library")
    materials = pytest.importorskip("sectionproperties.pre")
    analysis = pytest.importorskip("sectionproperties.analysis")

    def material(name, modulus):
        return materials.Material(name, modulus, 0.0, 1.0, 1.0, "grey")

    # A flange plate above and one below, in the line of a slab: one neutral axis.
    slab = library.rectangular_section(d=250, b=1000, material=material("slab", 22e3))
    plate = library.rectangular_section(d=160, b=30, material=material("plate", 200e3))
    geometry = slab + plate.align_to(slab, on="right").shift_section(y_offset=45)
    section = analysis.Section(geometry.create_mesh(mesh_sizes=[500, 50]))
    section.calculate_geometric_properties()
    section.calculate_warping_properties()
    result = section.calculate_stress(n=-1e6, mxx=2e8)
    parts = (
        shotcrete_part(
            "slab",
            thickness_m=0.25,
            modulus_mpa=22e3 * ONE,
            poisson_ratio=0.0,
            compressive_strength_mpa=25 * ONE,
            tensile_strength_mpa=2 * ONE,
        ),
        steel_part(
            "plate",
            area_m2=0.16 * 0.03 * ONE,
            inertia_m4=0.16**3 * 0.03 / 12 * ONE,
            depth_m=0.16,
            spacing_m=1.0,
            modulus_mpa=200e3 * ONE,
            poisson_ratio=0.0,
            yield_strength_mpa=235 * ONE,
        ),
    )
    found = [limit.thrust * 1.0 + limit.moment * 0.2 for limit in faces(parts, 1.0)]
    wanted = []
    for part in result.get_stress():
        wanted += [-part["sig_zz"].min(), part["sig_zz"].max()]
    np.testing.assert_allclose(np.concatenate(found), wanted, rtol=1e-9)
