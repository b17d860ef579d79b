"""What each element of a class carries and is good for: its share of ground and water load, and
what counts where capacities are added up."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.resting_state import RestingState, acting_from_m
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.sections import Sections, of_element
from tunnelcalc.support.element_reactions import ElementReaction
from tunnelcalc.support.followed import Followed
from tunnelcalc.support.reaction import GroundRing, PressureOfClosure

PLATEAU_STEPS = 64


def element_columns(
    rest: RestingState, response: ElementResponse, position: int, water_mpa: Array
) -> dict[str, Array]:
    """What the checks of an element find beside the ground and the state of the class."""
    columns = {
        "element_pressure_mpa": rest.element_pressure_mpa[position] + water_mpa,
        "element_capacity_mpa": response.capacity_mpa,
        "element_moved_mm": rest.element_moved_m[position] * MM_PER_M,
    }
    path = rest.paths.get(position)
    if path is not None:
        columns |= path.worst(water_mpa)
    return columns


def element_water_mpa(
    planned: PlannedClass, responses: Sequence[ElementResponse], sections: Sections
) -> Array:
    """(e, n) share of the water pressure that each ring of a watertight lining carries, by its
    capacity where a ring is no linear spring, else by stiffness. [MPa]"""
    weights = np.zeros((len(responses), sections.count))
    by_stiffness = water_goes_by_stiffness(planned, responses)
    for position in rings_under_water(planned, responses):
        response = responses[position]
        weights[position] = response.stiffness_mpa_per_m if by_stiffness else response.capacity_mpa
    together = np.zeros(sections.count)
    for own in weights:
        together = together + own
    share = np.divide(weights, together, out=np.zeros_like(weights), where=together > 0)
    return share * sections["lining_water_mpa"]


def rings_under_water(
    planned: PlannedClass, responses: Sequence[ElementResponse]
) -> tuple[int, ...]:
    """Positions of the rings that water presses on: not of those that give way at a load of their
    own, as sliding sets do, since water does not fall off while they slide."""
    return tuple(
        position
        for position, (item, response) in enumerate(zip(planned.elements, responses, strict=True))
        if item.is_ring and not isinstance(response.reaction, PressureOfClosure)
    )


def water_goes_by_stiffness(planned: PlannedClass, responses: Sequence[ElementResponse]) -> bool:
    """Whether every ring under water has one stiffness; else its capacity stands for it."""
    return not any(
        np.all(np.isnan(responses[position].stiffness_mpa_per_m))
        for position in rings_under_water(planned, responses)
    )


def class_columns(
    planned: PlannedClass,
    responses: Sequence[ElementResponse],
    rest: RestingState,
    credited_mpa: Array,
    water_mpa: Array,
) -> dict[str, Array]:
    """What the checks of a class find beside the ground and the state of the class: capacities
    of all, and of each element what its own checks find, its share of the water, and the
    distance behind the face from which it acts."""
    columns = class_capacities(planned, responses, credited_mpa)
    for position, (item, response) in enumerate(zip(planned.elements, responses, strict=True)):
        water = water_mpa[position]
        acts_from_m = acting_from_m(item.element.installed_at_m, response.reaction)
        own = {
            **element_columns(rest, response, position, water),
            "element_water_mpa": water,
            "element_acts_from_m": np.full(water.size, acts_from_m),
        }
        columns |= {of_element(name, position): column for name, column in own.items()}
    return columns


def class_capacities(
    planned: PlannedClass, responses: Sequence[ElementResponse], credited_mpa: Array
) -> dict[str, Array]:
    """Capacity (n,) of all elements together, and of the rings alone that bear water. [MPa]"""
    whole, rings = np.zeros((2, *credited_mpa.shape[1:]))
    under_water = rings_under_water(planned, responses)
    for position, own in enumerate(credited_mpa):
        whole = whole + own
        if position in under_water:
            rings = rings + own
    return {"class_capacity_mpa": whole, "ring_capacity_mpa": rings}


def credited_capacities_mpa(
    responses: Sequence[ElementResponse],
    checked_mpa: Array,
    rest: RestingState,
    limit_m: Array,
) -> Array:
    """(e, n) capacity of each element that counts where capacities are added up: of an
    element that gives way no more than the load at which it first does, and nothing of bolts that
    change the ground; up to a closure limit (n,) [m]. [MPa]"""
    credited = checked_mpa.copy()
    for position, response in enumerate(responses):
        if isinstance(response.reaction, GroundRing):
            credited[position] = np.where(np.isnan(checked_mpa[position]), np.nan, 0.0)
        elif isinstance(response.reaction, PressureOfClosure):
            at_rest_m = np.maximum(rest.element_moved_m[position], 0)
            moved = np.maximum(limit_m - rest.acting_m[position], at_rest_m)
            given = _first_plateau_mpa(response.reaction, moved)
            credited[position] = np.minimum(checked_mpa[position], given)
    return credited


def _first_plateau_mpa(reaction: PressureOfClosure, moved_m: Array) -> Array:
    """(n,) pressure at which an element first goes on without more load, up to a movement (n,);
    without such a plateau the pressure there. [MPa]"""
    plateau = np.full(moved_m.size, np.nan)
    for step in range(1, PLATEAU_STEPS + 1):
        pressure, slope = reaction.pressure_and_slope(moved_m * step / PLATEAU_STEPS)
        first = np.isnan(plateau) & (slope == 0) & (pressure > 0)
        plateau = np.where(first, pressure, plateau)
    return np.where(np.isnan(plateau), pressure, plateau)


def given_at_limit_mpa(
    elements: Sequence[ElementReaction],
    credited_mpa: Array,
    acting_m: Array,
    limit_m: Array,
    factor_of_safety: float,
) -> Array:
    """(e, n) what each element gives when the wall has moved to the limit of closure (n,) [m], no
    more than its capacity over the required factor. [MPa]

    Of an element that ages it is what it carries at that moment of the advance, by its capacity of
    that age; where the wall rests before the limit, what it carries once pushed there, hard.
    """
    given = np.empty(credited_mpa.shape)
    for row, element in enumerate(elements):
        moved = np.maximum(limit_m - acting_m[row], 0)
        capacity = credited_mpa[row]
        if isinstance(element, Followed):
            capacity = np.minimum(capacity, element.capacity_at_mpa(moved))
        pressure = element.pressure_and_slope(moved)[0]
        given[row] = np.minimum(pressure, capacity / factor_of_safety)
    return given


def missing_pressure_mpa(needed_mpa: Array, given_mpa: Array) -> Array:
    """(n,) by how much a class falls short at the limit of closure: the pressure that the ground
    needs to rest there, less what the elements give there (e, n); 0 where nothing is missing. [MPa]

    With elements that age the wall may pass the limit while the face is still near. What is missing
    is then what the face still holds at that moment (where no element is past its capacity): the
    pressure to be added before the face moves on. It is on the safe side: with more support the
    wall would come to the limit later, and find the elements harder. Bolts that change the ground
    are taken to hold so far: the first failure says where they do not.
    """
    given = np.zeros(needed_mpa.size)
    for own in given_mpa:
        given = given + own
    return np.maximum(needed_mpa - given, 0)
