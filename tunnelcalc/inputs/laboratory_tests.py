"""Triaxial and uniaxial tests by ground unit, and what follows from them."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.errors import Problems
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.table_columns import TypedTable
from tunnelcalc.inputs.typed_table import open_table, typed_columns
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import UnitTests
from tunnelcalc.rock_mass.laboratory import IntactTests, intact_rock_from_tests
from tunnelcalc.text import quoted
from tunnelcalc.vocabulary import Limits

TESTS = "tests"
UNIT, MINOR, MAJOR = "ground_unit", "minor_stress_mpa", "major_stress_mpa"
SPECIMEN, DATE = "specimen", "date"
FROM_TESTS = ("intact_strength_mpa", "mi")
"""What follows from tests."""
STRESSES = {MINOR: (Limits(0, 1000), "MPa"), MAJOR: (Limits(0, 3000, above=True), "MPa")}


@dataclass(frozen=True, slots=True)
class Tests:
    """Results by ground unit; `told` are the units whose tests have a problem, None for all."""

    by_unit: Mapping[str, UnitTests]
    told: frozenset[str] | None = frozenset()

    def values_of(self, quantity: str, units: Array) -> Array:
        """Values (i,) by the name (i,) of the ground unit, NaN where it has no result."""
        found = {unit: tests.value(quantity) for unit, tests in self.by_unit.items()}
        return np.array([found.get(unit, np.nan) for unit in units.tolist()])

    def told_of(self, units: Array) -> Array:
        """Mask (i,) of the names (i,) whose tests have a problem."""
        if self.told is None:
            return np.ones(units.shape, dtype=bool)
        return np.array([unit in self.told for unit in units.tolist()], dtype=bool)


def read_tests(reader: Reader, folder: ProjectFolder, registry: Registry) -> Tests:
    """Results by ground unit; empty where the project names no table of tests."""
    if not reader.has(TESTS):
        reader.known[TESTS] = None
        return Tests({})
    path = reader.text(TESTS, "the path of a table")
    if path is None:
        return Tests({}, None)
    raw = open_table(folder, path, reader.place(TESTS), reader.label(TESTS), registry)
    if raw is None:
        return Tests({}, None)
    table = typed_columns(
        raw, reader.problems, STRESSES, (UNIT, SPECIMEN, DATE), required=(UNIT, *STRESSES)
    )
    if not all(table.has(name) for name in (UNIT, *STRESSES)):
        return Tests({}, None)
    return _by_unit(table, reader.problems, _wrong_rows(table))


def _wrong_rows(table: TypedTable) -> Array:
    """Mask (r,) of the rows that cannot be used; what is wrong with them is told."""
    minor, major = table.numbers[MINOR], table.numbers[MAJOR]
    for row in range(table.rows):
        for name, values in ((MINOR, minor), (MAJOR, major)):
            if np.isnan(values[row]) and not table.wrong_in(name)[row]:
                _complain(table, row, name, "is empty", "write the stress at failure, in MPa")
        if not table.texts[UNIT][row]:
            _complain(table, row, UNIT, "is empty", "name the ground unit that was tested")
        day = table.texts[DATE][row] if table.has(DATE) else ""
        if day and not _is_date(day):
            _complain(
                table, row, DATE, f"holds {quoted(day)}, which is no date", "write 2031-04-17"
            )
        if major[row] <= minor[row]:
            _complain(
                table, row, MAJOR, f"is not above {MINOR}", "write the major stress at failure"
            )
    return ~(major > minor)


def _is_date(text: str) -> bool:
    try:
        date.fromisoformat(text)
    except ValueError:
        return False
    return True


def _complain(table: TypedTable, row: int, name: str, message: str, fix: str) -> None:
    table.problems.add(table.place(row, name), message, name=f'column "{name}"', fix=fix)


def _by_unit(table: TypedTable, problems: Problems, wrong: Array) -> Tests:
    """A unit with a wrong row gives nothing: with the row mended it may give something else."""
    names = table.texts[UNIT]
    found: dict[str, UnitTests] = {}
    told = set(names[wrong].tolist())
    for unit in dict.fromkeys(names.tolist()):
        rows = np.flatnonzero(names == unit)
        if not unit or unit in told:
            continue
        result = intact_rock_from_tests(table.numbers[MINOR][rows], table.numbers[MAJOR][rows])
        if result.reason:
            problems.add(
                table.raw.row(int(rows[0])),
                f"the tests of {quoted(unit)} give no strength: {result.reason}",
                fix="add or correct tests, or take the unit out of the table",
            )
            told.add(unit)
            continue
        found[unit] = UnitTests(unit, result, _specimens(table, rows, result))
    return Tests(found, frozenset(told))


def _specimens(table: TypedTable, rows: Array, result: IntactTests) -> tuple[str, ...]:
    named = table.texts.get(SPECIMEN)
    words = []
    for row in rows[list(result.outliers)].tolist():
        name = "" if named is None else str(named[row])
        words.append(name or f"line {table.raw.lines[row]}")
    return tuple(words)
