"""Reads ground and units tables from the values of a workbook's sheet."""

from __future__ import annotations

import datetime
import io
import warnings
from collections.abc import Callable, Iterator
from dataclasses import replace
from itertools import product
from typing import Any

from tunnelcalc import api
from tunnelcalc.builtin.table_shape import MOST_ROWS, shaped, tell_too_many_rows
from tunnelcalc.builtin.xlsx_parts import SheetMarks, WorkbookError, check_package, sheet_marks
from tunnelcalc.text import few, quoted, shown, suggestion

MOST_CELLS = 50_000_000
"""Blank ones to the left of others included."""


class XlsxReader:
    """The values of one sheet of a workbook, as they were last computed."""

    name = "xlsx"
    suffixes = (".xlsx", ".xlsm")

    def read(self, name: str, content: bytes) -> api.RawTable:
        return _read(name, content, None)

    def read_sheet(self, name: str, content: bytes, sheet: str) -> api.RawTable:
        return _read(name, content, sheet)


def _read(name: str, content: bytes, sheet: str | None) -> api.RawTable:
    problems = api.Problems()
    try:
        check_package(content)
        with warnings.catch_warnings():
            # The library warns of drawings, filters and styles that it leaves out.
            warnings.simplefilter("ignore")
            return _table(name, content, sheet, problems)
    except api.InputError:
        raise
    except WorkbookError as refusal:
        what, fix = refusal.args
    except Exception as error:  # damaged workbooks make the library raise nearly anything
        what = f"is a damaged workbook: {type(error).__name__}"
        fix = "open it in a spreadsheet, and save it again as .xlsx"
    problems.add(api.Where(name), what, allowed="a workbook (.xlsx)", fix=fix)
    raise api.InputError(tuple(problems))


def _table(name: str, content: bytes, sheet: str | None, problems: api.Problems) -> api.RawTable:
    # Here, so that whoever has no workbook does not wait for the library.
    from openpyxl import load_workbook

    workbook = load_workbook(io.BytesIO(content), read_only=True, data_only=True, keep_links=False)
    chosen = _chosen(name, workbook.worksheets, sheet, problems)
    place = api.Where(name, sheet=shown(chosen.title))
    with chosen._get_source() as part:  # the library has no public way to the XML of a sheet
        marks = sheet_marks(part)
    rows, lines = _rows(place, chosen, problems)
    table = shaped(place, rows, lines, "fill the header row, and clear cells beside it", problems)
    told = {(p.where.line, p.where.column) for p in problems if p.where.column}
    told |= set(_check_marks(table, marks, problems))
    if any(line == table.header_line for line, _ in told):
        problems.raise_if_any()  # without its names, a table cannot be read on
    return replace(table, problems=tuple(problems), told=frozenset(told))


def _chosen(name: str, sheets: list[Any], sheet: str | None, problems: api.Problems) -> Any:
    titles = [each.title for each in sheets]
    if sheet in titles:
        return sheets[titles.index(sheet)]
    if sheet is None and len(sheets) == 1:
        return sheets[0]
    example = suggestion(sheet or "", titles) or (titles or ["Sheet"])[0]
    problems.add(
        api.Where(name),
        f"has {len(sheets)} sheets" if sheet is None else f"has no sheet {quoted(sheet)}",
        allowed=few(titles),
        fix=f"name the sheet in the project, as in {quoted(f'{name}#{example}')}",
    )
    raise api.InputError(tuple(problems))


def _rows(
    place: api.Where, sheet: Any, problems: api.Problems
) -> tuple[list[list[str]], list[int]]:
    """Rows of text that are not blank, filled up to one width, and their numbers."""
    rows: list[list[str]] = []
    lines: list[int] = []
    percent: dict[int, bool] = {}
    for line, row in _numbered(place, sheet, problems):
        texts = [_text(place, cell, percent, problems) for cell in row]
        while texts and not texts[-1]:
            texts.pop()
        if texts:
            rows.append(texts)
            lines.append(line)
    width = max(map(len, rows), default=0)
    for texts in rows:
        texts.extend([""] * (width - len(texts)))
    return rows, lines


def _numbered(
    place: api.Where, sheet: Any, problems: api.Problems
) -> Iterator[tuple[int, tuple[Any, ...]]]:
    sheet.reset_dimensions()  # what a workbook says of its size is often wrong
    cells = 0
    for line, row in enumerate(sheet.iter_rows(), 1):
        cells += len(row)
        if line > MOST_ROWS or cells > MOST_CELLS:
            tell_too_many_rows(place, problems)
        yield line, row


def _text(place: api.Where, cell: Any, percent: dict[int, bool], problems: api.Problems) -> str:
    """The value of a cell as text: of a number the shortest that reads back as the same.

    `percent` keeps, by style, whether it shows percentages: to ask for the format is slow.
    """
    value = cell.value
    if value is None:
        return ""
    if cell.data_type == "e":
        what = f"holds the error {shown(str(value))}"
        _tell(place, cell, what, "a value", "mend the formula, or write the value", problems)
        return ""
    if isinstance(value, bool):
        return str(value).upper()
    if isinstance(value, (int, float)):
        style = cell._style_id
        if style not in percent:
            percent[style] = "%" in str(cell.number_format)
        if percent[style]:
            what = f"holds {value!r}, which the sheet shows as {value * 100:g} %"
            fix = "format the cell as a number, and write the value in the unit of its column"
            _tell(place, cell, what, "numbers not formatted as percentages", fix, problems)
            return ""
        return _number(value)
    if isinstance(value, datetime.datetime) and value.time() == datetime.time():
        return value.date().isoformat()
    return str(value).strip()


def _number(value: float) -> str:
    if isinstance(value, float) and value.is_integer() and abs(value) < 1e15:
        return str(int(value))
    return repr(value)


def _tell(
    place: api.Where, cell: Any, what: str, allowed: str, fix: str, problems: api.Problems
) -> None:
    where = api.Where(place.file, cell.row, cell.column, place.sheet)
    problems.add(where, what, allowed=allowed, fix=fix)


def _check_marks(
    table: api.RawTable, marks: SheetMarks, problems: api.Problems
) -> Iterator[tuple[int, int]]:
    """Tell formulas without a result and merged cells that lie in the table; their cells."""
    from openpyxl.utils import range_boundaries

    columns, last = set(table.column_numbers), max((table.header_line, *table.lines))
    for row, column in marks.without_result:
        yield row, column
        problems.add(
            api.Where(table.file, row, column, table.sheet),
            "holds a formula whose result is not stored",
            allowed="a value, or a formula with its result",
            fix="open the workbook in a spreadsheet, let it compute, and save it",
        )
    for cells in marks.merged:
        left, top, right, bottom = range_boundaries(cells)
        in_rows = top <= last and bottom >= table.header_line
        if not in_rows or columns.isdisjoint(range(left, min(right, max(columns)) + 1)):
            continue
        problems.add(
            api.Where(table.file, top, left, table.sheet),
            f"is merged with others, {cells}",
            allowed="cells that are not merged",
            fix="split the cells, and write the value into each of them",
        )
        rows = range(top, min(bottom, last) + 1)
        yield from product(rows, range(left, min(right, max(columns)) + 1))


@api.hookimpl
def tunnelcalc_register_ground_readers(register: Callable[[api.GroundReader], None]) -> None:
    register(XlsxReader())
