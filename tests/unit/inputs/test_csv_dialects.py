"""CSV in the dialects in which spreadsheets save it, and what is refused instead of guessed."""

from __future__ import annotations

import codecs

import pytest

from tunnelcalc.api import RawTable
from tunnelcalc.builtin import csv_reader, table_shape
from tunnelcalc.builtin.csv_reader import CsvReader
from tunnelcalc.errors import InputError

PLAIN = "from_m,to_m,unit,gsi\n0,45.5,a,62\n45.5,70,b,7.25\n"
HEADER = ("from_m", "to_m", "unit", "gsi")
CELLS = [["0", "45.5"], ["45.5", "70"], ["a", "b"], ["62", "7.25"]]


def in_dialect(separator: str, sign: str) -> str:
    return PLAIN.replace(",", separator).replace(".", sign)


def read(content: str | bytes) -> RawTable:
    return CsvReader().read("g.csv", content.encode() if isinstance(content, str) else content)


def told(content: str | bytes) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(content)
    return "\n".join(str(problem) for problem in caught.value.problems).splitlines()


def of_rows(text: str) -> list[str]:
    """What is told of rows that were left out."""
    return "\n".join(str(problem) for problem in read(text).problems).splitlines()


DIALECTS = {
    "utf-8": PLAIN.encode(),
    "utf-8-with-mark": codecs.BOM_UTF8 + PLAIN.encode(),
    "utf-16-le": codecs.BOM_UTF16_LE + PLAIN.encode("utf-16-le"),
    "utf-16-be": codecs.BOM_UTF16_BE + PLAIN.encode("utf-16-be"),
    "semicolons": in_dialect(";", ".").encode(),
    "semicolons-decimal-commas": in_dialect(";", ",").encode(),
    "tabs": in_dialect("\t", ".").encode(),
    "tabs-decimal-commas-utf-16": in_dialect("\t", ",").encode("utf-16"),
    "carriage-returns": PLAIN.replace("\n", "\r\n").encode(),
    "quoted": PLAIN.replace("from_m,to_m", '"from_m","to_m"').replace(",b,", ',"b",').encode(),
    "quoted-with-mark": codecs.BOM_UTF8 + PLAIN.replace("from_m", '"from_m"').encode(),
    "blank-rows-at-the-end": (PLAIN + ",,,\n,,,\n\n").encode(),
    "blank-columns-at-the-end": PLAIN.replace("\n", ",,\n").encode(),
    "blank-columns-cut-in-some-rows": PLAIN.replace("gsi\n", "gsi,,\n").encode(),
    "blank-column-between": b"from_m;;to_m;unit;gsi\n0;;45,5;a;62\n45,5;;70;b;7,25\n",
    "separator-announced": ("sep=;\r\n" + in_dialect(";", ",")).encode(),
}


@pytest.mark.parametrize("content", DIALECTS.values(), ids=DIALECTS.keys())
def test_a_dialect_gives_the_same_cells(content: bytes):
    table = read(content)
    assert table.header == HEADER
    assert [list(column) for column in table.columns] == CELLS


def test_cells_keep_their_place_beside_blank_columns_and_rows():
    table = read(";a;;b;\n\n;1;;2;\n;;;;\n;3;;4;\n")
    assert table.header == ("a", "b")
    assert str(table.place(1, 1)) == "g.csv:5:4"
    assert str(table.head(0)) == "g.csv:1:2"


def test_a_number_is_shown_with_the_sign_of_its_file():
    table = read("a;b;c\n1,5;x.y;12+345,60\n1e-3;2;3\n")
    assert [column[0] for column in table.columns] == ["1.5", "x.y", "12+345.60"]
    assert [table.written(0, column) for column in range(3)] == ["1,5", "x.y", "12+345,60"]
    assert table.written(1, 0) == "1e-3"


def test_commas_inside_an_unquoted_header_of_semicolons_do_not_separate():
    table = read("cover, crown (m);gsi\n60,5;62\n")
    assert table.header == ("cover, crown (m)", "gsi")
    assert [list(column) for column in table.columns] == [["60.5"], ["62"]]


def test_separators_in_quotes_do_not_separate():
    assert read('"a;b",c\n1,2\n').header == ("a;b", "c")
    assert read('"a\t""x""";c\n1;2\n').header == ('a\t"x"', "c")


def test_text_with_commas_stays_as_it_is():
    table = read("a;b\n1,5;1,2,3 and 4\n2,5;x,5\n")
    assert list(table.columns[1]) == ["1,2,3 and 4", "x,5"]


@pytest.mark.parametrize("cell", ["1.234,5", "1 234,5", "1'234", "1.234.567"])
def test_thousands_separators_stay_and_are_no_number(cell: str):
    """Whoever reads the column as numbers refuses them with what to write."""
    assert read(f"a;b\n{cell};0,25\n").columns[0][0] == cell


