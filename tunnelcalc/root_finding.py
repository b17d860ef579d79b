"""Roots of many increasing functions at once: Newton's method inside a shrinking bracket."""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array

RELATIVE_TOLERANCE = 1e-12
NEGLIGIBLE_STEP = 1e-24
"""Of the first bracket: a search towards 0 ends here, not at the smallest double."""
MOST_ITERATIONS = 100


class Roots(NamedTuple):
    """Roots (n,), and whether each was found (n,)."""

    value: Array
    converged: Array


def increasing_roots(
    function: Callable[[Array, Array], tuple[Array, Array]],
    lower: Array,
    upper: Array,
    start: Array,
) -> Roots:
    """Root of an increasing function in each of n brackets.

    A Newton step is taken where it stays inside the bracket and shrinks; elsewhere the bracket
    is halved. Each element stops by its own step, so that a result never depends on which
    other elements are solved beside it.

    Parameters
    ----------
    function : called with the present estimates (k,) and the indices (k,) that they belong to;
        returns values and slopes, each (k,). A NaN value leaves its element not converged; an
        infinite value, with any finite slope, only says on which side of the root it lies.
    lower, upper : (n,) ends of the brackets, function(lower) <= 0 <= function(upper).
    start : (n,) first estimates, inside the brackets.

    Returns
    -------
    Roots to a relative 1e-12, or to 1e-24 of the bracket where they lie that near to 0, with a
    mask of those that converged within 100 iterations.

    Source
    ------
    The safeguard (halve when Newton leaves the bracket or does not halve its step) is the usual
    one: common practice, no source.
    """
    estimate = np.array(start, dtype=float)
    low, high = np.array(lower, dtype=float), np.array(upper, dtype=float)
    step_before = high - low
    negligible = NEGLIGIBLE_STEP * step_before
    converged = np.zeros(estimate.shape, dtype=bool)
    active = np.arange(estimate.size)
    for _ in range(MOST_ITERATIONS):
        if active.size == 0:
            break
        at = estimate[active]
        value, slope = function(at, active)
        low[active] = np.where(value < 0, at, low[active])
        high[active] = np.where(value > 0, at, high[active])
        least, most = low[active], high[active]
        change = np.divide(value, slope, out=np.full_like(value, np.inf), where=slope != 0)
        newton = at - change
        good = (newton >= least) & (newton <= most)
        good &= np.abs(change) <= 0.5 * step_before[active]
        following = np.where(good, newton, 0.5 * (least + most))
        following = np.where(value == 0, at, following)
        step = np.abs(following - at)
        done = step <= np.maximum(RELATIVE_TOLERANCE * np.abs(following), negligible[active])
        estimate[active] = following
        step_before[active] = step
        known = ~np.isnan(value)
        converged[active[done & known]] = True
        active = active[~done & known]
    return Roots(estimate, converged)
