"""Workbooks: values with sheet and cell, and what is told instead of read."""

from __future__ import annotations

import datetime
import io
import zipfile
from collections.abc import Callable
from pathlib import Path
from typing import Any

import pytest
from end_to_end.projects import GROUND, UNITS, replaced
from openpyxl import Workbook
from unit.inputs.reading import read as read_project
from unit.inputs.reading import told as told_of_project

from tunnelcalc.api import RawTable
from tunnelcalc.builtin import table_shape, xlsx_parts, xlsx_reader
from tunnelcalc.builtin.xlsx_reader import XlsxReader
from tunnelcalc.errors import InputError, Problem

Change = Callable[[Any], object]


def workbook(*changes: Change, sheets: tuple[str, ...] = ("Geology",)) -> bytes:
    """A table of two rows in the first sheet, and changes to that sheet."""
    book = Workbook()
    book.active.title = sheets[0]
    for title in sheets[1:]:
        book.create_sheet(title).append(["mi"])
    sheet = book.worksheets[0]
    for row in (["from_m", "to_m", "cover (m)"], [0, 45, 60.1], [45, 70.5, 75]):
        sheet.append(row)
    for change in changes:
        change(sheet)
    stream = io.BytesIO()
    book.save(stream)
    return stream.getvalue()


def set_to(cell: str, value: object, number_format: str | None = None) -> Change:
    def change(sheet: Any) -> None:
        sheet[cell] = value
        if number_format is not None:
            sheet[cell].number_format = number_format

    return change


def merged(cells: str) -> Change:
    return lambda sheet: sheet.merge_cells(cells)


def read(*changes: Change) -> RawTable:
    return XlsxReader().read("geo.xlsx", workbook(*changes))


def problems_of(content: bytes, sheet: str | None = None) -> list[str]:
    reader = XlsxReader()
    named = () if sheet is None else (sheet,)
    with pytest.raises(InputError) as caught:
        (reader.read_sheet if named else reader.read)("geo.xlsx", content, *named)
    return "\n".join(str(problem) for problem in caught.value.problems).splitlines()


def placed(problem: Problem) -> tuple[int, int]:
    return problem.where.line, problem.where.column


def told(*changes: Change) -> list[str]:
    return problems_of(workbook(*changes))


def rewritten(content: bytes, part: str, old: bytes, new: bytes) -> bytes:
    """The workbook with a change in the XML of one part."""
    stream = io.BytesIO()
    with (
        zipfile.ZipFile(io.BytesIO(content)) as source,
        zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as target,
    ):
        for name in source.namelist():
            data = source.read(name)
            if name == part:
                assert old in data
                data = data.replace(old, new)
            target.writestr(name, data)
    return stream.getvalue()


SHEET = "xl/worksheets/sheet1.xml"


def test_values_are_read_with_sheet_and_cell():
    table = read()
    assert table.header == ("from_m", "to_m", "cover (m)")
    assert [list(column) for column in table.columns] == [
        ["0", "45"],
        ["45", "70.5"],
        ["60.1", "75"],
    ]
    assert str(table.place(1, 2)) == "geo.xlsx:Geology!C3"
    assert str(table.head(1)) == "geo.xlsx:Geology!B1"
    assert str(table.row(0)) == "geo.xlsx:Geology row 2"
    assert table.name == "geo.xlsx:Geology"


def test_a_table_may_begin_anywhere_and_have_blank_rows_and_columns():
    book = Workbook()
    sheet = book.active
    for cell, value in {"C4": "gsi", "AB4": "mi", "C6": 5, "AB6": 7, "C9": 6, "AB9": 8}.items():
        sheet[cell] = value
    sheet["AD20"] = " "
    stream = io.BytesIO()
    book.save(stream)
    table = XlsxReader().read("geo.xlsx", stream.getvalue())
    assert table.header == ("gsi", "mi")
    assert [list(column) for column in table.columns] == [["5", "6"], ["7", "8"]]
    assert str(table.place(1, 1)) == "geo.xlsx:Sheet!AB9"


@pytest.mark.parametrize(
    ("value", "text"),
    [
        pytest.param(0.1, "0.1", id="tenth"),
        pytest.param(12.0, "12", id="whole"),
        pytest.param(-3, "-3", id="integer"),
        pytest.param(1e-7, "1e-07", id="small"),
        pytest.param(123456789.125, "123456789.125", id="many-digits"),
        pytest.param("12,5", "12,5", id="number-as-text"),
        pytest.param(" sandstone ", "sandstone", id="text"),
        pytest.param(True, "TRUE", id="truth-value"),
        pytest.param(datetime.date(2024, 5, 3), "2024-05-03", id="date"),
        pytest.param(datetime.datetime(2024, 5, 3, 12, 30), "2024-05-03 12:30:00", id="time"),
    ],
)
def test_a_value_becomes_text(value: object, text: str):
    assert read(set_to("C2", value)).columns[2][0] == text


