"""Rock mass formulas where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import hoek_brown
from tunnelcalc.rock_mass.deformation_modulus import (
    hoek_diederichs_simplified_mpa,
    hoek_diederichs_with_intact_modulus_mpa,
)


def constants(gsi, mi, disturbance):
    arrays = (np.atleast_1d(np.asarray(v, float)) for v in (gsi, mi, disturbance))
    return hoek_brown.hoek_brown_constants(*arrays)


def test_intact_rock_keeps_mi_and_has_s_1_and_a_one_half_exactly():
    found = constants(100, 17, 0)
    assert (found.mb[0], found.s[0], found.a[0]) == (17.0, 1.0, 0.5)


def test_intact_rock_is_intact_whatever_the_disturbance():
    """GSI = 100 makes both exponents 0."""
    found = constants([100, 100], [17, 17], [0.5, 1])
    np.testing.assert_array_equal(found.mb, [17, 17])
    np.testing.assert_array_equal(found.s, [1, 1])


def test_unconfined_strength_of_intact_rock_is_that_of_the_sample():
    sci = np.array([73.0])
    found = hoek_brown.rock_mass_strength_mpa(sci, np.ones(1), np.full(1, 0.5))
    assert found[0] == 73.0


def test_unconfined_strength_for_a_one_half_is_the_root_of_s():
    """s = 0.04 leaves sqrt(0.04) = one fifth of the intact strength."""
    found = hoek_brown.rock_mass_strength_mpa(np.array([50.0]), np.array([0.04]), np.full(1, 0.5))
    assert found[0] == pytest.approx(10.0, rel=1e-15)


def test_worst_rock_mass_tends_to_the_exponent_of_two_thirds():
    """a = 1/2 + (1 - exp(-20/3)) / 6 for GSI towards 0."""
    found = constants(1e-12, 10, 0).a[0]
    assert found == pytest.approx(0.5 + (1 - np.exp(-20 / 3)) / 6, rel=1e-12)
    assert found < 2 / 3


def test_disturbance_weakens_and_never_strengthens():
    disturbance = np.linspace(0, 1, 21)
    found = constants(np.full(21, 50.0), np.full(21, 10.0), disturbance)
    assert np.all(np.diff(found.mb) < 0)
    assert np.all(np.diff(found.s) < 0)


def test_tensile_strength_is_s_over_mb_of_the_intact_strength():
    found = hoek_brown.tensile_strength_mpa(np.array([50.0]), np.array([2.0]), np.array([0.01]))
    assert found[0] == pytest.approx(0.25, rel=1e-15)


def test_straight_line_over_no_range_at_all_is_as_steep_as_the_criterion_there():
    """Near pure tension the criterion with a < 1 is steep: the line nears 90 degrees."""
    mb, s, a = constants(60, 10, 0)
    sci = np.array([50.0])
    just_above_tension = -hoek_brown.tensile_strength_mpa(sci, mb, s) * (1 - 1e-9)
    line = hoek_brown.equivalent_mohr_coulomb(sci, mb, s, a, just_above_tension)
    assert line.friction_angle_deg[0] > 85


def test_more_confinement_means_less_friction_and_more_cohesion():
    mb, s, a = (np.repeat(v, 5) for v in constants(60, 10, 0))
    confinement = np.array([0.5, 1, 2, 5, 12.5])
    line = hoek_brown.equivalent_mohr_coulomb(np.full(5, 50.0), mb, s, a, confinement)
    assert np.all(np.diff(line.friction_angle_deg) < 0)
    assert np.all(np.diff(line.cohesion_mpa) > 0)


@pytest.mark.parametrize("disturbance", [0.0, 0.5, 1.0])
def test_modulus_rises_with_quality_and_stays_below_102_per_cent_of_the_intact_one(disturbance):
    gsi = np.linspace(0.5, 100, 200)
    same = np.full(200, disturbance)
    share = hoek_diederichs_with_intact_modulus_mpa(gsi, same, np.ones(200))
    assert np.all(np.diff(share) > 0)
    assert share[-1] < 1.02 - disturbance / 2
    assert np.all(np.diff(hoek_diederichs_simplified_mpa(gsi, same)) > 0)


FORMULAS = [
    pytest.param(hoek_brown.hoek_brown_constants, 3, id="constants"),
    pytest.param(hoek_brown.rock_mass_strength_mpa, 3, id="unconfined-strength"),
    pytest.param(hoek_brown.tensile_strength_mpa, 3, id="tensile-strength"),
    pytest.param(hoek_brown.global_strength_mpa, 4, id="global-strength"),
    pytest.param(hoek_brown.tunnel_confinement_mpa, 2, id="confinement"),
    pytest.param(hoek_brown.equivalent_mohr_coulomb, 5, id="straight-line"),
    pytest.param(hoek_diederichs_simplified_mpa, 2, id="simplified-modulus"),
    pytest.param(hoek_diederichs_with_intact_modulus_mpa, 3, id="modulus"),
]


@pytest.mark.parametrize(("formula", "count"), FORMULAS)
def test_section_with_nan_stays_nan_and_spoils_no_other(formula, count):
    sound = [np.full(3, 0.6) for _ in range(count)]
    spoiled = [values.copy() for values in sound]
    spoiled[0][1] = np.nan
    for clean, found in zip(
        np.atleast_2d(np.array(formula(*sound))),
        np.atleast_2d(np.array(formula(*spoiled))),
        strict=True,
    ):
        np.testing.assert_array_equal(found[[0, 2]], clean[[0, 2]])
    assert np.isnan(np.array(formula(*spoiled))[..., 1]).any()


@pytest.mark.parametrize(("formula", "count"), FORMULAS)
def test_arrays_of_different_length_are_refused_by_name(formula, count):
    arrays = [np.full(3, 0.6) for _ in range(count)]
    arrays[-1] = np.full(2, 0.6)
    with pytest.raises(ShapeError, match="must have the same length"):
        formula(*arrays)
