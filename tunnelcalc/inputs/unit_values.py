"""The value of each quantity of a ground unit: as stated, most probable, or cautious.

A units table may give, beside NAME, NAME_mean, NAME_sd and NAME_tests (number of tests),
NAME_probable, and NAME_cautious. The project says which is used, and by which rule a cautious
value follows from statistics where none is entered.
"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.table_columns import TypedTable
from tunnelcalc.rock_mass.characteristic import (
    CautiousSide,
    cautious_by_half_deviation,
    cautious_fractile,
    cautious_mean,
)
from tunnelcalc.vocabulary import GROUND, Sort

STATED, PROBABLE, CAUTIOUS = "stated", "probable", "cautious"
VALUE_SETS = (STATED, PROBABLE, CAUTIOUS)
NOMINAL, MEAN_95, FRACTILE_5, HALF_DEVIATION = "nominal", "mean_95", "fractile_5", "half_deviation"
RULES = (NOMINAL, MEAN_95, FRACTILE_5, HALF_DEVIATION)
CAUTIOUS_IF_HIGH = (
    "unit_weight_kn_m3",
    "disturbance",
    "cover_m",
    "vertical_stress_mpa",
    "water_head_m",
    "block_width_m",
    "a",
    "residual_a",
    "disturbed_thickness_m",
)
"""Quantities whose cautious value is a high one; of all others it is a low one."""


@dataclass(slots=True)
class UnitValues:
    """By quantity, the value (u,) of each unit, NaN where there is none, and its rule (u,)."""

    numbers: dict[str, Array] = field(default_factory=dict)
    rules: dict[str, Array] = field(default_factory=dict)
    without_cautious: list[str] = field(default_factory=list)
    uses_deviations: bool = False


def unit_values(units: TypedTable, chosen: str, rule: str) -> UnitValues:
    """Choose the values of a units table.

    `chosen` is one of VALUE_SETS, `rule` one of RULES. Where a unit has no value of the chosen
    set for a quantity, the stated one is used; an entered cautious value goes before one by a
    rule; quantities of which some unit has statistics but
    no cautious value come back in `without_cautious`.
    """
    found = UnitValues(uses_deviations=chosen == CAUTIOUS and rule != NOMINAL)
    plain = [name for name in units.numbers if name not in GROUND]
    for name in plain:
        found.numbers[name] = units.numbers[name]
        found.rules[name] = np.full(units.rows, "", dtype=object)
    for quantity in GROUND.values():
        name = quantity.name
        if quantity.sort is not Sort.NUMBER or not _stands(units, name):
            continue
        values = _column(units, name).copy()
        rules = np.full(units.rows, "", dtype=object)
        better, how = _of_set(units, name, chosen, rule)
        there = ~np.isnan(better)
        column = f"{name}_mean" if f"{name}_mean" in units.numbers else name
        for row in np.flatnonzero(there & ~quantity.limits.contain(better)).tolist():
            units.problems.add(
                units.place(row, column),
                f"gives the value {better[row]:.6g} ({how[row]}), which is out of range",
                name=f'column "{column}"',
                allowed=quantity.allowed(),
                fix="correct mean, deviation and number of tests, or enter a cautious value",
            )
        values[there] = better[there]
        rules[there] = how[there]
        found.numbers[name], found.rules[name] = values, rules
        uncertain = ~np.isnan(_column(units, name + "_sd"))
        if chosen == CAUTIOUS and np.any(uncertain & ~there):
            found.without_cautious.append(name)
    return found


def _stands(units: TypedTable, name: str) -> bool:
    suffixes = ("", "_mean", "_probable", "_cautious")
    return any(name + suffix in units.numbers for suffix in suffixes)


def _column(units: TypedTable, name: str) -> Array:
    return units.numbers.get(name, np.full(units.rows, np.nan))


def _of_set(units: TypedTable, name: str, chosen: str, rule: str) -> tuple[Array, Array]:
    """Values (u,) of the chosen set, NaN where there is none, and what they are called (u,)."""
    nothing = np.full(units.rows, np.nan)
    words = np.full(units.rows, "", dtype=object)
    if chosen == STATED:
        return nothing, words
    if chosen == PROBABLE:
        probable = _column(units, name + "_probable")
        mean = _column(units, name + "_mean")
        words[:] = "most probable"
        return np.where(np.isnan(probable), mean, probable), words
    entered = _column(units, name + "_cautious")
    words[:] = f"cautious, {NOMINAL}"
    if rule == NOMINAL:
        return entered, words
    by_rule = _by_rule(units, name, rule)
    words[np.isnan(entered)] = f"cautious, {rule}"
    return np.where(np.isnan(entered), by_rule, entered), words


def _by_rule(units: TypedTable, name: str, rule: str) -> Array:
    mean, deviation = _column(units, name + "_mean"), _column(units, name + "_sd")
    stated = _column(units, name)
    mean = np.where(np.isnan(mean), stated, mean)
    side = CautiousSide.HIGH if name in CAUTIOUS_IF_HIGH else CautiousSide.LOW
    if rule == HALF_DEVIATION:
        return cautious_by_half_deviation(mean, deviation, side)
    tests = _column(units, name + "_tests")
    if rule == FRACTILE_5:
        return cautious_fractile(mean, deviation, tests, side)
    return cautious_mean(mean, deviation, tests, side)
