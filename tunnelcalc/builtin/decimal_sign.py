"""The decimal sign of a table, which nobody states: found from its cells, refused where unclear.

A cell takes part if it is wholly a number with one point or comma. Such a number in a column of
names takes part too: whoever reads a table learns only later what its columns mean.
"""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import replace

from tunnelcalc.errors import Problems
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.text import DECIMAL, quoted

_MAYBE_THOUSANDS = re.compile(r"[+-]?[1-9]\d{0,2}[.,]\d{3}", re.ASCII)
_WORDS = {".": "decimal point", ",": "decimal comma"}

Found = dict[int, set[str]]
"""By column, the different cells that have one sign."""


def with_decimal_points(table: RawTable, problems: Problems) -> RawTable:
    """The table with points in its numbers, or problems where the sign cannot be told."""
    found: dict[str, Found] = {sign: _with_sign(table.columns, sign) for sign in _WORDS}
    if all(found.values()):
        _tell_mixed(table, found, problems)
        return table
    sign = "," if found[","] else "."
    of_sign = found[sign]
    if of_sign and all(_MAYBE_THOUSANDS.fullmatch(c) for cells in of_sign.values() for c in cells):
        _tell_unclear(table, of_sign, sign, problems)
        return table
    if sign == ".":
        return table
    columns = tuple(
        _pointed(column, of_sign[number]) if number in of_sign else column
        for number, column in enumerate(table.columns)
    )
    return replace(table, columns=columns, decimal_sign=",")


def _with_sign(columns: Sequence[Sequence[str]], sign: str) -> Found:
    found = {}
    for number, column in enumerate(columns):
        # The different cells are far fewer than the cells, as a rule.
        cells = {cell for cell in set(column) if sign in cell and DECIMAL.fullmatch(cell)}
        if cells:
            found[number] = cells
    return found


def _pointed(column: Sequence[str], cells: set[str]) -> list[str]:
    points = {cell: cell.replace(",", ".") for cell in cells}
    return [points.get(cell, cell) for cell in column]


def _tell_mixed(table: RawTable, found: dict[str, Found], problems: Problems) -> None:
    """One problem for each column that has the rarer sign, at its first cell."""
    sizes = {
        sign: sum(cell in cells for n, cells in of_sign.items() for cell in table.columns[n])
        for sign, of_sign in found.items()
    }
    rare, usual = sorted(_WORDS, key=lambda sign: (sizes[sign], sign == ","))
    number, cells = next(iter(found[usual].items()))
    example = next(cell for cell in table.columns[number] if cell in cells)
    for column, cells in found[rare].items():
        rows = [row for row, cell in enumerate(table.columns[column]) if cell in cells]
        text = table.columns[column][rows[0]]
        more = len(rows) - 1
        cells_more = f"{more} more cell{'' if more == 1 else 's'} of the column"
        others = f", as in {cells_more}" if more else ""
        problems.add(
            table.place(rows[0], column),
            f"holds {quoted(text)}, with a {_WORDS[rare]}{others}; the table also has a "
            f"{_WORDS[usual]}, in {quoted(example)}",
            name=f"column {quoted(table.header[column])}",
            allowed="one decimal sign in the whole table",
            fix=f"write {quoted(text.replace(rare, usual))}, if it is a number; "
            "write names that look like numbers otherwise",
        )


def _tell_unclear(table: RawTable, found: Found, sign: str, problems: Problems) -> None:
    for column, cells in found.items():
        row = next(row for row, cell in enumerate(table.columns[column]) if cell in cells)
        text = table.columns[column][row]
        problems.add(
            table.place(row, column),
            f"holds {quoted(text)}: nothing in the table shows whether the "
            f"{_WORDS[sign].removeprefix('decimal ')} separates thousands or decimals",
            name=f"column {quoted(table.header[column])}",
            allowed="numbers without thousands separators",
            fix=f"write {text.replace(sign, '')}, or {text}0 with a fourth decimal, "
            "whichever is meant",
        )
