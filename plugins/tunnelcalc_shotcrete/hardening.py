"""Strength and stiffness of young shotcrete as shares of those at 28 days. Pure functions.

Ages are in days in every function, whatever the unit of the published law. A share is 0 at age
0, never above 1 and never falls; a negative age gives NaN. Beyond 28 days nothing is gained,
because the strength that a project declares is that of 28 days.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array

HOURS_PER_DAY = 24.0
REFERENCE_AGE_DAYS = 28.0
EUROCODE_FIRST_DAYS = 3.0
EUROCODE_COEFFICIENTS = {"R": 0.20, "N": 0.25, "S": 0.38}
"""s by the class of the cement: R rapid, N normal, S slow. EN 1992-1-1:2004, 3.1.2(6)."""
MESCHKE_JOINT_HOURS = 24.0
MESCHKE_STIFFNESS_JOINT_HOURS = 8.0


class EarlyStrength(NamedTuple):
    """A measured strength beside the one required at its age.

    `required_mpa` (n,) [MPa] and `ratio` (n,), measured over required [-]: 1 or more is
    accepted. Both are NaN at ages that the curve does not cover.
    """

    required_mpa: Array
    ratio: Array


def age_days(distance_m: Array, installation_distance_m: float, advance_m_per_day: float) -> Array:
    """Age of shotcrete at a distance behind the face, under a steady advance.

    Parameters
    ----------
    distance_m : (n,) behind the face. [m]
    installation_distance_m : behind the face, where it was sprayed. [m]
    advance_m_per_day : mean advance of the face, above 0. [m/day]

    Returns
    -------
    (n,) age. [day]  NaN ahead of the installation.

    Limits
    ------
    No standstill: one hardens the shotcrete at the same load and is on the safe side.

    Source
    ------
    Distance over speed.
    """
    age = (distance_m - installation_distance_m) / advance_m_per_day
    return np.where(age >= 0, age, np.nan)


def chang_stille_strength_ratio(age_days: Array) -> Array:
    """Strength over strength at 28 days, by one exponential from the first hours on.

    Parameters
    ----------
    age_days : (n,) t, 0 or more. [day]

    Returns
    -------
    (n,) 1.105 exp(-0.743 t^-0.70), at most 1. [-]

    Limits
    ------
    The fit passes 1 near 18 days and ends at 1.028 at 28 days: it is capped at 1.

    Source
    ------
    Y. Chang, H. Stille, Shotcrete for Underground Support VI (1993) [from memory].
    """
    return _exponential_ratio(age_days, 1.105, 0.743, 0.70)


def chang_stille_modulus_ratio(age_days: Array) -> Array:
    """Young's modulus over that at 28 days, by one exponential.

    Parameters
    ----------
    age_days : (n,) t, 0 or more. [day]

    Returns
    -------
    (n,) 1.062 exp(-0.446 t^-0.60), at most 1. [-]

    Source
    ------
    Y. Chang, H. Stille, Shotcrete for Underground Support VI (1993) [from memory].
    """
    return _exponential_ratio(age_days, 1.062, 0.446, 0.60)


def meschke_strength_ratio(age_days: Array) -> Array:
    """Strength over strength at 28 days, by two branches that meet at one day.

    Parameters
    ----------
    age_days : (n,) 0 or more. [day]

    Returns
    -------
    (n,) with t in hours, 0.489 ((t + 0.12) / 24)^0.72453 below 24 h and 1.027 exp(-17.8 / t)
    from there, at most 1. [-]

    Limits
    ------
    The first branch ends at 0.4908, the second begins at 0.4892: the larger holds until the
    second has passed it, so that strength never falls. The law gives 0.0105 at age 0; here it
    is 0 at age 0 exactly.

    Source
    ------
    G. Meschke, C. Kropik, H. A. Mang, Int. J. Numer. Methods Eng. 39 (1996) [from memory].
    """
    hours = _hours(age_days)
    first = _meschke_first_day(np.minimum(hours, MESCHKE_JOINT_HOURS))
    later = np.maximum(hours, MESCHKE_JOINT_HOURS)
    ratio = np.maximum(first, np.where(hours >= later, 1.027 * np.exp(-17.8 / later), 0))
    return np.where(hours == 0, 0, np.minimum(ratio, 1))


def meschke_modulus_ratio(age_days: Array) -> Array:
    """Young's modulus over that at 28 days, by two branches that meet at 8 hours.

    Parameters
    ----------
    age_days : (n,) 0 or more. [day]

    Returns
    -------
    (n,) with t in hours, 0.0468 t - 0.00211 t^2 below 8 h and (0.9506 + 32.89 / (t - 6))^-0.5
    from there, at most 1. [-]

    Source
    ------
    G. Meschke, C. Kropik, H. A. Mang, Int. J. Numer. Methods Eng. 39 (1996) [from memory].
    """
    hours = _hours(age_days)
    joint = MESCHKE_STIFFNESS_JOINT_HOURS
    early = np.minimum(hours, joint)
    first = 0.0468 * early - 0.00211 * early**2
    later = np.maximum(hours, joint)
    second = (0.9506 + 32.89 / (later - 6)) ** -0.5
    return np.minimum(np.maximum(first, np.where(hours >= later, second, 0)), 1)


def eurocode_strength_ratio(age_days: Array, cement_coefficient: float) -> Array:
    """Mean strength over mean strength at 28 days, for cured concrete.

    Parameters
    ----------
    age_days : (n,) t. [day]
    cement_coefficient : s, by the class of the cement: `EUROCODE_COEFFICIENTS`. [-]

    Returns
    -------
    (n,) exp(s (1 - sqrt(28 / t))), at most 1. [-]  NaN between 0 and 3 days: the code asks for
    tests there.

    Limits
    ------
    Mean cylinder strength at 20 degrees. The code's characteristic strength at an age is the
    mean less 8 MPa. Sprayed concrete is often less stiff than this.

    Source
    ------
    EN 1992-1-1:2004, 3.1.2(5) and (6), from 3 days on.
    """
    age = _age(age_days)
    within = np.where(age >= EUROCODE_FIRST_DAYS, age, np.nan)
    ratio = np.exp(cement_coefficient * (1 - np.sqrt(REFERENCE_AGE_DAYS / within)))
    return np.where(age == 0, 0, np.minimum(ratio, 1))


def eurocode_modulus_ratio(age_days: Array, cement_coefficient: float) -> Array:
    """Young's modulus over that at 28 days, for cured concrete.

    Parameters
    ----------
    age_days : (n,) t. [day]
    cement_coefficient : s, by the class of the cement: `EUROCODE_COEFFICIENTS`. [-]

    Returns
    -------
    (n,) strength ratio to the power 0.3. [-]  NaN between 0 and 3 days.

    Source
    ------
    EN 1992-1-1:2004, 3.1.3(3).
    """
    return eurocode_strength_ratio(age_days, cement_coefficient) ** 0.3


def acceptance(
    ages_days: Array,
    strengths_mpa: Array,
    curve_ages_days: Array,
    curve_strengths_mpa: Array,
) -> EarlyStrength:
    """Measured early strengths against a curve whose ordinates the project gives.

    Parameters
    ----------
    ages_days : (n,) age of each test. [day]
    strengths_mpa : (n,) measured, 0 or more. [MPa]
    curve_ages_days : (k,) ages of the ordinates, above 0 and increasing, k >= 2. [day]
    curve_strengths_mpa : (k,) required strengths, above 0 and not falling. [MPa]

    Returns
    -------
    Required strength [MPa] and ratio of measured to required [-].  Straight between the
    ordinates where both axes are logarithmic; at an ordinate the ordinate itself; nothing is
    extrapolated: NaN outside the curve.

    Raises
    ------
    ValueError : fewer than two ordinates, or not positive, or not in rising order.

    Source
    ------
    The ordinates are the project's and cite EN 14487-1; interpolation: common practice, no
    source.
    """
    ages, strengths = _ordinates(curve_ages_days, curve_strengths_mpa)
    inside = (ages_days >= ages[0]) & (ages_days <= ages[-1])
    within = np.where(inside, ages_days, ages[0])
    index = np.minimum(np.searchsorted(ages, within, side="right") - 1, ages.size - 2)
    # Written so that an ordinate's own age gives its own strength to the last bit.
    start, end = strengths[index], strengths[index + 1]
    share = np.log(within / ages[index]) / np.log(ages[index + 1] / ages[index])
    required = np.where(within == ages[-1], strengths[-1], start * (end / start) ** share)
    required = np.where(inside, required, np.nan)
    return EarlyStrength(required, strengths_mpa / required)


def _age(age_days: Array) -> Array:
    return np.where(age_days >= 0, age_days, np.nan)


def _hours(age_days: Array) -> Array:
    return _age(age_days) * HOURS_PER_DAY


def _exponential_ratio(age_days: Array, limit: float, rate: float, exponent: float) -> Array:
    age = _age(age_days)
    positive = np.where(age == 0, 1, age)
    # A tiny age would overflow the power; its share is 0 long before.
    decay = np.minimum(rate * np.maximum(positive, 1e-9) ** -exponent, 700)
    return np.where(age == 0, 0, np.minimum(limit * np.exp(-decay), 1))


def _meschke_first_day(hours: Array) -> Array:
    return 0.489 * ((hours + 0.12) / HOURS_PER_DAY) ** 0.72453


def _ordinates(ages: Array, strengths: Array) -> tuple[Array, Array]:
    age, strength = np.asarray(ages, float), np.asarray(strengths, float)
    if age.ndim != 1 or age.shape != strength.shape or age.size < 2:
        raise ValueError("an early-strength curve needs at least two ordinates")
    sound = np.isfinite(age).all() and np.isfinite(strength).all()
    sound = sound and (np.diff(age) > 0).all() and (np.diff(strength) >= 0).all()
    if not sound or age[0] <= 0 or strength[0] <= 0:
        raise ValueError("ordinates must be positive, ages increasing, strengths not falling")
    return age, strength
