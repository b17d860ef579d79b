"""Stresses in the ground before the tunnel is driven."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length

KPA_PER_MPA = 1000.0


def vertical_stress_mpa(cover_m: Array, unit_weight_kn_m3: Array, radius_m: Array) -> Array:
    """Weight of the ground above the tunnel axis.

    Parameters
    ----------
    cover_m : (n,) H, height of ground over the crown, not the depth of the axis. [m]
    unit_weight_kn_m3 : (n,) gamma, mean over the cover. [kN/m3]
    radius_m : (n,) R: the axis lies R below the crown. [m]

    Returns
    -------
    (n,) sv = gamma (H + R) / 1000. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Level ground surface, no tectonic stress, total stress.

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980), ch. 5: overburden weight.
    """
    same_length(cover_m=cover_m, unit_weight_kn_m3=unit_weight_kn_m3, radius_m=radius_m)
    return unit_weight_kn_m3 * (cover_m + radius_m) / KPA_PER_MPA


def mean_stress_mpa(vertical_stress_mpa: Array, stress_ratio: Array) -> Array:
    """Mean in-plane stress p0, which stands for a hydrostatic field.

    Parameters
    ----------
    vertical_stress_mpa : (n,) sv at the tunnel axis. [MPa]
    stress_ratio : (n,) k0, horizontal over vertical stress. [-]

    Returns
    -------
    (n,) p0 = sv (1 + k0) / 2. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Exact only for k0 = 1. Outside 0.8 to 1.25 the stress at the wall is badly understated,
    which the flag `stress_ratio` says.

    Source
    ------
    Common practice of convergence-confinement, no source.
    """
    same_length(vertical_stress_mpa=vertical_stress_mpa, stress_ratio=stress_ratio)
    return vertical_stress_mpa * (1 + stress_ratio) / 2


def largest_wall_stress_mpa(vertical_stress_mpa: Array, stress_ratio: Array) -> Array:
    """Largest elastic hoop stress on the wall of an unsupported circular opening.

    Parameters
    ----------
    vertical_stress_mpa : (n,) sv at the tunnel axis. [MPa]
    stress_ratio : (n,) k0, horizontal over vertical stress. [-]

    Returns
    -------
    (n,) 3 s1 - s3 of the in-plane principal stresses sv and k0 sv. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Linear elastic ground, principal stresses vertical and horizontal, deep opening.

    Source
    ------
    G. Kirsch, Z. VDI 42 (1898) 797-807; Timoshenko & Goodier, Theory of Elasticity,
    3rd ed. (1970), art. 35.
    """
    same_length(vertical_stress_mpa=vertical_stress_mpa, stress_ratio=stress_ratio)
    horizontal = vertical_stress_mpa * stress_ratio
    larger = np.maximum(vertical_stress_mpa, horizontal)
    smaller = np.minimum(vertical_stress_mpa, horizontal)
    return 3 * larger - smaller
