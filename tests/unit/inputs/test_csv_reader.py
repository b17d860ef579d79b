"""CSV as people and spreadsheets save it."""

from __future__ import annotations

import pytest

from tunnelcalc.api import RawTable
from tunnelcalc.builtin.csv_reader import CsvReader
from tunnelcalc.errors import InputError


def read(text: str) -> RawTable:
    return CsvReader().read("g.csv", text.encode())


def told(text: str) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(text)
    return [str(problem).splitlines()[0] for problem in caught.value.problems]


def test_cells_keep_their_place():
    table = read('\n a , b\n\n1,"x\ny"\n,,\n 2 ,"say ""hi"""\n')
    assert (table.header, table.header_line) == (("a", "b"), 2)
    assert [list(column) for column in table.columns] == [["1", "2"], ["x\ny", 'say "hi"']]
    assert list(table.lines) == [4, 7]
    assert str(table.place(1, 1)) == "g.csv:7:2"
    assert str(table.head(0)) == "g.csv:2:1"


@pytest.mark.parametrize("end", ["\n", "\r\n", "\r"])
def test_lines_end_as_on_any_system(end: str):
    table = read(end.join(["a,b", "1,2", "", "3,4"]))
    assert [list(column) for column in table.columns] == [["1", "3"], ["2", "4"]]
    assert list(table.lines) == [2, 4]


def test_a_header_without_rows_is_a_table_of_no_rows():
    table = read("a,b\n")
    assert [list(column) for column in table.columns] == [[], []]
    assert list(table.lines) == []


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        pytest.param("", "g.csv: holds no table", id="empty"),
        pytest.param(" , \n\n", "g.csv: holds no table", id="blank-cells"),
        pytest.param('a,b\n"1,2\n', "g.csv:2: is not CSV: unexpected end of data", id="quote"),
        pytest.param(
            'a,b\n"1"x,2\n', "g.csv:2: is not CSV: ',' expected after '\"'", id="after-quote"
        ),
    ],
)
def test_what_is_no_table_is_told(text: str, problem: str):
    assert told(text) == [problem]


def test_rows_of_a_wrong_width_are_told_and_the_others_read():
    table = read("a,b\n1\n\n1,2\n1,2,3\n")
    assert [str(problem).splitlines()[0] for problem in table.problems] == [
        "g.csv:2: has 1 cell, the header has 2",
        "g.csv:5: has 3 cells, the header has 2",
    ]
    assert [list(column) for column in table.columns] == [["1"], ["2"]]
    assert list(table.lines) == [4]
