"""What each element of a class carries and is good for: its share of ground and water load, and
what counts where capacities are added up."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.resting_state import RestingState, acting_from_m, pressure_of
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.project import Criteria
from tunnelcalc.sections import Sections, of_element
from tunnelcalc.support.reaction import PressureOfClosure


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


def missing_pressure_mpa(
    responses: Sequence[ElementResponse],
    credited_mpa: Array,
    sections: Sections,
    acting_m: Array,
    needed_mpa: Array,
    criteria: Criteria,
) -> Array:
    """(n,) by how much a class falls short at the limit of closure: the pressure that the ground
    then needs, less what its elements give there, each no more than its capacity over the required
    factor; 0 where nothing is missing, NaN with elements that age. [MPa]"""
    limit = sections["radius_m"] * criteria.closure_pct / 100
    given = np.zeros(sections.count)
    for response, credited, acts in zip(responses, credited_mpa, acting_m, strict=True):
        pressure = pressure_of(response.reaction, np.maximum(limit - acts, 0))
        given = given + np.minimum(pressure, credited / criteria.factor_of_safety)
    return np.maximum(needed_mpa - given, 0)
