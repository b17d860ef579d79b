"""The ground of a project: table over units, completed, checked and cut into sections."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Problems, Where
from tunnelcalc.inputs import alignment
from tunnelcalc.inputs.files import ProjectFolder
from tunnelcalc.inputs.ground_tables import (
    CHAINAGE,
    TABLE,
    UNITS,
    check_carried,
    other_columns,
    read_table,
)
from tunnelcalc.inputs.typed_table import TypedTable
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Gap
from tunnelcalc.sections import Sections
from tunnelcalc.text import few, quoted, suggestion
from tunnelcalc.vocabulary import DEVIATION_SUFFIX, GROUND, Limits, Sort, ground_quantity

SECTION_LENGTH = Limits(10 * SAME_PLACE_M, 1e6)
REQUIRED = ("gsi", "mi", "disturbance", "poisson_ratio", "intact_strength_mpa")
ASSUMED = {"stress_ratio": 1.0, "dilation_deg": 0.0}
"""The only two physical values that the program takes by itself, each with a flag."""
STRESS = "the in-situ stress"
STRESS_SOURCES = ("vertical_stress_mpa", "cover_m", "unit_weight_kn_m3")
STRESS_RULE = "vertical_stress_mpa, or cover_m with unit_weight_kn_m3"


@dataclass(frozen=True, slots=True)
class Ground:
    """Sections by increasing chainage, the columns that tables gave, and what was noticed."""

    sections: Sections
    columns: tuple[str, ...]
    gaps: tuple[Gap, ...]
    warnings: tuple[str, ...]


def read_ground(reader: Reader, folder: ProjectFolder, registry: Registry) -> Ground | None:
    """Read the `ground` part of a project; None, with problems, where it cannot be used."""
    problems = reader.problems
    longest = reader.number("section_length_m", SECTION_LENGTH, "m", required=False)
    gaps = list(_gaps(reader))
    others = list(other_columns(reader, registry))
    table = read_table(reader, folder, registry, TABLE, others)
    units = read_table(reader, folder, registry, UNITS, others)
    check_carried(reader, others, (table, units))
    reader.finish()
    if table is None or (units is None and reader.has(UNITS)):
        return None
    if units is not None and not (units.rows and units.has("ground_unit")):
        return None
    return _Assembly(table, units, gaps, longest, problems).ground()


def _gaps(reader: Reader) -> list[tuple[Gap, Where]]:
    found = []
    for entry in reader.tables_of("gaps", required=False):
        start = entry.number("from_m", CHAINAGE, "m")
        end = entry.number("to_m", CHAINAGE, "m")
        reason = entry.text("reason", "why there is no ground data")
        entry.finish()
        if start is None or end is None or reason is None:
            continue
        if end - start <= SAME_PLACE_M:
            entry.complain(
                "to_m",
                f"is {end:.10g}, not above from_m, which is {start:.10g}",
                fix="write the lower chainage as from_m",
            )
            continue
        found.append((Gap(start, end, reason), entry.where))
    return found


class _Assembly:
    """Puts the two tables together."""

    def __init__(
        self,
        table: TypedTable,
        units: TypedTable | None,
        gaps: list[tuple[Gap, Where]],
        longest_m: float | None,
        problems: Problems,
    ) -> None:
        self.table = table
        self.units = units
        self.gaps = gaps
        self.longest_m = longest_m
        self.problems = problems
        self.unit_row = self._unit_rows()

    def ground(self) -> Ground | None:
        table = self.table
        if "from_m" in table.numbers and "to_m" in table.numbers:
            self._check_intervals(table.numbers["from_m"], table.numbers["to_m"])
        numbers, texts = self._merged()
        self._check_complete(numbers)
        if len(self.problems):
            return None
        from_m, to_m = table.numbers["from_m"], table.numbers["to_m"]
        counts = alignment.section_counts(to_m - from_m, self.longest_m)
        if counts.sum() > alignment.MOST_SECTIONS:
            self.problems.add(
                Where(table.raw.file),
                f"gives {counts.sum()} sections",
                allowed=f"at most {alignment.MOST_SECTIONS}",
                fix="raise ground: section_length_m",
            )
            return None
        order = np.argsort(from_m, kind="stable")
        cut = alignment.cut_into_sections(from_m[order], to_m[order], self.longest_m)
        rows = order[cut.interval]
        columns: dict[str, Array] = {
            "chainage_m": (cut.from_m + cut.to_m) / 2,
            "from_m": cut.from_m,
            "to_m": cut.to_m,
        }
        columns |= {name: values[rows] for name, values in texts.items()}
        columns |= {name: values[rows] for name, values in numbers.items()}
        for name, value in ASSUMED.items():
            absent = np.isnan(columns[name])
            columns[name.replace("_deg", "") + "_assumed"] = absent
            columns[name] = np.where(absent, value, columns[name])
        for quantity in GROUND.values():
            # A column that no table gives takes no memory, and whoever needs it finds NaN.
            is_text = quantity.sort is Sort.CHOICE
            nothing = np.array("", dtype=object) if is_text else np.array(np.nan)
            columns.setdefault(quantity.name, np.broadcast_to(nothing, cut.from_m.shape))
        return Ground(
            Sections(columns),
            self._given(numbers, texts),
            tuple(sorted((gap for gap, _ in self.gaps), key=lambda gap: gap.from_m)),
            self._warnings(numbers, texts),
        )

    def _unit_rows(self) -> Array | None:
        """Row (i,) in the units table of each interval's unit; -1, with a problem, if none."""
        if self.units is None:
            return None
        names = self.units.texts["ground_unit"].tolist()
        rows: dict[str, int] = {}
        for row, name in enumerate(names):
            if name in rows or not name:
                what = f"holds {quoted(name)}, which stands already" if name else "is empty"
                self.problems.add(
                    self.units.place(row, "ground_unit"),
                    what,
                    name='column "ground_unit"',
                    allowed="each ground unit once",
                    fix="give every ground unit one row and a name of its own",
                )
            if name:
                rows.setdefault(name, row)
        if "ground_unit" not in self.table.texts:
            self.problems.add(
                Where(self.table.raw.file, self.table.raw.header_line),
                "is missing",
                name='column "ground_unit"',
                fix="add it: the project has a units table",
            )
            return np.full(self.table.rows, -1)
        found = np.empty(self.table.rows, dtype=np.int64)
        for row, name in enumerate(self.table.texts["ground_unit"].tolist()):
            found[row] = rows.get(name, -1)
            if found[row] < 0:
                hint = suggestion(name, rows)
                what = f"holds {quoted(name)}, which {self.units.raw.file} does not name"
                self.problems.add(
                    self.table.place(row, "ground_unit"),
                    what if name else "is empty",
                    name='column "ground_unit"',
                    allowed=few(sorted(rows)),
                    fix=f"did you mean {quoted(hint)}?"
                    if hint
                    else "add the unit to the units table",
                )
        return found

    def _check_intervals(self, from_m: Array, to_m: Array) -> None:
        pieces = alignment.gap_pieces(self.gaps)
        complete = not self.table.raw.problems
        for row, (start, end) in enumerate(zip(from_m.tolist(), to_m.tolist(), strict=True)):
            for name, value in (("from_m", start), ("to_m", end)):
                if np.isnan(value) and not self.table.wrong_in(name)[row]:
                    self.problems.add(
                        self.table.place(row, name),
                        "is empty",
                        name=f'column "{name}"',
                        allowed=CHAINAGE.describe("m"),
                        fix="write the chainage",
                    )
            if np.isnan(start) or np.isnan(end):
                complete = False
                continue
            if end - start <= SAME_PLACE_M:
                self.problems.add(
                    self.table.place(row, "to_m"),
                    f"holds {end:.10g}, which is not above from_m, {start:.10g}",
                    name='column "to_m"',
                    allowed="a chainage more than 1 mm above from_m",
                    fix="write the lower chainage as from_m",
                )
                complete = False
                continue
            pieces.append(alignment.Piece(start, end, self.table.place(row), False))
        alignment.check_order(pieces, complete, self.problems)

    def _merged(self) -> tuple[dict[str, Array], dict[str, Array]]:
        """Numbers and texts (i,) by interval: the table's cell, else the unit's."""
        numbers: dict[str, Array] = {}
        texts: dict[str, Array] = {}
        names = dict.fromkeys([*self.table.numbers, *(self.units.numbers if self.units else ())])
        for name in names:
            if name not in ("from_m", "to_m"):
                own = self.table.numbers.get(name)
                values = np.full(self.table.rows, np.nan) if own is None else own.copy()
                empty = np.isnan(values)
                values[empty] = self._of_unit(name)[empty]
                numbers[name] = values
        for name in dict.fromkeys([*self.table.texts, *(self.units.texts if self.units else ())]):
            values = self.table.texts.get(name, np.full(self.table.rows, "", dtype=object)).copy()
            of_unit = self.units.texts.get(name) if self.units else None
            if of_unit is not None and self.unit_row is not None and name != "ground_unit":
                empty = (values == "") & (self.unit_row >= 0)
                values[empty] = of_unit[self.unit_row[empty]]
            texts[name] = values
        texts.setdefault("ground_unit", np.full(self.table.rows, "", dtype=object))
        self._settle_intact_modulus(numbers)
        for quantity in GROUND.values():
            if quantity.used and quantity.sort is Sort.NUMBER:
                numbers.setdefault(quantity.name, np.full(self.table.rows, np.nan))
        return numbers, texts

    def _of_unit(self, name: str) -> Array:
        if self.units is None or self.unit_row is None or name not in self.units.numbers:
            return np.full(self.table.rows, np.nan)
        values = self.units.numbers[name][self.unit_row]
        return np.where(self.unit_row >= 0, values, np.nan)

    def _settle_intact_modulus(self, numbers: dict[str, Array]) -> None:
        """Either the intact modulus or the modulus ratio; what the table says of one overrides
        what the unit says of the other."""
        pair = ("intact_modulus_mpa", "modulus_ratio")
        if not all(name in numbers for name in pair):
            return
        for table in (self.table, self.units):
            if table is None or not all(name in table.numbers for name in pair):
                continue
            both = ~np.isnan(table.numbers[pair[0]]) & ~np.isnan(table.numbers[pair[1]])
            for row in np.flatnonzero(both).tolist():
                self.problems.add(
                    table.place(row, pair[1]),
                    f"stands beside {pair[0]}",
                    name=f'column "{pair[1]}"',
                    allowed="one of the two in a row",
                    fix="keep the one that was measured",
                )
        for name, other in (pair, pair[::-1]):
            own = self.table.numbers.get(name)
            if own is not None:
                numbers[other][~np.isnan(own)] = np.nan

    def _check_complete(self, numbers: dict[str, Array]) -> None:
        for name in REQUIRED:
            absent = np.isnan(numbers[name])
            self._tell_missing(name, self._has(name), absent, self._told((name,)))
        measured, *weight = STRESS_SOURCES
        absent = np.isnan(numbers[measured]) & np.isnan(numbers[weight[0]] * numbers[weight[1]])
        given = self._has(measured) or all(self._has(name) for name in weight)
        self._tell_missing(STRESS, given, absent, self._told(STRESS_SOURCES))

    def _has(self, name: str) -> bool:
        return self.table.has(name) or (self.units is not None and self.units.has(name))

    def _told(self, names: Sequence[str]) -> Array:
        """Mask (i,) of the intervals about whose cells a problem is told already."""
        told = np.zeros(self.table.rows, dtype=bool)
        for name in names:
            told |= self.table.wrong_in(name)
            if self.units is not None and self.unit_row is not None:
                told |= self.units.wrong_in(name)[self.unit_row] | (self.unit_row < 0)
        return told

    def _tell_missing(self, name: str, given: bool, absent: Array, told: Array) -> None:
        files = self.table.raw.file + (f" nor {self.units.raw.file}" if self.units else "")
        quantity = GROUND.get(name)
        allowed = quantity.allowed() if quantity else STRESS_RULE
        if not given:
            self.problems.add(
                Where(self.table.raw.file, self.table.raw.header_line),
                f"is missing: neither {files} gives it" if self.units else "is missing",
                name=f'column "{name}"' if quantity else name,
                allowed=allowed,
                fix="add the column; there is no default",
            )
            return
        for row in np.flatnonzero(absent & ~told).tolist():
            where = self._interval(row)
            unit = self.table.texts.get("ground_unit")
            of_unit = f", ground unit {quoted(unit[row])}" if unit is not None and unit[row] else ""
            self.problems.add(
                self.table.place(row, name),
                "has no value here" + (" and none for its ground unit" if self.units else ""),
                name=f'column "{name}"' if quantity else name,
                allowed=allowed,
                context=f"{where}{of_unit}",
                fix="fill it in; there is no default",
            )

    def _interval(self, row: int) -> str:
        ends = [self.table.numbers.get(name) for name in ("from_m", "to_m")]
        if any(end is None for end in ends):
            return f"row {row + 1}"
        return f"interval {alignment.span(*(float(end[row]) for end in ends if end is not None))}"

    def _given(self, numbers: dict[str, Array], texts: dict[str, Array]) -> tuple[str, ...]:
        """Columns that the tables gave, in the order of the vocabulary, free ones last."""
        tables = [table for table in (self.table, self.units) if table is not None]
        given = {name for table in tables for name in (*table.numbers, *table.texts)}
        ordered = ["ground_unit"]
        for name in GROUND:
            for column in (name, name + DEVIATION_SUFFIX):
                if column in given or column in ASSUMED or column == "vertical_stress_mpa":
                    ordered.append(column)
        free = [name for name in (*texts, *numbers) if name in given and name not in ordered]
        return tuple(dict.fromkeys([*ordered, *free]))

    def _warnings(self, numbers: dict[str, Array], texts: dict[str, Array]) -> tuple[str, ...]:
        def unused(name: str) -> bool:
            quantity = ground_quantity(name)
            return quantity is not None and not quantity.used

        idle = sorted(name for name in (*numbers, *texts) if unused(name))
        warnings = []
        if idle:
            warnings.append(
                "read, checked and carried along, but not computed with: " + ", ".join(idle)
            )
        if np.all(np.isnan(numbers["water_head_m"])):
            warnings.append("no water_head_m is given: stresses and strength are total")
        return tuple(warnings)
