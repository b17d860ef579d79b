"""The ground of a project: read, put together, completed, checked and cut into sections."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Where
from tunnelcalc.inputs import alignment
from tunnelcalc.inputs.completeness import check_complete
from tunnelcalc.inputs.estimates import (
    ESTIMATED,
    estimate,
    idle_observations,
    read_preferences,
)
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.ground_tables import TABLE, UNITS, check_carried, other_columns, read_table
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.laboratory_tests import read_tests
from tunnelcalc.inputs.level_tables import (
    TERRAIN,
    Levels,
    TunnelLevel,
    at_sections,
    check_reach,
    read_levels,
)
from tunnelcalc.inputs.merging import Merged, Origin, merged
from tunnelcalc.inputs.opening import Profile, check_profiles, limits_inside, profile_of
from tunnelcalc.inputs.typed_table import TypedTable
from tunnelcalc.inputs.unit_values import (
    CAUTIOUS,
    NOMINAL,
    RULES,
    STATED,
    VALUE_SETS,
    UnitValues,
    unit_values,
)
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Gap, UnitTests, ValueOrigin
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import (
    DEVIATION_SUFFIX,
    GROUND,
    UNIT_SUFFIXES,
    Limits,
    Sort,
    ground_quantity,
)

SECTION_LENGTH = Limits(10 * SAME_PLACE_M, 1e6)
ASSUMED = {"stress_ratio": 1.0, "dilation_deg": 0.0}
"""The only two physical values that the program takes by itself, each with a flag."""
FROM_LEVELS = ("cover_m", "water_head_m", "vertical_stress_mpa")
ALWAYS_WRITTEN = (*ASSUMED, "vertical_stress_mpa")


@dataclass(frozen=True, slots=True)
class Ground:
    """Sections by increasing chainage, the columns that are written, and what was noticed."""

    sections: Sections
    columns: tuple[str, ...]
    origins: tuple[ValueOrigin, ...]
    tests: tuple[UnitTests, ...]
    gaps: tuple[Gap, ...]
    warnings: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Opening:
    """The profiles, and the tunnel's level where it is stated."""

    profiles: tuple[Profile, ...]
    level: TunnelLevel | None
    has_axis: bool
    reader: Reader


def read_ground(
    reader: Reader, opening: Opening, folder: ProjectFolder, registry: Registry
) -> Ground | None:
    """Read the `ground` part of a project; None, with problems, where it cannot be used."""
    longest = reader.number("section_length_m", SECTION_LENGTH, "m", required=False)
    gaps = list(_gaps(reader))
    others = list(other_columns(reader, registry))
    chosen = reader.choice("values", VALUE_SETS, required=False) or STATED
    rule = reader.choice("cautious_rule", RULES, required=chosen == CAUTIOUS) or NOMINAL
    preferences = read_preferences(reader)
    table = read_table(reader, folder, registry, TABLE, others)
    units = read_table(reader, folder, registry, UNITS, others)
    values = None
    if units is not None and units.rows and units.has("ground_unit"):
        values = unit_values(units, chosen, rule)
    tests = read_tests(reader, folder, registry)
    weights = _unit_weights(units, values)
    levels = read_levels(reader, opening.level, opening.has_axis, weights, folder, registry)
    check_carried(reader, others, (table, units))
    reader.finish()
    if table is None or (values is None and reader.has(UNITS)):
        return None
    intervals = Intervals(table, units, reader.notation, reader.problems)
    intervals.check_order(gaps)
    found = merged(intervals, values)
    estimate(found, intervals, tests, preferences)
    check_complete(found, intervals, levels.terrain is not None)
    if opening.profiles and np.all(np.isfinite(intervals.from_m + intervals.to_m)):
        check_profiles(opening.profiles, intervals.from_m, intervals.to_m, opening.reader)
    if len(reader.problems) or not opening.profiles:
        return None
    cut = _cut(intervals, opening.profiles, longest, reader)
    if cut is None:
        return None
    return _ground(found, cut, opening, levels, tests, gaps, values, reader)


