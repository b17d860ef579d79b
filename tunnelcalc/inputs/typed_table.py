"""Gives the text of a table its meaning: known columns, numbers in range, choices."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping, Sequence
from dataclasses import dataclass, field

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.chainage import FORMS, ChainageError, Notation
from tunnelcalc.errors import InputError, Problems, Where
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.table_path import path_and_sheet, suffix_of
from tunnelcalc.plugin.contract import SheetReader
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.text import as_number, number_fix, quoted, suggestion
from tunnelcalc.vocabulary import GROUND, Limits, Quantity, Sort, ground_quantity

CHAINAGE = Limits(-1e7, 1e7)
GROUND_UNIT = "ground_unit"
JOINT = ";"
"""Joins names in a cell of an output table."""


@dataclass(slots=True)
class TypedTable:
    """Columns of a ground or units table.

    `numbers[name]` is (r,), NaN where the cell is empty; `texts[name]` is (r,) of text, empty
    where the cell is. Rows that could not be read are NaN or empty, with a problem told.
    """

    raw: RawTable
    problems: Problems
    numbers: dict[str, Array] = field(default_factory=dict)
    texts: dict[str, Array] = field(default_factory=dict)
    wrong: dict[str, Array] = field(default_factory=dict)
    """Mask (r,) of the cells of a column about which a problem was told."""

    def wrong_in(self, name: str) -> Array:
        """Mask (r,): these cells are told already, and not missing."""
        return self.wrong.get(name, np.zeros(self.rows, dtype=bool))

    @property
    def rows(self) -> int:
        return len(self.raw.lines)

    def has(self, name: str) -> bool:
        return name in self.numbers or name in self.texts

    def place(self, row: int, name: str | None = None) -> Where:
        """Where a row, or its cell of one column, stands."""
        if name is None or name not in self.raw.header:
            return self.raw.row(row)
        return self.raw.place(row, self.raw.header.index(name))


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
            table.texts[name] = _texts(table, column, context)
        elif name in numbers:
            table.numbers[name] = _chainages(table, column, notation, context)
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
            table.texts[name] = _choices(table, column, quantity, context)
        else:
            table.numbers[name] = _numbers(table, column, quantity.limits, quantity.unit, context)
    return table


def typed_columns(
    raw: RawTable,
    problems: Problems,
    numbers: Mapping[str, Limits],
    unit: str,
    texts: Sequence[str],
    *,
    required: Sequence[str],
    chainages: Sequence[str] = (),
    notation: Notation | None = None,
) -> TypedTable:
    """Read every cell of a table that has these columns and no others.

    `numbers` are in `unit`; `chainages` are written in `notation`.
    """
    table = TypedTable(raw, problems)
    known = (*chainages, *numbers, *texts)
    for column, name in enumerate(raw.header):
        if table.has(name):
            _about_header(table, column, "stands twice", "keep one of the two")
        elif name in texts:
            table.texts[name] = _texts(table, column, _nowhere)
        elif name in chainages:
            table.numbers[name] = _chainages(table, column, notation or Notation(), _nowhere)
        elif name in numbers:
            table.numbers[name] = _numbers(table, column, numbers[name], unit, _nowhere)
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


def _chainages(
    table: TypedTable, column: int, notation: Notation, context: Callable[[int], str]
) -> Array:
    """Axis metres; plain numbers in bulk, anything else one by one."""
    cells = table.raw.columns[column]
    if notation.is_plain and not any("+" in cell for cell in cells):
        return _numbers(table, column, CHAINAGE, "m", context)
    values = np.full(len(cells), np.nan)
    wrong = np.zeros(len(cells), dtype=bool)
    for row, cell in enumerate(cells):
        if cell == "":
            continue
        try:
            values[row] = notation.axis_m(cell)
        except ChainageError as error:
            wrong[row] = True
            table.problems.add(
                table.raw.place(row, column),
                f"holds {quoted(table.raw.written(row, column))}, which {error}",
                name=f"column {quoted(table.raw.header[column])}",
                allowed=FORMS,
                context=context(row),
                fix="write a chainage of this alignment",
            )
    table.wrong[table.raw.header[column]] = wrong
    return values


def _about_header(table: TypedTable, column: int, message: str, fix: str) -> None:
    name = f"column {quoted(table.raw.header[column])}"
    table.problems.add(table.raw.head(column), message, name=name, fix=fix)


def _numbers(
    table: TypedTable, column: int, limits: Limits, unit: str, context: Callable[[int], str]
) -> Array:
    cells = table.raw.columns[column]
    values = np.array([_float(cell) for cell in cells], dtype=float)
    filled = np.array([cell != "" for cell in cells], dtype=bool)
    wrong = np.flatnonzero(filled & ~limits.contain(values))
    for row in wrong.tolist():
        text = cells[row]
        number = as_number(text)
        what = "not a number" if number is None else "out of range"
        table.problems.add(
            table.raw.place(row, column),
            f"holds {quoted(table.raw.written(row, column))}, which is {what}",
            name=f"column {quoted(table.raw.header[column])}",
            allowed=limits.describe(unit),
            context=context(row),
            fix=number_fix(text) if number is None else "correct the value, and check its unit",
        )
    values[wrong] = np.nan
    told = _told(table.raw, column)
    values[told] = np.nan
    table.wrong[table.raw.header[column]] = (filled & np.isnan(values)) | told
    return values


def _told(raw: RawTable, column: int) -> Array:
    """Mask (r,) of the cells about which the reader of the file has said all."""
    if not raw.told:
        return np.zeros(len(raw.lines), dtype=bool)
    number = raw.number_of(column)
    return np.array([(line, number) in raw.told for line in raw.lines], dtype=bool)


def _float(cell: str) -> float:
    """Fast for what is nearly always a plain number; NaN for anything else."""
    try:
        value = float(cell)
    except ValueError:
        return np.nan
    return value if "_" not in cell and cell.isascii() else np.nan


def _texts(table: TypedTable, column: int, context: Callable[[int], str]) -> Array:
    cells = np.array(table.raw.columns[column], dtype=object)
    table.wrong[table.raw.header[column]] = _told(table.raw, column)
    of_unit = table.raw.header[column] == GROUND_UNIT
    for row, text in enumerate(cells.tolist()):
        if of_unit and JOINT in text:
            table.problems.add(
                table.raw.place(row, column),
                f"holds {quoted(text)}, with a semicolon",
                name=f'column "{GROUND_UNIT}"',
                allowed="text without a semicolon, which joins units in the schedule",
                context=context(row),
                fix="give the unit a name without it",
            )
        if not text.isprintable():
            table.problems.add(
                table.raw.place(row, column),
                f"holds {quoted(text)}, with control characters or line breaks",
                name=f"column {quoted(table.raw.header[column])}",
                allowed="printable text in one line",
                context=context(row),
                fix="write plain text",
            )
    return cells


def _choices(
    table: TypedTable, column: int, quantity: Quantity, context: Callable[[int], str]
) -> Array:
    cells = np.array(table.raw.columns[column], dtype=object)
    allowed = ("", *quantity.choices)
    for row, text in enumerate(cells.tolist()):
        if text not in allowed:
            table.problems.add(
                table.raw.place(row, column),
                f"holds {quoted(text)}",
                name=f'column "{quantity.name}"',
                allowed=quantity.allowed(),
                context=context(row),
                fix="write one of the allowed words, or leave the cell empty",
            )
    return cells
