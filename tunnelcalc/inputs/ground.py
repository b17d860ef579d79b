"""The ground of a project: read, put together, completed, checked and cut into sections."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, replace

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Where
from tunnelcalc.inputs import alignment
from tunnelcalc.inputs.completeness import check_complete, check_residual
from tunnelcalc.inputs.estimates import (
    ESTIMATED,
    estimate,
    read_preferences,
)
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.ground_tables import TABLE, UNITS, check_carried, other_columns, read_table
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.laboratory_tests import FROM_TESTS, read_tests
from tunnelcalc.inputs.level_tables import (
    TERRAIN,
    Levels,
    TunnelLevel,
    at_sections,
    check_reach,
    read_levels,
)
from tunnelcalc.inputs.merging import Merged, Origin, merged
from tunnelcalc.inputs.method_choices import MEASURED_MODULUS, ChosenMethods, Requirement
from tunnelcalc.inputs.opening import Profile, check_profiles, limits_inside, profile_of
from tunnelcalc.inputs.provenance import ground_warnings, value_origins, written_columns
from tunnelcalc.inputs.table_columns import TypedTable
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
from tunnelcalc.inputs.water import check_water
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import DRAINAGE, Gap, UnitTests, ValueOrigins, method_column
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import (
    GROUND,
    Limits,
    Sort,
)

SECTION_LENGTH = Limits(10 * SAME_PLACE_M, 1e6)
ASSUMED = {"stress_ratio": 1.0, "dilation_deg": 0.0}
"""The only two physical values that the program takes by itself, each with a flag."""
FROM_LEVELS = ("cover_m", "water_head_m", "vertical_stress_mpa")


@dataclass(frozen=True, slots=True)
class Ground:
    """Sections by increasing chainage, the columns that are written, and what was noticed."""

    sections: Sections
    columns: tuple[str, ...]
    origins: tuple[ValueOrigins, ...]
    tests: tuple[UnitTests, ...]
    gaps: tuple[Gap, ...]
    warnings: tuple[str, ...]
    drainage: str


@dataclass(frozen=True, slots=True)
class Opening:
    """The profiles, and the tunnel's level where it is stated."""

    profiles: tuple[Profile, ...]
    level: TunnelLevel | None
    has_axis: bool
    reader: Reader


def read_ground(
    reader: Reader,
    opening: Opening,
    folder: ProjectFolder,
    registry: Registry,
    methods: ChosenMethods | None,
    demands: Sequence[tuple[str, Limits, str]],
) -> Ground | None:
    """Read the `ground` part of a project; None, with problems, where it cannot be used.

    `demands` are columns that every interval must have, each with its range and who asks.
    """
    longest = reader.number("section_length_m", SECTION_LENGTH, "m", required=False)
    gaps = list(_gaps(reader))
    others = list(other_columns(reader, registry))
    chosen = reader.choice("values", VALUE_SETS, required=False) or STATED
    rule = reader.choice("cautious_rule", RULES, required=chosen == CAUTIOUS) or NOMINAL
    preferences = read_preferences(reader)
    drainage = reader.choice("drainage", DRAINAGE, required=False) or ""
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
    ground_units = found.texts["ground_unit"]
    for name in FROM_TESTS:
        intervals.tell_no_more(name, tests.told_of(ground_units))
    residual = {} if methods is None else {"residual_gsi": methods.needs_residual(ground_units)}
    estimate(found, intervals, tests, preferences, residual)
    check_complete(found, intervals, reader.has(TERRAIN), _asked(found, methods, demands))
    check_residual(found, intervals)
    ends = intervals.from_m + intervals.to_m
    if opening.profiles and ends.size and np.all(np.isfinite(ends)):
        check_profiles(opening.profiles, intervals.from_m, intervals.to_m, opening.reader)
    if len(reader.problems) or not opening.profiles:
        return None
    cut = _cut(intervals, opening.profiles, longest, reader)
    if cut is None:
        return None
    assert methods is not None
    ground = _ground(
        found, cut, opening, levels, tests.by_unit, gaps, values, intervals, reader, drainage
    )
    return None if ground is None else _with_methods(ground, methods, found)


