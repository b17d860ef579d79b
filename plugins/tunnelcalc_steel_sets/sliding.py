"""Steel sets with sliding joints: an elastic ring, a plateau while the joints slide, the ring.

The circumference shortens by 2 pi times the closure. While the joints slide the thrust is the
slip load and the pressure stands still; when their travel is used up the ring is elastic again,
up to its own yield.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array

M_PER_MM = 1e-3
MN_PER_KN = 1e-3


class SlidingReaction(NamedTuple):
    """Pressure (n,) [MPa] and its slope with closure (n,) [MPa/m]."""

    pressure_mpa: Array
    slope_mpa_per_m: Array


def slip_pressure_mpa(radius_m: Array, slip_load_kn: float, spacing_m: float) -> Array:
    """Pressure on the wall at which the joints of a set begin to slide.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    slip_load_kn : thrust at which a joint slides. [kN]
    spacing_m : S of the sets along the drive. [m]

    Returns
    -------
    (n,) slip load / (S R). [MPa]

    Source
    ------
    Statics of half a ring, thrust p S R.
    """
    return slip_load_kn * MN_PER_KN / (spacing_m * radius_m)


def slip_closure_m(travel_mm: float, joints: int) -> float:
    """Closure of the wall while the joints slide over all their travel.

    Parameters
    ----------
    travel_mm : by which one joint can shorten. [mm]
    joints : number of sliding joints in a ring. [-]

    Returns
    -------
    joints travel / (2 pi). [m]

    Limits
    ------
    All joints slide alike.

    Source
    ------
    The circumference is 2 pi times the radius.
    """
    return joints * travel_mm * M_PER_MM / (2 * np.pi)


def sliding_pressure_and_slope(
    closure_m: Array,
    *,
    stiffness_mpa_per_m: Array,
    slip_pressure_mpa: Array,
    slip_closure_m: float,
) -> SlidingReaction:
    """Reaction of sets with sliding joints to closure since their installation.

    Parameters
    ----------
    closure_m : (n,) of the wall since installation. [m]
    stiffness_mpa_per_m : (n,) K of the set while its joints stand, above 0. [MPa/m]
    slip_pressure_mpa : (n,) at which the joints slide. [MPa]
    slip_closure_m : closure over which they slide. [m]

    Returns
    -------
    Pressure [MPa], 0 before closure begins: K u up to the slip pressure, the slip pressure while
    the joints slide, K (u - slip closure) from there. Slope [MPa/m]: at a corner that of the
    part that begins there.

    Limits
    ------
    The slip load is constant: no running-in, no loss by bending, bolts tightened as declared.
    The pressure is not capped at the set's yield: that is its capacity.

    Source
    ------
    Thin elastic ring and statics; common practice for yielding sets, no source.
    """
    elastic = stiffness_mpa_per_m * np.maximum(closure_m, 0)
    locked = stiffness_mpa_per_m * (closure_m - slip_closure_m)
    pressure = np.maximum(np.minimum(elastic, slip_pressure_mpa), locked)
    slides = (elastic >= slip_pressure_mpa) & (locked < slip_pressure_mpa)
    stands = (closure_m >= 0) & ~slides
    slope = np.where(stands, stiffness_mpa_per_m, 0)
    return SlidingReaction(pressure, np.where(np.isnan(pressure), np.nan, slope))
