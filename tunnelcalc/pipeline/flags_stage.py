"""The stage that screens every section for every flag."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from functools import partial

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.pipeline.stress_cases import larger_column
from tunnelcalc.pipeline.support_stages import failing_column
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.plugin.flag import NumberOfFlag
from tunnelcalc.plugin.isolation import NO_REASON, Contained, contained
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project
from tunnelcalc.results import FlagCount
from tunnelcalc.sections import Sections
from tunnelcalc.validity import (
    FlagSettings,
    Level,
    ScreeningLine,
    in_force,
    levels,
    overridden,
    override_numbers,
)
from tunnelcalc.vocabulary import Sort, ground_quantity

FLAG_LEVEL = "flag_level"
"""Column (n, f) int8: number of the level of each flag."""
ENDS = ("from_m", "to_m")
CHECK_FAILS = failing_column("")
WORSE_UNDER_LARGER_STRESS = (
    "closure_pct",
    "plastic_radius_m",
    "squeezing_strain_pct",
    "face_strain_pct",
)
"""Columns of which flags see the worse of the two stress cases."""


def screening_lines(
    flags: Sequence[ValidityFlag], settings: FlagSettings
) -> tuple[ScreeningLine, ...]:
    """Each flag as it is put to this project."""
    return tuple(
        ScreeningLine(
            flag.name,
            flag.meaning,
            flag.remedy,
            flag.quantity,
            flag.unit,
            tuple(flag.needs),
            in_force(flag.name, flag.thresholds, settings),
            "" if flag.applies is None else flag.applies.words,
            "" if flag.outside_applies is None else flag.outside_applies.words,
            settings.overrides_of(flag.name),
        )
        for flag in flags
    )


def flags_stage(
    flags: Sequence[ValidityFlag], settings: FlagSettings, incidents: Incidents
) -> Stage:
    """The level of every flag on every section.

    A flag that fails is an incident, and not assessed where it fails.
    """
    lines = screening_lines(flags, settings)

    def compute(sections: Sections) -> Mapping[str, Array]:
        complete = with_optional_columns(sections, flags)
        found = np.empty((sections.count, len(flags)), dtype=np.int8)
        for number, (flag, line) in enumerate(zip(flags, lines, strict=True)):
            screened = _screened(flag, complete)
            _tell(flag, screened, complete, incidents)
            found[:, number] = _levels(line, screened, complete)
        return {FLAG_LEVEL: found}

    needs = (*ENDS, "chainage_m", *(name for name in _reads(flags) if not _is_optional(name)))
    return Stage(
        "flags",
        "where the method reaches its limits: " + ", ".join(flag.name for flag in flags),
        tuple(dict.fromkeys(needs)),
        (FLAG_LEVEL,),
        compute,
        whole_alignment=True,
    )


def flags_of(project: Project, registry: Registry) -> tuple[ValidityFlag, ...]:
    """The flags that a project is screened for."""
    found = []
    for flag in registry.flags(project.plugins):
        of_project = getattr(flag, "of_project", None)
        found.append(flag if of_project is None else of_project(project))
    return tuple(found)


def flag_numbers(flag: ValidityFlag, sections: Sections) -> list[tuple[NumberOfFlag, Array]]:
    """The numbers (n,) behind the value of a flag; NaN where they could not be computed."""
    numbers: tuple[NumberOfFlag, ...] = getattr(flag, "numbers", ())
    complete = with_optional_columns(sections, (flag,)) if numbers else sections
    found = []
    for number in numbers:
        told = contained(
            lambda part, n=number: (n.compute(part),),  # type: ignore[misc]
            complete,
            ("number",),
            any_value=True,
        )
        found.append((number, told.values[0]))
    return found


def flag_value(flag: ValidityFlag, sections: Sections) -> Array:
    """(n,) value of a flag; NaN where it could not be computed or does not apply."""
    screened = _screened(flag, with_optional_columns(sections, (flag,)))
    value, applies, _ = screened.values
    return np.where(applies == 1, value, np.nan)


def flag_counts(lines: Sequence[ScreeningLine], sections: Sections) -> tuple[FlagCount, ...]:
    """On how many sections each flag has each level."""
    return tuple(
        FlagCount(
            line.name,
            line.meaning,
            line.quantity,
            line.unit,
            line.threshold,
            line.origin,
            line.remedy,
            *np.bincount(sections[FLAG_LEVEL][:, number], minlength=len(Level)).tolist(),
        )
        for number, line in enumerate(lines)
    )


def with_optional_columns(sections: Sections, flags: Iterable[ValidityFlag]) -> Sections:
    """The sections as flags see them.

    What a flag reads and no table gives is there: nothing, or a check that no class has and so
    never fails; such a column takes no memory. Where a section is run a second time with the
    larger stress, the worse of the two states stands.
    """
    sections = sections.with_columns(_worse_state(sections))
    absent = [n for n in _reads(flags) if n not in sections and _is_optional(n)]
    shape = (sections.count,)
    return sections.with_columns({name: np.broadcast_to(_nothing(name), shape) for name in absent})


def _worse_state(sections: Sections) -> dict[str, Array]:
    found = {}
    for name in WORSE_UNDER_LARGER_STRESS:
        larger = sections.get(larger_column(name))
        if larger is not None and name in sections:
            second = ~np.isnan(sections["larger_stress_mpa"])
            found[name] = np.where(second, np.maximum(sections[name], larger), sections[name])
    return found


def _nothing(name: str) -> Array:
    if name.startswith(CHECK_FAILS):
        return np.array(False)
    quantity = ground_quantity(name)
    is_text = quantity is not None and quantity.sort is Sort.CHOICE
    return np.array("", dtype=object) if is_text else np.array(np.nan)


def _reads(flags: Iterable[ValidityFlag]) -> tuple[str, ...]:
    names = (name for flag in flags for name in (*flag.needs, *flag.may_be_missing))
    return tuple(dict.fromkeys(names))


def _is_optional(name: str) -> bool:
    return name.startswith(CHECK_FAILS) or ground_quantity(name) is not None


def _screened(flag: ValidityFlag, sections: Sections) -> Contained:
    """Value, where it applies, and where its outside thresholds hold; (3, n)."""
    names = ("value", "applies", "outside_applies")
    return contained(partial(_asked, flag), sections, names, any_value=True)


def _asked(flag: ValidityFlag, sections: Sections) -> tuple[Array, Array, Array]:
    everywhere = np.ones(sections.count, dtype=bool)
    return (
        flag.value(sections),
        everywhere if flag.applies is None else flag.applies.test(sections),
        everywhere if flag.outside_applies is None else flag.outside_applies.test(sections),
    )


def _tell(
    flag: ValidityFlag, screened: Contained, sections: Sections, incidents: Incidents
) -> None:
    if not np.any(screened.reason):  # far quicker than comparing texts
        return
    faults = screened.reason[screened.reason != NO_REASON]
    for reason in dict.fromkeys(faults.tolist()):
        failed = screened.reason == reason
        incidents.add(f"flag {flag.name}", reason, sections["chainage_m"][failed])


def _levels(line: ScreeningLine, screened: Contained, sections: Sections) -> Array:
    value, applies, outside_applies = screened.values
    found = levels(value, line.thresholds, outside_applies == 1)
    found[applies == 0] = Level.CLEAR
    for need in line.needs:
        found[missing(sections[need])] = Level.NOT_ASSESSED
    numbers = override_numbers(line.overrides, sections["from_m"], sections["to_m"])
    return overridden(found, numbers)


def missing(column: Array) -> Array:
    """Where a column (n,) has no value: NaN, or an empty text."""
    return column == "" if column.dtype == object else np.isnan(column)
