"""The tables with a row a section: sections, classes, checks."""

from __future__ import annotations

import os
from collections.abc import Sequence
from itertools import chain
from pathlib import Path
from typing import TextIO

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.outputs.cells import number_texts, text_cell
from tunnelcalc.project import Project
from tunnelcalc.results import STRESS_CASES, CheckLine, governing_labels
from tunnelcalc.schedule.selection import NONE_ADEQUATE_NAME
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import Outcome
from tunnelcalc.validity import is_raised

SECTION_COLUMNS = (
    "radius_m",
    "water_pressure_mpa",
    "effective_vertical_stress_mpa",
    "effective_horizontal_stress_mpa",
    "in_situ_stress_mpa",
    "larger_stress_mpa",
    "mb",
    "s",
    "a",
    "rock_mass_strength_mpa",
    "tensile_strength_mpa",
    "global_strength_mpa",
    "friction_angle_deg",
    "cohesion_mpa",
    "deformation_modulus_mpa",
    "critical_pressure_mpa",
    "plastic_radius_m",
    "closure_mm",
    "closure_pct",
    "squeezing_strength_mpa",
    "squeezing_strain_pct",
    "face_strain_pct",
    "spalling_depth_m",
)
"""Columns of `sections.csv` between the ground's and the classes."""

OPTIONAL_COLUMNS = (
    "residual_mb",
    "residual_s",
    "residual_a",
    "residual_friction_angle_deg",
    "residual_cohesion_mpa",
    "ring_mb",
    "ring_s",
    "ring_a",
    "ring_modulus_mpa",
)
"""Columns of `sections.csv` where some section has a value."""

CLASS_HEADER = (
    "chainage_m",
    "support_class",
    "stress_case",
    "installation_closure_mm",
    "support_pressure_mpa",
    "supported_closure_mm",
    "supported_closure_pct",
    "supported_plastic_radius_m",
    "first_failure_pressure_mpa",
    "first_failure_closure_mm",
    "full_mobilisation_pressure_mpa",
    "full_mobilisation_closure_mm",
    "missing_pressure_mpa",
    "factor_of_safety",
    "governing_check",
    "adequate",
)

CHECK_HEADER = (
    "chainage_m",
    "support_class",
    "stress_case",
    "element",
    "check",
    "demand",
    "capacity",
    "unit",
    "factor_of_safety",
    "outcome",
    "reason",
)

OUTCOME_WORDS = tuple(outcome.name.lower() for outcome in Outcome)
"""By the number of the outcome: pass, fail, not_evaluated."""

CHAINAGE = "chainage_m"
WRITTEN_CHAINAGE = "chainage"
WRITTEN_ENDS = {"chainage": "chainage_m", "from_chainage": "from_m", "to_chainage": "to_m"}
"""Columns with chainages as the project writes them, and the metres that they stand beside."""
ROWS_AT_ONCE = 20_000


class ChunkTables:
    """Writes `classes.csv` and `checks.csv` while chunks of sections are finished."""

    def __init__(self, folder: Path, project: Project, checks: Sequence[CheckLine]) -> None:
        self.project = project
        self.checks = checks
        written = () if project.notation.is_plain else (WRITTEN_CHAINAGE,)
        self._classes = _opened(folder / "classes.csv", (CHAINAGE, *written, *CLASS_HEADER[1:]))
        self._checks = _opened(folder / "checks.csv", (CHAINAGE, *written, *CHECK_HEADER[1:]))

    def write(self, chunk: Sections) -> None:
        """Append the rows of a chunk: by section, then class, then element and check."""
        chainage = _places(chunk, self.project)
        by_class = [
            self._class_lines(chunk, chainage, number)
            for number in range(len(self.project.support_classes))
        ]
        self._classes.writelines(chain.from_iterable(zip(*by_class, strict=True)))
        by_check = [
            self._check_lines(chunk, chainage, position, line)
            for position, line in enumerate(self.checks)
        ]
        self._checks.writelines(chain.from_iterable(zip(*by_check, strict=True)))

    def close(self) -> None:
        """Finish both files and make sure that they are on the disk."""
        for stream in (self._classes, self._checks):
            _finish(stream)

    def abandon(self) -> None:
        """Close both files of a run that failed."""
        for stream in (self._classes, self._checks):
            stream.close()

    def _class_lines(self, chunk: Sections, chainage: list[str], number: int) -> list[str]:
        name = text_cell(self.project.class_names[number])
        labels = [text_cell(label) for label in governing_labels(self.checks, number)]
        numeric = [
            number_texts(chunk[column][:, number])
            for column in (
                "installation_closure_mm",
                "class_support_pressure_mpa",
                "class_closure_mm",
                "class_closure_pct",
                "class_plastic_radius_m",
                "class_first_failure_pressure_mpa",
                "class_first_failure_closure_mm",
                "class_full_pressure_mpa",
                "class_full_closure_mm",
                "class_missing_pressure_mpa",
                "class_factor_of_safety",
            )
        ]
        cases = _cases(chunk, number)
        governing = [labels[int(code)] for code in chunk["class_governing"][:, number].tolist()]
        adequate = np.where(chunk["class_adequate"][:, number], "yes", "no").tolist()
        rows = zip(chainage, cases, *numeric, governing, adequate, strict=True)
        return [
            f"{at},{name},{case},{','.join(numbers)},{check},{ok}\n"
            for at, case, *numbers, check, ok in rows
        ]

    def _check_lines(
        self, chunk: Sections, chainage: list[str], position: int, line: CheckLine
    ) -> list[str]:
        name = text_cell(line.class_name)
        middle = ",".join(text_cell(t) for t in (line.element, line.check))
        unit = text_cell(line.unit)
        demand, capacity, factor = (
            number_texts(chunk[column][:, position])
            for column in ("check_demand", "check_capacity", "check_factor_of_safety")
        )
        outcome = [OUTCOME_WORDS[c] for c in chunk["check_outcome"][:, position].tolist()]
        reason = [text_cell(text) for text in chunk["check_reason"][:, position].tolist()]
        cases = _cases(chunk, line.class_number)
        return [
            f"{at},{name},{case},{middle},{d},{c},{unit},{f},{o},{why}\n"
            for at, case, d, c, f, o, why in zip(
                chainage, cases, demand, capacity, factor, outcome, reason, strict=True
            )
        ]


