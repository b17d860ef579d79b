"""Puts ground table and units table together, and keeps where each value came from."""

from __future__ import annotations

from dataclasses import dataclass, field
from enum import IntEnum

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.unit_values import UnitValues


class Origin(IntEnum):
    """Where a value came from."""

    NOWHERE = 0
    TABLE = 1
    UNIT = 2
    ESTIMATED = 3
    LEVELS = 4
    ASSUMED = 5


ALWAYS_THERE = (
    "cover_m",
    "unit_weight_kn_m3",
    "vertical_stress_mpa",
    "water_head_m",
    "stress_ratio",
    "dilation_deg",
    "mi",
    "rock_mass_modulus_mpa",
)
"""What may be completed although no table gives it, or is asked for by name."""


@dataclass(slots=True)
class Merged:
    """Values (i,) by interval: `numbers`, NaN where there is none, and `texts`.

    `origins[name]` (i,) says where each number came from, `methods[name]` (i,) by which method
    or rule, empty where it is as written.
    """

    count: int
    numbers: dict[str, Array] = field(default_factory=dict)
    texts: dict[str, Array] = field(default_factory=dict)
    origins: dict[str, Array] = field(default_factory=dict)
    methods: dict[str, Array] = field(default_factory=dict)

    def add(self, name: str, values: Array | None = None) -> None:
        """A column, without any value where none is given."""
        self.numbers[name] = np.full(self.count, np.nan) if values is None else values
        self.origins[name] = np.full(self.count, Origin.NOWHERE, dtype=np.int8)
        self.methods[name] = np.full(self.count, "", dtype=object)

    def put(self, name: str, rows: Array, values: Array, origin: Origin, method: str = "") -> None:
        """Set the values of some intervals (a mask (i,)); `values` is (i,)."""
        if name not in self.numbers:
            self.add(name)
        self.numbers[name][rows] = values[rows]
        self.origins[name][rows] = origin
        self.methods[name][rows] = method


def merged(intervals: Intervals, unit_values: UnitValues | None) -> Merged:
    """A cell of the ground table that is not empty, else the value of the ground unit."""
    found = Merged(intervals.count)
    table, row = intervals.table, intervals.unit_row
    of_units = {} if unit_values is None else unit_values.numbers
    for name in dict.fromkeys([*table.numbers, *of_units]):
        if name in ("from_m", "to_m"):
            continue
        found.add(name)
        if unit_values is not None and row is not None and name in of_units:
            values = np.where(row >= 0, of_units[name][row], np.nan)
            for rule in dict.fromkeys(unit_values.rules[name].tolist()):
                by_rule = (unit_values.rules[name][row] == rule) & ~np.isnan(values)
                found.put(name, by_rule, values, Origin.UNIT, rule)
        if name in table.numbers:
            own = table.numbers[name]
            found.put(name, ~np.isnan(own), own, Origin.TABLE)
    _merge_texts(found, intervals)
    _settle_intact_modulus(found, intervals)
    for name in ALWAYS_THERE:
        if name not in found.numbers:
            found.add(name)
    return found


def _merge_texts(found: Merged, intervals: Intervals) -> None:
    table, units, row = intervals.table, intervals.units, intervals.unit_row
    nothing = np.full(found.count, "", dtype=object)
    for name in dict.fromkeys([*table.texts, *(units.texts if units else ())]):
        values = table.texts.get(name, nothing).copy()
        of_unit = units.texts.get(name) if units else None
        if of_unit is not None and row is not None and name != "ground_unit":
            empty = (values == "") & (row >= 0)
            values[empty] = of_unit[row[empty]]
        found.texts[name] = values
    found.texts.setdefault("ground_unit", nothing)


def _settle_intact_modulus(found: Merged, intervals: Intervals) -> None:
    """Either the intact modulus or the modulus ratio; what the table says of one overrides what
    the unit says of the other."""
    pair = ("intact_modulus_mpa", "modulus_ratio")
    if not all(name in found.numbers for name in pair):
        return
    for table in (intervals.table, intervals.units):
        if table is None or not all(name in table.numbers for name in pair):
            continue
        both = ~np.isnan(table.numbers[pair[0]]) & ~np.isnan(table.numbers[pair[1]])
        for row in np.flatnonzero(both).tolist():
            intervals.problems.add(
                table.place(row, pair[1]),
                f"stands beside {pair[0]}",
                name=f'column "{pair[1]}"',
                allowed="one of the two in a row",
                fix="keep the one that was measured",
            )
    for name, other in (pair, pair[::-1]):
        own = found.origins[name] == Origin.TABLE
        found.put(other, own, np.full(found.count, np.nan), Origin.NOWHERE)
