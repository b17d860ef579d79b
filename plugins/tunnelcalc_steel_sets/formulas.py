"""Steel sets as elastic rings, in full contact or on blocks. Pure functions.

The capacity of blocked sets that is often printed, 1.5 sy As Is / (S R th (3 Is + ...)), takes
the block force equal to the thrust. That fails statics: the block force is 2 N0 sin th. The
printed capacity is too high by about 1 / (2 sin th), for close blocks above the hoop limit
sy As / (S R) itself. It is unsafe and is not used here: the exact elastic ring is.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.api import Array


@dataclass(frozen=True, slots=True)
class Profile:
    """One set: area [m2], second moment of area [m4], depth [m], yield strength and modulus
    [MPa], spacing along the drive [m]."""

    area_m2: float
    inertia_m4: float
    depth_m: float
    yield_strength_mpa: float
    modulus_mpa: float
    spacing_m: float


@dataclass(frozen=True, slots=True)
class Blocks:
    """Blocks between set and ground: half the angle between them [rad], thickness and width
    [m], modulus [MPa]."""

    half_angle_rad: float
    thickness_m: float
    width_m: float
    modulus_mpa: float


def hoop_stiffness_mpa_per_m(radius_m: Array, profile: Profile) -> Array:
    """Stiffness of sets in full contact with the ground.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    profile : the set.

    Returns
    -------
    (n,) K = Es As / (S R^2). [MPa/m]

    Source
    ------
    Thin elastic ring under uniform pressure.
    """
    return profile.modulus_mpa * profile.area_m2 / (profile.spacing_m * radius_m**2)


def hoop_capacity_mpa(radius_m: Array, profile: Profile) -> Array:
    """Pressure at which sets in full contact yield.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    profile : the set.

    Returns
    -------
    (n,) pmax = sy As / (S R). [MPa]

    Source
    ------
    Thin ring under uniform pressure.
    """
    return profile.yield_strength_mpa * profile.area_m2 / (profile.spacing_m * radius_m)


def blocked_stiffness_mpa_per_m(radius_m: Array, profile: Profile, blocks: Blocks) -> Array:
    """Stiffness of sets that carry the ground on evenly spaced blocks.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    profile, blocks : the set and its blocks.

    Returns
    -------
    (n,) K, with 1/K = S R^2/(Es As) + S R^4/(Es Is) (th (th + sin th cos th) / (2 sin^2 th) - 1)
    + 2 S th tB R / (EB B^2). [MPa/m]

    Limits
    ------
    Blocks evenly spaced around a closed ring, square bearing of width B, elastic.

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980); Brady & Brown, Rock Mechanics for
    Underground Mining, App. C, where k = K R.
    """
    th, spacing = blocks.half_angle_rad, profile.spacing_m
    sine, cosine = np.sin(th), np.cos(th)
    axial = spacing * radius_m**2 / (profile.modulus_mpa * profile.area_m2)
    bending = spacing * radius_m**4 / (profile.modulus_mpa * profile.inertia_m4)
    bending = bending * (th * (th + sine * cosine) / (2 * sine**2) - 1)
    give = 2 * spacing * th * blocks.thickness_m * radius_m
    give = give / (blocks.modulus_mpa * blocks.width_m**2)
    return 1 / (axial + bending + give)


def blocked_capacity_mpa(radius_m: Array, profile: Profile, blocks: Blocks) -> Array:
    """Pressure at which blocked sets yield, at a block.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    profile, blocks : the set and its blocks.

    Returns
    -------
    (n,) pmax = sy / (S R th (cot th / As + r Ds (1/th - cot th) / (2 Is))), with
    r = R - tB - Ds/2, and never above the hoop limit. [MPa]

    Source
    ------
    Exact elastic ring between two blocks: thrust N0 cos th and moment N0 r (sin th / th - cos th)
    at the block, block force 2 N0 sin th. Why the printed capacity is not used: the head of this
    module.
    """
    th = blocks.half_angle_rad
    cotangent = 1 / np.tan(th)
    ring = radius_m - blocks.thickness_m - profile.depth_m / 2
    bending = ring * profile.depth_m * (1 / th - cotangent) / (2 * profile.inertia_m4)
    stress = profile.spacing_m * radius_m * th * (cotangent / profile.area_m2 + bending)
    return np.minimum(profile.yield_strength_mpa / stress, hoop_capacity_mpa(radius_m, profile))
