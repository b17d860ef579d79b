"""Composite section: stiffness, shares and interaction limits by hand."""

import numpy as np
import pytest
from tunnelcalc_composite_lining.composite_section import (
    equivalent_section,
    shares,
    shotcrete_part,
    steel_part,
)
from tunnelcalc_composite_lining.interaction import (
    interaction_diagram,
    moment_capacity_mnm_per_m,
    shear_capacity_mn_per_m,
)

ONE = np.ones(1)


def concrete(thickness=0.2, modulus=20_000.0, strong=25.0, tension=2.0, nu=0.2):
    return shotcrete_part(
        "shotcrete",
        thickness_m=thickness,
        modulus_mpa=modulus * ONE,
        poisson_ratio=nu,
        compressive_strength_mpa=strong * ONE,
        tensile_strength_mpa=tension * ONE,
    )


def steel(spacing=1.0, nu=0.0):
    """Invented: 4000 mm2, 2000 cm4, 160 mm deep, 250 MPa."""
    return steel_part(
        "steel",
        area_m2=4e-3 * ONE,
        inertia_m4=2e-5 * ONE,
        depth_m=0.16,
        spacing_m=spacing,
        modulus_mpa=200_000.0 * ONE,
        poisson_ratio=nu,
        yield_strength_mpa=250.0 * ONE,
    )


def test_a_lone_rectangle_is_its_own_equivalent():
    found = equivalent_section([concrete()])
    assert found.thickness_m[0] == pytest.approx(0.2, rel=1e-14)
    assert found.modulus_mpa[0] == pytest.approx(20_000 / 0.96, rel=1e-14)


def test_shares_by_hand():
    """Concrete 20 000 x 0.2 = 4000 (nu 0), steel 200 000 x 0.004 = 800 MN/m: 5/6 and 1/6.
    Bending: 20 000 x 0.2^3 / 12 = 13.333 and 200 000 x 2e-5 = 4 MN m2/m."""
    found = shares([concrete(nu=0.0), steel()])
    np.testing.assert_allclose(found.thrust, [[5 / 6], [1 / 6]], rtol=1e-14)
    np.testing.assert_allclose(found.moment, [[10 / 13], [3 / 13]], rtol=1e-14)
    section = equivalent_section([concrete(nu=0.0), steel()])
    thickness = np.sqrt(12 * (40 / 3 + 4) / 4800)
    assert section.thickness_m[0] == pytest.approx(thickness, rel=1e-14)
    assert section.modulus_mpa[0] == pytest.approx(4800 / thickness, rel=1e-14)


def test_sets_are_smeared_over_their_spacing():
    assert steel(spacing=2.0).axial_stiffness_mn_per_m[0] == pytest.approx(400.0)
    assert steel(nu=0.3).axial_stiffness_mn_per_m[0] == pytest.approx(800 / 0.91)


def test_pure_thrust_and_pure_bending_of_a_rectangle():
    """t 0.2, sc 25, st 2, factor 2: thrust 12.5 x 0.2 = 2.5 MN/m, tension 0.2 MN/m, bending
    st t^2 / 6 = 1 x 0.04 / 6; most moment at N = (12.5 - 1) / 2 x 0.2 = 1.15 MN/m."""
    parts = [concrete()]
    found = interaction_diagram(parts, 2.0)
    np.testing.assert_allclose(found.thrust_mn_per_m[0, [0, -1]], [-0.2, 2.5], rtol=1e-14)
    np.testing.assert_allclose(found.moment_mnm_per_m[0, [0, -1]], 0, atol=1e-16)
    bending = moment_capacity_mnm_per_m(np.zeros(1), parts, 2.0)
    np.testing.assert_allclose(bending, 0.04 / 6, rtol=1e-14)
    corner = found.thrust_mn_per_m[0, np.argmax(found.moment_mnm_per_m[0])]
    assert corner == pytest.approx(1.15, rel=1e-14)
    assert found.moment_mnm_per_m.max() == pytest.approx(13.5 / 2 * 0.04 / 6, rel=1e-14)


def test_pure_thrust_and_pure_bending_of_concrete_and_steel():
    """Thrust: concrete alone limits at 25 x 0.2 x 6/5 = 6 MN/m, steel at 250 x 0.004 x 6 = 6.
    With 24 MPa: 5.76. Bending: concrete in tension, 2 x 0.04 / 6 x 13 / 10."""
    parts = [concrete(nu=0.0, strong=24.0), steel()]
    found = interaction_diagram(parts, 1.0)
    np.testing.assert_allclose(found.thrust_mn_per_m[0, -1], 5.76, rtol=1e-14)
    np.testing.assert_allclose(found.thrust_mn_per_m[0, 0], -2 * 0.2 * 6 / 5, rtol=1e-14)
    bending = moment_capacity_mnm_per_m(np.zeros(1), parts, 1.0)
    np.testing.assert_allclose(bending, 2 * 0.04 / 6 * 1.3, rtol=1e-14)


def test_no_moment_where_the_thrust_alone_is_too_much():
    thrust = np.array([2.51, -0.21, 2.49, np.nan])
    part = shotcrete_part(
        "shotcrete",
        thickness_m=0.2,
        modulus_mpa=np.full(4, 20_000.0),
        poisson_ratio=0.2,
        compressive_strength_mpa=np.full(4, 12.5),
        tensile_strength_mpa=np.full(4, 1.0),
    )
    found = moment_capacity_mnm_per_m(thrust, [part], 1.0)
    np.testing.assert_array_equal(np.isnan(found), [True, True, False, True])


def test_concrete_just_sprayed_leaves_all_to_the_steel():
    parts = [concrete(modulus=0.0, strong=0.0, tension=0.0), steel()]
    found = interaction_diagram(parts, 1.0)
    np.testing.assert_allclose(found.thrust_mn_per_m[0, [0, -1]], [-1.0, 1.0], rtol=1e-14)
    np.testing.assert_allclose(
        moment_capacity_mnm_per_m(np.zeros(1), parts, 1.0), 250 * 2e-5 / 0.08, rtol=1e-14
    )


def test_a_section_without_stiffness_is_nan():
    section = equivalent_section([concrete(modulus=0.0)])
    assert np.isnan(section.thickness_m[0])
    assert np.isnan(section.modulus_mpa[0])
    assert np.isnan(shares([concrete(modulus=0.0)]).thrust[0][0])


def test_shear_capacity_of_a_rectangle():
    """No thrust: the tensile strength, 2 x 0.2 / 1.5; at compression s / 2 of the concrete,
    2 (2 + 12.5) = 29 against 25 x 12.5: sqrt(29) x 0.2 / 1.5; nothing beyond the strength."""
    part = concrete()
    found = shear_capacity_mn_per_m(part, np.zeros(1), 1.0)
    np.testing.assert_allclose(found, 2 * 0.2 / 1.5, rtol=1e-14)
    found = shear_capacity_mn_per_m(part, 2.5 * ONE, 1.0)
    np.testing.assert_allclose(found, np.sqrt(29) * 0.2 / 1.5, rtol=1e-14)
    assert np.isnan(shear_capacity_mn_per_m(part, 5.1 * ONE, 1.0)[0])
    assert np.isnan(shear_capacity_mn_per_m(part, -0.41 * ONE, 1.0)[0])


@pytest.mark.parametrize("factor", [0.99, 0.0, np.nan])
def test_a_factor_below_one_is_refused(factor):
    with pytest.raises(ValueError, match="factor"):
        interaction_diagram([concrete()], factor)
