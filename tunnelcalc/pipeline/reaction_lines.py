"""The lines of support elements on one section, from installation to beyond their capacity."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.element_loads import element_water_mpa
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.section_curves import (
    BEYOND,
    CAPACITY,
    INSTALLED,
    ReactionOfClass,
    ReactionOfElement,
)
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import LinearSpring, PressureOfClosure, Reaction

BEYOND_CAPACITY = 1.2
"""Of its capacity, or of the furthest point that is told: how far a line is followed."""
POINTS = 61
LEAST_MOVEMENT_M = 0.02
"""Of a line that is drawn although the wall hardly moves. [m]"""
HALVINGS = 60


class _Line(NamedTuple):
    """Movements since the element acts (m,) [m], its pressures there (m,) [MPa], and what is
    special about points."""

    moved_m: Array
    pressure_mpa: Array
    marks: dict[int, str]


def of_class(planned: PlannedClass, found: Evaluated, section: Sections) -> ReactionOfClass:
    """The lines of a class's elements on one section, and of all of them together."""
    water = element_water_mpa(planned, found.responses, section)
    rest, radius = found.rest, float(section["radius_m"][0])
    elements = []
    for position, (item, response) in enumerate(
        zip(planned.elements, found.responses, strict=True)
    ):
        stiffness, capacity = (
            float(values[0]) for values in (response.stiffness_mpa_per_m, response.capacity_mpa)
        )
        installed_mm = float(found.acting_m[position, 0]) * MM_PER_M
        at_rest = float(rest.element_pressure_mpa[position, 0])
        line = _line_of(response.reaction, found, position, capacity, radius)
        elements.append(
            ReactionOfElement(
                item.element.label,
                item.element.installed_at_m,
                installed_mm,
                stiffness,
                capacity,
                at_rest,
                float(water[position, 0]),
                installed_mm + line.moved_m * MM_PER_M,
                line.pressure_mpa,
                line.marks,
            )
        )
    rest_mm = float(rest.closure_m[0]) * MM_PER_M
    closure = _together_mm(elements, rest_mm)
    return ReactionOfClass(
        tuple(elements),
        closure,
        _together_mpa(elements, closure, rest_mm),
        float(rest.support_pressure_mpa[0]),
        rest_mm,
        float(rest.plastic_ratio[0]) * radius,
    )


def _line_of(
    reaction: Reaction, found: Evaluated, position: int, capacity_mpa: float, radius_m: float
) -> _Line:
    path = found.rest.paths.get(position)
    if path is not None:
        acts = path.pressure_mpa[:, 0] > 0
        begins = found.acting_m[position, 0]
        moved = np.maximum(path.closure_m[acts, 0] - begins, 0)
        pressure = np.append(0.0, path.pressure_mpa[acts, 0])
        return _Line(np.append(0.0, moved), pressure, {0: INSTALLED})
    if isinstance(reaction, PressureOfClosure):
        at_rest = float(found.rest.element_moved_m[position, 0])
        return _of_function(reaction, at_rest, capacity_mpa, radius_m)
    pressure = np.array([0.0, capacity_mpa, BEYOND_CAPACITY * capacity_mpa])
    if not isinstance(reaction, LinearSpring) or not reaction.stiffness_mpa_per_m[0] > 0:
        return _Line(np.full(3, np.nan), pressure, {})
    moved = pressure / float(reaction.stiffness_mpa_per_m[0])
    if reaction.beyond == "yields":
        pressure = np.minimum(pressure, capacity_mpa)
    if reaction.beyond == "breaks":
        pressure = np.where(pressure > capacity_mpa, 0.0, pressure)
    return _Line(moved, pressure, {0: INSTALLED, 1: CAPACITY, 2: BEYOND})


def _of_function(
    reaction: PressureOfClosure, at_rest_m: float, capacity_mpa: float, radius_m: float
) -> _Line:
    """The line of an element that reacts in any way, with the points at which it turns."""

    def pressure_at(moved_m: float) -> float:
        return float(reaction.pressure_and_slope(np.array([moved_m]))[0][0])

    turns = {name: float(moved[0]) for name, moved in reaction.turns.items()}
    turns[CAPACITY] = _first_reached_m(pressure_at, capacity_mpa, radius_m)
    turns = {name: moved for name, moved in turns.items() if 0 < moved <= radius_m}
    known = [moved for moved in (at_rest_m, LEAST_MOVEMENT_M, *turns.values()) if moved == moved]
    end = BEYOND_CAPACITY * max(known)
    moved = np.union1d(np.linspace(0, end, POINTS), np.array([*turns.values()]))
    marks = {0: INSTALLED}
    for name, at in turns.items():
        point = int(np.searchsorted(moved, at))
        marks[point] = f"{marks[point]};{name}" if point in marks else name
    return _Line(moved, np.array([pressure_at(float(one)) for one in moved]), marks)


def _first_reached_m(
    pressure_at: Callable[[float], float], capacity_mpa: float, furthest_m: float
) -> float:
    """The least movement at which a rising pressure reaches a capacity; NaN where it is none up
    to the furthest. [m]"""
    below, above = 0.0, furthest_m
    if not pressure_at(above) >= capacity_mpa:
        return float("nan")
    for _ in range(HALVINGS):
        middle = 0.5 * (below + above)
        if pressure_at(middle) >= capacity_mpa:
            above = middle
        else:
            below = middle
    return above


def _together_mm(elements: Sequence[ReactionOfElement], rest_mm: float) -> Array:
    """Closures between which the line of all elements together is straight. [mm]"""
    ends = [element.closure_mm[-1] for element in elements]
    end = min((end for end in ends if np.isfinite(end)), default=np.nan)
    if np.isnan(end):
        return np.empty(0)
    end = max(end, rest_mm) if np.isfinite(rest_mm) else end
    inner = [value for element in elements for value in element.closure_mm[:-1]]
    closures = np.array([*inner, end])
    return np.unique(closures[np.isfinite(closures) & (closures <= end)])


def _together_mpa(
    elements: Sequence[ReactionOfElement], closure_mm: Array, rest_mm: float
) -> Array:
    """What all elements carry at closures (m,), each from its own installation. [MPa]"""
    total = np.zeros(closure_mm.size)
    for element in elements:
        if not np.all(np.isfinite(element.closure_mm)):
            continue
        closure, pressure = element.line_to(rest_mm)
        order = np.argsort(closure, kind="stable")
        total = total + np.interp(closure_mm, closure[order], pressure[order], left=0.0)
    return total
