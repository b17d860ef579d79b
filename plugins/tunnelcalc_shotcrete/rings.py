"""A closed ring of a stiffness and strength that differ by section, thick or thin.

The thick ring is Lame's cylinder. The thin ring has one hoop stress over its thickness: by
statics p R / t, which is also the mean stress of the thick ring. The thick ring counts the first
yield of its inner face, the thin ring the yield of the whole thickness: the capacities differ by
the factor 1 - t / (2 R) exactly.
"""

from __future__ import annotations

from tunnelcalc.api import Array
from tunnelcalc_shotcrete.formulas import ring_capacity_mpa, ring_stiffness_mpa_per_m


def thick_ring_stiffness_mpa_per_m(
    radius_m: Array, thickness_m: float, modulus_mpa: Array, poisson_ratio: float
) -> Array:
    """Pressure on the outer face of a thick ring a metre of its inward movement.

    Parameters
    ----------
    radius_m : (n,) R, outer radius of the ring, at the ground. [m]
    thickness_m : t, below R. [m]
    modulus_mpa : (n,) Ec, 0 before the ring is there. [MPa]
    poisson_ratio : nu_c. [-]

    Returns
    -------
    (n,) K = Ec (R^2 - r^2) / ((1 + nu_c) R ((1 - 2 nu_c) R^2 + r^2)), r = R - t. [MPa/m]

    Limits
    ------
    Ring closed through the invert, plane strain, no bending.

    Source
    ------
    Lame: see `formulas.ring_stiffness_mpa_per_m`.
    """
    return modulus_mpa * ring_stiffness_mpa_per_m(radius_m, thickness_m, 1.0, poisson_ratio)


def thick_ring_capacity_mpa(radius_m: Array, thickness_m: float, strength_mpa: Array) -> Array:
    """Outer pressure at which the inner face of a thick ring reaches its strength.

    Parameters
    ----------
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t, below R. [m]
    strength_mpa : (n,) compressive strength. [MPa]

    Returns
    -------
    (n,) strength (1 - r^2 / R^2) / 2, r = R - t. [MPa]

    Source
    ------
    Lame: see `formulas.ring_capacity_mpa`.
    """
    return strength_mpa * ring_capacity_mpa(radius_m, thickness_m, 1.0)


def thin_ring_stiffness_mpa_per_m(
    radius_m: Array, thickness_m: float, modulus_mpa: Array, poisson_ratio: float
) -> Array:
    """Pressure on the outer face of a thin ring a metre of its inward movement.

    Parameters
    ----------
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t, small beside R. [m]
    modulus_mpa : (n,) Ec. [MPa]
    poisson_ratio : nu_c. [-]

    Returns
    -------
    (n,) K = Ec t / ((1 - nu_c^2) R (R - t/2)). [MPa/m]

    Limits
    ------
    Thin: for nu_c = 0.2 below Lame's by a quarter of t / R.

    Source
    ------
    Statics, thrust p R; hoop strain of the centreline, radius R - t/2, in plane strain.
    """
    centreline = radius_m - thickness_m / 2
    return modulus_mpa * thickness_m / ((1 - poisson_ratio**2) * radius_m * centreline)


def thin_ring_capacity_mpa(radius_m: Array, thickness_m: float, strength_mpa: Array) -> Array:
    """Outer pressure at which the mean hoop stress reaches the strength.

    Parameters
    ----------
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t. [m]
    strength_mpa : (n,) compressive strength. [MPa]

    Returns
    -------
    (n,) strength t / R. [MPa]

    Limits
    ------
    Above the thick ring's by the factor 1 / (1 - t / (2 R)): the inner face has yielded before.

    Source
    ------
    Statics of half a ring, any thickness.
    """
    return strength_mpa * thickness_m / radius_m


def thin_ring_hoop_stress_mpa(pressure_mpa: Array, radius_m: Array, thickness_m: float) -> Array:
    """Mean hoop stress over the thickness.

    Parameters
    ----------
    pressure_mpa : (n,) on the outer face. [MPa]
    radius_m : (n,) R, outer radius. [m]
    thickness_m : t. [m]

    Returns
    -------
    (n,) p R / t. [MPa]

    Source
    ------
    Statics of half a ring, any thickness.
    """
    return pressure_mpa * radius_m / thickness_m
