"""What is told about the ground: which columns are written, where values came from, warnings."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.inputs.estimates import idle_observations, incomplete_pairs
from tunnelcalc.inputs.merging import Merged, Origin
from tunnelcalc.inputs.unit_values import UnitValues
from tunnelcalc.project import ValueOrigins
from tunnelcalc.vocabulary import (
    DEVIATION_SUFFIX,
    GROUND,
    UNIT_SUFFIXES,
    ground_quantity,
)

ALWAYS_WRITTEN = ("stress_ratio", "dilation_deg", "vertical_stress_mpa")
ORIGIN_WORDS = np.array([origin.name.lower() for origin in Origin], dtype=object)
WITH_METHOD = (Origin.UNIT, Origin.ESTIMATED)


def written_columns(found: Merged, origins: Mapping[str, Array]) -> tuple[str, ...]:
    """Columns of the ground in `sections.csv`, in the order of the vocabulary, free ones last."""
    there = {name for name, codes in origins.items() if np.any(codes != Origin.NOWHERE)} | set(
        found.texts
    )
    ordered = ["ground_unit"]
    for name in GROUND:
        for column in (name, name + DEVIATION_SUFFIX):
            if column in there or column in ALWAYS_WRITTEN:
                ordered.append(column)
    quantities = {name + suffix for name in GROUND for suffix in UNIT_SUFFIXES}
    spreads = {name for name in found.numbers if name.endswith("_spread")}
    free = [name for name in (*found.texts, *found.numbers) if name in there | spreads]
    return tuple(dict.fromkeys([*ordered, *(n for n in free if n not in quantities)]))


def value_origins(
    written: Sequence[str],
    columns: Mapping[str, Array],
    origins: Mapping[str, Array],
    methods: Mapping[str, Array],
    rows: Array,
    level_tables: Mapping[str, str],
) -> Iterator[ValueOrigins]:
    """By quantity, each value over the stretch on which it and its origin stay the same.

    What follows from levels changes with every section: its origin is told, and the tables
    that it follows from.
    """
    apart = columns["from_m"][1:] - columns["to_m"][:-1] > SAME_PLACE_M
    for name in written:
        if name not in GROUND or name not in origins:
            continue
        codes = origins[name]
        values = np.where(codes == Origin.LEVELS, np.nan, columns[name])
        method = methods[name][rows] if name in methods else np.full(rows.size, "", dtype=object)
        method = np.where(np.isin(codes, WITH_METHOD), method, "")
        method = np.where(codes == Origin.LEVELS, level_tables.get(name, ""), method)
        new = np.ones(rows.size, dtype=bool)
        new[1:] = (codes[1:] != codes[:-1]) | (method[1:] != method[:-1]) | apart
        new[1:] |= (values[1:] != values[:-1]) & ~(np.isnan(values[1:]) & np.isnan(values[:-1]))
        starts = np.flatnonzero(new)
        lasts = np.append(starts[1:], rows.size) - 1
        known = codes[starts] != Origin.NOWHERE
        starts, lasts = starts[known], lasts[known]
        yield ValueOrigins(
            name,
            columns["from_m"][starts],
            columns["to_m"][lasts],
            values[starts],
            ORIGIN_WORDS[codes[starts]],
            method[starts],
        )


def ground_warnings(
    found: Merged, columns: Mapping[str, Array], values: UnitValues | None, drainage: str
) -> tuple[str, ...]:
    """What a user should know about the ground although nothing is wrong with it."""

    def unused(name: str) -> bool:
        if values is not None and values.uses_deviations and name.endswith(DEVIATION_SUFFIX):
            return False
        quantity = ground_quantity(name)
        return quantity is not None and not quantity.used

    unused_names = {name for name in (*found.numbers, *found.texts) if unused(name)}
    given = {name for name, values in found.numbers.items() if not np.all(np.isnan(values))}
    idle = sorted(unused_names | idle_observations(given))
    warnings = []
    if idle:
        warnings.append(
            "read, checked and carried along, but not computed with: " + ", ".join(idle)
        )
    warnings += incomplete_pairs(found.numbers)
    if np.all(np.isnan(columns["water_head_m"])):
        warnings.append("no water_head_m is given: stresses and strength are total")
    elif not drainage:
        warnings.append(
            "water heads are given, but ground: drainage is not: stresses and strength are total"
        )
    if values is not None and values.without_cautious:
        warnings.append(
            "no cautious value follows for some units, the stated one is used: "
            + ", ".join(values.without_cautious)
        )
    return tuple(warnings)
