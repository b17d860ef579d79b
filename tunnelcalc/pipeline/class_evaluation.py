"""One support class on sections: equilibrium with the ground, checks, adequacy."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.dispatch import Chosen, closure_share
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass, counts
from tunnelcalc.plugin.contract import ClosureProfileMethod
from tunnelcalc.plugin.isolation import (
    NO_REASON,
    Contained,
    contained_class_evaluation,
    contained_evaluation,
    contained_spring,
)
from tunnelcalc.project import Criteria
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import class_outcome, load_check, rule_check
from tunnelcalc.support.equilibrium import Equilibrium, equilibrium

DOES_NOT_COUNT = "does not count: the project does not ask for it under criteria"
UNRESOLVED = "ground and support have no equilibrium that can be computed"


class CheckRow(NamedTuple):
    """One check on n sections, each (n,)."""

    demand: Array
    capacity: Array
    factor_of_safety: Array
    outcome: Array
    counts: Array
    reason: Array


class ClassRow(NamedTuple):
    """One support class on n sections, each (n,), in the order of `CLASS_COLUMNS`."""

    installation_closure_mm: Array
    support_pressure_mpa: Array
    closure_mm: Array
    closure_pct: Array
    plastic_radius_m: Array
    factor_of_safety: Array
    governing: Array
    adequate: Array


@dataclass(frozen=True, slots=True)
class Evaluated:
    """A class and its checks; `rest` and `springs` are the state at rest that they follow from."""

    row: ClassRow
    checks: tuple[CheckRow, ...]
    rest: Equilibrium
    springs: tuple[Contained, ...]
    installed_m: Array


def evaluate_class(
    planned: PlannedClass,
    curve: GroundCurve,
    profile: Chosen[ClosureProfileMethod],
    sections: Sections,
    criteria: Criteria,
) -> Evaluated:
    """A class on sections whose unsupported closure and plastic radius stand in them."""
    radius = sections["radius_m"]
    springs = tuple(
        contained_spring(item.kind, sections, item.element) for item in planned.elements
    )
    installed = _installed_m(planned, profile, sections)
    stiffness = np.array([spring.values[0] for spring in springs])
    shape = (len(springs), sections.count)
    rest = equilibrium(curve, radius, stiffness.reshape(shape), installed)
    checks = _check_rows(planned, springs, rest, sections, criteria)
    closure_pct = rest.closure_m / radius * 100
    loads = [check.carries_load for item in planned.elements for check in item.checks]
    outcome = class_outcome(
        [row.factor_of_safety for row in checks],
        [row.outcome for row in checks],
        loads + [check.carries_load for check in planned.class_checks],
        [row.counts for row in checks],
        closure_pct,
        criteria.closure_pct,
    )
    row = ClassRow(
        _least(installed, sections.count) * MM_PER_M,
        rest.support_pressure_mpa,
        rest.closure_m * MM_PER_M,
        closure_pct,
        rest.plastic_ratio * radius,
        outcome.factor_of_safety,
        outcome.governing,
        outcome.adequate,
    )
    return Evaluated(row, tuple(checks), rest, springs, installed)


def _installed_m(
    planned: PlannedClass, profile: Chosen[ClosureProfileMethod], sections: Sections
) -> Array:
    """(e, n) unsupported closure where each element is installed. [m]"""
    final = sections["closure_mm"] / MM_PER_M
    installed = np.empty((len(planned.elements), sections.count))
    for row, item in enumerate(planned.elements):
        distance = np.full(sections.count, item.element.installed_at_m)
        installed[row] = final * closure_share(profile, sections, distance)
    return installed


def _check_rows(
    planned: PlannedClass,
    springs: Sequence[Contained],
    rest: Equilibrium,
    sections: Sections,
    criteria: Criteria,
) -> list[CheckRow]:
    """The checks of each element, then those of the class."""
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
    water = element_water_mpa(planned, springs, sections)
    rows: list[CheckRow] = []
    for position, (item, spring) in enumerate(zip(planned.elements, springs, strict=True)):
        if not item.checks:
            continue
        of_element = supported.with_columns(
            {
                "element_pressure_mpa": rest.element_pressure_mpa[position] + water[position],
                "element_capacity_mpa": spring.values[1],
            }
        ).take(standing)
        for check in item.checks:
            found, left_out = contained_evaluation(check, of_element, item.element)
            row = _row(found, left_out, unresolved, standing, check.carries_load, True, criteria)
            rows.append(row)
    if planned.class_checks:
        of_class = supported.with_columns(class_capacities(planned, springs, sections.count))
        of_class = of_class.take(standing)
        for class_check in planned.class_checks:
            found, left_out = contained_class_evaluation(class_check, of_class)
            must_pass = counts(class_check, criteria)
            load = class_check.carries_load
            rows.append(_row(found, left_out, unresolved, standing, load, must_pass, criteria))
    return rows


def _row(
    found: Contained,
    left_out: Array,
    unresolved: Array,
    standing: Array,
    carries_load: bool,
    must_pass: bool,
    criteria: Criteria,
) -> CheckRow:
    """A check that was made where there is an equilibrium, over all sections."""
    count = unresolved.size
    demand, capacity = np.full((2, count), np.nan)
    demand[standing], capacity[standing] = found.values
    reason = unresolved.copy()
    reason[standing] = found.reason
    if not must_pass:
        reason[reason == NO_REASON] = DOES_NOT_COUNT
    counting = np.full(count, must_pass)
    counting[standing] &= ~left_out
    if carries_load:
        judged = load_check(demand, capacity, criteria.factor_of_safety)
    else:
        judged = rule_check(demand, capacity)
    return CheckRow(demand, capacity, *judged, counting, reason)


def element_water_mpa(
    planned: PlannedClass, springs: Sequence[Contained], sections: Sections
) -> Array:
    """(e, n) share of the water pressure that each ring of a watertight lining carries, by
    stiffness. [MPa]"""
    stiffness = np.zeros((len(springs), sections.count))
    for position, (item, spring) in enumerate(zip(planned.elements, springs, strict=True)):
        if item.is_ring:
            stiffness[position] = spring.values[0]
    together = np.zeros(sections.count)
    for own in stiffness:
        together = together + own
    share = np.divide(stiffness, together, out=np.zeros_like(stiffness), where=together > 0)
    return share * sections["lining_water_mpa"]


def class_capacities(
    planned: PlannedClass, springs: Sequence[Contained], count: int
) -> dict[str, Array]:
    """Capacity (n,) of all elements together, and of the rings alone. [MPa]"""
    whole, rings = np.zeros(count), np.zeros(count)
    for item, spring in zip(planned.elements, springs, strict=True):
        whole = whole + spring.values[1]
        if item.is_ring:
            rings = rings + spring.values[1]
    return {"class_capacity_mpa": whole, "ring_capacity_mpa": rings}


def _least(installed: Array, count: int) -> Array:
    """(n,) least over the elements; NaN for a class without elements."""
    return np.min(installed, axis=0) if len(installed) else np.full(count, np.nan)
