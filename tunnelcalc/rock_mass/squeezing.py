"""Squeezing of weak ground: closure, strain of the face and warning levels by simple relations.

These are cross-checks from published fits, each with its own strength. None of them replaces the
ground reaction curve.
"""

from __future__ import annotations

from enum import Enum

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.vocabulary import Limits

SQUEEZING_BANDS_PCT = (1.0, 2.5, 5.0, 10.0)
"""Closure at which bands 1 to 4 begin. [%]"""
PRESSURE_SHARE_2000 = Limits(0, 1)
"""Support pressure over in-situ stress in the relations of Hoek & Marinos (2000). [-]"""
PRESSURE_SHARE_1999 = Limits(0, 0.5, below=True)
"""Support pressure over in-situ stress in the relations of Hoek (1999). [-]"""
KGF_CM2_PER_MPA = 1 / 0.0980665
"""One kilogram-force is 9.80665 N."""


class WarningLevel(Enum):
    """Hazard warning levels of Sakurai with the constant c of their lines [from memory]."""

    FIRST = 1.59
    SECOND = 1.22
    THIRD = 0.85


def _above_zero(values: Array) -> Array:
    """The values, with NaN for those that are not above 0."""
    return np.where(values > 0, values, np.nan)


def _share(support_pressure_mpa: Array, in_situ_stress_mpa: Array, limits: Limits) -> Array:
    """Support pressure over in-situ stress; NaN outside the limits."""
    share = support_pressure_mpa / _above_zero(in_situ_stress_mpa)
    return np.where(limits.contain(share), share, np.nan)


def squeezing_strength_mpa(intact_strength_mpa: Array, mi: Array, gsi: Array) -> Array:
    """Strength of the rock mass that belongs to the squeezing relations of 2000.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock. [MPa]
    mi : (n,) constant of the intact rock, above 0. [-]
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]

    Returns
    -------
    (n,) 0.0034 mi^0.8 sci (1.029 + 0.025 exp(-0.1 mi))^GSI. [MPa]  NaN where mi is not above 0.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    For the relations of this module only: it is another number than the global strength of the
    criterion of 2002.

    Source
    ------
    E. Hoek, P. Marinos, Tunnels & Tunnelling Int. 32 (2000), no. 11, 45-51, and no. 12, 33-36
    [from memory].
    """
    same_length(intact_strength_mpa=intact_strength_mpa, mi=mi, gsi=gsi)
    constant = _above_zero(mi)
    growth = (1.029 + 0.025 * np.exp(-0.1 * constant)) ** gsi
    return 0.0034 * constant**0.8 * intact_strength_mpa * growth


def squeezing_strain_pct(squeezing_strength_mpa: Array, in_situ_stress_mpa: Array) -> Array:
    """Closure of a tunnel without support, per cent of its radius.

    Parameters
    ----------
    squeezing_strength_mpa : (n,) scm by `squeezing_strength_mpa`, above 0. [MPa]
    in_situ_stress_mpa : (n,) p0, above 0. [MPa]

    Returns
    -------
    (n,) 0.2 (scm / p0)^-2. [%]  NaN where the strength or the stress is not above 0.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    A fit to calculations in equal in-situ stress; beyond about 10 % it is a warning and no
    prediction.

    Source
    ------
    E. Hoek, P. Marinos, Tunnels & Tunnelling Int. 32 (2000), no. 11, 45-51, and no. 12, 33-36
    [from memory].
    """
    same_length(
        squeezing_strength_mpa=squeezing_strength_mpa, in_situ_stress_mpa=in_situ_stress_mpa
    )
    return 0.2 * (_above_zero(in_situ_stress_mpa) / _above_zero(squeezing_strength_mpa)) ** 2


def squeezing_band(strain_pct: Array) -> Array:
    """Number of the band of squeezing in which a closure lies.

    Parameters
    ----------
    strain_pct : (n,) closure per cent of the radius, at least 0. [%]

    Returns
    -------
    (n,) 0 few problems, 1 minor, 2 severe, 3 very severe, 4 extreme squeezing. [-]  NaN where the
    closure is below 0 or NaN.

    Limits
    ------
    `SQUEEZING_BANDS_PCT`. The source says "less than 1", "1 to 2.5" and so on; here a closure on a
    boundary belongs to the higher band, 10 % included.

    Source
    ------
    E. Hoek, P. Marinos, Tunnels & Tunnelling Int. 32 (2000), no. 11, 45-51 [from memory].
    """
    band = np.where(strain_pct >= 0, 0.0, np.nan)
    for begin in SQUEEZING_BANDS_PCT:
        band = band + (strain_pct >= begin)
    return band


def supported_strain_pct(
    squeezing_strength_mpa: Array, in_situ_stress_mpa: Array, support_pressure_mpa: Array
) -> Array:
    """Closure of a tunnel under a support pressure, per cent of its radius.

    Parameters
    ----------
    squeezing_strength_mpa : (n,) scm by `squeezing_strength_mpa`, above 0. [MPa]
    in_situ_stress_mpa : (n,) p0, above 0. [MPa]
    support_pressure_mpa : (n,) pi, 0 to p0. [MPa]

    Returns
    -------
    (n,) 0.15 (1 - pi/p0) (scm / p0)^-((3 pi/p0 + 1) / (3.8 pi/p0 + 0.54)). [%]  NaN outside the
    valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `PRESSURE_SHARE_2000`. A fit of its own: without support it does not give the value of
    `squeezing_strain_pct`.

    Source
    ------
    E. Hoek, P. Marinos, Tunnels & Tunnelling Int. 32 (2000), no. 11, 45-51, and no. 12, 33-36
    [from memory].
    """
    return 0.15 * _strain_shape(squeezing_strength_mpa, in_situ_stress_mpa, support_pressure_mpa)


