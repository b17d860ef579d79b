"""The same ground gives the same bytes, whatever spreadsheet program wrote it down."""

from __future__ import annotations

import codecs
from collections.abc import Callable
from pathlib import Path

import pytest
from end_to_end.projects import (
    GROUND,
    UNITS,
    all_of,
    completed,
    content,
    replaced,
    tables_of,
    write_project,
)
from openpyxl import Workbook

Form = Callable[[Path], object]
TABLES = {"ground.csv": GROUND, "units.csv": UNITS}


def rows_of(text: str) -> list[list[str]]:
    return [line.split(",") for line in text.splitlines()]


def written(encode: Callable[[str], bytes]) -> Form:
    """Both tables, written in one dialect."""
    return all_of(*(content(file, encode(text)) for file, text in TABLES.items()))


def in_dialect(separator: str, sign: str) -> Callable[[str], str]:
    return lambda text: text.replace(",", separator).replace(".", sign)


def as_workbook(project: Path) -> None:
    """Both tables as sheets, numbers as numbers, with titles that people give."""
    book = Workbook()
    for title, text in (("Intervals, rev. A", GROUND), ("Units", UNITS)):
        sheet = book.create_sheet(title)
        for row in rows_of(text):
            sheet.append([number_or_text(cell) for cell in row])
    book.remove(book.worksheets[0])
    book.save(project / "geology.xlsx")
    replaced("project.yaml", "table: ground.csv", "table: geology.xlsx#Intervals, rev. A")(project)
    replaced("project.yaml", "units: units.csv", "units: geology.xlsx#Units")(project)


def number_or_text(cell: str) -> float | str | None:
    try:
        return float(cell) if cell else None
    except ValueError:
        return cell


def as_one_table(project: Path) -> None:
    """The values of the units written into every interval, and no units table."""
    head, *units = rows_of(UNITS)
    of_unit = {row[0]: row[1:] for row in units}
    first, *intervals = rows_of(GROUND)
    lines = [first + head[1:], *(row + of_unit[row[2]] for row in intervals)]
    (project / "ground.csv").write_text("\n".join(",".join(line) for line in lines) + "\n")
    replaced("project.yaml", "  units: units.csv\n", "")(project)


def with_headers_as_people_write_them(project: Path) -> None:
    replaced("ground.csv", "from_m,to_m", "From (m),To [m]")(project)
    replaced("ground.csv", "cover_m", "Rock over crown (m)")(project)
    replaced("units.csv", "unit_weight_kn_m3", '"Unit weight\n(kN/m³)"')(project)
    replaced("units.csv", "intact_strength_mpa,mi,gsi", "UCS (N/mm2),mi (-),GSI")(project)
    aliases = "  aliases: {UCS: intact_strength_mpa, Rock over crown: cover_m}\n"
    replaced("project.yaml", "  units: units.csv\n", f"  units: units.csv\n{aliases}")(project)


def reordered(project: Path) -> None:
    """Rows and columns in another order, a blank column between and blank rows around."""
    for file, text in TABLES.items():
        head, *body = rows_of(text)
        lines = [["", *row[::-1][:2], "", *row[::-1][2:], ""] for row in (head, *body[::-1])]
        blank = ";" * (len(lines[0]) - 1)
        table = "\r\n".join([blank, *(";".join(line) for line in lines), blank, blank, ""])
        (project / file).write_text(table, encoding="utf-8", newline="")


FORMS: dict[str, Form] = {
    "utf-8-with-mark": written(lambda text: codecs.BOM_UTF8 + text.encode()),
    "semicolons-decimal-commas": written(lambda text: in_dialect(";", ",")(text).encode()),
    "tabs-utf-16": written(lambda text: in_dialect("\t", ",")(text).encode("utf-16")),
    "quoted-carriage-returns": written(
        lambda text: "".join(
            ",".join(f'"{cell}"' for cell in row) + "\r\n" for row in rows_of(text)
        ).encode()
    ),
    "reordered-with-blanks": reordered,
    "workbook": as_workbook,
    "one-table": as_one_table,
    "headers-as-people-write-them": with_headers_as_people_write_them,
}


@pytest.fixture(scope="module")
def plain(tmp_path_factory: pytest.TempPathFactory) -> dict[str, bytes]:
    """The tables of the run of the project as it is."""
    project = write_project(tmp_path_factory.mktemp("plain") / "project")
    return tables_of(completed(project))


@pytest.mark.parametrize("form", FORMS.values(), ids=FORMS.keys())
def test_the_same_ground_gives_the_same_tables(form: Form, plain: dict[str, bytes], tmp_path: Path):
    project = write_project(tmp_path / "project")
    form(project)
    tables = tables_of(completed(project))
    for name in ("sections.csv", "classes.csv", "checks.csv", "schedule.csv", "quantities.csv"):
        assert tables[name] == plain[name]


def test_another_ground_gives_other_tables(plain: dict[str, bytes], tmp_path: Path):
    """So that what is compared above depends on the ground at all."""
    project = write_project(tmp_path / "project")
    replaced("units.csv", "17,62", "17,61")(project)
    assert tables_of(completed(project))["sections.csv"] != plain["sections.csv"]
