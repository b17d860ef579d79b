"""The curves of one section: ground, closure along the drive, support, strength."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np

from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.class_evaluation import UNRESOLVED, Evaluated, evaluate_class
from tunnelcalc.pipeline.curve_points import distances_m, pressures_mpa, section_curve
from tunnelcalc.pipeline.dispatch import Chosen, ChosenSteps, M, closure_share, curves
from tunnelcalc.pipeline.envelope_curves import envelopes
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.incidents import ENDLESS_RING, NO_CLOSURE
from tunnelcalc.pipeline.lining_curves import lining_of
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.reaction_lines import of_class
from tunnelcalc.pipeline.stress_cases import MEAN, larger_stress
from tunnelcalc.pipeline.support_stages import STRESS_CASE
from tunnelcalc.plugin.isolation import NO_REASON
from tunnelcalc.project import Project
from tunnelcalc.results import STRESS_CASES
from tunnelcalc.schedule.selection import NONE_ADEQUATE_NAME
from tunnelcalc.section_curves import (
    CaseCurves,
    ClosureAlongDrive,
    ReactionOfGround,
    SectionCurves,
)
from tunnelcalc.sections import Sections

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
        rest_mpa = found.rest.support_pressure_mpa.tolist()
        cases.append(
            CaseCurves(
                name,
                _of_ground(found.ground, part, rest_mpa),
                _of_drive(steps, planned, part),
                of_class(planned, found, part),
                lining,
                None if found.ground is curve else _of_ground(curve, part, []),
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


def _of_ground(curve: GroundCurve, section: Sections, exact: Sequence[float]) -> ReactionOfGround:
    radius = _number(section, "radius_m")
    pressures = pressures_mpa(curve, exact)
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