def face_strain_pct(
    squeezing_strength_mpa: Array, in_situ_stress_mpa: Array, support_pressure_mpa: Array
) -> Array:
    """Strain of the face under a support pressure, per cent of the radius.

    Parameters
    ----------
    squeezing_strength_mpa : (n,) scm by `squeezing_strength_mpa`, above 0. [MPa]
    in_situ_stress_mpa : (n,) p0, above 0. [MPa]
    support_pressure_mpa : (n,) pi, 0 to p0. [MPa]

    Returns
    -------
    (n,) 0.1 (1 - pi/p0) (scm / p0)^-((3 pi/p0 + 1) / (3.8 pi/p0 + 0.54)). [%]  NaN outside the
    valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `PRESSURE_SHARE_2000`.

    Source
    ------
    E. Hoek, P. Marinos, Tunnels & Tunnelling Int. 32 (2000), no. 11, 45-51, and no. 12, 33-36
    [from memory].
    """
    return 0.1 * _strain_shape(squeezing_strength_mpa, in_situ_stress_mpa, support_pressure_mpa)


def _strain_shape(strength: Array, stress: Array, pressure: Array) -> Array:
    """What the closure and the strain of the face have in common. [%]"""
    same_length(
        squeezing_strength_mpa=strength, in_situ_stress_mpa=stress, support_pressure_mpa=pressure
    )
    share = _share(pressure, stress, PRESSURE_SHARE_2000)
    ratio = _above_zero(strength) / _above_zero(stress)
    return (1 - share) * ratio ** (-(3 * share + 1) / (3.8 * share + 0.54))


def plastic_radius_ratio_1999(
    strength_mpa: Array, in_situ_stress_mpa: Array, support_pressure_mpa: Array
) -> Array:
    """Radius of the plastic zone over that of the tunnel, as a cross-check.

    Parameters
    ----------
    strength_mpa : (n,) scm, strength of the rock mass, above 0. [MPa]
    in_situ_stress_mpa : (n,) p0, above 0. [MPa]
    support_pressure_mpa : (n,) pi, 0 to below half of p0. [MPa]

    Returns
    -------
    (n,) Rp/R = (1.25 - 0.625 pi/p0) (scm / p0)^(pi/p0 - 0.57). [-]  NaN outside the valid ranges,
    and where it would be below 1: of ground that stays elastic the fit says nothing.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `PRESSURE_SHARE_1999`. Not calibrated to the global strength of 2002.

    Source
    ------
    E. Hoek, Support for very weak rock associated with faults and shear zones, Rock Support and
    Reinforcement Practice in Mining, Kalgoorlie (1999), 19-32 [from memory].
    """
    ratio, share = _of_1999(strength_mpa, in_situ_stress_mpa, support_pressure_mpa)
    found = (1.25 - 0.625 * share) * ratio ** (share - 0.57)
    return np.where(found >= 1, found, np.nan)


def closure_ratio_1999(
    strength_mpa: Array, in_situ_stress_mpa: Array, support_pressure_mpa: Array
) -> Array:
    """Closure over the radius of the tunnel, as a cross-check.

    Parameters
    ----------
    strength_mpa : (n,) scm, strength of the rock mass, above 0. [MPa]
    in_situ_stress_mpa : (n,) p0, above 0. [MPa]
    support_pressure_mpa : (n,) pi, 0 to below half of p0. [MPa]

    Returns
    -------
    (n,) u/R = (0.002 - 0.0025 pi/p0) (scm / p0)^(2.4 pi/p0 - 2). [-]  NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `PRESSURE_SHARE_1999`. Not calibrated to the global strength of 2002.

    Source
    ------
    E. Hoek, Support for very weak rock associated with faults and shear zones, Rock Support and
    Reinforcement Practice in Mining, Kalgoorlie (1999), 19-32 [from memory].
    """
    ratio, share = _of_1999(strength_mpa, in_situ_stress_mpa, support_pressure_mpa)
    return (0.002 - 0.0025 * share) * ratio ** (2.4 * share - 2)


def _of_1999(strength: Array, stress: Array, pressure: Array) -> tuple[Array, Array]:
    """Strength and support pressure over the in-situ stress. [-]"""
    same_length(strength_mpa=strength, in_situ_stress_mpa=stress, support_pressure_mpa=pressure)
    share = _share(pressure, stress, PRESSURE_SHARE_1999)
    return _above_zero(strength) / _above_zero(stress), share


def critical_strain_pct(deformation_modulus_mpa: Array, level: WarningLevel) -> Array:
    """Strain of the ground at which monitoring reaches a hazard warning level.

    Parameters
    ----------
    deformation_modulus_mpa : (n,) E of the rock mass, above 0. [MPa]
    level : the first level asks for attention, the third means danger.

    Returns
    -------
    (n,) 100 eps with log10 eps = -0.25 log10 E - c, E in kgf/cm2. [%]  NaN where E is not above 0.

    Limits
    ------
    For the comparison with measured closure over radius. That eps is a fraction and no percentage
    is from memory and fits the magnitude of the levels.

    Source
    ------
    S. Sakurai, Tunn. Undergr. Space Technol. 12 (1997) 453-460; levels of 1983 [from memory].
    """
    modulus = _above_zero(deformation_modulus_mpa) * KGF_CM2_PER_MPA
    return 100 * 10 ** (-0.25 * np.log10(modulus) - level.value)
