"""Stages from the ground's reaction to the support class that each section requires."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.contract import (
    ClosureProfileMethod,
    GroundReactionMethod,
    SupportCheck,
    SupportKind,
)
from tunnelcalc.plugin.isolation import NO_REASON, Contained, contained_evaluation, contained_spring
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Criteria, Element, Project, SupportClass
from tunnelcalc.results import CheckLine
from tunnelcalc.schedule.selection import NONE_ADEQUATE, required_classes
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import class_outcome, load_check, rule_check
from tunnelcalc.support.equilibrium import Equilibrium, equilibrium, pressure_at_closure

CLASS_COLUMNS = (
    "installation_closure_mm",
    "class_support_pressure_mpa",
    "class_closure_mm",
    "class_closure_pct",
    "class_plastic_radius_m",
    "class_factor_of_safety",
    "class_governing",
    "class_adequate",
)
"""Columns (n, c): one value a section and support class."""

CHECK_COLUMNS = (
    "check_demand",
    "check_capacity",
    "check_factor_of_safety",
    "check_outcome",
    "check_counts",
    "check_reason",
)
"""Columns (n, k): one value a section and check line."""

UNRESOLVED = "ground and support have no equilibrium that can be computed"


@dataclass(frozen=True, slots=True)
class PlannedElement:
    """An element with its kind and the checks that will be made of it."""

    element: Element
    kind: SupportKind
    checks: tuple[SupportCheck, ...]


@dataclass(frozen=True, slots=True)
class PlannedClass:
    """A support class with all that is needed to judge it."""

    support_class: SupportClass
    elements: tuple[PlannedElement, ...]


def plan_classes(project: Project, registry: Registry) -> tuple[PlannedClass, ...]:
    """What is to be checked, before any number is known."""
    return tuple(
        PlannedClass(
            support_class,
            tuple(
                PlannedElement(
                    element,
                    registry.support_kind(element.kind),
                    tuple(registry.checks_for(element, project.plugins)),
                )
                for element in support_class.elements
            ),
        )
        for support_class in project.support_classes
    )


def check_lines(plan: Sequence[PlannedClass]) -> tuple[CheckLine, ...]:
    """The rows that every section has in `checks.csv`, in order."""
    return tuple(
        CheckLine(
            number,
            planned.support_class.name,
            item.element.label,
            check.name,
            check.unit,
            check.carries_load,
        )
        for number, planned in enumerate(plan)
        for item in planned.elements
        for check in item.checks
    )


def support_stage(
    plan: Sequence[PlannedClass],
    reaction: GroundReactionMethod,
    profile: ClosureProfileMethod,
    criteria: Criteria,
) -> Stage:
    """Every class on every section: equilibrium, checks, adequacy."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        curve = reaction.curve(sections)
        radius = sections["radius_m"]
        per_class: list[tuple[Array, ...]] = []
        per_check: list[tuple[Array, ...]] = []
        for planned in plan:
            springs = [
                contained_spring(item.kind, sections, item.element) for item in planned.elements
            ]
            installed = _installed_m(planned, profile, sections)
            stiffness = np.array([spring.values[0] for spring in springs])
            shape = (len(springs), sections.count)
            rest = equilibrium(curve, radius, stiffness.reshape(shape), installed)
            rows = _check_rows(planned, springs, rest, sections, criteria)
            closure_pct = rest.closure_m / radius * 100
            outcome = class_outcome(
                [row[2] for row in rows],
                [row[3] for row in rows],
                [check.carries_load for item in planned.elements for check in item.checks],
                [row[4] for row in rows],
                closure_pct,
                criteria.closure_pct,
            )
            per_class.append(
                (
                    _least(installed, sections.count) * MM_PER_M,
                    rest.support_pressure_mpa,
                    rest.closure_m * MM_PER_M,
                    closure_pct,
                    rest.plastic_ratio * radius,
                    outcome.factor_of_safety,
                    outcome.governing,
                    outcome.adequate,
                )
            )
            per_check.extend(rows)
        return {
            **_side_by_side(CLASS_COLUMNS, per_class, sections.count),
            **_side_by_side(CHECK_COLUMNS, per_check, sections.count),
        }

    own = ("radius_m", "closure_mm", "plastic_radius_m")
    return Stage(
        "support",
        f"each class on each section: closure at installation by {profile.name}, equilibrium, "
        "checks by plugins, adequacy",
        tuple(dict.fromkeys((*reaction.needs, *profile.needs, *own))),
        CLASS_COLUMNS + CHECK_COLUMNS,
        compute,
    )


