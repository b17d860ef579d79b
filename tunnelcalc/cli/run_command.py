"""`tunnelcalc run`: compute a project, then show what a designer wants to know first."""

from __future__ import annotations

import os
import sys
from collections.abc import Sequence
from contextlib import nullcontext
from pathlib import Path
from typing import Any

import numpy as np
from rich.console import Console
from rich.progress import BarColumn, MofNCompleteColumn, Progress, TextColumn, TimeRemainingColumn
from rich.table import Table

from tunnelcalc.arrays import SAME_PLACE_M
from tunnelcalc.cli.problem_report import Report
from tunnelcalc.cli.screen import console, metres, rounded, row, table
from tunnelcalc.errors import ExitCode
from tunnelcalc.limits_statement import LIMITS
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.results import RunResult, Zone
from tunnelcalc.run import CHUNK_SECTIONS, Finished, run_project
from tunnelcalc.schedule.selection import NONE_ADEQUATE, NONE_ADEQUATE_NAME

MOST_ZONES = 60
MOST_WORST = 8
WIDE_SCREEN = 100
"""Columns from which the schedule has room for the ground units."""


def run(
    project: Path,
    out: Path | None,
    strict: bool,
    chunk: int | None,
    report: Report,
    plugin_files: Sequence[Path] = (),
) -> ExitCode:
    """Run a project; the summary goes to standard output, progress to standard error."""
    registry = load_plugins(files=plugin_files)
    bar = Progress(
        TextColumn("sections"),
        BarColumn(),
        MofNCompleteColumn(),
        TimeRemainingColumn(),
        console=console(sys.stderr),
        transient=True,
        disable=not sys.stderr.isatty(),
    )
    # A bar that is disabled still prints an empty line at its end, in rich 13.
    with bar if sys.stderr.isatty() else nullcontext():
        task = bar.add_task("sections", total=None)
        finished = run_project(
            project,
            registry,
            out=out,
            strict=strict,
            chunk_sections=chunk or CHUNK_SECTIONS,
            progress=lambda done, total: bar.update(task, completed=done, total=total),
        )
    try:
        report.ended(finished.exit_code, outcome(finished))
        if not report.as_json:
            show(finished, console())
        sys.stdout.flush()
    except BrokenPipeError:
        # Whoever reads our output has seen enough. What Python flushes at its end goes nowhere.
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
    except OSError as error:
        print(
            f"tunnelcalc: the run is complete in {finished.folder}, but its summary could not be "
            f"shown: {error.strerror}",
            file=sys.stderr,
        )
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return ExitCode.INTERNAL
    return finished.exit_code


def outcome(finished: Finished) -> dict[str, Any]:
    """What another program wants to know of a run; everything else stands in its folder."""
    result = finished.result
    return {
        "folder": str(finished.folder),
        "sections": result.sections.count,
        "zones": len(result.zones),
        "sections_without_adequate_class": int(result.without_adequate_class),
        "not_evaluated": [
            {"what": i.what, "reason": i.reason, "sections": int(i.sections)}
            for i in result.incidents
        ],
        "notes": list(result.warnings),
    }


def show(finished: Finished, screen: Console) -> None:
    """The summary of a run."""
    result = finished.result
    screen.print(result.project.title, style="bold")
    screen.print(schedule_table(result, screen.width >= WIDE_SCREEN))
    screen.print(length_table(result))
    screen.print(worst_table(result))
    raised = flag_table(result)
    if raised.row_count:
        screen.print(raised)
    if lacking := unassessed(result):
        screen.print(lacking)
    for warning in result.warnings:
        screen.print(f"note: {warning}")
    if result.without_adequate_class:
        screen.print(
            f"attention: {result.without_adequate_class} of {result.sections.count} sections have "
            "no adequate class",
            style="bold",
        )
    for incident in result.incidents:
        screen.print(
            f"not evaluated: {incident.what}: {incident.reason} ({incident.sections} sections, "
            f"first at {metres(incident.first_chainage_m)} m)",
            style="bold",
        )
    screen.print("Limits", style="bold")
    for limit in LIMITS:
        screen.print(f"- {limit}")
    screen.print(f"written: {finished.folder}", soft_wrap=True)


def schedule_table(result: RunResult, with_units: bool) -> Table:
    """The zones, or the first of very many."""
    ends = _ends_header(result, with_units)
    columns = (*ends, "length m", "class", "FS", "governed by", "at m")
    made = table(
        "Support schedule",
        *columns,
        *(("ground units",) if with_units else ()),
        right=("from", "to", "from m", "to m", "length m", "FS", "at m"),
        wide=("governed by", "ground units"),
    )
    for zone in result.zones[:MOST_ZONES]:
        _add_gap_before(made, zone, result, with_units)
        cells = [
            *_ends(zone.from_m, zone.to_m, result, with_units),
            metres(zone.length_m),
            zone.support_class,
            rounded(zone.least_factor_of_safety),
            _governed_by(zone),
            metres(zone.governing_chainage_m),
        ]
        made.add_row(*row(*cells, *([", ".join(zone.ground_units)] if with_units else [])))
    if len(result.zones) > MOST_ZONES:
        made.caption = f"{len(result.zones) - MOST_ZONES} more zones stand in schedule.csv"
    return made


