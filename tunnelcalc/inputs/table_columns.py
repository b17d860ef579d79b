"""The columns of a table once their text has a meaning: numbers in range, chainages, choices."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.chainage import FORMS, ChainageError, Notation
from tunnelcalc.errors import Problems, Where
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.text import as_number, number_fix, quoted
from tunnelcalc.vocabulary import Limits, Quantity

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


def chainages_of(
    table: TypedTable, column: int, notation: Notation, context: Callable[[int], str]
) -> Array:
    """Axis metres; plain numbers in bulk, anything else one by one."""
    cells = table.raw.columns[column]
    if notation.is_plain and not any("+" in cell for cell in cells):
        return numbers_of(table, column, CHAINAGE, "m", context)
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


def numbers_of(
    table: TypedTable, column: int, limits: Limits, unit: str, context: Callable[[int], str]
) -> Array:
    """Numbers (r,) within limits, NaN where the cell is empty or wrong."""
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


def texts_of(table: TypedTable, column: int, context: Callable[[int], str]) -> Array:
    """Texts (r,) in one line."""
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


def choices_of(
    table: TypedTable, column: int, quantity: Quantity, context: Callable[[int], str]
) -> Array:
    """Words (r,) of those that a quantity allows, empty where the cell is."""
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
