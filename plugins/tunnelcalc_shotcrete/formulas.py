"""A closed ring under uniform pressure from outside. Pure functions."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import Array

M_PER_MM = 1e-3
MPA_PER_GPA = 1e3


def ring_stiffness_mpa_per_m(
    radius_m: Array, thickness_m: float, modulus_mpa: float, poisson_ratio: float
) -> Array:
    """Pressure on the ring's outer face a metre of its inward movement.

    Parameters
    ----------
    radius_m : (n,) R, outer radius of the ring, at the ground. [m]
    thickness_m : t, below R. [m]
    modulus_mpa : Ec. [MPa]
    poisson_ratio : nu_c. [-]

    Returns
    -------
    (n,) K = Ec (R^2 - r^2) / ((1 + nu_c) R ((1 - 2 nu_c) R^2 + r^2)), r = R - t. [MPa/m]

    Limits
    ------
    Ring closed through the invert, plane strain, no bending.

    Source
    ------
    Lame, thick-walled cylinder in plane strain (Timoshenko & Goodier, Theory of Elasticity,
    3rd ed. (1970), art. 28); as k = K R in Brady & Brown, Rock Mechanics for Underground
    Mining, App. C. A version with (1 - nu_c) in place of (1 + nu_c) is often reprinted; the
    Lame solution decides.
    """
    inner = radius_m - thickness_m
    give = (1 + poisson_ratio) * radius_m * ((1 - 2 * poisson_ratio) * radius_m**2 + inner**2)
    return modulus_mpa * (radius_m**2 - inner**2) / give


def ring_capacity_mpa(radius_m: Array, thickness_m: float, strength_mpa: float) -> Array:
    """Outer pressure at which the inner face reaches the strength.

    Parameters
    ----------
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t, below R. [m]
    strength_mpa : uniaxial compressive strength of the ring. [MPa]

    Returns
    -------
    (n,) strength (1 - r^2 / R^2) / 2, r = R - t. [MPa]

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980); Brady & Brown, App. C.
    """
    inner = radius_m - thickness_m
    return strength_mpa / 2 * (1 - inner**2 / radius_m**2)


def inner_hoop_stress_mpa(pressure_mpa: Array, radius_m: Array, thickness_m: float) -> Array:
    """Hoop stress at the inner face under outer pressure.

    Parameters
    ----------
    pressure_mpa : (n,) on the outer face. [MPa]
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t, below R. [m]

    Returns
    -------
    (n,) 2 p R^2 / (R^2 - r^2), r = R - t. [MPa]

    Source
    ------
    Lame, thick-walled cylinder (Timoshenko & Goodier (1970), art. 28).
    """
    inner = radius_m - thickness_m
    return 2 * pressure_mpa * radius_m**2 / (radius_m**2 - inner**2)


def ring_volume_m3_per_m(radius_m: Array, thickness_m: float) -> Array:
    """Volume of the ring a metre of tunnel.

    Parameters
    ----------
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t. [m]

    Returns
    -------
    (n,) pi (R^2 - (R - t)^2). [m3/m]

    Source
    ------
    Area of a ring.
    """
    return np.pi * (radius_m**2 - (radius_m - thickness_m) ** 2)
