"""The intervals of a ground table: their ends, their ground units, and where each is written."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.chainage import Notation
from tunnelcalc.errors import Problems, Where
from tunnelcalc.inputs import alignment
from tunnelcalc.inputs.table_columns import TypedTable
from tunnelcalc.project import Gap
from tunnelcalc.text import few, quoted, suggestion


class Intervals:
    """The rows of the ground table, each with its row in the units table."""

    def __init__(
        self, table: TypedTable, units: TypedTable | None, notation: Notation, problems: Problems
    ) -> None:
        self.table = table
        self.units = units
        self.notation = notation
        self.problems = problems
        self.unit_row = self._unit_rows()

    @property
    def count(self) -> int:
        """Number of intervals."""
        return self.table.rows

    @property
    def from_m(self) -> Array:
        """(i,) start, NaN where it could not be read. [m]"""
        return self.table.numbers.get("from_m", np.full(self.count, np.nan))

    @property
    def to_m(self) -> Array:
        """(i,) end, NaN where it could not be read. [m]"""
        return self.table.numbers.get("to_m", np.full(self.count, np.nan))

    @property
    def files(self) -> str:
        """The tables' files, for "neither ... gives it"."""
        return self.table.raw.name + (f" nor {self.units.raw.name}" if self.units else "")

    def has(self, name: str) -> bool:
        """Whether either table has a column."""
        return self.table.has(name) or (self.units is not None and self.units.has(name))

    def told(self, names: Sequence[str]) -> Array:
        """Mask (i,) of the intervals about whose cells a problem is told already."""
        told = np.zeros(self.count, dtype=bool)
        for name in names:
            told |= self.table.wrong_in(name)
            if self.units is not None and self.unit_row is not None:
                told |= self.units.wrong_in(name)[self.unit_row] | (self.unit_row < 0)
        return told

    def tell_no_more(self, name: str, rows: Array) -> None:
        """That intervals (a mask (i,)) have no value of a quantity is told already."""
        self.table.wrong[name] = self.table.wrong_in(name) | rows

    def source(self, row: int, name: str, of_unit: bool) -> tuple[Where, str]:
        """Where a value of an interval stands, and words that help to find it."""
        if not of_unit or self.units is None or self.unit_row is None:
            return self.table.place(row, name), self.context(row)
        unit = str(self.table.texts["ground_unit"][row])
        return self.units.place(int(self.unit_row[row]), name), f"ground unit {quoted(unit)}"

    def context(self, row: int) -> str:
        """Words that help to find an interval."""
        start, end = float(self.from_m[row]), float(self.to_m[row])
        if np.isnan(start) or np.isnan(end):
            where = f"row {row + 1}"
        else:
            where = f"interval {alignment.span(start, end)}"
        unit = self.table.texts.get("ground_unit")
        name = "" if unit is None else str(unit[row])
        return f"{where}, ground unit {quoted(name)}" if name else where

    def check_order(self, gaps: Sequence[tuple[Gap, Where]]) -> None:
        """Tell empty and reversed ends, overlaps, and gaps that nobody declared."""
        pieces = [alignment.Piece(gap.from_m, gap.to_m, where, True) for gap, where in gaps]
        complete = self.table.has("from_m") and self.table.has("to_m")
        complete = complete and not self.table.raw.problems
        ends = zip(self.from_m.tolist(), self.to_m.tolist(), strict=True)
        for row, (start, end) in enumerate(ends):
            if self._has_ends(row, start, end):
                pieces.append(alignment.Piece(start, end, self.table.place(row), False))
            else:
                complete = False
        alignment.check_order(pieces, complete, self.problems)

    def _has_ends(self, row: int, start: float, end: float) -> bool:
        for name, value in (("from_m", start), ("to_m", end)):
            missing = np.isnan(value) and self.table.has(name)
            if missing and not self.table.wrong_in(name)[row]:
                self.problems.add(
                    self.table.place(row, name),
                    "is empty",
                    name=f'column "{name}"',
                    allowed="a chainage",
                    fix="write the chainage",
                )
        if np.isnan(start) or np.isnan(end):
            return False
        if end - start > SAME_PLACE_M:
            return True
        first, last = self.notation.ends(start, end)
        along = "above" if self.notation.direction > 0 else "beyond"
        number = f"{end:.10g}" if self.notation.is_plain else last
        begin = f"{start:.10g}" if self.notation.is_plain else first
        which = "lower" if self.notation.direction > 0 else "higher"
        self.problems.add(
            self.table.place(row, "to_m"),
            f"holds {number}, which is not {along} from_m, {begin}",
            name='column "to_m"',
            allowed=f"a chainage more than 1 mm {along} from_m",
            fix=f"write the {which} chainage as from_m",
        )
        return False

    def _unit_rows(self) -> Array | None:
        """Row (i,) in the units table of each interval's unit; -1, with a problem, if none."""
        if self.units is None:
            return None
        rows = self._rows_by_name(self.units)
        if "ground_unit" not in self.table.texts:
            self.problems.add(
                self.table.raw.head(),
                "is missing",
                name='column "ground_unit"',
                fix="add it: the project has a units table",
            )
            return np.full(self.count, -1)
        found = np.empty(self.count, dtype=np.int64)
        for row, name in enumerate(self.table.texts["ground_unit"].tolist()):
            found[row] = rows.get(name, -1)
            if found[row] < 0 and not self.table.wrong_in("ground_unit")[row]:
                hint = suggestion(name, rows)
                what = f"holds {quoted(name)}, which {self.units.raw.name} does not name"
                add = "add the unit to the units table"
                self.problems.add(
                    self.table.place(row, "ground_unit"),
                    what if name else "is empty",
                    name='column "ground_unit"',
                    allowed=few(sorted(rows)),
                    fix=f"did you mean {quoted(hint)}?" if hint else add,
                )
        return found

    def _rows_by_name(self, units: TypedTable) -> dict[str, int]:
        rows: dict[str, int] = {}
        for row, name in enumerate(units.texts["ground_unit"].tolist()):
            if (name in rows or not name) and not units.wrong_in("ground_unit")[row]:
                what = f"holds {quoted(name)}, which stands already" if name else "is empty"
                self.problems.add(
                    units.place(row, "ground_unit"),
                    what,
                    name='column "ground_unit"',
                    allowed="each ground unit once",
                    fix="give every ground unit one row and a name of its own",
                )
            if name:
                rows.setdefault(name, row)
        return rows
