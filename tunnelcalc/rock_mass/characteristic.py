"""Cautious (characteristic) values of ground properties from a few tests.

Each rule moves from the mean of the tests to the side that is cautious for the purpose: `LOW` for
a strength that resists, `HIGH` for a quantity that harms. Nothing is clipped: a value that
leaves the range of its quantity, such as a strength below 0, is for the caller to refuse.
"""

from __future__ import annotations

from enum import IntEnum

import numpy as np

from tunnelcalc.arrays import Array, same_length

PROBABILITY = 0.95
"""EN 1997-1:2004, 2.4.5.2(11): at most 5 % that a worse value governs [from memory]. [-]"""
SCHNEIDER_SHARE = 0.5
"""Schneider (1997): standard deviations between the mean and the cautious value [from memory]."""
LEAST_TESTS = 2
"""Fewer tests have no standard deviation."""


class CautiousSide(IntEnum):
    """Which way from the mean is cautious: the sign of the step."""

    LOW = -1
    HIGH = 1


def student_quantile(probability: float, degrees_of_freedom: Array) -> Array:
    """Quantile of Student's t distribution.

    Parameters
    ----------
    probability : of a lower value, one-sided, between 0 and 1. [-]
    degrees_of_freedom : (n,) at least 1. [-]

    Returns
    -------
    (n,) t. [-]  NaN below one degree of freedom.

    Source
    ------
    Student, Biometrika 6 (1908) 1-25; by the inverse in scipy.special.
    """
    # Here, so that whoever has no tests does not wait for the library.
    from scipy.special import stdtrit

    degrees = np.asarray(degrees_of_freedom, float)
    return stdtrit(np.where(degrees >= 1, degrees, np.nan), probability)


def cautious_mean(
    mean: Array, standard_deviation: Array, test_count: Array, side: CautiousSide
) -> Array:
    """Value that the true mean passes, to the cautious side, with a probability of 5 %.

    Parameters
    ----------
    mean : (n,) of the tests, in one unit with the standard deviation.
    standard_deviation : (n,) s of the tests, with n - 1 in its denominator, in one unit with the
        mean.
    test_count : (n,) number of tests, at least 2. [-]
    side : which side is cautious.

    Returns
    -------
    (n,) mean -/+ t s / sqrt(n), t the one-sided 95 % quantile of Student for n - 1 degrees of
    freedom, in the unit of the mean.  NaN for fewer than 2 tests or a negative deviation.

    Raises
    ------
    ShapeError : the arrays differ in length.
    ValueError : the side is neither -1 nor 1.

    Limits
    ------
    Independent tests of one normally distributed property, and a failure that averages it over
    a large volume of ground. Where a weak spot decides, use the fractile.

    Source
    ------
    Student, Biometrika 6 (1908) 1-25: one-sided confidence bound of a mean; as characteristic
    value EN 1997-1:2004, 2.4.5.2(11), cautious estimate of the mean [from memory].
    """
    same_length(mean=mean, standard_deviation=standard_deviation, test_count=test_count)
    count = _enough(test_count)
    step = student_quantile(PROBABILITY, count - 1) / np.sqrt(count)
    return mean + CautiousSide(side) * step * _not_negative(standard_deviation)


def cautious_fractile(
    mean: Array, standard_deviation: Array, test_count: Array, side: CautiousSide
) -> Array:
    """Value that one further test passes, to the cautious side, with a probability of 5 %.

    Parameters
    ----------
    mean : (n,) of the tests, in one unit with the standard deviation.
    standard_deviation : (n,) s of the tests, with n - 1 in its denominator, in one unit with the
        mean.
    test_count : (n,) number of tests, at least 2. [-]
    side : which side is cautious.

    Returns
    -------
    (n,) mean -/+ t s sqrt(1 + 1/n), t the one-sided 95 % quantile of Student for n - 1 degrees
    of freedom, in the unit of the mean.  NaN for fewer than 2 tests or a negative deviation.

    Raises
    ------
    ShapeError : the arrays differ in length.
    ValueError : the side is neither -1 nor 1.

    Limits
    ------
    Independent tests of one normally distributed property. With few tests the step is so long
    that the value may leave the range of the property.

    Source
    ------
    EN 1990:2002, annex D, D7.2: prediction with unknown standard deviation; EN 1997-1:2004,
    2.4.5.2(11), fractile where local failure is concerned [both from memory].
    """
    same_length(mean=mean, standard_deviation=standard_deviation, test_count=test_count)
    count = _enough(test_count)
    step = student_quantile(PROBABILITY, count - 1) * np.sqrt(1 + 1 / count)
    return mean + CautiousSide(side) * step * _not_negative(standard_deviation)


def cautious_by_half_deviation(mean: Array, standard_deviation: Array, side: CautiousSide) -> Array:
    """Value half a standard deviation to the cautious side of the mean.

    Parameters
    ----------
    mean : (n,) of the tests, in one unit with the standard deviation.
    standard_deviation : (n,) s, in one unit with the mean.
    side : which side is cautious.

    Returns
    -------
    (n,) mean -/+ 0.5 s, in the unit of the mean.  NaN for a negative deviation.

    Raises
    ------
    ShapeError : the arrays differ in length.
    ValueError : the side is neither -1 nor 1.

    Limits
    ------
    A rule of thumb that knows nothing of the number of tests; with 13 tests it gives what the
    cautious mean gives, with fewer it is the bolder one.

    Source
    ------
    H. R. Schneider, Definition and determination of characteristic soil properties, Proc. 14th
    Int. Conf. Soil Mech. Found. Eng., Hamburg (1997) [from memory].
    """
    same_length(mean=mean, standard_deviation=standard_deviation)
    return mean + CautiousSide(side) * SCHNEIDER_SHARE * _not_negative(standard_deviation)


def _enough(test_count: Array) -> Array:
    """The number of tests, NaN where a standard deviation is impossible."""
    return np.where(test_count >= LEAST_TESTS, test_count, np.nan)


def _not_negative(standard_deviation: Array) -> Array:
    """The standard deviation, NaN where it is none."""
    return np.where(standard_deviation >= 0, standard_deviation, np.nan)
