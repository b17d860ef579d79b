"""Hardening of shotcrete: limits, joints, ranges, and acceptance by hand."""

import math

import numpy as np
import pytest
from tunnelcalc_shotcrete.hardening import (
    EUROCODE_COEFFICIENTS,
    acceptance,
    age_days,
    chang_stille_modulus_ratio,
    chang_stille_strength_ratio,
    eurocode_modulus_ratio,
    eurocode_strength_ratio,
    meschke_modulus_ratio,
    meschke_strength_ratio,
)

LAWS = [
    pytest.param(chang_stille_strength_ratio, id="chang-stille-strength"),
    pytest.param(chang_stille_modulus_ratio, id="chang-stille-modulus"),
    pytest.param(meschke_strength_ratio, id="meschke-strength"),
    pytest.param(meschke_modulus_ratio, id="meschke-modulus"),
    pytest.param(lambda t: eurocode_strength_ratio(t, 0.25), id="eurocode-strength"),
    pytest.param(lambda t: eurocode_modulus_ratio(t, 0.25), id="eurocode-modulus"),
]
TINY = 5e-324
CURVE = (np.array([0.25, 1.0, 4.0]), np.array([1.0, 4.0, 8.0]))


@pytest.mark.parametrize("law", LAWS)
def test_nothing_at_age_zero_and_all_of_it_after_a_year(law):
    np.testing.assert_array_equal(law(np.array([0.0, 365.0, 1e6])), [0.0, 1.0, 1.0])


@pytest.mark.parametrize("law", LAWS)
def test_what_has_no_age_has_no_strength(law):
    assert np.isnan(law(np.array([-1.0, np.nan]))).all()


@pytest.mark.parametrize("law", [law for law in LAWS if not law.id.startswith("eurocode")])
def test_a_moment_after_spraying_there_is_hardly_anything(law):
    """A microsecond: below the 0.0105 at which the power law of the first day begins."""
    assert np.all(law(np.array([TINY, 1e-11])) < 0.0106)


def test_strength_of_the_first_day_holds_until_the_second_branch_has_passed_it():
    """0.489 (24.12 / 24)^0.72453 = 0.49077 is reached by 1.027 exp(-17.8 / t) at 24.106 h."""
    held = 0.489 * (24.12 / 24) ** 0.72453
    found = meschke_strength_ratio(np.array([24.0, 24.1, 24.2]) / 24)
    np.testing.assert_allclose(found[:2], held, rtol=1e-14)
    assert found[2] == pytest.approx(1.027 * math.exp(-17.8 / 24.2), rel=1e-14)
    assert found[2] > held


def test_stiffness_of_the_two_branches_at_eight_hours():
    """0.0468 x 8 - 0.00211 x 64 = 0.23936 just before; (0.9506 + 16.445)^-0.5 = 0.23976 at 8 h."""
    found = meschke_modulus_ratio(np.array([8 - 1e-9, 8.0]) / 24)
    np.testing.assert_allclose(found, [0.23936, 17.3956**-0.5], rtol=1e-9)


def test_the_code_begins_at_three_days():
    """exp(0.2 (1 - sqrt(28 / 3))) = 0.663; nothing is said of the days before."""
    found = eurocode_strength_ratio(np.array([2.999, 3.0, 28.0]), EUROCODE_COEFFICIENTS["R"])
    assert math.isnan(found[0])
    assert found[1] == pytest.approx(math.exp(0.2 * (1 - math.sqrt(28 / 3))), rel=1e-15)
    assert found[2] == 1.0


def test_age_is_distance_over_advance():
    found = age_days(np.array([1.0, 2.0, 8.0]), 2.0, 1.5)
    np.testing.assert_array_equal(found, [np.nan, 0.0, 4.0])


def test_acceptance_on_the_ordinates_is_exact():
    found = acceptance(CURVE[0], CURVE[1], *CURVE)
    np.testing.assert_array_equal(found.required_mpa, CURVE[1])
    np.testing.assert_array_equal(found.ratio, 1.0)


def test_acceptance_between_ordinates_is_straight_on_logarithmic_axes():
    """Halfway between 0.25 and 1 day in the logarithm, 0.5 day: sqrt(1 x 4) = 2 MPa."""
    found = acceptance(np.array([0.5, 2.0]), np.array([3.0, 4.0]), *CURVE)
    np.testing.assert_allclose(found.required_mpa, [2.0, math.sqrt(32)], rtol=1e-14)
    np.testing.assert_allclose(found.ratio, [1.5, 4 / math.sqrt(32)], rtol=1e-14)


def test_nothing_is_extrapolated():
    found = acceptance(np.array([0.24, 4.01, np.nan]), np.array([9.0, 99.0, 9.0]), *CURVE)
    assert np.isnan(found.required_mpa).all()
    assert np.isnan(found.ratio).all()


@pytest.mark.parametrize(
    ("ages", "strengths"),
    [
        pytest.param([1.0], [1.0], id="one-ordinate"),
        pytest.param([1.0, 2.0], [1.0], id="lengths-differ"),
        pytest.param([2.0, 1.0], [1.0, 2.0], id="ages-fall"),
        pytest.param([1.0, 1.0], [1.0, 2.0], id="ages-equal"),
        pytest.param([1.0, 2.0], [2.0, 1.0], id="strengths-fall"),
        pytest.param([0.0, 2.0], [1.0, 2.0], id="age-zero"),
        pytest.param([1.0, 2.0], [0.0, 2.0], id="strength-zero"),
        pytest.param([1.0, np.nan], [1.0, 2.0], id="nan"),
    ],
)
def test_a_curve_that_is_none_is_refused(ages, strengths):
    with pytest.raises(ValueError, match="ordinates"):
        acceptance(np.array([1.0]), np.array([1.0]), np.array(ages), np.array(strengths))
