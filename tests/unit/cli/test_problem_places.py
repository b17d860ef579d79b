from __future__ import annotations

import pytest

from tunnelcalc.errors import InputError, Problem, Problems, Where


@pytest.mark.parametrize(
    ("where", "text", "cell"),
    [
        (Where("a.csv"), "a.csv", ""),
        (Where("a.csv", 3), "a.csv:3", ""),
        (Where("a.csv", 3, 4), "a.csv:3:4", ""),
        (Where("a.xlsx", sheet="S 1"), "a.xlsx:S 1", ""),
        (Where("a.xlsx", 3, sheet="S"), "a.xlsx:S row 3", ""),
        (Where("a.xlsx", 3, 1, "S"), "a.xlsx:S!A3", "A3"),
        (Where("a.xlsx", 3, 26, "S"), "a.xlsx:S!Z3", "Z3"),
        (Where("a.xlsx", 3, 27, "S"), "a.xlsx:S!AA3", "AA3"),
        (Where("a.xlsx", 3, 702, "S"), "a.xlsx:S!ZZ3", "ZZ3"),
        # The last column of a sheet of 2**14 columns.
        (Where("a.xlsx", 1048576, 16384, "S"), "a.xlsx:S!XFD1048576", "XFD1048576"),
    ],
)
def test_a_place_is_told_as_its_file_counts(where, text, cell):
    assert (str(where), where.cell) == (text, cell)


@pytest.mark.parametrize(
    ("message", "value"),
    [
        ('holds "4,5", which is not a number', "4,5"),
        ('holds "4"', "4"),
        ('holds "a "b" c", which is out of range', 'a "b" c'),
        ('names "x.csv", which no plugin can read', "x.csv"),
        ('holds ""', ""),
        ("is missing", None),
        ("holds a list", None),
        ('is "x"', None),
    ],
)
def test_the_value_is_that_of_the_message(message, value):
    assert Problem(Where("a"), message, "fix").value == value


def test_problems_are_told_by_file_sheet_line_and_column_each_once():
    problems = Problems()
    places = [
        Where("b.xlsx", 2, 1, "T"),
        Where("b.xlsx", 9, 1, "S"),
        Where("a.csv", 9, 2),
        Where("a.csv", 10, 1),
        Where("a.csv", 9, 1),
        Where("a.csv", 9, 1),
    ]
    for where in places:
        problems.add(where, "is wrong", fix="mend it")
    with pytest.raises(InputError) as caught:
        problems.raise_if_any()
    told = [str(problem.where) for problem in caught.value.problems]
    assert told == ["b.xlsx:S!A9", "b.xlsx:T!A2", "a.csv:9:1", "a.csv:9:2", "a.csv:10:1"]
    assert str(caught.value).splitlines()[:2] == ["b.xlsx:S!A9: is wrong", "  fix: mend it"]
