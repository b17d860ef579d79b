"""The two limits of a support system: its first element at capacity, and all that it can give.

Full mobilisation is the state of the greatest support pressure that the system ever gives, while
the behaviour of every element is declared. Where all elements yield, that is the closure at which
the last of them reaches its plateau. An element that breaks carries nothing beyond its capacity,
so that the greatest pressure may come before the others have given all. An element of which
nothing is declared beyond its capacity ends the system there: with one such, or with springs
alone, full mobilisation is no later than that element's capacity.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.support.element_reactions import ElementReaction
from tunnelcalc.support.equilibrium import pressure_at_closure
from tunnelcalc.support.general_equilibrium import GeneralEquilibrium

NO_ELEMENT = -1
"""Where no element ever reaches its capacity."""


class SystemLimit(NamedTuple):
    """A limit of the support system, (n,) each.

    `closure_m` at which it is reached, inf where it never is [m]; `support_pressure_mpa` that all
    elements then carry together [MPa]; `ground_pressure_mpa` that the ground would need in order
    to rest there, 0 where it never closes so far [MPa]; `element`, the number of the element whose
    capacity it is, -1 where none; `reached`, whether the ground goes that far with this
    support.
    """

    closure_m: Array
    support_pressure_mpa: Array
    ground_pressure_mpa: Array
    element: Array
    reached: Array


def first_failure(
    curve: GroundCurve,
    radius_m: Array,
    reactions: Sequence[ElementReaction],
    installed_m: Array,
    rest: GeneralEquilibrium,
) -> SystemLimit:
    """State in which the first element reaches its capacity.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    reactions : the e elements.
    installed_m : (e, n) unsupported closure where each element begins to act. [m]
    rest : the equilibrium of these.

    Returns
    -------
    SystemLimit at min over the elements of u_i + the movement to its capacity, the elastic limit
    of the system. Of elements that reach it together, the first named.

    Source
    ------
    C. Carranza-Torres, C. Fairhurst, Tunn. Undergr. Space Technol. 15 (2000) 187-213, for one
    element; several: definition.
    """
    count = radius_m.size
    closure, element = np.full(count, np.inf), np.full(count, NO_ELEMENT)
    for row, reaction in enumerate(reactions):
        own = installed_m[row] + reaction.reaches_capacity_m
        earlier = own < closure
        element = np.where(earlier, row, element)
        closure = np.where(earlier | np.isnan(own), own, closure)
    pressure = _carried(reactions, installed_m, element, closure)
    reached = np.zeros(count, dtype=bool)
    for row, reaction in enumerate(reactions):
        reached |= rest.element_moved_m[row] >= reaction.reaches_capacity_m
    return _limit(curve, radius_m, closure, pressure, element, reached, rest)


def full_mobilisation(
    curve: GroundCurve,
    radius_m: Array,
    reactions: Sequence[ElementReaction],
    installed_m: Array,
    rest: GeneralEquilibrium,
) -> SystemLimit:
    """State in which the support gives the greatest pressure that it can.

    Parameters
    ----------
    curve : ground reaction curves of n sections.
    radius_m : (n,) R. [m]
    reactions : the e elements.
    installed_m : (e, n) unsupported closure where each element begins to act. [m]
    rest : the equilibrium of these.

    Returns
    -------
    SystemLimit, as defined at the head of this module, at the least closure that gives the
    greatest pressure. Elements that never reach their capacity, such as those without stiffness,
    give no limit of their own.

    Source
    ------
    Definition.
    """
    count = radius_m.size
    ends = np.full(count, np.inf)
    for row, reaction in enumerate(reactions):
        ends = np.minimum(ends, installed_m[row] + reaction.holds_until_m)
    closure, element = np.full(count, np.inf), np.full(count, NO_ELEMENT)
    greatest = np.full(count, -np.inf)
    for row, reaction in enumerate(reactions):
        own = installed_m[row] + reaction.reaches_capacity_m
        pressure = _carried(reactions, installed_m, np.full(count, row), own)
        possible = (own <= ends) & np.isfinite(own)
        better = (pressure > greatest) | ((pressure == greatest) & (own < closure))
        better &= possible
        closure, element = np.where(better, own, closure), np.where(better, row, element)
        greatest = np.where(better, pressure, greatest)
    unknown = np.isnan(ends)
    closure = np.where(unknown, np.nan, closure)
    greatest = np.where(unknown | (element == NO_ELEMENT), np.nan, greatest)
    return _limit(curve, radius_m, closure, greatest, element, rest.closure_m >= closure, rest)


def _carried(
    reactions: Sequence[ElementReaction], installed_m: Array, at: Array, closure_m: Array
) -> Array:
    """(n,) pressure of all elements when the one numbered `at` just reaches its capacity. [MPa]

    That one has moved just so far, whatever the rounding of the closure says.
    """
    finite = np.isfinite(closure_m)
    total = np.where(finite, 0.0, np.nan)
    own_start, own_moved = np.zeros((2, closure_m.size))
    for row, reaction in enumerate(reactions):
        own_start = np.where(at == row, installed_m[row], own_start)
        own_moved = np.where(at == row, reaction.reaches_capacity_m, own_moved)
    own_moved = np.where(finite, own_moved, np.nan)
    for row, reaction in enumerate(reactions):
        moved = own_moved - (installed_m[row] - own_start)
        pressure = reaction.pressure_and_slope(np.maximum(moved, 0))[0]
        if reaction.breaks:
            pressure = np.where(moved > reaction.reaches_capacity_m, 0, pressure)
        total = total + pressure
    return total


def _limit(
    curve: GroundCurve,
    radius_m: Array,
    closure_m: Array,
    pressure_mpa: Array,
    element: Array,
    reached: Array,
    rest: GeneralEquilibrium,
) -> SystemLimit:
    asked = np.isfinite(closure_m)
    ground = pressure_at_closure(curve, radius_m, np.where(asked, closure_m, 1.0))
    ground = np.where(asked, ground, np.where(np.isinf(closure_m), 0.0, np.nan))
    return SystemLimit(
        closure_m, pressure_mpa, ground, element.astype(np.int64), reached & rest.converged
    )