def _cases(chunk: Sections, class_number: int) -> list[str]:
    """The stress case that each section's row of a class is told of."""
    return [STRESS_CASES[case] for case in chunk["class_stress_case"][:, class_number].tolist()]


def write_sections(
    folder: Path, project: Project, sections: Sections, flag_names: Sequence[str]
) -> None:
    """Write `sections.csv`."""
    ends = (CHAINAGE, "from_m", "to_m")
    computed = {*SECTION_COLUMNS, *OPTIONAL_COLUMNS}
    ground = [name for name in project.ground_columns if name not in computed]
    names = [*ends, *_profile_columns(sections), *ground, *_section_columns(sections)]
    written = {} if project.notation.is_plain else WRITTEN_ENDS
    header = (*names[:3], *written, *names[3:], "required_class", "scheduled_class", "flags")
    stream = _opened(folder / "sections.csv", [text_cell(name) for name in header])
    class_cells = [text_cell(name) for name in (*project.class_names, NONE_ADEQUATE_NAME)]
    for start in range(0, sections.count, ROWS_AT_ONCE):
        part = sections.take(slice(start, start + ROWS_AT_ONCE))
        columns = [_cells(part[name]) for name in names]
        columns[3:3] = [
            [text_cell(text) for text in project.notation.written(part[name], name == "to_m")]
            for name in written.values()
        ]
        for name in ("required_class", "scheduled_class"):
            # NONE_ADEQUATE is -1: the last of the cells.
            columns.append([class_cells[number] for number in part[name].tolist()])
        columns.append(flag_texts(is_raised(part["flag_level"]), flag_names))
        stream.writelines(",".join(row) + "\n" for row in zip(*columns, strict=True))
    _finish(stream)


def _section_columns(sections: Sections) -> tuple[str, ...]:
    """What every run writes, and what only some laws of the ground have."""
    optional = [
        name
        for name in OPTIONAL_COLUMNS
        if name in sections and not np.all(np.isnan(sections[name]))
    ]
    last = SECTION_COLUMNS.index("friction_angle_deg")
    return (*SECTION_COLUMNS[:last], *optional, *SECTION_COLUMNS[last:])


def _profile_columns(sections: Sections) -> tuple[str, ...]:
    """Profiles are written where they have names."""
    named = np.any(sections["profile"] != "") or np.any(sections["equivalent_radius"])
    return ("profile", "span_m") if named else ()


def _places(chunk: Sections, project: Project) -> list[str]:
    """Metres along the axis, and beside them the chainage as the project writes it."""
    metres = number_texts(chunk[CHAINAGE])
    if project.notation.is_plain:
        return metres
    written = project.notation.written(chunk[CHAINAGE])
    return [f"{m},{text_cell(text)}" for m, text in zip(metres, written, strict=True)]


def flag_texts(raised: Array, flag_names: Sequence[str]) -> list[str]:
    """(n,) names of the raised flags, sorted and joined by a semicolon; `raised` is (n, f)."""
    patterns, which = np.unique(raised, axis=0, return_inverse=True)
    texts = [
        ";".join(sorted(name for name, on in zip(flag_names, row, strict=True) if on))
        for row in patterns.tolist()
    ]
    return [texts[number] for number in which.ravel().tolist()]


def _cells(column: Array) -> list[str]:
    if column.dtype == object:
        return [text_cell(text) for text in column.tolist()]
    return number_texts(column)


def _opened(path: Path, header: Sequence[str]) -> TextIO:
    stream = path.open("w", encoding="utf-8", newline="")
    stream.write(",".join(header) + "\n")
    return stream


def _finish(stream: TextIO) -> None:
    stream.flush()
    os.fsync(stream.fileno())
    stream.close()