def test_a_formula_gives_its_stored_result():
    content = rewritten(
        workbook(set_to("C2", "=1+1")), SHEET, b"<f>1+1</f><v />", b"<f>1+1</f><v>2.5</v>"
    )
    assert XlsxReader().read("geo.xlsx", content).columns[2][0] == "2.5"


def test_a_formula_whose_result_is_an_empty_text_gives_an_empty_cell():
    content = rewritten(
        workbook(set_to("C2", "=1+1")),
        SHEET,
        b'<c r="C2"><f>1+1</f><v />',
        b'<c r="C2" t="str"><f>1+1</f><v></v>',
    )
    assert XlsxReader().read("geo.xlsx", content).columns[2][0] == ""


REFUSED: dict[str, tuple[tuple[Change, ...], list[str]]] = {
    "formula-without-result": (
        (set_to("C2", "=1+1"),),
        [
            "geo.xlsx:Geology!C2: holds a formula whose result is not stored",
            "  allowed: a value, or a formula with its result",
            "  fix: open the workbook in a spreadsheet, let it compute, and save it",
        ],
    ),
    "error": (
        (set_to("B3", "#DIV/0!"),),
        [
            "geo.xlsx:Geology!B3: holds the error #DIV/0!",
            "  allowed: a value",
            "  fix: mend the formula, or write the value",
        ],
    ),
    "percentage": (
        (set_to("C3", 0.35, "0.0%"),),
        [
            "geo.xlsx:Geology!C3: holds 0.35, which the sheet shows as 35 %",
            "  allowed: numbers not formatted as percentages",
            "  fix: format the cell as a number, and write the value in the unit of its column",
        ],
    ),
    "merged-cells": (
        (merged("C2:C3"), merged("H1:J2"), merged("A9:B10")),
        [
            "geo.xlsx:Geology!C2: is merged with others, C2:C3",
            "  allowed: cells that are not merged",
            "  fix: split the cells, and write the value into each of them",
        ],
    ),
    "merged-over-the-edge": (
        (merged("C3:F9"),),
        [
            "geo.xlsx:Geology!C3: is merged with others, C3:F9",
            "  allowed: cells that are not merged",
            "  fix: split the cells, and write the value into each of them",
        ],
    ),
}


@pytest.mark.parametrize(("changes", "lines"), REFUSED.values(), ids=REFUSED.keys())
def test_a_cell_that_has_no_value_of_its_own_is_refused(
    changes: tuple[Change, ...], lines: list[str]
):
    table = read(*changes)
    assert "\n".join(str(problem) for problem in table.problems).splitlines() == lines
    assert {(p.where.line, p.where.column) for p in table.problems} <= table.told


def test_a_header_that_has_no_names_ends_the_reading():
    assert told(merged("A1:B1"))[0] == "geo.xlsx:Geology!A1: is merged with others, A1:B1"


def test_all_cells_are_told_at_once_and_the_others_read():
    table = read(set_to("B3", "#N/A"), set_to("C2", "=1+1"), merged("A2:A3"))
    told_cells = [str(problem).splitlines()[0] for problem in sorted(table.problems, key=placed)]
    assert {(2, 1), (3, 1), (2, 3), (3, 2)} == set(table.told)
    assert told_cells == [
        "geo.xlsx:Geology!A2: is merged with others, A2:A3",
        "geo.xlsx:Geology!C2: holds a formula whose result is not stored",
        "geo.xlsx:Geology!B3: holds the error #N/A",
    ]


def test_the_sheet_must_be_named_where_there_are_several():
    content = workbook(sheets=("Geology", "Units"))
    assert problems_of(content) == [
        "geo.xlsx: has 2 sheets",
        "  allowed: Geology, Units",
        '  fix: name the sheet in the project, as in "geo.xlsx#Geology"',
    ]
    assert XlsxReader().read_sheet("geo.xlsx", content, "Units").header == ("mi",)
    assert problems_of(content, "units") == [
        'geo.xlsx: has no sheet "units"',
        "  allowed: Geology, Units",
        '  fix: name the sheet in the project, as in "geo.xlsx#Units"',
    ]


BROKEN = {
    "empty": (b"", "is not a workbook, or a damaged one", "save it again as .xlsx"),
    "text": (b"a,b\n1,2\n", "is not a workbook, or a damaged one", "save it again as .xlsx"),
    "cut": (workbook()[:-60], "is not a workbook, or a damaged one", "save it again as .xlsx"),
    "locked-or-old": (
        b"\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1",
        "is protected by a password, or a workbook of the old kind (.xls)",
        "save it as .xlsx without a password",
    ),
    "other-package": (
        rewritten(workbook(), "[Content_Types].xml", b"sheet.main+xml", b"other+xml"),
        "is a damaged workbook: OSError",
        "open it in a spreadsheet, and save it again as .xlsx",
    ),
    "xml-cut": (
        rewritten(workbook(), SHEET, b"</sheetData>", b""),
        "is a damaged workbook: ExpatError",
        "open it in a spreadsheet, and save it again as .xlsx",
    ),
    "no-number": (
        rewritten(workbook(), SHEET, b"<v>60.1</v>", b"<v>sixty</v>"),
        "is a damaged workbook: ValueError",
        "open it in a spreadsheet, and save it again as .xlsx",
    ),
    "document-type": (
        rewritten(workbook(), SHEET, b"<worksheet ", b'<!DOCTYPE x [<!ENTITY a "a">]><worksheet '),
        "declares a document type",
        "save the table again as .xlsx",
    ),
}


