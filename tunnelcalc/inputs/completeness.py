"""Tells which required values an interval lacks: there is no default for any of them."""

from __future__ import annotations

from collections.abc import Iterable

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.estimates import observations_of
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.merging import Merged, Origin
from tunnelcalc.inputs.method_choices import Requirement
from tunnelcalc.vocabulary import GROUND, UNIT_SUFFIXES

STRESS = "the in-situ stress"
STRESS_SOURCES = ("vertical_stress_mpa", "cover_m", "unit_weight_kn_m3")
STRESS_RULE = "vertical_stress_mpa, or cover_m with unit_weight_kn_m3"


def check_complete(
    found: Merged,
    intervals: Intervals,
    cover_from_levels: bool,
    requirements: Iterable[Requirement],
) -> None:
    """Tell each missing value, or once a column that nobody gives; then values that are outside
    the range of the method that needs them."""
    needed: dict[str, Array] = {}
    asked = list(requirements)
    for requirement in asked:
        before = needed.get(requirement.column, np.zeros(found.count, dtype=bool))
        needed[requirement.column] = before | requirement.rows
    for name, rows in needed.items():
        if not np.any(rows):
            continue
        absent = rows & np.isnan(found.numbers.get(name, np.full(found.count, np.nan)))
        given = intervals.has(name) or not np.all((absent & ~intervals.told((name,)))[rows])
        _tell(intervals, name, given, absent & ~intervals.told((name, *observations_of(name))))
    for requirement in asked:
        _tell_out_of_range(found, intervals, requirement)
    measured, cover, weight = STRESS_SOURCES
    depth = found.numbers[cover] if not cover_from_levels else np.zeros(found.count)
    absent = np.isnan(found.numbers[measured]) & np.isnan(depth * found.numbers[weight])
    given = intervals.has(measured) or (
        intervals.has(weight) and (cover_from_levels or intervals.has(cover))
    )
    _tell(intervals, STRESS, given, absent & ~intervals.told(STRESS_SOURCES))


def _tell_out_of_range(found: Merged, intervals: Intervals, asked: Requirement) -> None:
    """Tell it where the value stands: of a ground unit once, not in each interval."""
    values = found.numbers.get(asked.column)
    if values is None:
        return
    outside = asked.rows & ~np.isnan(values) & ~asked.limits.contain(values)
    told: set[tuple[str, int | None, int | None]] = set()
    for row in np.flatnonzero(outside & ~intervals.told((asked.column,))).tolist():
        of_unit = bool(found.origins[asked.column][row] == Origin.UNIT)
        where, context = intervals.source(row, asked.column, of_unit)
        key = (where.file, where.line, where.column)
        if key in told:
            continue
        told.add(key)
        intervals.problems.add(
            where,
            f"is {values[row]:g}, outside the range of the method {asked.method}",
            name=f'column "{asked.column}"',
            allowed=asked.limits.describe(GROUND[asked.column].unit),
            context=context,
            fix="correct the value, or choose another method for this ground unit",
        )


def _tell(intervals: Intervals, name: str, given: bool, absent: Array) -> None:
    quantity = GROUND.get(name)
    allowed = quantity.allowed() if quantity else STRESS_RULE
    label = f'column "{name}"' if quantity else name
    units = intervals.units
    if not given and np.any(absent):
        neither = f"is missing: neither {intervals.files} gives it"
        intervals.problems.add(
            intervals.table.raw.head(),
            neither if units else "is missing",
            name=label,
            allowed=allowed,
            fix=_of_statistics(intervals, name) or "add the column; there is no default",
        )
        return
    for row in np.flatnonzero(absent).tolist():
        intervals.problems.add(
            intervals.table.place(row, name),
            "has no value here" + (" and none for its ground unit" if units else ""),
            name=label,
            allowed=allowed,
            context=intervals.context(row),
            fix=_of_statistics(intervals, name) or "fill it in; there is no default",
        )


def _of_statistics(intervals: Intervals, name: str) -> str:
    """What to do where the units table says something of a quantity, but gives no value."""
    units = intervals.units
    said = [name + s for s in UNIT_SUFFIXES if units is not None and units.has(name + s)]
    if units is None or not said:
        return ""
    return (
        f"{units.raw.name} has {', '.join(said)}: choose the set under ground: values, and fill in "
        "all that its rule needs"
    )


WEAKER = (
    ("residual_gsi", "gsi"),
    ("residual_mb", "mb"),
    ("residual_s", "s"),
    ("residual_cohesion_mpa", "cohesion_mpa"),
    ("residual_friction_angle_deg", "friction_angle_deg"),
)
"""Residual quantities that must not be above what they are the residue of."""


def check_residual(found: Merged, intervals: Intervals) -> None:
    """Tell residual strength above the peak."""
    for name, peak in WEAKER:
        if name not in found.numbers or peak not in found.numbers:
            continue
        above = found.numbers[name] > found.numbers[peak]
        for row in np.flatnonzero(above & ~intervals.told((name, peak))).tolist():
            of_unit = bool(found.origins[name][row] == Origin.UNIT)
            where, context = intervals.source(row, name, of_unit)
            intervals.problems.add(
                where,
                f"is {found.numbers[name][row]:g}, above {peak}, {found.numbers[peak][row]:g}",
                name=f'column "{name}"',
                allowed=f"at most {peak}",
                context=context,
                fix="correct one of the two",
            )
