"""Triaxial and uniaxial tests by ground unit, and what follows from them."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.errors import Problems
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.typed_table import TypedTable, open_table, typed_columns
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import UnitTests
from tunnelcalc.rock_mass.laboratory import IntactTests, intact_rock_from_tests
from tunnelcalc.text import quoted
from tunnelcalc.vocabulary import Limits

TESTS = "tests"
UNIT, MINOR, MAJOR = "ground_unit", "minor_stress_mpa", "major_stress_mpa"
SPECIMEN, DATE = "specimen", "date"
STRESSES = {MINOR: Limits(0, 1000), MAJOR: Limits(0, 3000, above=True)}


def read_tests(reader: Reader, folder: ProjectFolder, registry: Registry) -> dict[str, UnitTests]:
    """Results by ground unit; empty where the project names no table of tests."""
    path = reader.text(TESTS, "the path of a table", required=False)
    if path is None:
        return {}
    raw = open_table(folder, path, reader.place(TESTS), reader.label(TESTS), registry)
    if raw is None:
        return {}
    table = typed_columns(
        raw, reader.problems, STRESSES, "MPa", (UNIT, SPECIMEN, DATE), required=(UNIT, *STRESSES)
    )
    if not all(table.has(name) for name in (UNIT, *STRESSES)):
        return {}
    _check_rows(table)
    return _by_unit(table, reader.problems)


def _check_rows(table: TypedTable) -> None:
    minor, major = table.numbers[MINOR], table.numbers[MAJOR]
    for row in range(table.rows):
        for name, values in ((MINOR, minor), (MAJOR, major)):
            if np.isnan(values[row]) and not table.wrong_in(name)[row]:
                _complain(table, row, name, "is empty", "write the stress at failure, in MPa")
        if not table.texts[UNIT][row]:
            _complain(table, row, UNIT, "is empty", "name the ground unit that was tested")
        if major[row] <= minor[row]:
            _complain(
                table, row, MAJOR, f"is not above {MINOR}", "write the major stress at failure"
            )


def _complain(table: TypedTable, row: int, name: str, message: str, fix: str) -> None:
    table.problems.add(table.place(row, name), message, name=f'column "{name}"', fix=fix)


def _by_unit(table: TypedTable, problems: Problems) -> dict[str, UnitTests]:
    usable = ~np.isnan(table.numbers[MINOR]) & ~np.isnan(table.numbers[MAJOR])
    names = table.texts[UNIT]
    found: dict[str, UnitTests] = {}
    for unit in dict.fromkeys(names.tolist()):
        rows = np.flatnonzero((names == unit) & usable)
        if not unit or not rows.size:
            continue
        result = intact_rock_from_tests(table.numbers[MINOR][rows], table.numbers[MAJOR][rows])
        if result.reason:
            problems.add(
                table.raw.row(int(rows[0])),
                f"the tests of {quoted(unit)} give no strength: {result.reason}",
                fix="add or correct tests, or take the unit out of the table",
            )
            continue
        found[unit] = UnitTests(unit, result, _specimens(table, rows, result))
    return found


def _specimens(table: TypedTable, rows: Array, result: IntactTests) -> tuple[str, ...]:
    named = table.texts.get(SPECIMEN)
    words: Callable[[int], str] = lambda row: f"line {table.raw.lines[row]}"  # noqa: E731
    return tuple(
        str(named[rows[k]]) if named is not None and named[rows[k]] else words(int(rows[k]))
        for k in result.outliers
    )
