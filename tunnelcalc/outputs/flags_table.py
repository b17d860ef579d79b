"""`flags.csv`: every flag over the whole alignment, a row a stretch of one level."""

from __future__ import annotations

import os
from collections.abc import Callable, Iterator, Sequence
from pathlib import Path
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.outputs.cells import number_texts, text_cell
from tunnelcalc.plugin.flag import NumberOfFlag
from tunnelcalc.project import Project
from tunnelcalc.sections import Sections
from tunnelcalc.validity import (
    LEVEL_WORDS,
    NO_OVERRIDE,
    YES_OR_NO,
    Level,
    ScreeningLine,
    override_numbers,
    severity,
)

FLAGS_FILE = "flags.csv"
ROWS_AT_ONCE = 20_000
FLAGS_HEADER = (
    "from_m",
    "to_m",
    "flag",
    "level",
    "quantity",
    "value",
    "chainage_m",
    "unit",
    "numbers",
    "threshold",
    "threshold_source",
    "meaning",
    "remedy",
    "person",
    "reason",
)
LEVEL_CELLS = np.array(LEVEL_WORDS, dtype=object)
Numbers = Sequence[tuple[NumberOfFlag, Array]]
NOT_COMPUTED = "the value could not be computed"


class Stretches(NamedTuple):
    """Consecutive sections of one level of one flag, one by one (k,).

    `worst` is the position of the section whose value is nearest to the threshold or furthest
    beyond it; where no section has a value it is the first.
    """

    first: Array
    last: Array
    worst: Array


def stretches_of(found: Array, kind: Array, from_m: Array, to_m: Array, beyond: Array) -> Stretches:
    """Where the levels (n,) change, or `kind` (n,), or the alignment has a gap."""
    new = np.ones(found.size, dtype=bool)
    new[1:] = (found[1:] != found[:-1]) | (kind[1:] != kind[:-1])
    new[1:] |= from_m[1:] - to_m[:-1] > SAME_PLACE_M
    first = np.flatnonzero(new)
    if not first.size:
        return Stretches(first, first, first)
    last = np.append(first[1:], found.size) - 1
    most = np.repeat(np.maximum.reduceat(beyond, first), last - first + 1)
    candidates = np.flatnonzero(beyond == most)
    return Stretches(first, last, candidates[np.searchsorted(candidates, first)])


def write_flags(
    folder: Path,
    project: Project,
    sections: Sections,
    lines: Sequence[ScreeningLine],
    value_of: Callable[[int], Array],
    numbers_of: Callable[[int], Numbers] = lambda number: (),
) -> None:
    """Write `flags.csv`, flags by name.

    `sections` has the levels of the flags in `flag_level`. `value_of` gives the values (n,) of
    the flag of a number, one flag at a time, so that never all of them are in memory;
    `numbers_of` the numbers that stand behind them.
    """
    plain = project.notation.is_plain
    ends, place = ((), ()) if plain else (("from_chainage", "to_chainage"), ("chainage",))
    header = (*FLAGS_HEADER[:2], *ends, *FLAGS_HEADER[2:7], *place, *FLAGS_HEADER[7:])
    with (folder / FLAGS_FILE).open("w", encoding="utf-8", newline="") as stream:
        stream.write(",".join(header) + "\n")
        for number in sorted(range(len(lines)), key=lambda k: lines[k].name):
            found = sections["flag_level"][:, number]
            of_flag = (found, value_of(number), numbers_of(number))
            for rows in _rows(project, sections, lines[number], *of_flag):
                stream.writelines(rows)
        stream.flush()
        os.fsync(stream.fileno())


