"""Groups of an AGS 4 file through the library python-ags4: columns of text, units, lines."""

from __future__ import annotations

import io
import logging
import re
import warnings
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from tunnelcalc.errors import Problems, Where
from tunnelcalc.plugin.registry import describe
from tunnelcalc.text import as_number, few, number_fix, quoted, shown
from tunnelcalc.vocabulary import Limits

LINES = "line_number"
_SILENT = logging.NullHandler()


@dataclass(frozen=True, slots=True)
class Group:
    """One group: `columns[heading][r]` is the text of row r, `lines[r]` its line."""

    file: str
    name: str
    columns: Mapping[str, Sequence[str]]
    units: Mapping[str, str]
    lines: Sequence[int]
    head: int
    unit_line: int

    def has(self, heading: str) -> bool:
        return heading in self.columns

    def text(self, heading: str, row: int) -> str:
        return self.columns[heading][row].strip() if heading in self.columns else ""

    def number(self, heading: str, row: int, limits: Limits, problems: Problems) -> float | None:
        """A number within limits; None where the cell is empty or, with a problem, none."""
        text = self.text(heading, row)
        if not text:
            return None
        value = as_number(text)
        if value is not None and limits.minimum <= value <= limits.maximum:
            return value
        problems.add(
            Where(self.file, self.lines[row]),
            f"holds {quoted(text)}, which is {'not a number' if value is None else 'out of range'}",
            name=f"{self.name} heading {heading}",
            allowed=limits.describe(self.units.get(heading, "")),
            fix=number_fix(text) if value is None else "correct the value, and check its unit",
        )
        return None

    def check_unit(self, heading: str, allowed: Sequence[str], problems: Problems) -> None:
        """Tell a unit other than those that need no factor."""
        unit = self.units.get(heading, "")
        if heading not in self.columns or unit in allowed:
            return
        problems.add(
            Where(self.file, self.unit_line),
            f"has the unit {quoted(unit)}" if unit else "has no unit",
            name=f"{self.name} heading {heading}",
            allowed=" or ".join(allowed),
            fix="have the file written in this unit: values are not converted",
        )


def groups_of(file: str, text: str, problems: Problems) -> dict[str, Group]:
    """Every group; raises InputError where the text has none or the library is not there."""
    try:
        from python_ags4 import AGS4
    except ImportError:
        problems.add(
            Where(file),
            "needs the library python-ags4, which is not installed",
            fix="install python-ags4, or tunnelcalc with its extra ags",
        )
        problems.raise_if_any()
        raise
    logging.getLogger("python_ags4").addHandler(_SILENT)
    try:
        data, _, places = AGS4.AGS4_to_dict(io.StringIO(text), get_line_numbers=True)
        groups = {name: _group(file, name, data[name], places[name]) for name in data}
    except Exception as error:  # the library raises nearly anything on what is no AGS 4
        _tell_broken(file, error, problems)
        problems.raise_if_any()
        raise
    return groups


def _group(
    file: str, name: str, data: Mapping[str, Sequence[str]], places: Mapping[str, object]
) -> Group:
    kinds = [str(kind) for kind in data.get("HEADING", ())]
    rows = [row for row, kind in enumerate(kinds) if kind == "DATA"]
    lines = [int(line) for line in data.get(LINES, ())]
    unit_row = kinds.index("UNIT") if "UNIT" in kinds else None
    headings = [heading for heading in data if heading not in ("HEADING", LINES)]
    return Group(
        file,
        name,
        {heading: [data[heading][row] for row in rows] for heading in headings},
        {h: "" if unit_row is None else data[h][unit_row].strip() for h in headings},
        [lines[row] for row in rows],
        _line(places.get("HEADING")),
        _line(places.get("GROUP")) if unit_row is None else lines[unit_row],
    )


def _line(place: object) -> int:
    return place if isinstance(place, int) else 0


def _tell_broken(file: str, error: Exception, problems: Problems) -> None:
    found = re.search(r"Line (\d+)", str(error))
    reason = shown(str(error)) if type(error).__name__ == "AGS4Error" else describe(error)
    problems.add(
        Where(file, int(found[1]) if found else 0),
        f"is not AGS 4 data: {reason}",
        allowed="GROUP, HEADING, UNIT, TYPE and DATA rows, with quoted values",
        fix="have the file checked and written again by whoever made it",
    )


def breaches(file: str, text: str) -> list[str]:
    """What the library's own checker says against the rules of the format, by rule."""
    from python_ags4 import AGS4

    with warnings.catch_warnings():
        warnings.simplefilter("ignore")
        try:
            found = AGS4.check_file(io.StringIO(text, newline=""))
        except Exception as error:  # a checker that fails must not cost the file
            return [f"{file}: the rules of AGS 4 could not be checked: {describe(error)}"]
    told = []
    for rule, places in sorted(found.items()):
        if not rule.startswith("AGS Format Rule"):
            continue
        lines = dict.fromkeys(str(p["line"]) for p in places if isinstance(p["line"], int))
        told.append(f"{file}: breaks {rule}{', lines ' if lines else ''}{few(list(lines))}")
    return told
