"""Opens a table and gives its text a meaning: known columns, and what each holds."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence

from tunnelcalc.chainage import Notation
from tunnelcalc.errors import InputError, Problems, Where
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.table_columns import (
    TypedTable,
    chainages_of,
    choices_of,
    numbers_of,
    texts_of,
)
from tunnelcalc.inputs.table_path import path_and_sheet, suffix_of
from tunnelcalc.plugin.contract import SheetReader
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.text import quoted, suggestion
from tunnelcalc.vocabulary import GROUND, Limits, Sort, ground_quantity


def open_table(
    folder: ProjectFolder, path: str, named_at: Where, key: str, registry: Registry
) -> RawTable | None:
    """The text cells of a table, by the reader that knows its file ending.

    Of a file that holds several tables, the path may name one: `geology.xlsx#Intervals`.
    """
    problems = folder.problems
    path, sheet = path_and_sheet(path, registry)
    reader = registry.ground_reader(suffix_of(path))
    if reader is None:
        known = sorted({s for o in registry.of_sort("ground_reader") for s in o.thing.suffixes})
        problems.add(
            named_at,
            f"names {quoted(path)}, which no plugin can read",
            name=key,
            allowed="a file ending in " + " or ".join(known) if known else "",
            fix="save the table so" if known else "install a plugin that reads tables",
        )
        return None
    file = folder.read(path, named_at, key)
    if file is None:
        return None
    try:
        if sheet is not None and isinstance(reader, SheetReader):
            raw = reader.read_sheet(file.path, file.content, sheet)
        else:
            raw = reader.read(file.path, file.content)
        problems.found.extend(raw.problems)
        return raw
    except InputError as error:
        problems.found.extend(error.problems)
    except Exception as error:  # a stranger's reader may raise anything
        problems.add(
            Where(file.path),
            f"could not be read: the reader {reader.name} failed with {describe(error)}",
            fix="save the table as CSV, and report the fault to the maker of the plugin",
        )
    return None


def typed(
    raw: RawTable,
    problems: Problems,
    numbers: dict[str, Limits],
    texts: Sequence[str],
    carried: Iterable[str],
    context: Callable[[int], str],
    notation: Notation,
) -> TypedTable:
    """Read every cell of a ground or units table.

    Parameters
    ----------
    numbers, texts : columns that this table has besides the ground quantities; the numbers are
        chainages, written in `notation`.
    carried : columns that the project asks to be carried along as they are.
    context : words that help to find a row.
    """
    table = TypedTable(raw, problems)
    kept = set(carried)
    known = [*numbers, *texts, *GROUND]
    seen: dict[str, int] = {}
    unnamed = sum(name == "" for name in raw.header)
    if unnamed > 1:
        problems.add(
            raw.head(),
            f"has {unnamed} columns without a name",
            allowed="a name over every column",
            fix="begin the table with its header row, without a title above it",
        )
    for column, name in enumerate(raw.header):
        if name == "" and unnamed > 1:
            continue
        if name in seen:
            first = f"stands twice, first in column {raw.number_of(seen[name])}"
            _about_header(table, column, first, "keep one of the two")
            continue
        seen[name] = column
        quantity = ground_quantity(name)
        if name in texts or (name in kept and quantity is None and name not in numbers):
            table.texts[name] = texts_of(table, column, context)
        elif name in numbers:
            table.numbers[name] = chainages_of(table, column, notation, context)
        elif quantity is None:
            hint = suggestion(name, known)
            fix = (
                f'did you mean "{hint}"?'
                if hint
                else "say under ground: aliases what it means, carry it along under other_columns, "
                "or remove it"
            )
            if name == "":
                fix = "give the column a name, or remove it"
            _about_header(table, column, "is unknown", fix)
        elif quantity.sort is Sort.CHOICE:
            table.texts[name] = choices_of(table, column, quantity, context)
        else:
            table.numbers[name] = numbers_of(table, column, quantity.limits, quantity.unit, context)
    return table


def typed_columns(
    raw: RawTable,
    problems: Problems,
    numbers: Mapping[str, tuple[Limits, str]],
    texts: Sequence[str],
    *,
    required: Sequence[str],
    chainages: Sequence[str] = (),
    notation: Notation | None = None,
) -> TypedTable:
    """Read every cell of a table that has these columns and no others.

    `numbers` have limits and a unit each; `chainages` are written in `notation`.
    """
    table = TypedTable(raw, problems)
    known = (*chainages, *numbers, *texts)
    for column, name in enumerate(raw.header):
        if table.has(name):
            _about_header(table, column, "stands twice", "keep one of the two")
        elif name in texts:
            table.texts[name] = texts_of(table, column, _nowhere)
        elif name in chainages:
            table.numbers[name] = chainages_of(table, column, notation or Notation(), _nowhere)
        elif name in numbers:
            table.numbers[name] = numbers_of(table, column, *numbers[name], _nowhere)
        else:
            hint = suggestion(name, known)
            fix = f'did you mean "{hint}"?' if hint else "remove it"
            _about_header(table, column, "is unknown", fix)
    for name in required:
        if not table.has(name):
            problems.add(
                raw.head(),
                "is missing",
                name=f'column "{name}"',
                allowed="the columns " + ", ".join(known),
                fix="add it",
            )
    if not table.rows:
        problems.add(raw.whole(), "has a header and no rows", fix="write one row for each")
    return table


def _nowhere(row: int) -> str:
    return ""


def _about_header(table: TypedTable, column: int, message: str, fix: str) -> None:
    name = f"column {quoted(table.raw.header[column])}"
    table.problems.add(table.raw.head(column), message, name=name, fix=fix)