def _rows(
    project: Project,
    sections: Sections,
    line: ScreeningLine,
    found: Array,
    value: Array,
    numbers: Numbers,
) -> Iterator[Iterator[str]]:
    from_m, to_m = sections["from_m"], sections["to_m"]
    accepted = override_numbers(line.overrides, from_m, to_m)
    accepted[found != Level.OVERRIDDEN] = NO_OVERRIDE
    finite = np.isfinite(value)
    beyond = np.where(finite, severity(value, line.thresholds), -np.inf)
    every = stretches_of(found, accepted, from_m, to_m, beyond)
    missing = _missing(line, sections, every)
    for start in range(0, every.first.size, ROWS_AT_ONCE):
        part = slice(start, start + ROWS_AT_ONCE)
        first, last, worst = (positions[part] for positions in every)
        level = found[first]
        told = finite[worst] & (level != Level.NOT_ASSESSED)
        at = np.where(told, sections["chainage_m"][worst], np.nan)
        person, reason = _who_and_why(line, level, accepted[first], missing[part])
        columns = [
            *_places(project, from_m[first], to_m[last]),
            [text_cell(line.name)] * first.size,
            LEVEL_CELLS[level].tolist(),
            [text_cell(line.quantity)] * first.size,
            _value_cells(line, np.where(told, value[worst], np.nan)),
            *_place(project, at),
            [text_cell(line.unit)] * first.size,
            _number_cells(numbers, worst, told),
            [_of_line(line)] * first.size,
            person,
            reason,
        ]
        yield (",".join(cells) + "\n" for cells in zip(*columns, strict=True))


def _of_line(line: ScreeningLine) -> str:
    """Cells that are the same in every row of a flag."""
    cells = (line.threshold, line.origin, line.meaning, line.remedy)
    return ",".join(text_cell(cell) for cell in cells)


def _number_cells(numbers: Numbers, worst: Array, told: Array) -> list[str]:
    """The numbers behind the value at the section that it is told of."""
    if not numbers:
        return [""] * worst.size
    texts = [
        [f"{number.meaning} {text} {number.unit}" for text in number_texts(values[worst])]
        for number, values in numbers
    ]
    return [
        text_cell("; ".join(parts)) if shown else ""
        for *parts, shown in zip(*texts, told.tolist(), strict=True)
    ]


def _value_cells(line: ScreeningLine, value: Array) -> list[str]:
    if line.unit == YES_OR_NO:
        return ["" if v != v else "yes" if v else "no" for v in value.tolist()]
    return number_texts(value)


def _who_and_why(
    line: ScreeningLine, level: Array, accepted: Array, missing: Array
) -> tuple[list[str], list[str]]:
    """Who accepted the flag and why; of what is not assessed, what is missing."""
    persons = [*(text_cell(o.person) for o in line.overrides), ""]
    reasons = [*(text_cell(o.reason) for o in line.overrides), ""]
    numbers = accepted.tolist()  # NO_OVERRIDE is -1: the last of the cells
    why = [
        _absent(line, lacks) if of == Level.NOT_ASSESSED else reasons[number]
        for of, number, lacks in zip(level.tolist(), numbers, missing.tolist(), strict=True)
    ]
    return [persons[number] for number in numbers], why


def _missing(line: ScreeningLine, sections: Sections, every: Stretches) -> Array:
    """(k,) which needed columns miss a value somewhere in each stretch, one bit a column."""
    found = np.zeros(every.first.size, dtype=np.int64)
    if not every.first.size:
        return found
    for bit, need in enumerate(line.needs):
        if need not in sections:
            found |= 1 << bit
            continue
        column = sections[need]
        lacks = column == "" if column.dtype == object else np.isnan(column)
        found |= np.logical_or.reduceat(lacks, every.first).astype(np.int64) << bit
    return found


def _absent(line: ScreeningLine, lacks: int) -> str:
    names = [need for bit, need in enumerate(line.needs) if lacks >> bit & 1]
    return text_cell("no " + ", no ".join(names) if names else NOT_COMPUTED)


def _places(project: Project, from_m: Array, to_m: Array) -> list[list[str]]:
    metres = [number_texts(from_m), number_texts(to_m)]
    if project.notation.is_plain:
        return metres
    written = (project.notation.written(from_m), project.notation.written(to_m, True))
    return [*metres, *([text_cell(text) for text in texts] for texts in written)]


def _place(project: Project, at: Array) -> list[list[str]]:
    metres = number_texts(at)
    if project.notation.is_plain:
        return [metres]
    known = ~np.isnan(at)
    cells = np.full(at.shape, "", dtype=object)
    cells[known] = [text_cell(text) for text in project.notation.written(at[known])]
    return [metres, cells.tolist()]
