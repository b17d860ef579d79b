"""Reads levels along the alignment: terrain, tunnel, water table, layers."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from itertools import pairwise

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.inputs.alignment import span
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.table_columns import TypedTable
from tunnelcalc.inputs.typed_table import open_table, typed_columns
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.rock_mass.levels import Layer, Line, layered_stress_mpa
from tunnelcalc.text import few, quoted
from tunnelcalc.vocabulary import Limits

CHAINAGE, LEVEL, BASE, UNIT = "chainage_m", "level_m", "base_level_m", "ground_unit"
LEVELS = Limits(-12000, 9000)
AXIS, CROWN = "axis", "crown"
TERRAIN, WATER, LAYERS = "terrain", "water_table", "layers"
FOLLOWS_FROM: Mapping[str, tuple[str, ...]] = {
    "cover_m": (AXIS, TERRAIN),
    "water_head_m": (AXIS, WATER),
    "vertical_stress_mpa": (AXIS, TERRAIN, LAYERS),
}
"""Tables from which each quantity follows. The axis is `opening: axis`."""


@dataclass(frozen=True, slots=True)
class TunnelLevel:
    """The tunnel's level along the alignment; `level_of` says of axis or crown."""

    line: Line
    level_of: str
    table: str
    """path of the table that it was read from"""


@dataclass(frozen=True, slots=True)
class Levels:
    """What the levels of a project give, each None or empty where it is not stated."""

    tunnel: TunnelLevel | None
    terrain: Line | None
    water: Line | None
    layers: tuple[Layer, ...]
    tables: Mapping[str, str] = field(default_factory=dict)
    """paths of the tables from which each column of `AtSections` follows"""


@dataclass(frozen=True, slots=True)
class AtSections:
    """By section (n,), NaN where it does not follow: cover, water head over the axis [m], and
    vertical stress under the layers [MPa]."""

    cover_m: Array
    water_head_m: Array
    vertical_stress_mpa: Array


def read_tunnel_level(
    opening: Reader, folder: ProjectFolder, registry: Registry
) -> TunnelLevel | None:
    """`opening: axis: {table, level_of}`."""
    reader = opening.table_of("axis", required=False)
    if reader is None:
        return None
    level_of = reader.choice("level_of", (AXIS, CROWN))
    line = _line(reader, "table", folder, registry, required=True)
    reader.finish()
    if line is None or level_of is None:
        return None
    return TunnelLevel(line, level_of, reader.text("table") or "")


def read_levels(
    ground: Reader,
    tunnel: TunnelLevel | None,
    has_axis: bool,
    unit_weights: Mapping[str, float],
    folder: ProjectFolder,
    registry: Registry,
) -> Levels:
    """Terrain, water table and layers of the `ground` part; `has_axis`: the project states the
    tunnel's level, rightly or wrongly."""
    for key in (TERRAIN, WATER, LAYERS):
        if ground.has(key) and not has_axis:
            ground.complain(
                key,
                "has no use without the level of the tunnel",
                fix="add opening: axis: {table, level_of}",
            )
    terrain = _line(ground, TERRAIN, folder, registry)
    water = _line(ground, WATER, folder, registry)
    layers = _layers(ground, unit_weights, folder, registry)
    if layers and not ground.has(TERRAIN):
        ground.complain(LAYERS, "has no use without terrain", fix="add ground: terrain")
    read = {TERRAIN: terrain, WATER: water, LAYERS: layers}
    # A key whose table was read holds a path: asking again tells no problem twice.
    paths = {key: ground.text(key) or "" for key, lines in read.items() if lines}
    if tunnel is not None:
        paths[AXIS] = tunnel.table
    tables = {
        column: ", ".join(paths[key] for key in keys if key in paths)
        for column, keys in FOLLOWS_FROM.items()
    }
    return Levels(tunnel, terrain, water, layers, tables)


def at_sections(
    levels: Levels, chainage_m: Array, radius_m: Array, unit_weight: Array
) -> AtSections:
    """Interpolated at the middle of each section; `unit_weight` is NaN where unknown."""
    nothing = np.full(chainage_m.shape, np.nan)
    if levels.tunnel is None:
        return AtSections(nothing, nothing, nothing)
    level = levels.tunnel.line.at(chainage_m)
    axis = level if levels.tunnel.level_of == AXIS else level - radius_m
    terrain = nothing if levels.terrain is None else levels.terrain.at(chainage_m)
    water = nothing if levels.water is None else levels.water.at(chainage_m)
    stress = nothing
    if levels.layers:
        stress = layered_stress_mpa(levels.layers, terrain, axis, unit_weight, chainage_m)
    return AtSections(terrain - axis - radius_m, np.maximum(water - axis, 0), stress)


