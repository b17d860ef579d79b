"""Tells which required values an interval lacks: there is no default for any of them."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.estimates import observations_of
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.merging import Merged
from tunnelcalc.vocabulary import GROUND, UNIT_SUFFIXES

REQUIRED = ("gsi", "mi", "disturbance", "poisson_ratio", "intact_strength_mpa")
STRESS = "the in-situ stress"
STRESS_SOURCES = ("vertical_stress_mpa", "cover_m", "unit_weight_kn_m3")
STRESS_RULE = "vertical_stress_mpa, or cover_m with unit_weight_kn_m3"


def check_complete(found: Merged, intervals: Intervals, cover_from_levels: bool) -> None:
    """Tell each missing value, or once a column that nobody gives."""
    for name in REQUIRED:
        absent = np.isnan(found.numbers[name])
        given = intervals.has(name) or not np.all(absent & ~intervals.told((name,)))
        _tell(intervals, name, given, absent & ~intervals.told((name, *observations_of(name))))
    measured, cover, weight = STRESS_SOURCES
    depth = found.numbers[cover] if not cover_from_levels else np.zeros(found.count)
    absent = np.isnan(found.numbers[measured]) & np.isnan(depth * found.numbers[weight])
    given = intervals.has(measured) or (
        intervals.has(weight) and (cover_from_levels or intervals.has(cover))
    )
    _tell(intervals, STRESS, given, absent & ~intervals.told(STRESS_SOURCES))


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
