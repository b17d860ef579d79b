"""The validity screen of one section: every flag with level, value and threshold."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass

import numpy as np

from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.explain.recorded import Recorded
from tunnelcalc.explain.section import ComputedSection
from tunnelcalc.explain.tables import section_row
from tunnelcalc.outputs.cells import number_text
from tunnelcalc.outputs.flags_table import FLAGS_FILE
from tunnelcalc.outputs.tables import flag_texts
from tunnelcalc.pipeline.flags_stage import (
    FLAG_LEVEL,
    flag_numbers,
    flag_value,
    flags_of,
    flags_stage,
    missing,
    screening_lines,
    with_optional_columns,
)
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.sections import Sections
from tunnelcalc.validity import YES_OR_NO, Level, ScreeningLine, is_raised

BY_ZONING = "rule_not_applied"
SCHEDULED = "scheduled_class"
"""Columns that follow from the whole alignment: taken from the run."""
ORDER = (Level.OUTSIDE, Level.ADVISORY, Level.OVERRIDDEN, Level.NOT_ASSESSED, Level.CLEAR)


@dataclass(frozen=True, slots=True)
class Screened:
    """The flags of a project on one section."""

    lines: tuple[ScreeningLine, ...]
    levels: tuple[Level, ...]
    values: tuple[float, ...]
    numbers: tuple[str, ...]
    sections: Sections

    def block(self) -> SheetBlock:
        """Every flag, the gravest first."""
        order = sorted(range(len(self.lines)), key=lambda k: ORDER.index(self.levels[k]))
        notes = [note for k in order for note in self._notes(k)]
        return SheetBlock("Validity screen", tuple(self._line(k) for k in order), tuple(notes))

    def _line(self, number: int) -> SheetLine:
        line, level = self.lines[number], self.levels[number]
        meaning = f"{level.word}: {line.quantity}"
        if level is Level.NOT_ASSESSED:
            absent = [name for name in line.needs if missing(self.sections[name])[0]]
            meaning += f"; not given: {', '.join(absent)}" if absent else ""
        source = f"{line.threshold}; {line.origin}"
        value = math.nan if level is Level.NOT_ASSESSED else self.values[number]
        unit = "(1 yes, 0 no)" if line.unit == YES_OR_NO else line.unit
        return SheetLine(line.name, meaning, "", {}, value, unit, source)

    def _notes(self, number: int) -> Iterator[str]:
        line, level = self.lines[number], self.levels[number]
        if level in (Level.OUTSIDE, Level.ADVISORY):
            numbers = self.numbers[number]
            parts = (line.meaning, *((numbers,) if numbers else ()), line.remedy)
            yield f"{line.name}, {level.word}: {'; '.join(parts)}"
        if level is Level.OVERRIDDEN:
            middle = float(self.sections["chainage_m"][0])
            for override in line.overrides:
                if override.from_m <= middle <= override.to_m:
                    yield f"{line.name}: accepted by {override.person}: {override.reason}"


def screened(run: Recorded, section: ComputedSection) -> Screened:
    """Every flag on the section, by the functions of the run."""
    project = section.project
    flags = flags_of(project, section.registry)
    raised_in_run = section_row(run, section).get("flags", "").split(";")
    scheduled = section_row(run, section).get("scheduled_class", "")
    names = project.class_names
    zoned = {
        BY_ZONING: np.array([BY_ZONING in raised_in_run]),
        SCHEDULED: np.array([names.index(scheduled) if scheduled in names else NONE_ADEQUATE]),
    }
    sections = flags_stage(flags, project.flags, Incidents())(section.sections.with_columns(zoned))
    return Screened(
        screening_lines(flags, project.flags),
        tuple(Level(int(code)) for code in sections[FLAG_LEVEL][0]),
        tuple(float(flag_value(flag, sections)[0]) for flag in flags),
        tuple(_numbers(flag, sections) for flag in flags),
        with_optional_columns(sections, flags),
    )


def _numbers(flag: ValidityFlag, sections: Sections) -> str:
    return "; ".join(
        f"{number.meaning} {number_text(float(values[0]))} {number.unit}"
        for number, values in flag_numbers(flag, sections)
    )


def flag_differences(run: Recorded, section: ComputedSection, found: Screened) -> Iterator[str]:
    """Levels that the tables of the run do not say."""
    row = section_row(run, section)
    raised = np.array([[bool(is_raised(np.array([level]))[0]) for level in found.levels]])
    (names,) = flag_texts(raised, [line.name for line in found.lines])
    if "flags" in row and row["flags"] != names:
        yield f"sections.csv, flags: the table says {row['flags']}, computed {names}"
    middle = section.chainage_m
    recorded = {
        entry["flag"]: entry["level"]
        for entry in run.table(FLAGS_FILE)
        if _number(entry, "from_m") <= middle <= _number(entry, "to_m")
    }
    for line, level in zip(found.lines, found.levels, strict=True):
        said = recorded.get(line.name, "nothing")
        if said != level.word:
            yield f"{FLAGS_FILE}, {line.name}: the table says {said}, computed {level.word}"


def _number(entry: dict[str, str], name: str) -> float:
    try:
        return float(entry.get(name) or math.nan)
    except ValueError:
        return math.nan
