"""Stages from the ground's reaction to the support class that each section requires."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.class_evaluation import CheckRow, ClassRow, Evaluated, evaluate_class
from tunnelcalc.pipeline.dispatch import ChosenSteps, curves
from tunnelcalc.pipeline.plan import PlannedClass, check_lines
from tunnelcalc.pipeline.resting_state import PressureTables
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.pipeline.stress_cases import (
    LARGER,
    MEAN,
    LargerStress,
    larger_column,
    larger_stress,
    with_limit_pressure,
)
from tunnelcalc.project import Criteria
from tunnelcalc.results import CheckLine
from tunnelcalc.schedule.selection import NONE_ADEQUATE, required_classes
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import Outcome

CLASS_COLUMNS = (
    "installation_closure_mm",
    "class_support_pressure_mpa",
    "class_closure_mm",
    "class_closure_pct",
    "class_plastic_radius_m",
    "class_factor_of_safety",
    "class_governing",
    "class_adequate",
    "class_first_failure_pressure_mpa",
    "class_first_failure_closure_mm",
    "class_full_pressure_mpa",
    "class_full_closure_mm",
    "class_missing_pressure_mpa",
    "class_capacity_mpa",
)
"""Columns (n, c): one value a section and support class, in the order of `ClassRow`."""

CHECK_COLUMNS = (
    "check_demand",
    "check_capacity",
    "check_factor_of_safety",
    "check_outcome",
    "check_counts",
    "check_reason",
)
"""Columns (n, k): one value a section and check line, in the order of `CheckRow`."""

STATE_WITHOUT_SUPPORT = ("closure_pct", "plastic_radius_m")
"""What is kept of the second run besides the classes: flags look at it."""

STRESS_CASE = "class_stress_case"
"""Column (n, c): number of the stress case that a class is told of."""


def failing_column(check: str) -> str:
    """Column (n,): whether some class fails a check of this name."""
    return f"fails_{check}"


def support_stage(plan: Sequence[PlannedClass], steps: ChosenSteps, criteria: Criteria) -> Stage:
    """Every class on every section: equilibrium, checks, adequacy."""
    lines = check_lines(plan)
    failing = tuple(dict.fromkeys(failing_column(line.check) for line in lines))

    def compute(sections: Sections) -> Mapping[str, Array]:
        curve = curves(steps.ground_reaction, sections)
        sections = with_limit_pressure(sections, curve, criteria)
        larger = larger_stress(steps.ground_reaction, sections, criteria)
        limit = np.array(sections["limit_pressure_mpa"])
        if larger.positions.size:
            more = larger.sections["limit_pressure_mpa"]
            limit[larger.positions] = np.maximum(limit[larger.positions], more)
        tables = PressureTables()
        rows: list[ClassRow] = []
        checks: list[CheckRow] = []
        failed: list[Array] = []
        cases: list[Array] = []
        for planned in plan:
            found = evaluate_class(planned, curve, steps, sections, criteria, tables)
            row, of_class, case = found.row, found.checks, np.full(sections.count, MEAN)
            fails = [check.outcome == Outcome.FAIL for check in of_class]
            if larger.positions.size:
                other = evaluate_class(
                    planned, larger.curve, steps, larger.sections, criteria, tables
                )
                row, of_class, case = _heavier(found, other, larger.positions)
                for own, check in zip(fails, other.checks, strict=True):
                    own[larger.positions] |= check.outcome == Outcome.FAIL
            rows.append(row)
            checks.extend(of_class)
            failed.extend(fails)
            cases.append(case)
        return {
            **_side_by_side(CLASS_COLUMNS, rows, sections.count),
            **_side_by_side(CHECK_COLUMNS, checks, sections.count),
            **_side_by_side((STRESS_CASE,), [(case,) for case in cases], sections.count),
            **_failing(lines, failed, sections.count),
            "dead_weight_not_required": np.full(
                sections.count, "crown_dead_weight" not in criteria.chosen_checks
            ),
            "profile_plastic_limit": _profile_limit(steps, sections),
            "limit_pressure_mpa": limit,
            **_larger_state(larger, sections.count),
        }

    own = (
        "radius_m",
        "closure_mm",
        "plastic_radius_m",
        "critical_pressure_mpa",
        "larger_stress_mpa",
        "lining_water_mpa",
    )
    needs = (*steps.ground_reaction.needs, *steps.closure_profile.needs, *own)
    return Stage(
        "support",
        "each class on each section: closure at installation by "
        f"{steps.closure_profile.names}, equilibrium, checks by plugins, adequacy; where stresses "
        "are far from equal, once more with the larger one, and both must pass",
        tuple(dict.fromkeys(needs)),
        (
            *CLASS_COLUMNS,
            *CHECK_COLUMNS,
            STRESS_CASE,
            *failing,
            "dead_weight_not_required",
            "profile_plastic_limit",
            "limit_pressure_mpa",
            *(larger_column(name) for name in STATE_WITHOUT_SUPPORT),
        ),
        compute,
    )


def _heavier(
    mean: Evaluated, larger: Evaluated, positions: Array
) -> tuple[ClassRow, tuple[CheckRow, ...], Array]:
    """Of two stress cases, on each section the one that asks more of the class.

    A class must be adequate in both. What is told of it comes from one case alone, so that its
    numbers belong together: the one in which it is not adequate; else the lower factor; else the
    larger closure.
    """
    first = [column[positions] for column in mean.row]
    before, after = ClassRow(*first), larger.row
    worse = before.adequate & ~after.adequate
    alike = before.adequate == after.adequate
    one, two = (
        np.where(np.isnan(row.factor_of_safety), np.inf, row.factor_of_safety)
        for row in (before, after)
    )
    # NaN, a closure that could not be computed, asks most.
    moves_more = ~(after.closure_pct <= before.closure_pct)
    worse |= alike & ((two < one) | ((two == one) & moves_more))
    chosen, taken = positions[worse], np.flatnonzero(worse)
    row = ClassRow(*(_replaced(a, b, chosen, taken) for a, b in zip(mean.row, after, strict=True)))
    checks = tuple(
        CheckRow(*(_replaced(a, b, chosen, taken) for a, b in zip(one_, two_, strict=True)))
        for one_, two_ in zip(mean.checks, larger.checks, strict=True)
    )
    case = np.full(mean.row.adequate.size, MEAN)
    case[chosen] = LARGER
    return row, checks, case


def _replaced(values: Array, others: Array, positions: Array, taken: Array) -> Array:
    mended = values.copy()
    mended[positions] = others[taken]
    return mended


def _failing(lines: Sequence[CheckLine], failed: Sequence[Array], count: int) -> dict[str, Array]:
    """By name of the check, whether it fails in some class and some stress case."""
    found: dict[str, Array] = {}
    for line, fails in zip(lines, failed, strict=True):
        name = failing_column(line.check)
        found[name] = found.get(name, np.zeros(count, dtype=bool)) | fails
    return found


def _larger_state(larger: LargerStress, count: int) -> dict[str, Array]:
    """The opening without support under the larger stress, NaN where it is not run."""
    found = {}
    for name in STATE_WITHOUT_SUPPORT:
        column = np.full(count, np.nan)
        if larger.positions.size:
            column[larger.positions] = larger.sections[name]
        found[larger_column(name)] = column
    return found


def _profile_limit(steps: ChosenSteps, sections: Sections) -> Array:
    """(n,) Rp / R up to which each section's closure profile holds."""
    limit = np.empty(sections.count)
    for method, positions in steps.closure_profile.positions(sections):
        limit[positions] = method.largest_plastic_ratio
    return limit


def choice_stage() -> Stage:
    """The first class that meets every criterion; where none does, the pressure needed."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        required = required_classes(sections["class_adequate"])
        none = required == NONE_ADEQUATE
        needed = np.where(none, sections["limit_pressure_mpa"], np.nan)
        return {"required_class": required, "needed_pressure_mpa": needed}

    return Stage(
        "choice",
        "first listed class that meets every criterion, else the pressure that the closure limit "
        "would need",
        ("class_adequate", "limit_pressure_mpa"),
        ("required_class", "needed_pressure_mpa"),
        compute,
    )


def _side_by_side(
    names: Sequence[str], rows: Sequence[Sequence[Array]], count: int
) -> dict[str, Array]:
    if not rows:
        return {name: np.empty((count, 0)) for name in names}
    columns = zip(*rows, strict=True)
    return {name: np.stack(column, axis=1) for name, column in zip(names, columns, strict=True)}
