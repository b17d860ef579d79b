"""How much of its final closure the wall has undergone at a distance from the face.

All formulas here are for an unsupported opening. Those without a form ahead of the face give NaN
there: nothing is extrapolated.
"""

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


def panet_1995(distance_m: Array, radius_m: Array) -> Array:
    """Share of the final closure that has taken place behind the face, in elastic ground.

    Parameters
    ----------
    distance_m : (n,) x, positive behind the face. [m]
    radius_m : (n,) R of the opening. [m]

    Returns
    -------
    (n,) u / umax, from 0.25 to 1; NaN ahead of the face, x < 0, where there is no formula. [-]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Unsupported opening in elastic ground: beside a plastic zone the wall moves later.

    Source
    ------
    M. Panet, Le calcul des tunnels par la methode convergence-confinement, Presses de l'ENPC,
    Paris (1995). Formula from memory.
    """
    same_length(distance_m=distance_m, radius_m=radius_m)
    return _behind_only(distance_m, at_face=0.25, reach_m=0.75 * radius_m)


def panet_guenot_1982(distance_m: Array, plastic_radius_m: Array) -> Array:
    """Share of the final closure that has taken place behind the face, by the plastic radius.

    Parameters
    ----------
    distance_m : (n,) x, positive behind the face. [m]
    plastic_radius_m : (n,) Rp of the unsupported section far from the face; R where the ground
        stays elastic. [m]

    Returns
    -------
    (n,) u / umax, from 0.28 to 1; NaN ahead of the face, x < 0, where there is no formula. [-]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Unsupported opening. The share at the face is the same for any plastic zone.

    Source
    ------
    M. Panet, A. Guenot, "Analysis of convergence behind the face of a tunnel", Tunnelling '82,
    London (1982). Formula from memory.
    """
    same_length(distance_m=distance_m, plastic_radius_m=plastic_radius_m)
    return _behind_only(distance_m, at_face=0.28, reach_m=0.84 * plastic_radius_m)


def unlu_gercek_2003(distance_m: Array, radius_m: Array, poisson_ratio: Array) -> Array:
    """Share of the final closure at a distance from the face, in elastic ground, by its nu.

    Parameters
    ----------
    distance_m : (n,) x, positive behind the face, negative ahead of it. [m]
    radius_m : (n,) R of the opening. [m]
    poisson_ratio : (n,) nu, 0 <= nu < 0.5. [-]

    Returns
    -------
    (n,) u / umax, between 0 and 1. [-]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Unsupported opening in elastic ground: beside a plastic zone the wall moves later.

    Source
    ------
    T. Unlu, H. Gercek, Tunn. Undergr. Space Technol. 18 (2003) 547-553. Formula from memory.
    """
    same_length(distance_m=distance_m, radius_m=radius_m, poisson_ratio=poisson_ratio)
    at_face = 0.22 * poisson_ratio + 0.19
    # A of the form ahead is -u0, so that u0 + A (1 - exp) is one product, which keeps the digits
    # of a small share; A of the form behind is 1 - u0.
    rate = 0.73 * poisson_ratio + 0.81
    with np.errstate(over="ignore"):  # further away than a double can tell is infinitely far
        ahead = at_face * np.exp(rate * (np.minimum(distance_m, 0) / radius_m))
    reach_m = (0.39 * poisson_ratio + 0.65) * radius_m
    return np.where(distance_m < 0, ahead, _hyperbola(distance_m, at_face, reach_m))


def hoek_2002(distance_m: Array, radius_m: Array) -> Array:
    """Share of the final closure at a distance from the face, by a fit to measurements.

    Parameters
    ----------
    distance_m : (n,) x, positive behind the face, negative ahead of it. [m]
    radius_m : (n,) R of the opening. [m]

    Returns
    -------
    (n,) u / umax, between 0 and 1. [-]  At the face 2^-1.7.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    A fit to measurements, whatever the plastic radius: it knows nothing of the ground.

    Source
    ------
    E. Hoek's fit, (1 + exp(-X / 1.10))^-1.7 with X = x / R, to the measurements of Chern, Shiao
    & Yu (1998), quoted by C. Carranza-Torres, C. Fairhurst, Tunn. Undergr.
    Space Technol. 15 (2000) 187-213. Formula from memory.
    """
    same_length(distance_m=distance_m, radius_m=radius_m)
    with np.errstate(over="ignore"):  # further away than a double can tell is infinitely far
        reduced = distance_m / radius_m / 1.10
        # The logarithm of 1 + exp(-X / 1.10), with the large part of it split off: far ahead
        # the exponential alone would leave the range of a double.
        logarithm = np.maximum(-reduced, 0) + np.log1p(np.exp(-np.abs(reduced)))
        return np.exp(-1.7 * logarithm)


def _behind_only(distance_m: Array, at_face: float, reach_m: Array) -> Array:
    """`_hyperbola`, NaN ahead of the face."""
    return np.where(distance_m >= 0, _hyperbola(distance_m, at_face, reach_m), np.nan)


def _hyperbola(distance_m: Array, at_face: Array | float, reach_m: Array) -> Array:
    """u0 + (1 - u0) (1 - (c / (c + x))^2), with x = 0 ahead of the face.

    Each operation keeps the order of its arguments, rounding included: the share never falls,
    is exactly u0 at the face and exactly 1 far behind.
    """
    remaining = reach_m / (reach_m + np.maximum(distance_m, 0))
    return at_face + (1 - at_face) * (1 - remaining**2)
