"""Reads ground and units tables from CSV as RFC 4180 has it: commas, a header row, UTF-8."""

from __future__ import annotations

import csv
import io
from collections.abc import Callable

from tunnelcalc import api


class CsvReader:
    """Comma-separated text."""

    name = "csv"
    suffixes = (".csv",)

    def read(self, name: str, content: bytes) -> api.RawTable:
        problems = api.Problems()
        text = api.decoded(name, content, problems)
        problems.raise_if_any()
        assert text is not None
        rows, lines = _rows(name, text, problems)
        if not rows:
            problems.add(
                api.Where(name),
                "holds no table",
                allowed="a header row and one row an interval or unit",
                fix="write the column names into the first row",
            )
            problems.raise_if_any()
        header, header_line = tuple(cell.strip() for cell in rows[0]), lines[0]
        if len(header) == 1 and (";" in header[0] or "\t" in header[0]):
            problems.add(
                api.Where(name, header_line),
                "is not separated by commas",
                allowed="commas between cells",
                fix="save the table as CSV with commas and decimal points",
            )
            problems.raise_if_any()
        width = len(header)
        for row, line in zip(rows[1:], lines[1:], strict=True):
            if len(row) != width:
                problems.add(
                    api.Where(name, line),
                    f"has {len(row)} cell{'s' if len(row) > 1 else ''}, the header has {width}",
                    allowed=f"{width} cells",
                    fix="write decimal points, not commas, and put text with commas in quotes",
                )
        whole = [number for number, row in enumerate(rows) if len(row) == width and number]
        columns = tuple(
            [cell.strip() for cell in column]
            for column in zip(*(rows[number] for number in whole), strict=True)
        ) or tuple([] for _ in header)
        kept = [lines[number] for number in whole]
        return api.RawTable(name, header, header_line, columns, kept, tuple(problems))


def _rows(name: str, text: str, problems: api.Problems) -> tuple[list[list[str]], list[int]]:
    """Rows that are not blank, and the line on which each begins."""
    rows: list[list[str]] = []
    lines: list[int] = []
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    line = 1
    try:
        for row in reader:
            if any(cell.strip() for cell in row):
                rows.append(row)
                lines.append(line)
            line = reader.line_num + 1
    except csv.Error as error:
        problems.add(
            api.Where(name, reader.line_num),
            f"is not CSV: {error}",
            fix="close the quotes, and save the table as CSV with commas",
        )
        problems.raise_if_any()
    return rows, lines


@api.hookimpl
def tunnelcalc_register_ground_readers(register: Callable[[api.GroundReader], None]) -> None:
    register(CsvReader())
