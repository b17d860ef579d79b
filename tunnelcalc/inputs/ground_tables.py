"""Reads the tables that the `ground` part of a project names."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence

from tunnelcalc.inputs.aliases import read_aliases
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.headers import understood
from tunnelcalc.inputs.table_columns import CHAINAGE, TypedTable
from tunnelcalc.inputs.typed_table import open_table, typed
from tunnelcalc.inputs.values import Reader
from tunnelcalc.pipeline.flags_stage import WORSE_UNDER_LARGER_STRESS
from tunnelcalc.pipeline.stress_cases import larger_column
from tunnelcalc.pipeline.support_stages import (
    CHECK_COLUMNS,
    CLASS_COLUMNS,
    STRESS_CASE,
    failing_column,
)
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import DEFAULT_METHODS, method_column
from tunnelcalc.text import few, quoted, shown, suggestion
from tunnelcalc.vocabulary import GROUND, QUANTITIES, UNIT_SUFFIXES, WORDS

TABLE, UNITS = "table", "units"
"""Keys under which a project names its tables."""

OWN_COLUMNS = (
    *QUANTITIES,
    *CLASS_COLUMNS,
    *CHECK_COLUMNS,
    *WORDS,
    *("flag_level", "height_m", "lining_water_mpa", "water_left_out", "profile_plastic_limit"),
    *("finite_strain", *map(larger_column, WORSE_UNDER_LARGER_STRESS)),
    STRESS_CASE,
    *(f"{name}_spread" for name in GROUND),
    *(method_column(step) for step in DEFAULT_METHODS),
)
"""Names that a free column cannot have: the program fills them."""


def own_columns(registry: Registry) -> set[str]:
    """The same, with the names that follow from what is installed."""
    checks = (*registry.names("support_check"), *registry.names("class_check"))
    failing = (failing_column(check) for check in checks)
    return {*OWN_COLUMNS, *registry.names("validity_flag"), *failing}


def other_columns(reader: Reader, registry: Registry) -> Iterator[str]:
    """Names of the columns that the project wants to be carried along as they are."""
    taken = own_columns(registry)
    for where, name in reader.texts_of("other_columns"):
        if name not in taken:
            yield name
            continue
        reader.problems.add(
            where,
            f"names {quoted(name)}, a column of the program's own",
            name=reader.label("other_columns"),
            allowed="names that have no meaning to the program",
            fix="remove the entry, or give the column another name",
        )


def check_carried(
    reader: Reader, others: Sequence[str], tables: Sequence[TypedTable | None]
) -> None:
    """Tell columns that the project wants carried along and no table has."""
    found = [table.raw.header for table in tables if table is not None]
    headers = list(dict.fromkeys(name for header in found for name in header))
    for name in others:
        if headers and name not in headers:
            hint = suggestion(name, headers)
            reader.complain(
                "other_columns",
                f"names {quoted(name)}, a column that no table has",
                allowed=few(headers),
                fix=f"did you mean {quoted(hint)}?" if hint else "remove the entry",
            )


def read_table(
    reader: Reader,
    folder: ProjectFolder,
    registry: Registry,
    key: str,
    others: Sequence[str],
) -> TypedTable | None:
    """The table that `key` names; None, with a problem unless it is optional, without one."""
    is_units = key == UNITS
    aliases = read_aliases(reader)
    path = reader.text(key, "the path of a table", required=not is_units)
    if path is None:
        return None
    raw = open_table(folder, path, reader.place(key), reader.label(key), registry)
    if raw is None:
        return None
    ends = () if is_units else ("from_m", "to_m")
    own_units = dict.fromkeys(ends, "m") | {"ground_unit": ""}
    raw = understood(raw, aliases, own_units, others, reader.problems)
    _check_frame(reader, raw, ends or ("ground_unit",))
    numbers = dict.fromkeys(ends, CHAINAGE)
    context = _of_unit(raw) if is_units else _of_interval(raw)
    table = typed(raw, reader.problems, numbers, ("ground_unit",), others, context, reader.notation)
    if not is_units:
        _only_of_units(table)
    return table


def _only_of_units(table: TypedTable) -> None:
    """Statistics belong to a ground unit, not to an interval."""
    for column, name in enumerate(table.raw.header):
        statistic = name not in GROUND and name.endswith(UNIT_SUFFIXES)
        if statistic and table.numbers.pop(name, None) is not None:
            table.problems.add(
                table.raw.head(column),
                "belongs into the units table",
                name=f'column "{name}"',
                fix="move it there, or state the interval's own value",
            )


def _check_frame(reader: Reader, raw: RawTable, required: Sequence[str]) -> None:
    """Tell missing columns, and a table without rows."""
    for name in required:
        if name not in raw.header:
            hint = suggestion(name, raw.header)
            reader.problems.add(
                raw.head(),
                "is missing",
                name=f'column "{name}"',
                allowed="the columns " + ", ".join(required),
                fix=f"add it; the column {quoted(hint)} may be meant" if hint else "add it",
            )
    if not raw.lines and not raw.problems:
        reader.problems.add(
            raw.whole(), "has a header and no rows", fix="write one row an interval or unit"
        )


def _of_interval(raw: RawTable) -> Callable[[int], str]:
    if "from_m" not in raw.header or "to_m" not in raw.header:
        return lambda row: ""
    start, end = (raw.columns[raw.header.index(name)] for name in ("from_m", "to_m"))
    return lambda row: f"interval {shown(start[row])} to {shown(end[row])} m"


def _of_unit(raw: RawTable) -> Callable[[int], str]:
    if "ground_unit" not in raw.header:
        return lambda row: ""
    names = raw.columns[raw.header.index("ground_unit")]
    return lambda row: f"ground unit {quoted(names[row])}"
