"""What a bolt can carry: bar, plate and bond as separate limits, of which the least governs.

Forces are those of one bolt. The project declares the factor for corrosion and for temporary or
permanent use; there is no default.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array

MN_PER_KN = 1e-3
KN_PER_N = 1e-3


class BoltCapacity(NamedTuple):
    """Least limit of a bolt (n,) [kN] and its name (n,), empty where the limit is NaN."""

    capacity_kn: Array
    governing: Array


def bar_force_kn(diameter_mm: float, strength_mpa: float) -> float:
    """Force in a solid round bar at a stress: its yield or its ultimate strength.

    Parameters
    ----------
    diameter_mm : d of the section that carries: of the core where a thread is cut. [mm]
    strength_mpa : yield or ultimate strength of the grade. [MPa]

    Returns
    -------
    strength pi d^2 / 4. [kN]

    Source
    ------
    Stress times area.
    """
    return strength_mpa * math.pi * diameter_mm**2 / 4 * KN_PER_N


def length_beyond_plastic_zone_m(
    length_m: float, radius_m: Array, plastic_radius_m: Array
) -> Array:
    """Length of a radial bolt in ground that has not yielded.

    Parameters
    ----------
    length_m : of the bolt, from the wall. [m]
    radius_m : (n,) R of the opening. [m]
    plastic_radius_m : (n,) Rp of the supported section. [m]

    Returns
    -------
    (n,) R + length - Rp, 0 for a bolt that ends inside the plastic zone. [m]

    Source
    ------
    Geometry; a bolt anchored inside the plastic zone is not credited: common practice, no
    source.
    """
    return np.maximum(length_m - np.maximum(plastic_radius_m - radius_m, 0), 0)


def bond_force_kn(bond_kn_per_m: float, bonded_length_m: Array) -> Array:
    """Force that friction or grout transfers over a length in sound ground.

    Parameters
    ----------
    bond_kn_per_m : declared, from pull-out tests in this ground. [kN/m]
    bonded_length_m : (n,) that counts: beyond the plastic zone. [m]

    Returns
    -------
    (n,) bond times length. [kN]

    Limits
    ------
    Bond even along the length: short lengths, as friction bolts and usual anchorages have.

    Source
    ------
    Common practice, no source.
    """
    return bond_kn_per_m * bonded_length_m


def least_limit(limits: Mapping[str, Array], service_factor: float) -> BoltCapacity:
    """Capacity of a bolt, and which of its limits gives it.

    Parameters
    ----------
    limits : forces (n,) [kN] by name, such as bar_yield, bar_ultimate, plate, bond; one or more.
    service_factor : share of every limit that may be counted on: 1 for a temporary or fully
        protected bolt, less for corrosion over a permanent bolt's life, declared. Above 0 and
        at most 1. [-]

    Returns
    -------
    service_factor times the least limit [kN], and its name; of equal limits the first named. A
    row with NaN in any limit is NaN, without a name.

    Raises
    ------
    ValueError : no limit, or a factor outside its range.

    Source
    ------
    The weakest part of a chain; factor: common practice, no source.
    """
    if not limits:
        raise ValueError("a bolt needs at least one limit")
    if not 0 < service_factor <= 1:
        raise ValueError("service_factor must lie above 0 and not above 1")
    names, forces = list(limits), [np.asarray(force, float) for force in limits.values()]
    least, governing = forces[0], np.full(forces[0].shape, names[0], dtype=object)
    for name, force in zip(names[1:], forces[1:], strict=True):
        governing = np.where(force < least, name, governing)
        least = np.minimum(least, force)
    governing = np.where(np.isnan(least), "", governing)
    return BoltCapacity(service_factor * least, governing)


def spread_pressure_mpa(force_kn: Array, spacing_around_m: float, spacing_along_m: float) -> Array:
    """Pressure on the wall of a force in each bolt of a pattern.

    Parameters
    ----------
    force_kn : (n,) in one bolt. [kN]
    spacing_around_m, spacing_along_m : between bolts. [m]

    Returns
    -------
    (n,) force over the bolt's share of the wall. [MPa]

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980).
    """
    return force_kn * MN_PER_KN / (spacing_around_m * spacing_along_m)