@pytest.mark.parametrize(("content", "what", "fix"), BROKEN.values(), ids=BROKEN.keys())
def test_what_is_no_sound_workbook_is_refused(content: bytes, what: str, fix: str):
    assert problems_of(content) == [
        f"geo.xlsx: {what}",
        "  allowed: a workbook (.xlsx)",
        f"  fix: {fix}",
    ]


def test_an_empty_sheet_is_refused():
    stream = io.BytesIO()
    Workbook().save(stream)
    assert problems_of(stream.getvalue())[0] == "geo.xlsx:Sheet: holds no table"


def test_a_bomb_is_refused_before_it_is_unpacked():
    stream = io.BytesIO()
    with zipfile.ZipFile(stream, "w", zipfile.ZIP_DEFLATED) as bomb:
        for number in range(9):
            with bomb.open(f"xl/worksheets/sheet{number}.xml", "w") as part:
                for _ in range(32):
                    part.write(bytes(1024 * 1024))
    assert len(stream.getvalue()) < 400_000
    assert problems_of(stream.getvalue()) == [
        "geo.xlsx: unpacks to 302 MB, more than can be read",
        "  allowed: a workbook (.xlsx)",
        "  fix: save the table alone, values only, in a new workbook or as CSV",
    ]


def test_swollen_styles_are_refused(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setattr(xlsx_parts, "LARGEST_OTHER_PART_BYTES", 1000)
    assert "unpacks to" in problems_of(workbook())[0]


@pytest.mark.parametrize(
    ("old", "new"),
    [
        pytest.param(b'<row r="3"', b'<row r="999999999999"', id="row-far-down"),
        pytest.param(b'ref="A1:C3"', b'ref="A1:XFD1048576"', id="size-stated-wrongly"),
    ],
)
def test_a_sheet_that_claims_to_be_huge_costs_nothing(old: bytes, new: bytes):
    content = rewritten(workbook(), SHEET, old, new)
    if b"ref" in new:
        assert len(XlsxReader().read("geo.xlsx", content).lines) == 2
    else:
        most = table_shape.MOST_ROWS
        assert problems_of(content)[0] == f"geo.xlsx:Geology: has more than {most} rows"


def test_too_many_cells_are_refused(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setattr(xlsx_reader, "MOST_CELLS", 8)
    assert "has more than" in told()[0]


def test_a_row_with_more_cells_than_a_sheet_has_is_refused(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setattr(xlsx_parts, "MOST_CELLS_IN_A_ROW", 2)
    assert told()[0] == "geo.xlsx: has a row of too many cells"


def both_tables(project: Path) -> None:
    """Ground and units as two sheets of one workbook."""
    book = Workbook()
    for title, text in (("Intervals #1", GROUND), ("Units", UNITS)):
        sheet = book.create_sheet(title)
        for line in text.splitlines():
            sheet.append([_value(cell) for cell in line.split(",")])
    book.remove(book.worksheets[0])
    book.save(project / "geo.xlsx")
    text = (project / "project.yaml").read_text(encoding="utf-8")
    text = text.replace("ground.csv", '"geo.xlsx#Intervals #1"').replace(
        "units.csv", "geo.xlsx#Units"
    )
    (project / "project.yaml").write_text(text, encoding="utf-8")


def _value(cell: str) -> float | str | None:
    try:
        return float(cell) if cell else None
    except ValueError:
        return cell


def test_a_project_names_the_sheets_of_one_workbook(tmp_path: Path):
    project = read_project(tmp_path, both_tables)
    assert [file.path for file in project.files] == ["geo.xlsx", "project.yaml"]
    assert set(project.ground["gsi"]) == {62, 35, 12}


def test_problems_of_a_workbook_name_sheet_and_cell(tmp_path: Path):
    def spoilt(project: Path) -> None:
        both_tables(project)
        from openpyxl import load_workbook

        book = load_workbook(project / "geo.xlsx")
        book["Units"]["F3"] = 0
        book["Intervals #1"]["D3"] = datetime.date(2024, 5, 3)
        book.save(project / "geo.xlsx")

    assert told_of_project(tmp_path, spoilt) == [
        'geo.xlsx:Intervals #1!D3: column "cover_m" holds "2024-05-03", which is not a number',
        'geo.xlsx:Units!F3: column "gsi" holds "0", which is out of range',
    ]


def test_a_mark_in_the_path_of_another_format_is_part_of_its_name(tmp_path: Path):
    def renamed(project: Path) -> None:
        (project / "ground.csv").rename(project / "ground#1.csv")
        replaced("project.yaml", "table: ground.csv", "table: ground#1.csv")(project)

    assert read_project(tmp_path, renamed).ground.count > 0
