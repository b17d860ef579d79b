"""Where ground and support come to rest, for all sections at once."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.root_finding import increasing_roots

LARGEST_RESIDUAL = 1e-8
"""Of the pressure. Where closures of many thousand radii leave more, doubles cannot tell the
pressure in the elements, and the section is given up instead of being given a number."""


class Equilibrium(NamedTuple):
    """State at rest.

    `support_pressure_mpa`, `closure_m`, `plastic_ratio` and `converged` are (n,);
    `element_pressure_mpa` is (e, n), the share of each element.
    """

    support_pressure_mpa: Array
    closure_m: Array
    plastic_ratio: Array
    element_pressure_mpa: Array
    converged: Array


def equilibrium(
    curve: GroundCurve, radius_m: Array, stiffness_mpa_per_m: Array, installed_m: Array
) -> Equilibrium:
    """Pressure at which the wall and linear elements in parallel move no further.

    Each element starts from its own closure at installation, p = sum K_i max(u - u_i, 0): only
    ground that still moves after installation loads it.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    stiffness_mpa_per_m : (e, n) K_i >= 0 of each element; e may be 0. [MPa/m]
    installed_m : (e, n) u_i, unsupported closure where each element is installed. [m]

    Returns
    -------
    Equilibrium, to a relative 1e-12 of the pressure. Sections that did not converge, or whose
    unsupported closure cannot be computed, are NaN and marked.

    Limits
    ------
    Elements do not yield or break; the effect of elements on the closure at which later ones
    are installed is neglected.

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980); C. Carranza-Torres, C. Fairhurst,
    Tunn. Undergr. Space Technol. 15 (2000) 187-213.
    """
    count = radius_m.size
    unloaded = curve.at(np.zeros(count))
    free_closure = unloaded.closure_ratio * radius_m
    greatest = _shares(free_closure, stiffness_mpa_per_m, installed_m)
    full = _in_order(greatest)
    pressure = np.where(full > 0, np.nan, 0.0)
    pressure[~np.isfinite(free_closure + full)] = np.nan
    loaded = np.flatnonzero((full > 0) & np.isfinite(free_closure))
    upper = np.minimum(full, curve.in_situ_stress_mpa)[loaded]
    # One Newton step from the unsupported state never passes the root: closure is convex.
    active_stiffness = _in_order(np.where(greatest > 0, stiffness_mpa_per_m, 0))
    start = full / (1 - active_stiffness * unloaded.slope * radius_m)

    def surplus(estimate: Array, index: Array) -> tuple[Array, Array]:
        chosen = loaded[index]
        radius = radius_m[chosen]
        point = curve.take(chosen).at(estimate)
        stiffness = stiffness_mpa_per_m[:, chosen]
        shares = _shares(point.closure_ratio * radius, stiffness, installed_m[:, chosen])
        moving = _in_order(np.where(shares > 0, stiffness, 0))
        return estimate - _in_order(shares), 1 - moving * point.slope * radius

    roots = increasing_roots(surplus, np.zeros(loaded.size), upper, start[loaded])
    pressure[loaded] = np.where(roots.converged, roots.value, np.nan)
    rest = curve.at(pressure)
    closure = rest.closure_ratio * radius_m
    shares = _shares(closure, stiffness_mpa_per_m, installed_m)
    residual = np.abs(pressure - _in_order(shares))
    resolved = residual <= LARGEST_RESIDUAL * pressure
    return Equilibrium(
        np.where(resolved, pressure, np.nan),
        np.where(resolved, closure, np.nan),
        np.where(resolved, rest.plastic_ratio, np.nan),
        np.where(resolved, shares, np.nan),
        resolved,
    )


def pressure_at_closure(curve: GroundCurve, radius_m: Array, closure_m: Array) -> Array:
    """Uniform pressure at which the ground alone would come to rest at a given closure.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    closure_m : (n,) the closure wanted, above 0. [m]

    Returns
    -------
    (n,) pressure; 0 where the unsupported closure is not larger; NaN where it cannot be
    computed. [MPa]

    Source
    ------
    Inverse of the ground reaction curve; definition of the needed pressure of a zone that no
    class satisfies.
    """
    free = curve.at(np.zeros(radius_m.size)).closure_ratio * radius_m
    pressure = np.where(free <= closure_m, 0.0, np.nan)
    # A closure beyond the range of a double is certainly larger than the one wanted.
    wanted = np.flatnonzero(~(free <= closure_m) & np.isfinite(curve.critical_pressure_mpa))

    def shortfall(estimate: Array, index: Array) -> tuple[Array, Array]:
        chosen = wanted[index]
        point = curve.take(chosen).at(estimate)
        radius = radius_m[chosen]
        beyond = ~np.isfinite(point.closure_ratio)
        value = np.where(beyond, -np.inf, closure_m[chosen] - point.closure_ratio * radius)
        return value, np.where(beyond, 1, -point.slope * radius)

    upper = curve.in_situ_stress_mpa[wanted]
    roots = increasing_roots(shortfall, np.zeros(wanted.size), upper, 0.5 * upper)
    pressure[wanted] = np.where(roots.converged, roots.value, np.nan)
    return pressure


def _shares(closure_m: Array, stiffness_mpa_per_m: Array, installed_m: Array) -> Array:
    """Pressure in each element (e, n). [MPa]"""
    return stiffness_mpa_per_m * np.maximum(closure_m - installed_m, 0)


def _in_order(shares: Array) -> Array:
    """Sum over the elements, one by one: the order of arithmetic never changes."""
    total = np.zeros(shares.shape[1:])
    for share in shares:
        total = total + share
    return total
