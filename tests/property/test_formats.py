"""Any bytes under any ending are read or told, and what is written in a dialect is read back."""

from __future__ import annotations

import csv
import io
import zipfile
from pathlib import Path

import pytest
from end_to_end.projects import PROJECT, write_project
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st
from openpyxl import Workbook
from unit.inputs.test_ags import ags
from unit.inputs.test_xlsx import SHEET, rewritten, workbook

from tunnelcalc.api import InputError, Problems, RawTable
from tunnelcalc.builtin.ags_reader import AgsReader
from tunnelcalc.builtin.csv_reader import CsvReader
from tunnelcalc.builtin.xlsx_reader import XlsxReader
from tunnelcalc.inputs.headers import understood
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins

PATIENT = settings(
    max_examples=100, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
REGISTRY = load_plugins()
READERS = {"csv": CsvReader(), "xlsx": XlsxReader(), "ags": AgsReader()}


def assert_told(error: InputError) -> None:
    assert error.problems
    assert all(problem.fix for problem in error.problems)
    for line in "\n".join(map(str, error.problems)).split("\n"):
        assert line.isprintable()


def outcome(ending: str, content: bytes) -> RawTable | InputError:
    """A table of one shape with a place for every cell, or problems with remedies."""
    try:
        table = READERS[ending].read(f"t.{ending}", content)
    except InputError as error:
        assert_told(error)
        return error
    assert len(table.header) == len(table.columns)
    assert {len(column) for column in table.columns} <= {len(table.lines)}
    for column in range(len(table.header)):
        str(table.head(column))
        for row in range(len(table.lines)):
            str(table.place(row, column))
            table.written(row, column)
    return table


SAMPLES = {
    "csv": "from_m;to_m;gsi\n0;45,5;6\n45,5;70;7\n".encode("utf-16"),
    "xlsx": workbook(),
    "ags": ags().encode(),
}


@PATIENT
@given(ending=st.sampled_from(sorted(READERS)), content=st.binary(max_size=300))
def test_any_bytes_are_read_or_told(ending: str, content: bytes):
    outcome(ending, content)


@PATIENT
@given(ending=st.sampled_from(["csv", "ags"]), text=st.text(max_size=300))
@example(ending="csv", text='sep=;\n"')
@example(ending="csv", text="sep=;\n")
@example(ending="csv", text=";;;\n,,,\n\t")
@example(ending="csv", text="\ufeff\ufeffa;b\n1,5;+1+2,5")
@example(ending="ags", text='"GROUP","GEOL"\n"HEADING","HEADING"\n"UNIT","m"\n')
@example(ending="ags", text='"GROUP"\n')
@example(ending="ags", text='"HEADING","a","a"\n')
def test_any_text_is_read_or_told(ending: str, text: str):
    outcome(ending, text.encode("utf-8", "surrogatepass"))


@PATIENT
@given(ending=st.sampled_from(sorted(SAMPLES)), data=st.data())
def test_a_sound_file_with_a_few_wrong_bytes_is_read_or_told(ending: str, data):
    content = bytearray(SAMPLES[ending])
    for _ in range(data.draw(st.integers(1, 4))):
        place = data.draw(st.integers(0, len(content) - 1))
        content[place] = data.draw(st.integers(0, 255))
    outcome(ending, bytes(content))


@PATIENT
@given(data=st.data())
def test_a_workbook_with_a_slip_in_its_xml_is_read_or_told(data):
    with zipfile.ZipFile(io.BytesIO(SAMPLES["xlsx"])) as archive:
        part = data.draw(st.sampled_from([SHEET, "xl/workbook.xml", "[Content_Types].xml"]))
        xml = archive.read(part)
    start = data.draw(st.integers(0, len(xml) - 1))
    end = min(len(xml), start + data.draw(st.integers(1, 12)))
    piece = data.draw(st.one_of(st.binary(max_size=8), st.sampled_from([b"-1", b"<", b"XFE1"])))
    outcome("xlsx", rewritten(SAMPLES["xlsx"], part, xml, xml[:start] + piece + xml[end:]))


NUMBERS = st.floats(-1e6, 1e6).map(lambda value: repr(round(value, 2)))
TEXTS = st.text(st.characters(categories=["Lu", "Ll"], include_characters=" ;,\t\"'-"), max_size=8)
TABLES = st.integers(1, 5).flatmap(
    lambda width: st.lists(
        st.lists(NUMBERS | TEXTS.map(str.strip), min_size=width, max_size=width), max_size=6
    )
)
NAMES = ("alpha", "beta", 'gam"ma', "del,ta; eps", "zeta (m)")


@PATIENT
@given(
    rows=TABLES,
    dialect=st.sampled_from([(",", "."), (";", "."), (";", ","), ("\t", "."), ("\t", ",")]),
    encoding=st.sampled_from(["utf-8", "utf-8-sig", "utf-16"]),
    end=st.sampled_from(["\n", "\r\n"]),
)
def test_what_is_written_in_a_dialect_is_read_back(
    rows: list[list[str]], dialect: tuple[str, str], encoding: str, end: str
):
    separator, sign = dialect
    width = len(rows[0]) if rows else 1
    # One number with two decimals shows the decimal sign of the table.
    body = [[*row, "0.25"] for row in rows] + [["x"] * width + ["0.25"]]
    header = [*NAMES[:width], "sign"]
    stream = io.StringIO()
    writer = csv.writer(
        stream, delimiter=separator, lineterminator=end, quoting=csv.QUOTE_NONNUMERIC
    )
    writer.writerow(header)
    writer.writerows([in_sign(cell, sign) for cell in row] for row in body)
    table = CsvReader().read("t.csv", stream.getvalue().encode(encoding))
    assert table.header == tuple(header)
    assert [list(row) for row in zip(*table.columns, strict=True)] == body
    for row, cells in enumerate(body):
        for column, cell in enumerate(cells):
            assert table.written(row, column) == in_sign(cell, sign)


def in_sign(cell: str, sign: str) -> str:
    return cell.replace(".", sign) if "." in cell and cell.strip("-.0123456789e") == "" else cell


@PATIENT
@given(values=st.lists(st.floats(allow_nan=False, allow_infinity=False), min_size=1, max_size=20))
def test_a_number_of_a_workbook_is_read_back_to_the_last_bit(values: list[float]):
    book = Workbook()
    for value in ["gsi", *values]:
        book.active.append([value])
    stream = io.BytesIO()
    book.save(stream)
    (column,) = XlsxReader().read("t.xlsx", stream.getvalue()).columns
    # The writer of the library keeps 16 digits: what it wrote is what must be read.
    assert [float(cell) for cell in column] == [float(f"{value:.16g}") for value in values]


@settings(max_examples=300, deadline=None)
@given(
    header=st.lists(
        st.text(max_size=12)
        | st.builds(
            "{} ({})".format,
            st.sampled_from(["cover", "gsi", "modulus", "rqd sd"]),
            st.text(max_size=4),
        ),
        max_size=5,
    ),
    aliases=st.dictionaries(st.text(max_size=4), st.sampled_from(["cover_m", "gsi", "no"])),
)
def test_any_header_is_understood_told_or_left_as_it_is(header: list[str], aliases: dict[str, str]):
    columns = tuple([str(number)] for number, _ in enumerate(header))
    table = RawTable("t.csv", tuple(header), 1, columns, [2])
    problems = Problems()
    found = understood(table, aliases, {"from_m": "m", "ground_unit": ""}, (), problems)
    assert len(found.header) == len(found.columns) == len(found.column_numbers)
    assert len(header) - len(found.header) <= len(problems)
    again = understood(found, {}, {"from_m": "m", "ground_unit": ""}, found.header, Problems())
    assert again.header == found.header


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return write_project(tmp_path_factory.mktemp("formats") / "project")


@PATIENT
@given(path=st.text(st.characters(exclude_categories=["Cs", "Cc"]), max_size=12))
@example(path="units.csv#a")
@example(path="#")
@example(path="a.xlsx#")
@example(path=".xlsx#.xlsx#")
def test_any_path_of_a_table_is_read_or_told(folder: Path, path: str):
    quoted = path.replace("'", "''")
    text = PROJECT.replace("table: ground.csv", f"table: '{quoted}'")
    (folder / "project.yaml").write_text(text, encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_project(folder, REGISTRY)
    assert_told(caught.value)
