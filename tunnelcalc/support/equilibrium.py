"""Where ground and support come to rest, for all sections at once."""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.root_finding import increasing_roots

LARGEST_ERROR = 1e-8
"""Of the pressure. Where doubles leave more, the section is given up instead of being given a
number."""
NEGLIGIBLE_PRESSURE = 1e-12
"""Of the in-situ stress: an error that is never too large, for elements that hardly touch."""


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
    Equilibrium, as near to a relative 1e-12 of the pressure as doubles can tell closures apart.
    Sections that did not converge, or whose unsupported closure cannot be computed, are NaN and
    marked.

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
    # One Newton step from the unsupported state never passes the root where closure is convex in
    # the pressure; under finite strain it is not, and the step is held to the bracket.
    active_stiffness = _in_order(np.where(greatest > 0, stiffness_mpa_per_m, 0))
    # A wall that has lost all strength gives way infinitely fast under the first pressure: from
    # there Newton's step is 0, and would pass for a root.
    steep = np.isinf(unloaded.slope)
    slope = np.where(steep, 0, unloaded.slope)
    start = full / (1 - active_stiffness * slope * radius_m)
    start = np.where(steep, 0.5 * np.minimum(full, curve.in_situ_stress_mpa), start)

    def surplus(estimate: Array, index: Array) -> tuple[Array, Array]:
        chosen = loaded[index]
        radius = radius_m[chosen]
        point = curve.take(chosen).at(estimate)
        stiffness = stiffness_mpa_per_m[:, chosen]
        shares = _shares(point.closure_ratio * radius, stiffness, installed_m[:, chosen])
        moving = _in_order(np.where(shares > 0, stiffness, 0))
        steepness = 1 - moving * point.slope * radius
        # Slope 0 makes the search halve its bracket.
        return estimate - _in_order(shares), np.where(np.isinf(steepness), 0, steepness)

    first = np.minimum(start[loaded], upper)
    roots = increasing_roots(surplus, np.zeros(loaded.size), upper, first)
    pressure[loaded] = np.where(roots.converged, roots.value, np.nan)
    return _at_rest(curve, radius_m, pressure, stiffness_mpa_per_m, installed_m)


def _at_rest(
    curve: GroundCurve,
    radius_m: Array,
    pressure: Array,
    stiffness_mpa_per_m: Array,
    installed_m: Array,
) -> Equilibrium:
    """The state under the pressure found, NaN where it is not an equilibrium after all."""
    rest = curve.at(pressure)
    closure = rest.closure_ratio * radius_m
    shares, held_at = _shared_out(pressure, stiffness_mpa_per_m, installed_m)
    acting = _in_order(np.where(shares > 0, stiffness_mpa_per_m, 0))
    give = np.divide(1, acting, out=np.zeros(acting.shape), where=acting > 0)
    # Without pressure the slope may be infinite; then the error is not asked for.
    slope = np.where(np.isinf(rest.slope), -1, rest.slope)
    error = np.abs(closure - held_at) / (give - slope * radius_m)
    smallest = NEGLIGIBLE_PRESSURE * curve.in_situ_stress_mpa
    resolved = (pressure == 0) | (error <= np.maximum(LARGEST_ERROR * pressure, smallest))
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
    # A closure beyond the range of a double is certainly larger than the one wanted: what is
    # not known at all is not known under the in-situ stress either.
    known = np.isfinite(curve.at(curve.in_situ_stress_mpa).closure_ratio)
    wanted = np.flatnonzero(~(free <= closure_m) & known)

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


def _shared_out(
    pressure_mpa: Array, stiffness_mpa_per_m: Array, installed_m: Array
) -> tuple[Array, Array]:
    """Pressure in each element (e, n) of springs that together carry a pressure (n,) [MPa], and
    the closure (n,) at which they do [m].

    The rounding of a closure, times a great stiffness, would be a great pressure: so this does
    not start from the closure of the ground. Of all sets of springs, by order of installation,
    the set that acts needs least movement to carry the pressure.
    """
    stiff = stiffness_mpa_per_m > 0
    first = np.min(np.where(stiff, installed_m, np.inf), axis=0, initial=np.inf)
    late = np.where(stiff, installed_m - first, 0)
    moved = np.full(pressure_mpa.shape, np.inf)
    for latest in late:
        within = np.where(late <= latest, stiffness_mpa_per_m, 0)
        together, carried = _in_order(within), pressure_mpa + _in_order(within * late)
        needed = np.divide(carried, together, out=np.full_like(carried, np.inf), where=together > 0)
        moved = np.minimum(moved, needed)
    moved = np.where(np.isinf(moved), 0, moved)
    acting = np.where(late < moved, stiffness_mpa_per_m, 0)
    together = _in_order(acting)
    share = np.divide(acting, together, out=np.zeros_like(acting), where=together > 0)
    shares = np.empty_like(acting)
    for row, own in enumerate(late):
        # What the acting springs would carry, had all been installed together with this one.
        carried = pressure_mpa + _in_order(acting * (late - own))
        shares[row] = share[row] * np.maximum(carried, 0)
    return shares, first + moved


def _in_order(shares: Array) -> Array:
    """Sum over the elements, one by one: the order of arithmetic never changes."""
    total = np.zeros(shares.shape[1:])
    for share in shares:
        total = total + share
    return total
