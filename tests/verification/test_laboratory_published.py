"""Regression of the intact criterion: Hoek & Brown (1980, app. 5; 1997, app. A), from memory.

Compared with data that lie on the criterion, with the sums of the published regression written
out, and with the general fits of numpy and scipy. The tests are invented.
"""

import numpy as np
import pytest
from scipy.optimize import curve_fit, minimize
from scipy.stats import linregress

from tunnelcalc.rock_mass.laboratory import intact_rock_from_tests

# Standard statistical tables, two-sided 95 % points of Student's t, for n - 2 degrees of freedom.
STUDENT = {5: 3.182, 8: 2.447, 10: 2.306}
PRINTED = 5e-4 / 2.3
"""Three printed decimals of a quantile of 2.3 or more, as a share of it. [-]"""

SETS = {
    "granite-like": (
        [0, 0, 0, 5, 10, 10, 20, 40],
        [148, 161, 139, 228, 271, 287, 378, 492],
    ),
    "shale-like": (
        [0, 0, 2, 4, 6, 8, 10, 12, 14, 16],
        [27.5, 33.1, 36.0, 48.2, 47.9, 59.5, 60.3, 70.8, 71.0, 79.9],
    ),
    "five-tests": ([0, 3, 7, 14, 25], [60, 78, 101, 118, 171]),
}
"""s3 and s1 in MPa, invented."""


@pytest.fixture(params=SETS, name="tests")
def _tests(request):
    return tuple(np.array(column, float) for column in SETS[request.param])


def criterion(minor, strength, mi):
    return minor + np.sqrt(mi * strength * minor + strength**2)


def ends(fit):
    return np.array([fit.intact_strength_interval_mpa, fit.mi_interval])


@pytest.mark.parametrize(
    ("strength", "mi"),
    [
        pytest.param(250.0, 33.0, id="strong-brittle"),
        pytest.param(100.0, 12.0, id="average"),
        pytest.param(5.0, 4.0, id="weak"),
    ],
)
@pytest.mark.parametrize("minor", [[0, 0.1, 0.2, 0.3, 0.4], [0, 0, 0, 0, 0, 0.45], [0.1, 0.2] * 3])
def test_tests_on_the_criterion_give_back_its_strength_and_mi(strength, mi, minor):
    minor = np.array(minor) * strength
    found = intact_rock_from_tests(minor, criterion(minor, strength, mi))
    for fit in (found.regression, found.least_squares):
        np.testing.assert_allclose(fit[:2], (strength, mi), rtol=1e-12)
        np.testing.assert_allclose(ends(fit), [[strength] * 2, [mi] * 2], rtol=1e-8)
    assert found.r_squared == pytest.approx(1, rel=1e-12)


def test_regression_is_the_published_sums(tests):
    """sci^2 = sum y / n - slope sum x / n and mi = slope / sci, with y = (s1 - s3)^2, x = s3."""
    x, y = tests[0], (tests[1] - tests[0]) ** 2
    n = len(x)
    above = np.sum(x * y) - np.sum(x) * np.sum(y) / n
    below, below_y = np.sum(x**2) - np.sum(x) ** 2 / n, np.sum(y**2) - np.sum(y) ** 2 / n
    strength = np.sqrt(np.sum(y) / n - above / below * np.sum(x) / n)
    found = intact_rock_from_tests(*tests)
    np.testing.assert_allclose(
        (*found.regression[:2], found.r_squared),
        (strength, above / below / strength, above**2 / (below * below_y)),
        rtol=1e-10,
    )


def test_regression_is_the_line_of_numpy_and_of_scipy(tests):
    minor, y = tests[0], (tests[1] - tests[0]) ** 2
    found = intact_rock_from_tests(*tests)
    strength, mi = found.regression[:2]
    line = linregress(minor, y)
    np.testing.assert_allclose((mi * strength, strength**2), np.polyfit(minor, y, 1), rtol=1e-10)
    np.testing.assert_allclose((mi * strength, strength**2), line[:2], rtol=1e-12)
    assert found.r_squared == pytest.approx(line.rvalue**2, rel=1e-12)


def test_interval_of_the_strength_is_that_of_the_intercept(tests):
    """Intercept -/+ t times its standard error, t from the printed table."""
    line = linregress(tests[0], (tests[1] - tests[0]) ** 2)
    half = STUDENT[len(tests[0])] * line.intercept_stderr
    expected = np.array([max(line.intercept - half, 0), line.intercept + half])
    found = np.square(intact_rock_from_tests(*tests).regression.intact_strength_interval_mpa)
    np.testing.assert_allclose(found, expected, atol=half * PRINTED)


def test_interval_of_mi_is_that_of_a_fit_with_mi_as_its_own_unknown(tests):
    """y = sci^2 + mi sci s3 solved for sci and mi: the same line, its errors to first order."""
    minor, y = tests[0], (tests[1] - tests[0]) ** 2
    found = intact_rock_from_tests(*tests).regression
    _, errors = curve_fit(lambda x, c, m: c**2 + m * c * x, minor, y, p0=found[:2])
    half = STUDENT[len(minor)] * np.sqrt(errors[1, 1])
    np.testing.assert_allclose(
        found.mi_interval, (found.mi - half, found.mi + half), atol=half * PRINTED
    )


def test_least_squares_are_those_of_curve_fit(tests):
    found = intact_rock_from_tests(*tests).least_squares
    best, errors = curve_fit(criterion, *tests, p0=(50, 10), ftol=1e-14, xtol=1e-14, gtol=1e-14)
    np.testing.assert_allclose(found[:2], best, rtol=1e-6)
    half = STUDENT[len(tests[0])] * np.sqrt(np.diag(errors))
    expected = np.stack([best - half, best + half], axis=1)
    np.testing.assert_allclose(ends(found) - expected, 0, atol=float(half.max()) * PRINTED)


def test_least_squares_leave_less_than_a_search_without_derivatives(tests):
    def left(values):
        return float(np.sum((criterion(tests[0], *values) - tests[1]) ** 2))

    found = intact_rock_from_tests(*tests)
    searched = minimize(left, found.regression[:2], method="Nelder-Mead", options={"xatol": 1e-8})
    assert left(found.least_squares[:2]) <= searched.fun * (1 + 1e-12)
    np.testing.assert_allclose(found.least_squares[:2], searched.x, rtol=1e-5)


def test_studentised_residuals_are_misses_of_the_line_through_the_others(tests):
    """Each test left out in turn: its miss over the standard error of a prediction."""
    minor, y = tests[0], (tests[1] - tests[0]) ** 2
    found = intact_rock_from_tests(*tests).studentised_residuals
    for place, residual in enumerate(found):
        x, others = np.delete(minor, place), np.delete(y, place)
        slope, intercept = np.polyfit(x, others, 1)
        scatter = np.sqrt(np.sum((others - intercept - slope * x) ** 2) / (len(x) - 2))
        away = (minor[place] - x.mean()) ** 2 / np.sum((x - x.mean()) ** 2)
        miss = y[place] - intercept - slope * minor[place]
        assert residual == pytest.approx(miss / (scatter * np.sqrt(1 + 1 / len(x) + away)))