def _ends_header(result: RunResult, wide: bool) -> tuple[str, ...]:
    """Chainages as the project writes them, and metres along the axis where there is room."""
    if result.project.notation.is_plain:
        return ("from m", "to m")
    return ("from", "to", "from m", "to m") if wide else ("from", "to")


def _ends(from_m: float, to_m: float, result: RunResult, wide: bool) -> list[str]:
    along = [metres(from_m), metres(to_m)]
    notation = result.project.notation
    if notation.is_plain:
        return along
    return [*notation.ends(from_m, to_m), *(along if wide else [])]


def _governed_by(zone: Zone) -> str:
    """What governs a zone; where no class is adequate, what its closure would need."""
    needed = zone.needed_pressure_mpa
    if needed != needed:
        return zone.governing_check
    return f"needs {rounded(needed)} MPa" if needed > 0 else "checks of every class fail"


def _add_gap_before(made: Table, zone: Zone, result: RunResult, with_units: bool) -> None:
    """A declared gap that ends where a zone begins, as a line of its own."""
    for gap in result.project.gaps:
        if abs(gap.to_m - zone.from_m) <= SAME_PLACE_M:
            length = metres(gap.to_m - gap.from_m)
            ends = _ends(gap.from_m, gap.to_m, result, with_units)
            cells = [*ends, length, "gap", "", gap.reason, ""]
            made.add_row(*row(*cells, *([""] if with_units else [])))


def length_table(result: RunResult) -> Table:
    """Length of each class as required and as scheduled."""
    made = table(
        "Class lengths",
        "class",
        "required m",
        "scheduled m",
        "share %",
        right=("required m", "scheduled m", "share %"),
    )
    sections = result.sections
    length = sections["to_m"] - sections["from_m"]
    total = float(length.sum())
    numbers = [*range(len(result.project.class_names)), NONE_ADEQUATE]
    for number, name in zip(
        numbers, (*result.project.class_names, NONE_ADEQUATE_NAME), strict=True
    ):
        required = float(length[sections["required_class"] == number].sum())
        scheduled = float(length[sections["scheduled_class"] == number].sum())
        made.add_row(
            *row(name, metres(required), metres(scheduled), f"{100 * scheduled / total:.1f}")
        )
    made.add_section()
    made.add_row(*row("all", metres(total), metres(total), "100.0"))
    return made


def worst_table(result: RunResult) -> Table:
    """The governing sections of zones without an adequate class, with the closure of the ground
    alone, then of those with the least factors."""
    numeric = ("at m", "FS", "closure %", "limit %", "cover m")
    made = table(
        "Worst sections",
        "at m",
        "class",
        "FS",
        "closure %",
        "limit %",
        "ground unit",
        "cover m",
        right=numeric,
    )
    sections = result.sections
    without = [zone for zone in result.zones if zone.support_class == NONE_ADEQUATE_NAME]
    without.sort(key=lambda z: -z.needed_pressure_mpa)
    loaded = [zone for zone in result.zones if zone.least_factor_of_safety > 0]
    loaded.sort(key=lambda z: z.least_factor_of_safety)
    for zone in [*without, *loaded][:MOST_WORST]:
        at = int(np.searchsorted(sections["chainage_m"], zone.governing_chainage_m))
        number = int(sections["scheduled_class"][at])
        unsupported = sections["closure_pct"][at]
        closure = sections["class_closure_pct"][at, number] if number >= 0 else unsupported
        made.add_row(
            *row(
                metres(zone.governing_chainage_m),
                zone.support_class,
                rounded(zone.least_factor_of_safety),
                rounded(float(closure)),
                rounded(result.project.criteria.closure_pct),
                str(sections["ground_unit"][at]),
                rounded(float(sections["cover_m"][at])),
            )
        )
    return made


def flag_table(result: RunResult) -> Table:
    """Flags that were raised somewhere, those at outside first: how often, and what to do."""
    levels = ("outside", "advisory", "overridden")
    made = table(
        "Flags on validity, sections",
        "flag",
        *levels,
        "meaning and remedy",
        right=levels,
        wide=("meaning and remedy",),
    )
    for flag in sorted(result.flags, key=lambda f: (not f.outside, f.name)):
        if flag.raised:
            counts = (flag.outside, flag.advisory, flag.overridden)
            numbers = [str(count) if count else "" for count in counts]
            made.add_row(*row(flag.name, *numbers, f"{flag.meaning}; {flag.remedy}"))
    return made


def unassessed(result: RunResult) -> str:
    """One line on the flags that lack an input on some section; empty where none does."""
    names = [flag.name for flag in result.flags if flag.not_assessed]
    if not names:
        return ""
    return (
        f"not assessed for lack of an input, on some or all sections, and not clear: "
        f"{', '.join(names)}; flags.csv says where and what is missing"
    )
