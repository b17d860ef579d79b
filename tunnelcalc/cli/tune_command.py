"""`tunnelcalc tune`: what would do on sections that no class satisfies."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.screen import console, metres, rounded, row, table
from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.tune import Tuned, tune

MOST_ROWS = 40


def advise(
    project: Path,
    vary: Sequence[str],
    class_name: str | None,
    out: Path | None,
    plugin_files: Sequence[Path] = (),
) -> ExitCode:
    """Vary, write the advice, and show its head."""
    registry = load_plugins(files=plugin_files)
    tuned = tune(project, registry, vary, class_name=class_name, out=out)
    _show(tuned)
    return tuned.exit_code


def _show(tuned: Tuned) -> None:
    screen = console()
    screen.print(tuned.project.title, style="bold")
    if not tuned.advice:
        screen.print("every section has an adequate class: there is nothing to tune")
    made = table(
        f"What would make class {tuned.support_class} adequate, one change at a time",
        "at m",
        "ground unit",
        "parameter",
        "from",
        "to",
        "unit",
        right=("at m", "from", "to"),
    )
    for one in tuned.advice[:MOST_ROWS]:
        variation = one.variation
        name = f"{variation.element}.{variation.parameter}".lstrip(".")
        ends = [rounded(one.adequate_from, 4), rounded(one.adequate_to, 4)]
        made.add_row(
            *row(
                metres(float(tuned.sections["chainage_m"][one.position])),
                str(tuned.sections["ground_unit"][one.position]),
                name,
                *(ends if one.helps else ["none in", "range"]),
                variation.unit,
            )
        )
    if tuned.advice:
        screen.print(made)
    if len(tuned.advice) > MOST_ROWS:
        screen.print(f"{len(tuned.advice) - MOST_ROWS} more rows stand in advice.csv")
    screen.print(
        "One parameter is changed at a time, by calculation alone: whether it can be built, and "
        "what else it changes, is for the engineer to judge."
    )
    screen.print(f"written: {tuned.folder}", soft_wrap=True)
