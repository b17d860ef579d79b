"""Water pressure in the ground and the stresses that are left to its grains."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array, same_length

KPA_PER_MPA = 1000.0
WATER_UNIT_WEIGHT_KN_M3 = 9.81
"""1000 kg/m3 under standard gravity, rounded: common practice, no source. [kN/m3]"""


class EffectiveStresses(NamedTuple):
    """Vertical and horizontal in-situ stress less the water pressure, each (n,). [MPa]"""

    vertical_mpa: Array
    horizontal_mpa: Array


def water_pressure_mpa(head_m: Array) -> Array:
    """Pressure of still water under a head.

    Parameters
    ----------
    head_m : (n,) height of the water level over the tunnel axis, at least 0. [m]

    Returns
    -------
    (n,) uw = 9.81 head / 1000. [MPa]  NaN where the head is below 0.

    Limits
    ------
    Still fresh water; the pressure at the axis stands for the whole section.

    Source
    ------
    Common practice, no source.
    """
    return WATER_UNIT_WEIGHT_KN_M3 * np.where(head_m >= 0, head_m, np.nan) / KPA_PER_MPA


def effective_stresses_mpa(
    vertical_stress_mpa: Array, stress_ratio: Array, water_pressure_mpa: Array
) -> EffectiveStresses:
    """In-situ stresses less the water pressure.

    Parameters
    ----------
    vertical_stress_mpa : (n,) sv, total. [MPa]
    stress_ratio : (n,) k0, horizontal over vertical effective stress. [-]
    water_pressure_mpa : (n,) uw, at least 0. [MPa]

    Returns
    -------
    sv' = sv - uw and sh' = k0 sv'. [MPa]  NaN where the water pressure is below 0, and where it
    leaves no vertical stress.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    The ratio is one of effective stresses; without water it is that of the total stresses too.

    Source
    ------
    K. Terzaghi, Theoretical Soil Mechanics (1943): the principle of effective stress.
    """
    same_length(
        vertical_stress_mpa=vertical_stress_mpa,
        stress_ratio=stress_ratio,
        water_pressure_mpa=water_pressure_mpa,
    )
    left = vertical_stress_mpa - np.where(water_pressure_mpa >= 0, water_pressure_mpa, np.nan)
    vertical = np.where(left > 0, left, np.nan)
    return EffectiveStresses(vertical, stress_ratio * vertical)