def check_reach(levels: Levels, chainage_m: Array, opening: Reader, ground: Reader) -> None:
    """Tell lines that end before the alignment does: nothing is extrapolated."""
    lines = [(ground, TERRAIN, levels.terrain), (ground, WATER, levels.water)]
    lines += [(ground, LAYERS, layer.base) for layer in levels.layers]
    lines += [(opening, AXIS, levels.tunnel.line if levels.tunnel else None)]
    for reader, name, line in lines:
        if line is None:
            continue
        outside = np.isnan(line.at(chainage_m))
        if np.any(outside):
            count, places = int(np.count_nonzero(outside)), chainage_m[outside]
            missed = f"the section at {places[0]:.10g} m"
            if count > 1:
                missed = f"{count} sections from {span(places[0], places[-1])}"
            reader.complain(
                name,
                f"reaches from {span(line.chainage_m[0], line.chainage_m[-1])}, not to {missed}",
                allowed="levels over the whole alignment: nothing is extrapolated",
                fix="add levels before the first and after the last section",
            )


def _line(
    reader: Reader,
    key: str,
    folder: ProjectFolder,
    registry: Registry,
    required: bool = False,
) -> Line | None:
    table = _table(reader, key, folder, registry, (LEVEL,), (), required)
    if table is None:
        return None
    return _in_order(table, np.arange(table.rows), LEVEL)


def _layers(
    reader: Reader, weights: Mapping[str, float], folder: ProjectFolder, registry: Registry
) -> tuple[Layer, ...]:
    table = _table(reader, LAYERS, folder, registry, (BASE,), (UNIT,), False)
    if table is None:
        return ()
    layers = []
    for unit in dict.fromkeys(table.texts[UNIT].tolist()):
        rows = np.flatnonzero(table.texts[UNIT] == unit)
        if unit not in weights:
            table.problems.add(
                table.place(int(rows[0]), UNIT),
                f"holds {quoted(unit)}, which has no unit weight in the units table",
                name=f'column "{UNIT}"',
                allowed=few(sorted(weights)) or "units of the units table",
                fix="give the unit a unit_weight_kn_m3 in the units table",
            )
            continue
        line = _in_order(table, rows, BASE)
        if line is not None:
            layers.append(Layer(weights[unit], line, unit))
    return tuple(layers) if _from_top(layers, table) else ()


def _from_top(layers: Sequence[Layer], table: TypedTable) -> bool:
    """Whether no base lies above one that is listed before it; else a problem is told."""
    for upper, lower in pairwise(layers):
        places = np.union1d(upper.base.chainage_m, lower.base.chainage_m)
        above = lower.base.at(places) - upper.base.at(places) > SAME_PLACE_M
        if np.any(above):
            table.problems.add(
                table.raw.whole(),
                f"has the base of {quoted(lower.unit)} above that of {quoted(upper.unit)}, which "
                "is listed before it",
                name=f'column "{BASE}"',
                allowed="layers from the top down, with bases that meet but do not cross",
                fix="sort the layers from the top down, or correct the levels",
            )
            return False
    return True


def _table(
    reader: Reader,
    key: str,
    folder: ProjectFolder,
    registry: Registry,
    levels: Sequence[str],
    texts: Sequence[str],
    required: bool,
) -> TypedTable | None:
    path = reader.text(key, "the path of a table", required=required)
    if path is None:
        return None
    raw = open_table(folder, path, reader.place(key), reader.label(key), registry)
    if raw is None:
        return None
    table = typed_columns(
        raw,
        reader.problems,
        dict.fromkeys(levels, (LEVELS, "m")),
        texts,
        required=(CHAINAGE, *levels, *texts),
        chainages=(CHAINAGE,),
        notation=reader.notation,
    )
    needed = (CHAINAGE, *levels, *texts)
    return table if table.rows and all(table.has(name) for name in needed) else None


def _in_order(table: TypedTable, rows: Array, level: str) -> Line | None:
    """The rows (r,) as a line; None, with a problem, where it is no line."""
    chainage, levels = table.numbers[CHAINAGE][rows], table.numbers[level][rows]
    for name, values in ((CHAINAGE, chainage), (level, levels)):
        for row in rows[np.isnan(values) & ~table.wrong_in(name)[rows]].tolist():
            table.problems.add(
                table.place(row, name), "is empty", name=f'column "{name}"', fix="fill it in"
            )
    if np.any(np.isnan(chainage) | np.isnan(levels)):
        return None
    order = np.argsort(chainage, kind="stable")
    chainage, levels = chainage[order], levels[order]
    twice = np.flatnonzero(np.diff(chainage) <= SAME_PLACE_M)
    for row in rows[order[twice + 1]].tolist():
        table.problems.add(
            table.place(row, CHAINAGE),
            f"holds {quoted(_cell(table, row))}, where a level stands already",
            name=f'column "{CHAINAGE}"',
            allowed="each place once",
            fix="remove one of the two rows",
        )
    if len(chainage) < 2:
        table.problems.add(
            table.raw.whole(), "has fewer than two levels", fix="add levels along the alignment"
        )
        return None
    return None if twice.size else Line(chainage, levels)


def _cell(table: TypedTable, row: int) -> str:
    """A chainage as it is written."""
    return table.raw.written(row, table.raw.header.index(CHAINAGE))