def _gaps(reader: Reader) -> Iterator[tuple[Gap, Where]]:
    for entry in reader.tables_of("gaps", required=False):
        start, end = entry.chainage("from_m"), entry.chainage("to_m")
        reason = entry.text("reason", "why there is no ground data")
        entry.finish()
        if start is None or end is None or reason is None:
            continue
        if end - start > SAME_PLACE_M:
            yield Gap(start, end, reason), entry.where
            continue
        entry.complain(
            "to_m",
            f"is {end:.10g}, not above from_m, which is {start:.10g}",
            fix="write the lower chainage as from_m",
        )


def _unit_weights(units: TypedTable | None, values: UnitValues | None) -> Mapping[str, float]:
    name = "unit_weight_kn_m3"
    if units is None or values is None or name not in values.numbers:
        return {}
    pairs = zip(units.texts["ground_unit"].tolist(), values.numbers[name].tolist(), strict=True)
    return {unit: weight for unit, weight in pairs if weight == weight}


def _cut(
    intervals: Intervals, profiles: Sequence[Profile], longest: float | None, reader: Reader
) -> alignment.Cut | None:
    """Sections, each with the row of its interval."""
    order = np.argsort(intervals.from_m, kind="stable")
    limits = np.array(list(limits_inside(profiles)))
    pieces = alignment.Cut(order, intervals.from_m[order], intervals.to_m[order])
    if limits.size:
        split = alignment.split_at(pieces.from_m, pieces.to_m, limits)
        pieces = alignment.Cut(order[split.interval], split.from_m, split.to_m)
    counts = alignment.section_counts(pieces.to_m - pieces.from_m, longest)
    if counts.sum() > alignment.MOST_SECTIONS:
        reader.problems.add(
            intervals.table.raw.whole(),
            f"gives {counts.sum()} sections",
            allowed=f"at most {alignment.MOST_SECTIONS}",
            fix="raise ground: section_length_m",
        )
        return None
    cut = alignment.cut_into_sections(pieces.from_m, pieces.to_m, longest)
    return alignment.Cut(pieces.interval[cut.interval], cut.from_m, cut.to_m)


def _ground(
    found: Merged,
    cut: alignment.Cut,
    opening: Opening,
    levels: Levels,
    tests: Mapping[str, UnitTests],
    gaps: Sequence[tuple[Gap, Where]],
    values: UnitValues | None,
    reader: Reader,
) -> Ground | None:
    rows = cut.interval
    middle = (cut.from_m + cut.to_m) / 2
    columns: dict[str, Array] = {"chainage_m": middle, "from_m": cut.from_m, "to_m": cut.to_m}
    columns |= {name: column[rows] for name, column in found.texts.items()}
    columns |= {name: column[rows] for name, column in found.numbers.items()}
    columns |= _profile_columns(opening.profiles, middle)
    origins = {name: codes[rows] for name, codes in found.origins.items()}
    check_reach(levels, middle, reader.problems, reader)
    _fill_from_levels(columns, origins, levels)
    _check_cover(columns, origins, reader)
    if len(reader.problems):
        return None
    for name, value in ASSUMED.items():
        absent = np.isnan(columns[name])
        columns[name.removesuffix("_deg") + "_assumed"] = absent
        columns[name] = np.where(absent, value, columns[name])
        origins[name] = np.where(absent, Origin.ASSUMED, origins[name])
    reached = {unit: t.result.greatest_confinement_mpa for unit, t in tests.items()}
    used = origins["mi"] == Origin.ESTIMATED
    confinement = [reached.get(unit, np.nan) for unit in columns["ground_unit"].tolist()]
    # Without tests nothing was missed: no confinement is beyond what they reached.
    columns["tested_confinement_mpa"] = np.where(used, np.array(confinement), np.inf)
    spreads = [columns[name + "_spread"] > 0 for name in ESTIMATED if name + "_spread" in columns]
    columns["estimates_differ"] = np.any([np.zeros(middle.shape, bool), *spreads], axis=0)
    for quantity in GROUND.values():
        # A column that no table gives takes no memory, and whoever needs it finds NaN.
        is_text = quantity.sort is Sort.CHOICE
        nothing = np.array("", dtype=object) if is_text else np.array(np.nan)
        columns.setdefault(quantity.name, np.broadcast_to(nothing, middle.shape))
    written = _written(found, origins)
    return Ground(
        Sections(columns),
        written,
        tuple(_origins(written, columns, origins, found.methods, rows)),
        tuple(tests.values()),
        tuple(sorted((gap for gap, _ in gaps), key=lambda gap: gap.from_m)),
        _warnings(found, columns, levels, values),
    )


