"""Stiffness and capacity of end-anchored, ungrouted bolts. Pure functions."""

from __future__ import annotations

import math

MN_PER_KN = 1e-3
M_PER_MM = 1e-3
MPA_PER_GPA = 1e3


def end_anchored_stiffness_mpa_per_m(
    *,
    spacing_around_m: float,
    spacing_along_m: float,
    free_length_m: float,
    diameter_mm: float,
    steel_modulus_gpa: float,
    anchor_deformation_m_per_mn: float,
) -> float:
    """Pressure on the wall a metre of wall movement, spread over the bolt's share of the wall.

    Parameters
    ----------
    spacing_around_m, spacing_along_m : between bolts, around the ring and along the drive. [m]
    free_length_m : length that stretches between plate and anchor. [m]
    diameter_mm : of the bar. [mm]
    steel_modulus_gpa : Young's modulus of the bar. [GPa]
    anchor_deformation_m_per_mn : Q, give of anchor, plate and head a force, from a pull-out
        test. [m/MN]

    Returns
    -------
    K of p = K (u - u_installed). [MPa/m]

    Limits
    ------
    The anchor is taken to stand still. It moves with the ground, so that the bolt's load is
    overstated and the other elements are relieved.

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980), ungrouted bolts; Brady & Brown, Rock
    Mechanics for Underground Mining, App. C, where k = K R.
    """
    diameter = diameter_mm * M_PER_MM
    modulus = steel_modulus_gpa * MPA_PER_GPA
    give = 4 * free_length_m / (math.pi * diameter**2 * modulus) + anchor_deformation_m_per_mn
    return 1 / (spacing_around_m * spacing_along_m * give)


def capacity_pressure_mpa(
    *, capacity_kn: float, spacing_around_m: float, spacing_along_m: float
) -> float:
    """Pressure on the wall at which each bolt carries its capacity.

    Parameters
    ----------
    capacity_kn : the least of bar, anchor and plate. [kN]
    spacing_around_m, spacing_along_m : between bolts. [m]

    Returns
    -------
    Capacity spread over the bolt's share of the wall. [MPa]

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980).
    """
    return capacity_kn * MN_PER_KN / (spacing_around_m * spacing_along_m)