def test_a_table_with_both_decimal_signs_is_refused_once_for_each_column():
    assert told("a;b;c\n1,5;2,5;3\n1,6;2.5;4.25\n1,7;2.6;5\n") == [
        'g.csv:3:2: column "b" holds "2.5", with a decimal point, as in 1 more cell of the '
        'column; the table also has a decimal comma, in "1,5"',
        "  allowed: one decimal sign in the whole table",
        '  fix: write "2,5", if it is a number; write names that look like numbers otherwise',
        'g.csv:3:3: column "c" holds "4.25", with a decimal point; the table also has a '
        'decimal comma, in "1,5"',
        "  allowed: one decimal sign in the whole table",
        '  fix: write "4,25", if it is a number; write names that look like numbers otherwise',
    ]


@pytest.mark.parametrize(("sign", "word"), [(".", "point"), (",", "comma")])
def test_what_may_be_thousands_or_decimals_is_refused(sign: str, word: str):
    assert told(f"a;b\n1{sign}250;7\n1{sign}300;8\n") == [
        f'g.csv:2:1: column "a" holds "1{sign}250": nothing in the table shows whether the '
        f"{word} separates thousands or decimals",
        "  allowed: numbers without thousands separators",
        f"  fix: write 1250, or 1{sign}2500 with a fourth decimal, whichever is meant",
    ]


def test_one_clear_decimal_tells_for_the_whole_table():
    assert list(read("a;b\n1,250;0,5\n1,300;8\n").columns[0]) == ["1.250", "1.300"]


def test_windows_1252_is_refused_and_not_guessed():
    assert told("a,b\n1,2\n1,Störung\n".encode("cp1252")) == [
        "g.csv:3: is not UTF-8 text: byte 0xf6 cannot be read",
        "  allowed: UTF-8, or UTF-16 with its byte order mark",
        '  fix: save the table as "CSV UTF-8"; plain CSV may be Windows-1252, which is not guessed',
    ]


NOT_TEXT = {
    "utf-16-without-mark": (PLAIN.encode("utf-16-le"), "is not a text file: it holds null bytes"),
    "utf-16-cut": (
        PLAIN.encode("utf-16")[:-1],
        "is not UTF-16 text, although it begins with the mark of it",
    ),
    "null-characters": (
        "a,b\n\0,1\n".encode("utf-16"),
        "is not a text file: it holds null characters",
    ),
    "packed": (b"PK\x03\x04abc", "is a workbook or another packed file, not text"),
    "old-workbook": (
        b"\xd0\xcf\x11\xe0abc",
        "is a workbook or another packed file, not text",
    ),
}


@pytest.mark.parametrize(("content", "message"), NOT_TEXT.values(), ids=NOT_TEXT.keys())
def test_what_is_no_text_is_told(content: bytes, message: str):
    assert told(content)[0] == f"g.csv: {message}"


def test_a_title_above_the_header_is_told_once():
    assert told("Geology of an invented drive\na,b\n1,2\n3,4\n") == [
        "g.csv:1: has 1 cell, and every row below has 2",
        "  allowed: a header row with a name for every column",
        "  fix: begin the table with its header row, without a title above it, and use one "
        "separator throughout",
    ]


def test_a_row_that_may_have_lost_or_gained_a_cell_is_refused():
    """A blank cell too many may come from a decimal comma, `75,5,` under `cover,width`."""
    assert of_rows("a,b\n75,5,\n75,5\n") == [
        "g.csv:2: has 3 cells, the header has 2",
        "  allowed: 2 cells",
        "  fix: write decimal points, not commas, and put text with commas in quotes",
    ]
    assert of_rows("a;b;;\n1\n1;2\n") == [
        "g.csv:2: has 1 cell, the header has 4",
        "  allowed: 2 to 4 cells",
        "  fix: write every cell of the row, empty ones too",
    ]


def test_content_in_a_column_without_a_name_is_kept_for_whoever_tells_it():
    assert read("a,,b\n1,2,3\n").header == ("a", "", "b")


def test_a_table_of_too_many_rows_is_refused(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setattr(csv_reader, "MOST_ROWS", 3)
    assert len(read("a,b\n1,2\n3,4\n").lines) == 2
    assert told("a,b\n1,2\n3,4\n5,6\n") == [
        f"g.csv: has more than {table_shape.MOST_ROWS} rows",
        f"  allowed: at most {table_shape.MOST_ROWS} rows",
        "  fix: join neighbouring intervals of the same ground, or divide the project",
    ]


def test_a_table_of_200_mb_is_refused_before_it_is_read():
    assert told(bytes(200_000_000)) == [
        "g.csv: has 200 MB",
        "  allowed: at most 67 MB",
        "  fix: join neighbouring intervals of the same ground, or divide the project",
    ]


def test_a_row_of_a_wrong_width_does_not_hide_the_others():
    table = read("a;b\n1,5\n2,5;3\n")
    assert of_rows("a;b\n1,5\n2,5;3\n")[0] == "g.csv:2: has 1 cell, the header has 2"
    assert [list(column) for column in table.columns] == [["2.5"], ["3"]]
    assert told("a;b\n1,5\n2,5;3.5\n")[::3] == [
        "g.csv:2: has 1 cell, the header has 2",
        'g.csv:3:2: column "b" holds "3.5", with a decimal point; the table also has a decimal '
        'comma, in "2,5"',
    ]