def _asked(
    found: Merged, methods: ChosenMethods | None, demands: Sequence[tuple[str, Limits, str]]
) -> Iterator[Requirement]:
    """What methods and checks cannot do without."""
    if methods is not None:
        ground_units = found.texts["ground_unit"]
        methods.check_units(ground_units.tolist())
        yield from methods.requirements(ground_units, ~np.isnan(found.numbers[MEASURED_MODULUS]))
    for column, limits, name in demands:
        yield Requirement(column, limits, name, np.ones(found.count, dtype=bool))


def _with_methods(ground: Ground, methods: ChosenMethods, found: Merged) -> Ground:
    """Where a step has several methods, the number of each section's own; notes on values that
    no method reads."""
    units = ground.sections["ground_unit"]
    columns = {
        method_column(step): methods.numbers(step, units)
        for step, choice in methods.choices.items()
        if len(choice.names) > 1
    }
    idle = tuple(methods.idle_values(found.numbers, found.texts["ground_unit"]))
    return replace(
        ground,
        sections=ground.sections.with_columns(columns),
        warnings=(*ground.warnings, *idle),
    )


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
    intervals: Intervals,
    reader: Reader,
    drainage: str,
) -> Ground | None:
    rows = cut.interval
    middle = (cut.from_m + cut.to_m) / 2
    columns: dict[str, Array] = {"chainage_m": middle, "from_m": cut.from_m, "to_m": cut.to_m}
    columns |= {name: column[rows] for name, column in found.texts.items()}
    columns |= {name: column[rows] for name, column in found.numbers.items()}
    columns |= _profile_columns(opening.profiles, middle)
    origins = {name: codes[rows] for name, codes in found.origins.items()}
    check_reach(levels, middle, opening.reader, reader)
    _fill_from_levels(columns, origins, levels)
    _check_cover(columns, origins, reader)
    if drainage:
        check_water(columns, origins, intervals, rows, reader)
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
    written = written_columns(found, origins)
    return Ground(
        Sections(columns),
        written,
        tuple(value_origins(written, columns, origins, found.methods, rows, levels.tables)),
        tuple(tests.values()),
        tuple(sorted((gap for gap, _ in gaps), key=lambda gap: gap.from_m)),
        (
            *_notes(intervals),
            *_idle_tests(tests, found),
            *ground_warnings(found, columns, values, drainage),
        ),
        drainage,
    )


def _notes(intervals: Intervals) -> tuple[str, ...]:
    """What the readers of the tables want a user to know."""
    tables = [table for table in (intervals.table, intervals.units) if table is not None]
    return tuple(f"{table.raw.name}: {note}" for table in tables for note in table.raw.notes)


def _idle_tests(tests: Mapping[str, UnitTests], found: Merged) -> tuple[str, ...]:
    """Tests of a unit that no interval has: perhaps its name is misspelt."""
    idle = sorted(set(tests) - set(found.texts["ground_unit"].tolist()))
    what = f"laboratory tests of {', '.join(idle)} are not used: no interval has the unit"
    return (what,) if idle else ()


def _profile_columns(profiles: Sequence[Profile], middle: Array) -> dict[str, Array]:
    number = profile_of(profiles, middle)
    names = np.array([profile.name for profile in profiles], dtype=object)
    return {
        "radius_m": np.array([profile.radius_m for profile in profiles])[number],
        "span_m": np.array([profile.span_m for profile in profiles])[number],
        "profile": names[number],
        "height_m": np.array([profile.height_m for profile in profiles])[number],
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
    if np.any(bare):
        rows = np.flatnonzero(bare)
        deepest = -float(np.min(columns["cover_m"][rows]))
        first = alignment.span(float(columns["from_m"][rows[0]]), float(columns["to_m"][rows[0]]))
        reader.complain(
            TERRAIN,
            f"lies up to {deepest:.6g} m below the crown, in {rows.size} sections from {first} on",
            allowed="terrain at or above the crown",
            fix="correct the levels, or end the alignment at the portal",
        )