def _profile_columns(profiles: Sequence[Profile], middle: Array) -> dict[str, Array]:
    number = profile_of(profiles, middle)
    names = np.array([profile.name for profile in profiles], dtype=object)
    return {
        "radius_m": np.array([profile.radius_m for profile in profiles])[number],
        "span_m": np.array([profile.span_m for profile in profiles])[number],
        "profile": names[number],
        "equivalent_radius": np.array([p.rule != "circle" for p in profiles])[number],
    }


def _fill_from_levels(columns: dict[str, Array], origins: dict[str, Array], levels: Levels) -> None:
    """A value that a table states goes before one that follows from levels."""
    if levels.tunnel is None:
        return
    derived = at_sections(
        levels, columns["chainage_m"], columns["radius_m"], columns["unit_weight_kn_m3"]
    )
    for name in FROM_LEVELS:
        values = getattr(derived, name)
        fill = np.isnan(columns[name]) & ~np.isnan(values)
        columns[name] = np.where(fill, values, columns[name])
        origins[name] = np.where(fill, Origin.LEVELS, origins[name])


def _check_cover(
    columns: Mapping[str, Array], origins: Mapping[str, Array], reader: Reader
) -> None:
    bare = (origins["cover_m"] == Origin.LEVELS) & (columns["cover_m"] < 0)
    for row in np.flatnonzero(bare).tolist():
        at = alignment.span(float(columns["from_m"][row]), float(columns["to_m"][row]))
        reader.complain(
            TERRAIN,
            f"lies {-columns['cover_m'][row]:.6g} m below the crown, section {at}",
            allowed="terrain at or above the crown",
            fix="correct the levels, or end the alignment at the portal",
        )


def _written(found: Merged, origins: Mapping[str, Array]) -> tuple[str, ...]:
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


def _origins(
    written: Sequence[str],
    columns: Mapping[str, Array],
    origins: Mapping[str, Array],
    methods: Mapping[str, Array],
    rows: Array,
) -> Iterator[ValueOrigin]:
    """Each value over the stretch on which it and its origin stay the same.

    What follows from levels changes with every section: only its origin is told.
    """
    for name in written:
        if name not in GROUND or name not in origins:
            continue
        codes = origins[name]
        values = np.where(codes == Origin.LEVELS, np.nan, columns[name])
        method = methods[name][rows] if name in methods else np.full(rows.size, "", dtype=object)
        new = np.ones(rows.size, dtype=bool)
        new[1:] = (codes[1:] != codes[:-1]) | (method[1:] != method[:-1])
        new[1:] |= (values[1:] != values[:-1]) & ~(np.isnan(values[1:]) & np.isnan(values[:-1]))
        new[1:] |= columns["from_m"][1:] - columns["to_m"][:-1] > SAME_PLACE_M
        starts = np.flatnonzero(new)
        lasts = np.append(starts[1:], rows.size) - 1
        for first, last in zip(starts.tolist(), lasts.tolist(), strict=True):
            if codes[first] == Origin.NOWHERE:
                continue
            yield ValueOrigin(
                name,
                float(columns["from_m"][first]),
                float(columns["to_m"][last]),
                float(values[first]),
                Origin(int(codes[first])).name.lower(),
                str(method[first]) if codes[first] in (Origin.UNIT, Origin.ESTIMATED) else "",
            )


def _warnings(
    found: Merged, columns: Mapping[str, Array], levels: Levels, values: UnitValues | None
) -> tuple[str, ...]:
    def unused(name: str) -> bool:
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
    if np.all(np.isnan(columns["water_head_m"])):
        warnings.append("no water_head_m is given: stresses and strength are total")
    elif levels.water is not None:
        warnings.append("water heads follow from the water table, but stresses are total")
    if values is not None and values.without_cautious:
        warnings.append(
            "no cautious value follows for some units, the stated one is used: "
            + ", ".join(values.without_cautious)
        )
    return tuple(warnings)