def choice_stage(reaction: GroundReactionMethod, criteria: Criteria) -> Stage:
    """The first class that meets every criterion; where none does, the pressure needed."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        required = required_classes(sections["class_adequate"])
        needed = np.full(sections.count, np.nan)
        none = required == NONE_ADEQUATE
        if np.any(none):
            failed = sections.take(none)
            radius = failed["radius_m"]
            limit = radius * criteria.closure_pct / 100
            needed[none] = pressure_at_closure(reaction.curve(failed), radius, limit)
        return {"required_class": required, "needed_pressure_mpa": needed}

    return Stage(
        "choice",
        "first listed class that meets every criterion, else the pressure that the closure limit "
        "would need",
        tuple(dict.fromkeys((*reaction.needs, "radius_m", "class_adequate"))),
        ("required_class", "needed_pressure_mpa"),
        compute,
    )


def _installed_m(planned: PlannedClass, profile: ClosureProfileMethod, sections: Sections) -> Array:
    """(e, n) unsupported closure where each element is installed. [m]"""
    final = sections["closure_mm"] / MM_PER_M
    installed = np.empty((len(planned.elements), sections.count))
    for row, item in enumerate(planned.elements):
        distance = np.full(sections.count, item.element.installed_at_m)
        installed[row] = final * profile.share(sections, distance)
    return installed


def _check_rows(
    planned: PlannedClass,
    springs: Sequence[Contained],
    rest: Equilibrium,
    sections: Sections,
    criteria: Criteria,
) -> list[tuple[Array, ...]]:
    """For each check: demand, capacity, factor, outcome, counts, reason; (n,) each."""
    rows: list[tuple[Array, ...]] = []
    unresolved = np.where(rest.converged, NO_REASON, UNRESOLVED).astype(object)
    for spring in springs:
        faulty = spring.reason != NO_REASON
        unresolved[faulty] = spring.reason[faulty]
    standing = np.flatnonzero(unresolved == NO_REASON)
    supported = sections.with_columns(
        {
            "support_pressure_mpa": rest.support_pressure_mpa,
            "supported_closure_mm": rest.closure_m * MM_PER_M,
            "supported_plastic_radius_m": rest.plastic_ratio * sections["radius_m"],
        }
    )
    for position, (item, spring) in enumerate(zip(planned.elements, springs, strict=True)):
        if not item.checks:
            continue
        of_element = supported.with_columns(
            {
                "element_pressure_mpa": rest.element_pressure_mpa[position],
                "element_capacity_mpa": spring.values[1],
            }
        ).take(standing)
        for check in item.checks:
            found, left_out = contained_evaluation(check, of_element, item.element)
            demand, capacity = np.full((2, sections.count), np.nan)
            demand[standing], capacity[standing] = found.values
            reason = unresolved.copy()
            reason[standing] = found.reason
            counts = np.ones(sections.count, dtype=bool)
            counts[standing] = ~left_out
            if check.carries_load:
                judged = load_check(demand, capacity, criteria.factor_of_safety)
            else:
                judged = rule_check(demand, capacity)
            rows.append((demand, capacity, *judged, counts, reason))
    return rows


def _least(installed: Array, count: int) -> Array:
    """(n,) least over the elements; NaN for a class without elements."""
    return np.min(installed, axis=0) if len(installed) else np.full(count, np.nan)


def _side_by_side(
    names: Sequence[str], rows: Sequence[tuple[Array, ...]], count: int
) -> dict[str, Array]:
    if not rows:
        return {name: np.empty((count, 0)) for name in names}
    columns = zip(*rows, strict=True)
    return {name: np.stack(column, axis=1) for name, column in zip(names, columns, strict=True)}
