"""Tests of one ground unit: what is refused and why, outliers, range of confinement."""

import dataclasses
import math
import subprocess
import sys

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass.laboratory import (
    NO_FIT,
    intact_rock_from_tests,
    is_recommended_confinement,
)

MINOR = np.array([0.0, 0.0, 5.0, 10.0, 20.0, 40.0])


def on_criterion(minor, strength=100.0, mi=12.0):
    return minor + np.sqrt(mi * strength * minor + strength**2)


SCATTER = np.array([3.0, -4.0, 2.0, -5.0, 4.0, -1.0])
MAJOR = on_criterion(MINOR) + SCATTER


def test_strength_and_mi_of_tests_that_lie_on_the_criterion():
    """sci = 3 and mi = 9 at s3 of 0, 1 and 16: roots of 9, 27 + 9 and 432 + 9 are 3, 6, 21."""
    minor = np.array([0.0, 0.0, 1.0, 1.0, 16.0])
    found = intact_rock_from_tests(minor, minor + np.array([3, 3, 6, 6, 21]))
    assert found.reason == ""
    assert found.regression.intact_strength_mpa == pytest.approx(3, rel=1e-14)
    assert found.regression.mi == pytest.approx(9, rel=1e-14)
    assert found.r_squared == pytest.approx(1, rel=1e-14)


def test_number_and_range_of_the_tests_are_told():
    found = intact_rock_from_tests(MINOR, MAJOR)
    assert (found.test_count, found.least_confinement_mpa) == (6, 0.0)
    assert found.greatest_confinement_mpa == 40.0


REFUSED = [
    pytest.param(MINOR[:4], MAJOR[:4], "4 tests, but at least 5", id="four-tests"),
    pytest.param([], [], "0 tests, but at least 5", id="no-test"),
    pytest.param([7.0] * 5, [90, 95, 100, 105, 110], "same confinement", id="one-confinement"),
    pytest.param([0.0] * 5, [90, 95, 100, 105, 110], "same confinement", id="uniaxial-only"),
    pytest.param(
        [0.3, 0.1 + 0.2, 0.3, 0.3, 0.3], [9, 9, 10, 10, 11], "same confinement", id="rounding"
    ),
    pytest.param([-1.0, 0, 5, 10, 20], [50, 90, 120, 150, 190], "tensile", id="tension"),
    pytest.param([0.0, 1, 5, 10, 20], [90, 95, 5, 150, 190], "not above its minor", id="s1-is-s3"),
    pytest.param([0.0, 1, 5, 10, 20], [90, 95, 4, 150, 190], "not above its minor", id="swapped"),
    pytest.param([0.0, 1, 5, np.nan, 20], [90, 95, 120, 150, 190], "finite", id="nan-s3"),
    pytest.param([0.0, 1, 5, 10, 20], [90, 95, np.inf, 150, 190], "finite", id="infinite-s1"),
    pytest.param(
        [5.0, 10, 20, 30, 40], [10, 30, 70, 120, 180], "no positive intercept", id="intercept"
    ),
    pytest.param(
        [0.0, 5, 10, 20, 30], [100, 100, 100, 100, 100], "does not rise", id="difference-falls"
    ),
]


@pytest.mark.parametrize(("minor", "major", "reason"), REFUSED)
def test_tests_that_cannot_carry_the_regression_give_a_reason_and_no_number(minor, major, reason):
    found = intact_rock_from_tests(np.array(minor, float), np.array(major, float))
    assert reason in found.reason
    assert found.test_count == len(minor)
    assert found.regression is NO_FIT
    assert found.least_squares is NO_FIT
    assert math.isnan(found.r_squared)
    assert found.outliers == ()
    assert not found.within_recommended_confinement


def test_five_tests_are_enough():
    assert intact_rock_from_tests(MINOR[:5], MAJOR[:5]).reason == ""


def test_a_strength_that_only_friction_gives_has_no_intercept():
    """(s1 - s3)^2 in proportion to s3: the intercept is 0 but for rounding."""
    minor = np.array([0.1, 0.3, 0.7, 1.1, 1.9])
    found = intact_rock_from_tests(minor, minor + np.sqrt(30 * minor))
    assert "no positive intercept" in found.reason


def test_a_strength_without_friction_has_no_mi():
    """One difference of stresses at all confinements: the slope is 5e-15 by rounding alone."""
    minor = np.array([0, 1.1, 2.2, 3.3, 4.4])
    found = intact_rock_from_tests(minor, minor + 12.7)
    assert "does not rise with confinement" in found.reason


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        intact_rock_from_tests(MINOR, MAJOR[:5])


