"""Where ground and elements of any reaction come to rest, for all sections at once.

The wall moves until the support carries what the ground asks for: the rest is the first
closure at which it does. While no element breaks, the excess p - S(u(p)) rises with p and has one
root. An element that breaks does so at a movement that is known beforehand; so the rest is found
with every element whole, and again without the first to break, until none of those left breaks.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.root_finding import increasing_roots
from tunnelcalc.support.element_reactions import ElementReaction, ElementState
from tunnelcalc.support.equilibrium import LARGEST_ERROR, NEGLIGIBLE_PRESSURE

MOST_MOVEMENT_M = 1e260
"""Further than any wall moves: times any stiffness it stays in the range of a double."""

Carried = Callable[[Array, Array], tuple[Array, Array]]
"""Pressure (k,) [MPa] and slope (k,) [MPa/m] of the whole support for movements (k,) [m] of the
sections with numbers (k,); neither pressure nor movement falls while the other rises."""


class GeneralEquilibrium(NamedTuple):
    """State at rest.

    `support_pressure_mpa`, `closure_m`, `plastic_ratio` and `converged` are (n,);
    `element_pressure_mpa` and `element_state` (`ElementState`, int8) are (e, n), and so is
    `element_moved_m`, the movement of the wall since each installation, negative before it.
    """

    support_pressure_mpa: Array
    closure_m: Array
    plastic_ratio: Array
    element_pressure_mpa: Array
    element_state: Array
    element_moved_m: Array
    converged: Array


class Rest(NamedTuple):
    """Ground and support at rest, (n,) each: what the support then carries [MPa], closure [m],
    Rp / R, movement from the reference [m], and whether doubles resolve it."""

    pressure_mpa: Array
    closure_m: Array
    plastic_ratio: Array
    moved_m: Array
    resolved: Array


def general_equilibrium(
    curve: GroundCurve,
    radius_m: Array,
    reactions: Sequence[ElementReaction],
    installed_m: Array,
) -> GeneralEquilibrium:
    """State in which the wall and elements of any reaction in parallel move no further.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    reactions : the e elements, each for n sections; e may be 0.
    installed_m : (e, n) unsupported closure where each element begins to act: where it is
        installed, or for a ring where it is closed. [m]

    Returns
    -------
    GeneralEquilibrium. Sections that did not converge, or whose unsupported closure cannot be
    computed, are NaN and marked. Of several states at which ground and elements that break
    could rest, the one that the wall reaches first.

    Limits
    ------
    A break is as slow as the closing of the wall: no sudden load from the energy set free.
    The effect of elements on the closure at which later ones are installed is neglected.

    Source
    ------
    Elements in parallel: Hoek & Brown, Underground Excavations in Rock (1980); C.
    Carranza-Torres, C. Fairhurst, Tunn. Undergr. Space Technol. 15 (2000) 187-213. Elements that
    yield or break: definition, at the head of this module.
    """
    count, elements = radius_m.size, len(reactions)
    first = np.min(installed_m, axis=0) if elements else np.zeros(count)
    late = installed_m - first
    whole = np.ones((elements, count), dtype=bool)
    breaking = [row for row, reaction in enumerate(reactions) if reaction.breaks]
    breaks_at = np.full((elements, count), np.inf)
    for row in breaking:
        breaks_at[row] = late[row] + reactions[row].reaches_capacity_m
    unknown = [np.full(count, np.nan) for _ in range(4)]
    rest = Rest(unknown[0], unknown[1], unknown[2], unknown[3], np.zeros(count, dtype=bool))
    open_ = np.arange(count)
    for _ in range(len(breaking) + 1):
        support = _together(reactions, late, whole, open_)
        found = come_to_rest(curve.take(open_), radius_m[open_], first[open_], support)
        for values, new in zip(rest, found, strict=True):
            values[open_] = new
        if not breaking:
            break
        standing = np.where(whole[:, open_], breaks_at[:, open_], np.inf)
        next_break = np.min(standing, axis=0)
        rest.resolved[open_] &= ~np.isnan(next_break)
        breaks = found.moved_m > next_break
        whole[:, open_] &= ~(breaks & (standing <= next_break))
        open_ = open_[breaks]
        if open_.size == 0:
            break
    moved = np.where(rest.resolved, rest.moved_m - late, np.nan)
    pressures, states = np.empty((2, elements, count))
    for row, reaction in enumerate(reactions):
        pressure = reaction.pressure_and_slope(np.maximum(moved[row], 0))[0]
        pressures[row] = np.where(whole[row] | np.isnan(pressure), pressure, 0)
        state = reaction.state(moved[row])
        states[row] = np.where(whole[row] | np.isnan(moved[row]), state, ElementState.FAILED)
    return GeneralEquilibrium(
        np.where(rest.resolved, in_order(pressures), np.nan),
        np.where(rest.resolved, rest.closure_m, np.nan),
        np.where(rest.resolved, rest.plastic_ratio, np.nan),
        pressures,
        states.astype(np.int8),
        moved,
        rest.resolved,
    )


def come_to_rest(curve: GroundCurve, radius_m: Array, reference_m: Array, carried: Carried) -> Rest:
    """State in which ground and one support, whose pressure does not fall, move no further.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    reference_m : (n,) closure from which `carried` counts the movement: best the one at which
        the support begins to act, since rounding then spoils no small movement. [m]
    carried : what the support carries.

    Returns
    -------
    Rest. Where the support carries nothing under the unsupported closure, that state.

    Source
    ------
    Definition: the ground's closure under p is one at which the support carries p.
    """
    count = radius_m.size
    every = np.arange(count)
    unloaded = curve.at(np.zeros(count))
    free = np.where(np.isfinite(unloaded.closure_ratio), unloaded.closure_ratio * radius_m, np.nan)
    full, free_stiffness = carried(free - reference_m, every)
    known = np.isfinite(free) & np.isfinite(full)
    pressure = np.where(known, 0.0, np.nan)
    loaded = np.flatnonzero(known & (full > 0))

    def surplus(estimate: Array, index: Array) -> tuple[Array, Array]:
        chosen = loaded[index]
        point = curve.take(chosen).at(estimate)
        radius = radius_m[chosen]
        held, stiffness = carried(point.closure_ratio * radius - reference_m[chosen], chosen)
        return estimate - held, _surplus_slope(stiffness, point.slope * radius)

    upper = np.minimum(full, curve.in_situ_stress_mpa)[loaded]
    # A Newton step from the unsupported state; half way where that slope says nothing.
    slope = _surplus_slope(free_stiffness, unloaded.slope * radius_m)[loaded]
    start = np.divide(full[loaded], slope, out=0.5 * upper, where=slope > 0)
    start = np.where(start < upper, start, 0.5 * upper)
    roots = increasing_roots(surplus, np.zeros(loaded.size), upper, start)
    pressure[loaded] = np.where(roots.converged, roots.value, np.nan)
    point = curve.at(pressure)
    closure = point.closure_ratio * radius_m
    moved = closure - reference_m
    solved = loaded[roots.converged]
    moved[solved] = _moved(
        pressure[solved],
        moved[solved],
        -point.slope[solved] * radius_m[solved],
        lambda estimate, index: carried(estimate, solved[index]),
    )
    error = np.abs(carried(moved, every)[0] - pressure)
    smallest = NEGLIGIBLE_PRESSURE * curve.in_situ_stress_mpa
    resolved = error <= np.maximum(LARGEST_ERROR * pressure, smallest)
    return Rest(pressure, closure, point.plastic_ratio, moved, resolved)


def in_order(pressures_mpa: Array) -> Array:
    """Sum over the elements, one by one: the order of arithmetic never changes.

    Parameters
    ----------
    pressures_mpa : (e, n). [MPa]

    Returns
    -------
    (n,) [MPa]

    Source
    ------
    Definition.
    """
    total = np.zeros(pressures_mpa.shape[1:])
    for pressure in pressures_mpa:
        total = total + pressure
    return total


def _together(
    reactions: Sequence[ElementReaction], late_m: Array, whole: Array, sections: Array
) -> Carried:
    """The whole elements in parallel, on the sections with the given numbers."""

    def carried(moved: Array, index: Array) -> tuple[Array, Array]:
        chosen = sections[index]
        total, stiffness = np.zeros((2, moved.size))
        for row, reaction in enumerate(reactions):
            since = moved - late_m[row, chosen]
            pressure, slope = reaction.take(chosen).pressure_and_slope(np.maximum(since, 0))
            counts = whole[row, chosen]
            total = total + np.where(counts, pressure, 0)
            stiffness = stiffness + np.where(counts & (since >= 0), slope, 0)
        return total, stiffness

    return carried


def _surplus_slope(stiffness: Array, give: Array) -> Array:
    """1 - S' u', or 0, which makes the root finder halve its bracket, where the ground gives
    way without bound: some laws do at zero pressure."""
    bounded = np.isfinite(give)
    return np.where(bounded, 1 - stiffness * np.where(bounded, give, 0), 0)


def _moved(pressure_mpa: Array, from_ground_m: Array, give: Array, carried: Carried) -> Array:
    """Movement (n,) of the support under the pressure found. [m]

    The ground's closure, a large number, says how far the wall has moved only to its rounding,
    and that times a great stiffness is a great pressure. So the ground is taken as a straight line
    through the point found, `give` metres a MPa, and the support decides where on it: stiff
    support by the pressure, soft support by the closure.
    """
    every = np.arange(pressure_mpa.size)
    held, stiffness = carried(from_ground_m, every)
    missing = pressure_mpa - held
    reach = np.minimum(np.abs(missing), MOST_MOVEMENT_M / give) * give
    other = from_ground_m + np.copysign(reach, missing)

    def excess(moved: Array, index: Array) -> tuple[Array, Array]:
        held, stiffness = carried(moved, index)
        line = (moved - from_ground_m[index]) / give[index]
        return held - pressure_mpa[index] + line, stiffness + 1 / give[index]

    start = from_ground_m + missing / (stiffness + 1 / give)
    lower, upper = np.minimum(from_ground_m, other), np.maximum(from_ground_m, other)
    # Support that carries anything has been moved, whatever the rounding of the closure says.
    must_move = (lower < 0) & (excess(np.zeros(every.size), every)[0] < 0)
    start = np.where(must_move & (from_ground_m < 0), 0, start)
    lower = np.where(must_move, 0, lower)
    start = np.minimum(np.maximum(start, lower), upper)
    return increasing_roots(excess, lower, upper, start).value
