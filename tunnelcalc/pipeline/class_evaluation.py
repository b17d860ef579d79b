"""One support class on sections: equilibrium with the ground, checks, adequacy."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.dispatch import Chosen, ChosenSteps, closure_share
from tunnelcalc.pipeline.element_loads import (
    class_capacities,
    class_columns,
    credited_capacities_mpa,
    element_columns,
    element_water_mpa,
    given_at_limit_mpa,
    missing_pressure_mpa,
)
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass, counts
from tunnelcalc.pipeline.resting_state import (
    PressureTables,
    RestingState,
    acting_from_m,
    at_rest,
)
from tunnelcalc.pipeline.ring_curves import curve_of_class
from tunnelcalc.pipeline.system_limits import limited_elements, system_limits
from tunnelcalc.plugin.contained_reaction import ElementResponse, contained_reaction
from tunnelcalc.plugin.isolation import (
    NO_REASON,
    Contained,
    contained_class_evaluation,
    contained_evaluation,
)
from tunnelcalc.plugin.method_contract import ClosureProfileMethod
from tunnelcalc.project import Criteria
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import class_outcome, load_check, rule_check
from tunnelcalc.support.equilibrium import pressure_at_closure
from tunnelcalc.support.reaction import GroundRing

DOES_NOT_COUNT = "does not count: the project does not ask for it under criteria"
HARDENED = "compared at rest, where what hardens has its final capacity; not while it is young"
ROUNDING = 1e-9
"""A check that is at its limit where the reaction is at its own may miss it by rounding."""
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
    first_failure_pressure_mpa: Array
    first_failure_closure_mm: Array
    full_pressure_mpa: Array
    full_closure_mm: Array
    missing_pressure_mpa: Array
    capacity_mpa: Array


@dataclass(frozen=True, slots=True)
class Evaluated:
    """A class and its checks; `rest` and `responses` are the state at rest that they follow from.

    `installed_m` (e, n) is the unsupported closure where each element is installed, `acting_m`
    (e, n) that from which it counts its movement: the unsupported one where it begins to act,
    with elements that age that of the supported wall. `ground` is as the
    class meets it, with its ring.
    """

    ground: GroundCurve
    row: ClassRow
    checks: tuple[CheckRow, ...]
    rest: RestingState
    responses: tuple[ElementResponse, ...]
    installed_m: Array
    acting_m: Array
    credited_mpa: Array
    """(e, n) capacity of each element that counts where capacities are added up."""
    needed_mpa: Array
    """(n,) pressure at which the ground of the class rests at the limit of closure."""
    given_mpa: Array
    """(e, n) what each element gives there."""


def evaluate_class(
    planned: PlannedClass,
    curve: GroundCurve,
    steps: ChosenSteps,
    sections: Sections,
    criteria: Criteria,
    tables: PressureTables | None = None,
) -> Evaluated:
    """A class on sections whose unsupported closure, plastic radius and needed pressure stand in
    them. Classes of the same sections may share their tables."""
    needed_mpa = sections["limit_pressure_mpa"]
    radius = sections["radius_m"]
    limit_m = radius * criteria.closure_pct / 100
    profile = steps.closure_profile
    responses = tuple(
        contained_reaction(item.kind, sections, item.element) for item in planned.elements
    )
    installed_at = [item.element.installed_at_m for item in planned.elements]
    acting_at = [
        acting_from_m(at, response.reaction)
        for at, response in zip(installed_at, responses, strict=True)
    ]
    installed = _closure_at_m(installed_at, profile, sections)
    acting = _closure_at_m(acting_at, profile, sections)
    ground = curve_of_class(curve, steps.ground_reaction, sections, responses, installed)
    rest = at_rest(
        ground.curve,
        sections,
        profile,
        responses,
        installed_at,
        acting,
        planned.support_class.advance_m_per_day,
        tables or PressureTables(),
    )
    if any(isinstance(response.reaction, GroundRing) for response in responses):
        needed_mpa = pressure_at_closure(ground.curve, radius, limit_m)
    supported = _Supported.of(planned, responses, rest, ground.reason, sections)
    checked = checked_capacities_mpa(supported, planned, responses)
    credited = credited_capacities_mpa(responses, checked, rest, limit_m)
    checks = _check_rows(supported, planned, responses, credited, criteria)
    elements = limited_elements(
        ground.curve, supported.sections, planned, responses, checked, rest, supported.standing
    )
    limits = system_limits(ground.curve, radius, elements, rest)
    factor = criteria.factor_of_safety
    given = given_at_limit_mpa(elements, credited, rest.acting_m, limit_m, factor)
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
        limits.first_failure_pressure_mpa,
        limits.first_failure_closure_m * MM_PER_M,
        limits.full_pressure_mpa,
        limits.full_closure_m * MM_PER_M,
        missing_pressure_mpa(needed_mpa, given),
        class_capacities(planned, responses, credited)["class_capacity_mpa"],
    )
    return Evaluated(
        *(ground.curve, row, tuple(checks), rest, responses, installed, rest.acting_m),
        *(credited, needed_mpa, given),
    )


def _closure_at_m(
    distances_m: Sequence[float], profile: Chosen[ClosureProfileMethod], sections: Sections
) -> Array:
    """(e, n) unsupported closure at distances behind the face. [m]"""
    final = sections["closure_mm"] / MM_PER_M
    closure = np.empty((len(distances_m), sections.count))
    for row, distance in enumerate(distances_m):
        share = closure_share(profile, sections, np.full(sections.count, distance))
        closure[row] = final * share
    return closure


@dataclass(frozen=True, slots=True)
class _Supported:
    """Sections with a class at rest, the water on each element, and why single ones are not
    computed."""

    rest: RestingState
    sections: Sections
    water_mpa: Array
    unresolved: Array

    @classmethod
    def of(
        cls,
        planned: PlannedClass,
        responses: Sequence[ElementResponse],
        rest: RestingState,
        ground_reason: Array,
        sections: Sections,
    ) -> _Supported:
        unresolved = np.where(rest.converged, NO_REASON, UNRESOLVED).astype(object)
        underived = ground_reason != NO_REASON
        unresolved[underived] = ground_reason[underived]
        for response in responses:
            faulty = response.reason != NO_REASON
            unresolved[faulty] = response.reason[faulty]
        state = {
            "support_pressure_mpa": rest.support_pressure_mpa,
            "supported_closure_mm": rest.closure_m * MM_PER_M,
            "supported_plastic_radius_m": rest.plastic_ratio * sections["radius_m"],
        }
        water = element_water_mpa(planned, responses, sections)
        return cls(rest, sections.with_columns(state), water, unresolved)

    @property
    def standing(self) -> Array:
        return np.flatnonzero(self.unresolved == NO_REASON)


def checked_capacities_mpa(
    supported: _Supported, planned: PlannedClass, responses: Sequence[ElementResponse]
) -> Array:
    """(e, n) pressure at which the first load check of each element reaches its limit, at most
    the capacity of its reaction: a bond that is left beyond the plastic zone may be less. [MPa]"""
    standing = supported.standing
    found = np.full((len(responses), supported.unresolved.size), np.nan)
    for position, (item, response) in enumerate(zip(planned.elements, responses, strict=True)):
        columns = element_columns(supported.rest, response, position, supported.water_mpa[position])
        full = {**columns, "element_pressure_mpa": response.capacity_mpa}
        path = supported.rest.paths.get(position)
        if path is not None:
            full |= path.hard_at(response.capacity_mpa)
        at_capacity = supported.sections.with_columns(full).take(standing)
        share = np.ones(standing.size)
        for check in item.checks:
            if check.carries_load:
                result, _ = contained_evaluation(check, at_capacity, item.element)
                demand, capacity = result.values
                with np.errstate(divide="ignore", invalid="ignore"):
                    own = np.where(demand > 0, capacity / demand, 1.0)
                share = np.minimum(share, np.where(own >= 1 - ROUNDING, 1.0, own))
        found[position, standing] = response.capacity_mpa[standing] * share
    return found


def _check_rows(
    supported: _Supported,
    planned: PlannedClass,
    responses: Sequence[ElementResponse],
    credited_mpa: Array,
    criteria: Criteria,
) -> list[CheckRow]:
    """The checks of each element, then those of the class."""
    unresolved, standing = supported.unresolved, supported.standing
    rest, water = supported.rest, supported.water_mpa
    rows: list[CheckRow] = []
    for position, (item, response) in enumerate(zip(planned.elements, responses, strict=True)):
        if not item.checks:
            continue
        columns = element_columns(rest, response, position, water[position])
        of_element = supported.sections.with_columns(columns).take(standing)
        for check in item.checks:
            found, left_out = contained_evaluation(check, of_element, item.element)
            row = _row(found, left_out, unresolved, standing, check.carries_load, True, criteria)
            rows.append(row)
    if planned.class_checks:
        of_class = supported.sections.with_columns(
            class_columns(planned, responses, rest, credited_mpa, water)
        )
        of_class = of_class.take(standing)
        members = tuple(item.element for item in planned.elements)
        for class_check in planned.class_checks:
            found, left_out = contained_class_evaluation(class_check, of_class, members)
            must_pass = counts(class_check, criteria)
            load = class_check.carries_load
            note = "" if must_pass else DOES_NOT_COUNT
            note = "; ".join(filter(None, (note, HARDENED if rest.paths else "")))
            rows.append(
                _row(found, left_out, unresolved, standing, load, must_pass, criteria, note)
            )
    return rows


def _row(
    found: Contained,
    left_out: Array,
    unresolved: Array,
    standing: Array,
    carries_load: bool,
    must_pass: bool,
    criteria: Criteria,
    note: str = NO_REASON,
) -> CheckRow:
    """A check that was made where there is an equilibrium, over all sections, with a
    note where there is no other reason to give."""
    count = unresolved.size
    demand, capacity = np.full((2, count), np.nan)
    demand[standing], capacity[standing] = found.values
    reason = unresolved.copy()
    reason[standing] = found.reason
    reason[reason == NO_REASON] = note
    counting = np.full(count, must_pass)
    counting[standing] &= ~left_out
    if carries_load:
        judged = load_check(demand, capacity, criteria.factor_of_safety)
    else:
        judged = rule_check(demand, capacity)
    return CheckRow(demand, capacity, *judged, counting, reason)


def _least(installed: Array, count: int) -> Array:
    """(n,) least over the elements; NaN for a class without elements."""
    return np.min(installed, axis=0) if len(installed) else np.full(count, np.nan)
