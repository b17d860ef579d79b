"""The curves of one section: ground, closure along the drive, support, strength."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.class_evaluation import UNRESOLVED, Evaluated, evaluate_class
from tunnelcalc.pipeline.curve_points import distances_m, pressures_mpa, section_curve
from tunnelcalc.pipeline.dispatch import Chosen, ChosenSteps, M, closure_share, curves
from tunnelcalc.pipeline.element_loads import element_water_mpa
from tunnelcalc.pipeline.envelope_curves import envelopes
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.incidents import ENDLESS_RING, NO_CLOSURE
from tunnelcalc.pipeline.lining_curves import lining_of
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.stress_cases import MEAN, larger_stress
from tunnelcalc.pipeline.support_stages import STRESS_CASE
from tunnelcalc.plugin.isolation import NO_REASON
from tunnelcalc.project import Project
from tunnelcalc.results import STRESS_CASES
from tunnelcalc.schedule.selection import NONE_ADEQUATE_NAME
from tunnelcalc.section_curves import (
    CaseCurves,
    ClosureAlongDrive,
    ReactionOfClass,
    ReactionOfElement,
    ReactionOfGround,
    SectionCurves,
)
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import LinearSpring, PressureOfClosure, Reaction

BEYOND_CAPACITY = 1.2
POINTS = 61
LEAST_MOVEMENT_M = 0.02
"""Of a line that is drawn although the wall hardly moves. [m]"""
"""Of its capacity: how far the line of an element is followed."""

Unknown = tuple[str, str]


def section_curves(
    project: Project, steps: ChosenSteps, plan: Sequence[PlannedClass], section: Sections, of: int
) -> SectionCurves:
    """Every curve of a computed section with the class of number `of`.

    `section` is one section with all columns of the section stages.
    """
    planned = plan[of]
    larger = larger_stress(steps.ground_reaction, section, project.criteria)
    runs = [(STRESS_CASES[MEAN], section, curves(steps.ground_reaction, section))]
    if larger.positions.size:
        runs.append((STRESS_CASES[1 - MEAN], larger.sections, larger.curve))
    cases: list[CaseCurves] = []
    unknown: dict[Unknown, None] = {}
    for name, part, curve in runs:
        found = evaluate_class(planned, curve, steps, part, project.criteria)
        lining, fault = lining_of(planned, found, part)
        cases.append(
            CaseCurves(
                name,
                _of_ground(curve, part, found),
                _of_drive(steps, planned, part),
                _of_class(planned, found, part),
                lining,
            )
        )
        unknown.update({(f"{planned.support_class.name} lining", fault): None} if fault else {})
        unknown.update(dict.fromkeys(_unknown(planned, found, part)))
    required = int(section["required_class"][0])
    return SectionCurves(
        title=project.title,
        chainage=project.notation.written(section["chainage_m"])[0],
        chainage_m=_number(section, "chainage_m"),
        from_m=_number(section, "from_m"),
        to_m=_number(section, "to_m"),
        ground_unit=str(section["ground_unit"][0]),
        radius_m=_number(section, "radius_m"),
        closure_limit_pct=project.criteria.closure_pct,
        methods=_methods(steps, section),
        support_class=planned.support_class.name,
        required_class=NONE_ADEQUATE_NAME if required < 0 else project.class_names[required],
        governing_case=STRESS_CASES[int(section[STRESS_CASE][0, of])],
        cases=tuple(cases),
        envelopes=envelopes(section),
        unknown=tuple(unknown),
    )


def _number(section: Sections, name: str) -> float:
    return float(section[name][0])


def _methods(steps: ChosenSteps, section: Sections) -> dict[str, str]:
    """The method of each step that computes this section."""
    return {
        **_named(steps.strength, section),
        **_named(steps.deformation_modulus, section),
        **_named(steps.ground_reaction, section),
        **_named(steps.closure_profile, section),
    }


def _named(chosen: Chosen[M], section: Sections) -> dict[str, str]:
    """The method that computes a section, by its step."""
    (method,) = (method for method, _ in chosen.positions(section))
    return {chosen.step: method.name}


def _of_ground(curve: GroundCurve, section: Sections, found: Evaluated) -> ReactionOfGround:
    radius = _number(section, "radius_m")
    pressures = pressures_mpa(curve, found.rest.support_pressure_mpa.tolist())
    point = section_curve(curve)(pressures)
    return ReactionOfGround(
        float(curve.in_situ_stress_mpa[0]),
        float(curve.critical_pressure_mpa[0]),
        pressures,
        point.closure_ratio * radius * MM_PER_M,
        point.plastic_ratio * radius,
    )


def _of_drive(steps: ChosenSteps, planned: PlannedClass, section: Sections) -> ClosureAlongDrive:
    installed = [item.element.installed_at_m for item in planned.elements]
    distance = distances_m(
        _number(section, "radius_m"), _number(section, "plastic_radius_m"), installed
    )
    needed = (*steps.closure_profile.needs, "radius_m")
    repeated = section.only(needed).take(np.zeros(distance.size, dtype=np.intp))
    share = closure_share(steps.closure_profile, repeated, distance)
    return ClosureAlongDrive(distance, share * _number(section, "closure_mm"), share)


def _of_class(planned: PlannedClass, found: Evaluated, section: Sections) -> ReactionOfClass:
    water = element_water_mpa(planned, found.responses, section)
    rest = found.rest
    elements = []
    for position, (item, response) in enumerate(
        zip(planned.elements, found.responses, strict=True)
    ):
        stiffness, capacity = (
            float(values[0]) for values in (response.stiffness_mpa_per_m, response.capacity_mpa)
        )
        installed_mm = float(found.acting_m[position, 0]) * MM_PER_M
        at_rest = float(rest.element_pressure_mpa[position, 0])
        moved, pressure = _line_of(response.reaction, found, position, capacity)
        beyond = installed_mm + moved * MM_PER_M
        elements.append(
            ReactionOfElement(
                item.element.label,
                item.element.installed_at_m,
                installed_mm,
                stiffness,
                capacity,
                at_rest,
                float(water[position, 0]),
                beyond,
                pressure,
            )
        )
    rest_mm = float(rest.closure_m[0]) * MM_PER_M
    closure = _together_mm(elements, rest_mm)
    return ReactionOfClass(
        tuple(elements),
        closure,
        _together_mpa(elements, closure),
        float(rest.support_pressure_mpa[0]),
        rest_mm,
        float(rest.plastic_ratio[0]) * _number(section, "radius_m"),
    )


def _line_of(
    reaction: Reaction, found: Evaluated, position: int, capacity_mpa: float
) -> tuple[Array, Array]:
    """Movements since the element acts [m] and its pressures there [MPa]."""
    path = found.rest.paths.get(position)
    if path is not None:
        acts = path.pressure_mpa[:, 0] > 0
        begins = found.acting_m[position, 0]
        moved = np.maximum(path.closure_m[acts, 0] - begins, 0)
        return np.append(0.0, moved), np.append(0.0, path.pressure_mpa[acts, 0])
    if isinstance(reaction, PressureOfClosure):
        at_rest = float(found.rest.element_moved_m[position, 0])
        moved = np.linspace(0, BEYOND_CAPACITY * max(at_rest, LEAST_MOVEMENT_M), POINTS)
        pressures = [float(reaction.pressure_and_slope(np.array([m]))[0][0]) for m in moved]
        return moved, np.array(pressures)
    pressure = np.array([0.0, capacity_mpa, BEYOND_CAPACITY * capacity_mpa])
    if not isinstance(reaction, LinearSpring) or not reaction.stiffness_mpa_per_m[0] > 0:
        return np.full(3, np.nan), pressure
    moved = pressure / float(reaction.stiffness_mpa_per_m[0])
    if reaction.beyond == "yields":
        pressure = np.minimum(pressure, capacity_mpa)
    if reaction.beyond == "breaks":
        pressure = np.where(pressure > capacity_mpa, 0.0, pressure)
    return moved, pressure


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


def _together_mpa(elements: Sequence[ReactionOfElement], closure_mm: Array) -> Array:
    """What all elements carry at closures (m,), each from its own installation. [MPa]"""
    total = np.zeros(closure_mm.size)
    for element in elements:
        if not np.all(np.isfinite(element.closure_mm)):
            continue
        order = np.argsort(element.closure_mm, kind="stable")
        line = element.closure_mm[order], element.pressure_mpa[order]
        total = total + np.interp(closure_mm, *line, left=0.0)
    return total


def _unknown(planned: PlannedClass, found: Evaluated, section: Sections) -> Iterator[Unknown]:
    """What could not be computed, in the words of a run."""
    if not np.isfinite(section["closure_mm"][0]):
        endless = np.isinf(section["plastic_radius_m"][0])
        yield "ground reaction", ENDLESS_RING if endless else NO_CLOSURE
        return
    name = planned.support_class.name
    faults = [
        (f"{name} {item.element.label}", str(spring.reason[0]))
        for item, spring in zip(planned.elements, found.responses, strict=True)
        if spring.reason[0] != NO_REASON
    ]
    yield from faults
    if not faults and not found.rest.converged[0]:
        yield name, UNRESOLVED
