"""The section as computed now against the rows that the run wrote."""

from __future__ import annotations

import csv
import tempfile
from collections.abc import Iterator
from pathlib import Path

from tunnelcalc.explain.recorded import Recorded
from tunnelcalc.explain.section import ComputedSection
from tunnelcalc.outputs.cells import number_text
from tunnelcalc.outputs.tables import ChunkTables
from tunnelcalc.pipeline.plan import check_lines
from tunnelcalc.schedule.selection import NONE_ADEQUATE_NAME

NOT_COMPUTED = ("scheduled_class", "flags")
"""The schedule follows from the whole alignment; flags are compared with the validity screen."""


def section_row(run: Recorded, section: ComputedSection) -> dict[str, str]:
    """The row of `sections.csv`; empty where there is none."""
    found = run.rows("sections.csv", number_text(section.chainage_m))
    return found[0] if found else {}


def differences(run: Recorded, section: ComputedSection) -> Iterator[str]:
    """Values of the tables that this computation does not give, to the digits printed."""
    row = section_row(run, section)
    if not row:
        yield f"sections.csv has no row at {number_text(section.chainage_m)}"
    for name, cell in row.items():
        now = _cell(section, name)
        if now is not None and now != cell:
            yield f"sections.csv, {name}: the table says {cell or 'nothing'}, computed {now}"
    with tempfile.TemporaryDirectory() as folder:
        checks = check_lines(section.plan)
        tables = ChunkTables(Path(folder), section.project, checks)
        try:
            tables.write(section.sections)
            tables.close()
        finally:
            tables.abandon()
        for name, keys in (
            ("classes.csv", ("support_class",)),
            ("checks.csv", ("support_class", "element", "check")),
        ):
            written = run.rows(name, number_text(section.chainage_m))
            with (Path(folder) / name).open(encoding="utf-8", newline="") as stream:
                yield from _row_differences(name, keys, written, list(csv.DictReader(stream)))


def _row_differences(
    table: str,
    keys: tuple[str, ...],
    written: list[dict[str, str]],
    computed: list[dict[str, str]],
) -> Iterator[str]:
    if len(written) != len(computed):
        yield f"{table} has {len(written)} rows here, computed {len(computed)}"
        return
    for before, now in zip(written, computed, strict=True):
        where = ", ".join(now[key] for key in keys)
        for column, value in now.items():
            if before.get(column) != value:
                said = before.get(column) or "nothing"
                yield f"{table}, {where}, {column}: the table says {said}, computed {value}"


def _cell(section: ComputedSection, name: str) -> str | None:
    """A column of `sections.csv` as computed now; None where it is not computed here."""
    if name == "required_class":
        number = int(section.sections["required_class"][0])
        return section.project.class_names[number] if number >= 0 else NONE_ADEQUATE_NAME
    if name in NOT_COMPUTED or name not in section.sections:
        return None
    value = section.sections[name][0]
    return value if isinstance(value, str) else number_text(float(value))
