"""Intact strength and mi of one ground unit from its uniaxial and triaxial tests.

The published way is a straight line through (s1 - s3)^2 against s3. It gives the tests at high
confinement more weight than a fit of s1 itself, so that the latter stands beside it as a check:
where the two differ much, the tests do not lie on the criterion.

Tests that cannot carry the regression give a reason instead of numbers.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.rock_mass.characteristic import student_quantile

MINIMUM_TESTS = 5
"""Hoek & Brown (1997) ask for at least five well spaced tests [from memory]."""
RECOMMENDED_CONFINEMENT = 0.5
"""Hoek & Brown (1997): tests over 0 < s3 < 0.5 sci [from memory]. [-]"""
OUTLIER_LIMIT = 3.0
"""An externally studentised residual beyond it is told; common practice, no source. [-]

Of sound tests about one in ten lies beyond it where there are 5, one in a hundred where 20.
"""
TWO_SIDED_95 = 0.975
"""Probability below the upper end of an interval that holds 95 % in its middle. [-]"""
SAME_CONFINEMENT = 1e-6
"""Confinements that differ by less than this share of the greatest are one confinement. [-]"""
ROUNDING = 1e-9
"""What lies below this share of the largest value is rounding, no measurement. [-]"""
STATIONARY = 1e-4
"""Cosine between the residuals and a column of slopes, below which a fit has settled. [-]"""


class Interval(NamedTuple):
    """Ends of a 95 % confidence interval, in the unit of its quantity."""

    low: float
    high: float


class IntactFit(NamedTuple):
    """Intact strength sci [MPa] and constant mi [-] with their 95 % confidence intervals."""

    intact_strength_mpa: float
    mi: float
    intact_strength_interval_mpa: Interval
    mi_interval: Interval


UNKNOWN = Interval(math.nan, math.nan)
NO_FIT = IntactFit(math.nan, math.nan, UNKNOWN, UNKNOWN)


@dataclass(frozen=True, slots=True)
class IntactTests:
    """What the tests of one ground unit give; all numbers after `reason` are NaN if it speaks.

    `studentised_residuals` has one value a test, in the order given; NaN for a test that alone
    fixes the line. `within_recommended_confinement` says whether every test lies in the
    published range for the strength found.
    """

    test_count: int
    least_confinement_mpa: float
    greatest_confinement_mpa: float
    reason: str = ""
    regression: IntactFit = NO_FIT
    r_squared: float = math.nan
    least_squares: IntactFit = NO_FIT
    studentised_residuals: tuple[float, ...] = ()
    within_recommended_confinement: bool = False

    @property
    def outliers(self) -> tuple[int, ...]:
        """Positions of the tests whose residual lies beyond `OUTLIER_LIMIT`; none is left out."""
        pairs = enumerate(self.studentised_residuals)
        return tuple(place for place, residual in pairs if abs(residual) > OUTLIER_LIMIT)


def intact_rock_from_tests(minor_stress_mpa: Array, major_stress_mpa: Array) -> IntactTests:
    """Intact strength and mi by regression of the intact criterion, and by least squares on s1.

    The criterion s1 = s3 + sqrt(mi sci s3 + sci^2) is the line y = mi sci x + sci^2 in x = s3 and
    y = (s1 - s3)^2.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3 at failure, 0 for a uniaxial test. [MPa]
    major_stress_mpa : (m,) s1 at failure. [MPa]

    Returns
    -------
    Strength [MPa], mi [-] and what tells their worth; a reason instead of numbers where the
    regression cannot hold. The order of the tests changes nothing.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    At least `MINIMUM_TESTS` tests of one ground unit, at more than one confinement; no tensile
    tests. The intervals suppose independent, normal scatter of the same size in all tests: of y
    in the regression, of s1 in the least squares. The regression's interval of sci is that of
    the intercept, from 0 where the intercept's reaches below 0; that of mi and those of the
    least squares are of first order, and may reach below 0. Least squares whose best mi is not
    above 0 gives NaN.

    Source
    ------
    E. Hoek, E. T. Brown, Underground Excavations in Rock (1980), app. 5; the same regression in
    Hoek & Brown, Int. J. Rock Mech. Min. Sci. 34 (1997) 1165-1186, app. A [both from memory].
    """
    same_length(minor_stress_mpa=minor_stress_mpa, major_stress_mpa=major_stress_mpa)
    order = np.lexsort((major_stress_mpa, minor_stress_mpa))
    minor = np.asarray(minor_stress_mpa, float)[order]
    major = np.asarray(major_stress_mpa, float)[order]
    count = minor.size
    least, greatest = (float(minor.min()), float(minor.max())) if count else (math.nan, math.nan)
    reason = _unfit(minor, major)
    if reason:
        return IntactTests(count, least, greatest, reason)
    line = _Line.through(minor, (major - minor) ** 2)
    reason = line.unfit()
    if reason:
        return IntactTests(count, least, greatest, reason)
    regression = line.intact_fit()
    residuals = np.empty(count)
    residuals[order] = line.studentised_residuals()
    return IntactTests(
        count,
        least,
        greatest,
        regression=regression,
        r_squared=line.r_squared(),
        least_squares=_least_squares(minor, major, regression),
        studentised_residuals=tuple(residuals.tolist()),
        within_recommended_confinement=bool(
            is_recommended_confinement(minor, regression.intact_strength_mpa).all()
        ),
    )


def is_recommended_confinement(minor_stress_mpa: Array, intact_strength_mpa: float) -> Array:
    """Whether tests lie in the range of confinement from which mi is meant to be found.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3 of the tests. [MPa]
    intact_strength_mpa : sci. [MPa]

    Returns
    -------
    (m,) mask: 0 <= s3 < 0.5 sci. Uniaxial tests, s3 = 0, belong to it.

    Source
    ------
    Hoek & Brown (1997), 0 < s3 < 0.5 sci [from memory].
    """
    upper = RECOMMENDED_CONFINEMENT * intact_strength_mpa
    return (minor_stress_mpa >= 0) & (minor_stress_mpa < upper)


def _unfit(minor: Array, major: Array) -> str:
    """Why the tests cannot carry a regression; empty if they can."""
    if not (np.isfinite(minor).all() and np.isfinite(major).all()):
        return "a stress is not a finite number"
    if minor.size < MINIMUM_TESTS:
        return f"{minor.size} tests, but at least {MINIMUM_TESTS} are needed"
    if minor.min() < 0:
        return "a test has a tensile minor stress, for which the regression does not hold"
    if np.any(major <= minor):
        return "a test has a major stress that is not above its minor stress"
    if np.ptp(minor) <= SAME_CONFINEMENT * minor.max():
        return "all tests have the same confinement, which leaves mi unknown"
    return ""


@dataclass(frozen=True, slots=True)
class _Line:
    """Least-squares line y = intercept + slope x, about the means of x and y."""

    x: Array
    y: Array
    spread: float
    slope: float
    intercept: float

    @classmethod
    def through(cls, x: Array, y: Array) -> _Line:
        away = x - x.mean()
        spread = float(np.sum(away**2))
        slope = float(np.sum(away * (y - y.mean()))) / spread
        return cls(x, y, spread, slope, float(y.mean() - slope * x.mean()))

    def unfit(self) -> str:
        """Why the line cannot be the criterion; empty if it can."""
        rounding = ROUNDING * float(self.y.max())
        if self.intercept <= rounding:
            return "the regression has no positive intercept, so that there is no intact strength"
        if self.slope * float(np.ptp(self.x)) <= rounding:
            return "strength does not rise with confinement, so that there is no mi"
        return ""

    def residuals(self) -> Array:
        apart = self.y - (self.intercept + self.slope * self.x)
        return np.where(np.abs(apart) > ROUNDING * self.y.max(), apart, 0.0)

    def r_squared(self) -> float:
        return self.slope**2 * self.spread / float(np.sum((self.y - self.y.mean()) ** 2))

    def intact_fit(self) -> IntactFit:
        """sci^2 is the intercept, mi sci the slope."""
        strength = math.sqrt(self.intercept)
        mi = self.slope / strength
        count, mean = self.x.size, float(self.x.mean())
        variance = float(np.sum(self.residuals() ** 2)) / (count - 2)
        of_slope = variance / self.spread
        of_intercept = variance / count + mean**2 * of_slope
        # mi = slope / sqrt(intercept): relative errors add, with the covariance -mean of_slope.
        of_mi = (
            of_slope / self.slope**2
            + of_intercept / (4 * self.intercept**2)
            + mean * of_slope / (self.slope * self.intercept)
        )
        t = float(student_quantile(TWO_SIDED_95, np.array(count - 2)))
        half, half_mi = t * math.sqrt(of_intercept), t * mi * math.sqrt(of_mi)
        ends = Interval(math.sqrt(max(self.intercept - half, 0)), math.sqrt(self.intercept + half))
        return IntactFit(strength, mi, ends, Interval(mi - half_mi, mi + half_mi))

    def studentised_residuals(self) -> Array:
        """(m,) externally studentised: the scatter is that of the other tests."""
        count, apart = self.x.size, self.residuals()
        free = 1 - 1 / count - (self.x - self.x.mean()) ** 2 / self.spread
        free = np.where(free > ROUNDING, free, np.nan)
        others = (np.sum(apart**2) - apart**2 / free) / (count - 3)
        scatter = np.sqrt(np.maximum(others, (ROUNDING * self.y.max()) ** 2))
        return apart / (scatter * np.sqrt(free))


def _least_squares(minor: Array, major: Array, start: IntactFit) -> IntactFit:
    """The criterion fitted to s1, in stresses over the regression's strength."""
    # Here, so that whoever has no tests does not wait for the library.
    from scipy.optimize import least_squares

    unit = start.intact_strength_mpa
    x, difference = minor / unit, (major - minor) / unit

    def apart(values: Array) -> Array:
        return np.sqrt(values[0] ** 2 + values[1] * values[0] * x) - difference

    def slopes(values: Array) -> Array:
        root = np.sqrt(values[0] ** 2 + values[1] * values[0] * x)
        columns = (2 * values[0] + values[1] * x, values[0] * x)
        return np.stack(columns, axis=1) / (2 * root[:, None])

    # Steps end it, not the gradient, whose size says little where the tests lie on the criterion.
    ends = {"xtol": 1e-15, "ftol": 1e-15, "gtol": None}
    bounds = (0, np.inf)
    found = least_squares(apart, (1.0, start.mi), slopes, bounds, x_scale="jac", **ends)
    # Where the best mi would be below 0 the bound stops the search on a slope.
    size = np.sqrt(np.sum(found.jac**2, axis=0)) * max(np.sqrt(2 * found.cost), ROUNDING)
    if not found.success or np.any(np.abs(found.grad) > STATIONARY * size):
        return NO_FIT
    variance = 2 * found.cost / (minor.size - 2)
    errors = np.sqrt(variance * np.diag(np.linalg.inv(found.jac.T @ found.jac)))
    halves = float(student_quantile(TWO_SIDED_95, np.array(minor.size - 2))) * errors
    (low, low_mi), (high, high_mi) = found.x - halves, found.x + halves
    return IntactFit(
        float(found.x[0]) * unit,
        float(found.x[1]),
        Interval(float(low) * unit, float(high) * unit),
        Interval(float(low_mi), float(high_mi)),
    )
