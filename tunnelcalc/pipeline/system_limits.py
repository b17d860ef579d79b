"""The limits of a class as a system, whatever forms its elements react in."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.resting_state import RestingState, element_of
from tunnelcalc.pipeline.ring_limits import ring_limit_m
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.sections import Sections
from tunnelcalc.support.element_reactions import ElementReaction, FunctionReaction
from tunnelcalc.support.mobilisation import first_failure, full_mobilisation
from tunnelcalc.support.reaction import GroundRing, LinearSpring, PressureOfClosure, Reaction


@dataclass(frozen=True, slots=True)
class SystemLimits:
    """Pressure [MPa] and closure [m] when the first element reaches its limit, and at full
    mobilisation, (n,) each; NaN where they are never reached."""

    first_failure_pressure_mpa: Array
    first_failure_closure_m: Array
    full_pressure_mpa: Array
    full_closure_m: Array


def limited_elements(
    curve: GroundCurve,
    sections: Sections,
    planned: PlannedClass,
    responses: Sequence[ElementResponse],
    capacity_mpa: Array,
    rest: RestingState,
    known: Array,
) -> list[ElementReaction]:
    """The elements of a class with these capacities (e, n), as they react to the movement of the
    wall. Those that age do so as along the advance, and from the rest on as hard; those that change
    the ground carry nothing, up to their own limit. `known`: numbers of the sections that can be
    computed."""
    elements: list[ElementReaction] = []
    for position, (response, capacity) in enumerate(zip(responses, capacity_mpa, strict=True)):
        path, acting = rest.paths.get(position), rest.acting_m[position]
        if isinstance(response.reaction, GroundRing):
            item = planned.elements[position]
            limit = ring_limit_m(curve, sections, item, response.capacity_mpa, acting, known)
            elements.append(_silent(limit))
        elif path is not None:
            elements.append(path.followed(capacity, acting))
        else:
            reaction = _with_capacity(response.reaction, capacity)
            elements.append(element_of(reaction, sections["radius_m"]))
    return elements


def system_limits(
    curve: GroundCurve, radius_m: Array, elements: Sequence[ElementReaction], rest: RestingState
) -> SystemLimits:
    """The limits of a class with these elements, made by `limited_elements`."""
    failure = first_failure(curve, radius_m, elements, rest.acting_m, rest.state)
    full = full_mobilisation(curve, radius_m, elements, rest.acting_m, rest.state)
    return SystemLimits(
        *(
            np.where(np.isfinite(values), values, np.nan)
            for limit in (failure, full)
            for values in (limit.support_pressure_mpa, limit.closure_m)
        )
    )


def _silent(limit_m: Array) -> ElementReaction:
    """An element that carries nothing at the wall, and is at its limit at a movement (n,). [m]"""
    count = limit_m.size
    return FunctionReaction(
        lambda moved: (0 * moved, 0 * moved),
        count,
        np.arange(count),
        np.zeros(count),
        limit_m,
        limit_m,
    )


def _with_capacity(reaction: Reaction, capacity_mpa: Array) -> Reaction:
    if isinstance(reaction, LinearSpring | PressureOfClosure):
        return replace(reaction, capacity_mpa=capacity_mpa)
    return reaction