def test_whole_numbers_are_stresses_too():
    whole = intact_rock_from_tests(np.array([0, 0, 5, 10, 20]), np.array([90, 110, 150, 190, 220]))
    found = intact_rock_from_tests(
        np.array([0, 0, 5, 10, 20.0]), np.array([90, 110, 150, 190, 220.0])
    )
    assert whole == found


def test_intervals_hold_the_estimate():
    found = intact_rock_from_tests(MINOR, MAJOR)
    for fit in (found.regression, found.least_squares):
        low, high = fit.intact_strength_interval_mpa
        assert low < fit.intact_strength_mpa < high
        assert fit.mi_interval.low < fit.mi < fit.mi_interval.high


def test_an_intercept_that_may_be_zero_lets_the_strength_begin_at_zero():
    major = MINOR + np.array([10.0, 90.0, 60.0, 100.0, 150.0, 170.0])
    found = intact_rock_from_tests(MINOR, major)
    assert found.reason == ""
    assert found.regression.intact_strength_interval_mpa.low == 0.0
    assert found.regression.intact_strength_interval_mpa.high > 0


def test_no_test_that_lies_on_the_criterion_is_an_outlier():
    found = intact_rock_from_tests(MINOR, on_criterion(MINOR))
    assert found.studentised_residuals == (0.0,) * 6
    assert found.outliers == ()


def test_a_gross_error_is_told_by_its_position_in_the_order_given():
    minor = np.array([40.0, 0.0, 10.0, 20.0, 5.0, 0.0, 30.0, 15.0])
    major = on_criterion(minor) + np.array([1.0, -2.0, 2.0, -1.0, 1.0, 2.0, -2.0, 60.0])
    found = intact_rock_from_tests(minor, major)
    assert found.outliers == (7,)
    assert found.studentised_residuals[7] > 3
    assert intact_rock_from_tests(minor[::-1], major[::-1]).outliers == (0,)


def test_a_test_that_is_too_weak_is_an_outlier_as_well():
    minor = np.array([40.0, 0.0, 10.0, 20.0, 5.0, 0.0, 30.0, 15.0])
    major = on_criterion(minor) + np.array([1.0, -2.0, 2.0, -60.0, 1.0, 2.0, -2.0, 1.0])
    found = intact_rock_from_tests(minor, major)
    assert found.outliers == (3,)
    assert found.studentised_residuals[3] < -3


def test_one_error_among_tests_on_the_criterion_is_an_outlier():
    major = on_criterion(MINOR)
    major[3] += 10
    found = intact_rock_from_tests(MINOR, major)
    assert found.outliers == (3,)
    assert np.isfinite(found.studentised_residuals).all()


def test_a_test_alone_at_its_confinement_cannot_be_judged():
    """All others at one confinement: the line passes through this one whatever it is."""
    minor = np.array([0.0, 0.0, 0.0, 0.0, 20.0])
    found = intact_rock_from_tests(minor, minor + np.array([90.0, 100.0, 95.0, 105.0, 190.0]))
    assert math.isnan(found.studentised_residuals[4])
    assert np.isfinite(found.studentised_residuals[:4]).all()
    assert found.outliers == ()


def test_least_squares_give_nothing_where_their_best_mi_is_below_zero():
    """Mean difference 100 at s3 = 0 and 99.7 at 10, mean square 10000 and 12294."""
    minor = np.array([0.0, 0.0, 0.0, 10.0, 10.0, 10.0])
    found = intact_rock_from_tests(minor, minor + np.array([100.0, 100, 100, 40, 100, 159]))
    assert found.reason == ""
    assert found.regression.mi > 0
    assert found.least_squares is NO_FIT


@pytest.mark.parametrize(
    ("greatest", "within"),
    [pytest.param(49.0, True, id="below"), pytest.param(51.0, False, id="beyond")],
)
def test_tests_beyond_half_the_strength_leave_the_recommended_range(greatest, within):
    minor = np.append(MINOR[:5], greatest)
    found = intact_rock_from_tests(minor, on_criterion(minor))
    assert found.within_recommended_confinement is within


def test_recommended_confinement_begins_with_uniaxial_tests_and_ends_before_half_the_strength():
    minor = np.array([-1.0, 0.0, 10.0, 49.99, 50.0, 80.0, np.nan])
    found = is_recommended_confinement(minor, 100.0)
    np.testing.assert_array_equal(found, [False, True, True, True, False, False, False])


def test_the_result_cannot_be_changed():
    found = intact_rock_from_tests(MINOR, MAJOR)
    with pytest.raises(dataclasses.FrozenInstanceError, match="reason"):
        found.reason = "other"


def test_importing_the_module_does_not_load_scipy():
    code = (
        "import sys, tunnelcalc.rock_mass.laboratory, tunnelcalc.rock_mass.characteristic; "
        "sys.exit('scipy' in sys.modules)"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
