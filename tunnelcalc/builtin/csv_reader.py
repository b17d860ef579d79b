"""Reads ground and units tables from text in the dialects of common spreadsheets.

UTF-8 with or without its mark, or UTF-16 with it; commas, semicolons or tabs between cells;
decimal commas where a comma does not separate cells.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc.builtin.decimal_sign import with_decimal_points
from tunnelcalc.builtin.table_shape import MOST_ROWS, shaped, tell_too_many_rows
from tunnelcalc.builtin.table_text import announced_separator, separator_of, text_of

LARGEST_BYTES = 64 * 1024 * 1024
"""Some 800 000 intervals. Cells take some ten times their text in memory."""

_WORDS = {",": "commas", ";": "semicolons", "\t": "tabs"}
_COMMA_FIX = "write decimal points, not commas, and put text with commas in quotes"


class CsvReader:
    """Text, with cells separated by commas, semicolons or tabs."""

    name = "csv"
    suffixes = (".csv", ".tsv", ".txt")

    def read(self, name: str, content: bytes) -> api.RawTable:
        problems = api.Problems()
        place = api.Where(name)
        _check_size(place, content, problems)
        text = text_of(name, content, problems)
        problems.raise_if_any()
        assert text is not None
        separator = separator_of(text)
        rows, lines = _rows(name, text, separator, problems)
        if announced_separator(text):
            rows, lines = rows[1:], lines[1:]
        fix = _COMMA_FIX if separator == "," else _other_fix(_WORDS[separator])
        table = shaped(place, rows, lines, fix, problems)
        if separator != ",":
            told = len(problems)
            table = with_decimal_points(table, problems)
            if len(problems) > told:
                problems.raise_if_any()
        return table


def _other_fix(words: str) -> str:
    return f"put {words} between all cells, and text with {words} in quotes"


def _check_size(place: api.Where, content: bytes, problems: api.Problems) -> None:
    if len(content) > LARGEST_BYTES:
        problems.add(
            place,
            f"has {len(content) / 1e6:.0f} MB",
            allowed=f"at most {LARGEST_BYTES / 1e6:.0f} MB",
            fix="join neighbouring intervals of the same ground, or divide the project",
        )
        problems.raise_if_any()


def _rows(
    name: str, text: str, separator: str, problems: api.Problems
) -> tuple[list[list[str]], list[int]]:
    """Rows that are not blank, and the line on which each begins."""
    rows: list[list[str]] = []
    lines: list[int] = []
    reader = csv.reader(io.StringIO(text, newline=""), delimiter=separator, strict=True)
    line = 1
    try:
        for row in reader:
            if any(cell.strip() for cell in row):
                rows.append(row)
                lines.append(line)
                if len(rows) > MOST_ROWS:
                    tell_too_many_rows(api.Where(name), problems)
            line = reader.line_num + 1
    except csv.Error as error:
        problems.add(
            api.Where(name, reader.line_num),
            f"is not CSV: {error}",
            fix=f"close the quotes, and save the table as CSV with {_WORDS[separator]}",
        )
        problems.raise_if_any()
    return rows, lines


@api.hookimpl
def tunnelcalc_register_ground_readers(register: Callable[[api.GroundReader], None]) -> None:
    register(CsvReader())
