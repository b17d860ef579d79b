"""From rows of cells to a table with a header: what any spreadsheet leaves around it goes."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.errors import Problems, Where
from tunnelcalc.plugin.raw_table import RawTable

MOST_ROWS = 1_000_000


def shaped(
    place: Where, rows: list[list[str]], lines: Sequence[int], widths_fix: str, problems: Problems
) -> RawTable:
    """A table from rows that are not blank, each with its line; raises where they are none.

    Columns without name and content are left out. A row may lack only cells of such columns:
    one that lacks others may have lost a cell anywhere, and one with more cells has a cell cut
    in two.
    """
    before = len(problems)
    if not rows:
        problems.add(
            place,
            "holds no table",
            allowed="a header row and one row an interval or unit",
            fix="write the column names into the first row",
        )
        problems.raise_if_any()
    header = [cell.strip() for cell in rows[0]]
    named = max((number for number, name in enumerate(header, 1) if name), default=0)
    _check_widths(
        Where(place.file, lines[0], sheet=place.sheet),
        named,
        len(header),
        rows,
        lines,
        widths_fix,
        problems,
    )
    told = tuple(problems)[before:]
    if told and told[0].where.line == lines[0]:
        problems.raise_if_any()
    # Rows of a wrong width are told and left out; the others are read on.
    sound = [k for k, row in enumerate(rows) if named <= len(row) <= len(header)]
    rows, lines = [rows[k] for k in sound], [lines[k] for k in sound]
    for row in rows:
        row.extend([""] * (len(header) - len(row)))
    columns = [[cell.strip() for cell in column] for column in zip(*rows[1:], strict=True)]
    columns = columns or [[] for _ in header]
    kept = [
        n for n, (name, cells) in enumerate(zip(header, columns, strict=True)) if name or any(cells)
    ]
    return RawTable(
        file=place.file,
        header=tuple(header[number] for number in kept),
        header_line=lines[0],
        columns=tuple(columns[number] for number in kept),
        lines=lines[1:],
        sheet=place.sheet,
        column_numbers=tuple(number + 1 for number in kept),
        problems=told,
    )


def _check_widths(
    head: Where,
    named: int,
    width: int,
    rows: list[list[str]],
    lines: Sequence[int],
    fix: str,
    problems: Problems,
) -> None:
    widths = {len(row) for row in rows[1:]}
    if all(named <= found <= width for found in widths):
        return
    if len(rows) > 2 and len(widths) == 1 and width == named:
        problems.add(
            head,
            f"has {_cells(width)}, and every row below has {widths.pop()}",
            allowed="a header row with a name for every column",
            fix="begin the table with its header row, without a title above it, "
            "and use one separator throughout",
        )
        return
    allowed = _cells(named) if named == width else f"{named} to {_cells(width)}"
    for row, line in zip(rows[1:], lines[1:], strict=True):
        if not named <= len(row) <= width:
            problems.add(
                Where(head.file, line, sheet=head.sheet),
                f"has {_cells(len(row))}, the header has {width}",
                allowed=allowed,
                fix=fix if len(row) > width else "write every cell of the row, empty ones too",
            )


def _cells(count: int) -> str:
    return f"{count} cell{'' if count == 1 else 's'}"


def tell_too_many_rows(place: Where, problems: Problems) -> None:
    problems.add(
        place,
        f"has more than {MOST_ROWS} rows",
        allowed=f"at most {MOST_ROWS} rows",
        fix="join neighbouring intervals of the same ground, or divide the project",
    )
    problems.raise_if_any()
