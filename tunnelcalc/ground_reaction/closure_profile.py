"""How much of its final closure the wall has undergone at a distance from the face."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length


def vlachopoulos_diederichs_2009(
    distance_m: Array, radius_m: Array, plastic_radius_m: Array
) -> Array:
    """Share of the final unsupported closure that has taken place at a distance from the face.

    Parameters
    ----------
    distance_m : (n,) x, positive behind the face, negative ahead of it. [m]
    radius_m : (n,) R of the opening. [m]
    plastic_radius_m : (n,) Rp of the unsupported section far from the face; R where the ground
        stays elastic. [m]

    Returns
    -------
    (n,) u / umax, between 0 and 1. [-]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Unsupported opening. Stiff support within about a diameter of the face holds the closure
    before installation below this, so that the load on the support is understated.

    Source
    ------
    N. Vlachopoulos, M. S. Diederichs, Rock Mech. Rock Eng. 42 (2009) 131-146.
    """
    same_length(distance_m=distance_m, radius_m=radius_m, plastic_radius_m=plastic_radius_m)
    distance_ratio = distance_m / radius_m
    plastic_ratio = plastic_radius_m / radius_m
    at_face = np.exp(-0.15 * plastic_ratio) / 3
    ahead = at_face * np.exp(np.minimum(distance_ratio, 0))
    # 1 - (1 - u0) exp(-z), written so that a small share keeps its digits: beside a deep plastic
    # zone z is tiny, and a share lost to rounding would install support in still ground.
    decay = -1.5 * np.maximum(distance_ratio, 0) / plastic_ratio
    behind = at_face - (1 - at_face) * np.expm1(decay)
    return np.where(distance_ratio < 0, ahead, behind)
