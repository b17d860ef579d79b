"""Strength by the Mohr-Coulomb criterion, a straight line.

Source of all formulas here: J. C. Jaeger, N. G. W. Cook, R. W. Zimmerman, Fundamentals of Rock
Mechanics, 4th ed. (2007), the Coulomb criterion [from memory].
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.vocabulary import Limits

FRICTION_ANGLE_RANGE_DEG = Limits(0, 90, below=True)
"""A friction angle; at 90 a confined sample would have no finite strength. [deg]"""
COHESION_RANGE_MPA = Limits(0)
"""Cohesion. [MPa]"""


def _radians(friction_angle_deg: Array) -> Array:
    """Friction angle in radians; NaN outside its range."""
    inside = FRICTION_ANGLE_RANGE_DEG.contain(friction_angle_deg)
    return np.radians(np.where(inside, friction_angle_deg, np.nan))


def _sine(friction_angle_deg: Array) -> Array:
    """Sine of the friction angle; NaN outside its range and where it rounds to 1."""
    sine = np.sin(_radians(friction_angle_deg))
    return np.where(sine < 1, sine, np.nan)


def _cohesion(cohesion_mpa: Array) -> Array:
    """Cohesion; NaN outside its range."""
    return np.where(COHESION_RANGE_MPA.contain(cohesion_mpa), cohesion_mpa, np.nan)


def unconfined_strength_mpa(cohesion_mpa: Array, friction_angle_deg: Array) -> Array:
    """Unconfined compressive strength that belongs to a straight strength line.

    Parameters
    ----------
    cohesion_mpa : (n,) c, at least 0. [MPa]
    friction_angle_deg : (n,) phi, 0 <= phi < 90. [deg]

    Returns
    -------
    (n,) q = 2 c cos phi / (1 - sin phi). [MPa]  NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `COHESION_RANGE_MPA`, `FRICTION_ANGLE_RANGE_DEG`. Of a line that stands for a curved
    criterion this is the intercept, and not the strength of the rock mass at s3 = 0.

    Source
    ------
    Jaeger, Cook & Zimmerman (2007), the Coulomb criterion in principal stresses.
    """
    same_length(cohesion_mpa=cohesion_mpa, friction_angle_deg=friction_angle_deg)
    cosine = np.cos(_radians(friction_angle_deg))
    return 2 * _cohesion(cohesion_mpa) * cosine / (1 - _sine(friction_angle_deg))


def slope(friction_angle_deg: Array) -> Array:
    """Gain of the major stress at failure for a gain of the minor stress.

    Parameters
    ----------
    friction_angle_deg : (n,) phi, 0 <= phi < 90. [deg]

    Returns
    -------
    (n,) k = (1 + sin phi) / (1 - sin phi), at least 1. [-]  NaN outside the valid range.

    Limits
    ------
    `FRICTION_ANGLE_RANGE_DEG`.

    Source
    ------
    Jaeger, Cook & Zimmerman (2007), the Coulomb criterion in principal stresses.
    """
    sine = _sine(friction_angle_deg)
    return (1 + sine) / (1 - sine)


def strength_difference_mpa(
    minor_stress_mpa: Array, cohesion_mpa: Array, friction_angle_deg: Array
) -> Array:
    """Difference of the principal stresses at failure.

    Parameters
    ----------
    minor_stress_mpa : (n,) s3, compression positive. [MPa]
    cohesion_mpa : (n,) c, at least 0. [MPa]
    friction_angle_deg : (n,) phi, 0 <= phi < 90. [deg]

    Returns
    -------
    (n,) s1 - s3 = q + (k - 1) s3 by the straight line. [MPa]  It is below 0 beyond the tip of the
    line, at s3 = -c / tan phi, where the line means nothing. NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `COHESION_RANGE_MPA`, `FRICTION_ANGLE_RANGE_DEG`. No tension cut-off.

    Source
    ------
    Jaeger, Cook & Zimmerman (2007), the Coulomb criterion in principal stresses.
    """
    same_length(
        minor_stress_mpa=minor_stress_mpa,
        cohesion_mpa=cohesion_mpa,
        friction_angle_deg=friction_angle_deg,
    )
    sine = _sine(friction_angle_deg)
    # k - 1 written so that nothing cancels where the friction is small.
    gain = 2 * sine / (1 - sine)
    return unconfined_strength_mpa(cohesion_mpa, friction_angle_deg) + gain * minor_stress_mpa


def shear_strength_mpa(
    normal_stress_mpa: Array, cohesion_mpa: Array, friction_angle_deg: Array
) -> Array:
    """Shear stress at failure on a plane under a normal stress.

    Parameters
    ----------
    normal_stress_mpa : (n,) sn, compression positive. [MPa]
    cohesion_mpa : (n,) c, at least 0. [MPa]
    friction_angle_deg : (n,) phi, 0 <= phi < 90. [deg]

    Returns
    -------
    (n,) tau = c + sn tan phi. [MPa]  NaN outside the valid ranges and where it would be below 0:
    so much tension the line does not bear at all.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `COHESION_RANGE_MPA`, `FRICTION_ANGLE_RANGE_DEG`. No tension cut-off.

    Source
    ------
    Jaeger, Cook & Zimmerman (2007), the Coulomb criterion.
    """
    same_length(
        normal_stress_mpa=normal_stress_mpa,
        cohesion_mpa=cohesion_mpa,
        friction_angle_deg=friction_angle_deg,
    )
    tangent = np.tan(_radians(friction_angle_deg))
    strength = _cohesion(cohesion_mpa) + normal_stress_mpa * tangent
    return np.where(strength >= 0, strength, np.nan)
