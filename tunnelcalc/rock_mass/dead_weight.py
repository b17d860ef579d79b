"""Weight of the ground that has failed around a tunnel."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length

KPA_PER_MPA = 1000.0


def plastic_zone_weight_mpa(
    unit_weight_kn_m3: Array, plastic_radius_m: Array, radius_m: Array
) -> Array:
    """Pressure on the crown by the weight of the plastic zone above it.

    Parameters
    ----------
    unit_weight_kn_m3 : (n,) gamma of the failed ground. [kN/m3]
    plastic_radius_m : (n,) Rp, of the section with its support. [m]
    radius_m : (n,) R of the tunnel. [m]

    Returns
    -------
    (n,) gamma (Rp - R) / 1000. [MPa]  NaN where Rp is below R.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    The whole thickness of the plastic zone is taken as loose. At the crown the weight is added to
    the pressure of the ground, at the walls it does not act, at the invert it is taken off.

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980); E. T. Brown, J. W. Bray, B. Ladanyi,
    E. Hoek, J. Geotech. Eng. 109 (1983) 15-39 [from memory].
    """
    same_length(
        unit_weight_kn_m3=unit_weight_kn_m3, plastic_radius_m=plastic_radius_m, radius_m=radius_m
    )
    thickness = np.where(plastic_radius_m >= radius_m, plastic_radius_m, np.nan) - radius_m
    return unit_weight_kn_m3 * thickness / KPA_PER_MPA
