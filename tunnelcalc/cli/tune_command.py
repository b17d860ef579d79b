"""`tunnelcalc tune`: what would do on sections that no class satisfies."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.screen import console, metres, rounded, row, table
from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.tune.advice import Advice
from tunnelcalc.tune.tuning import Tuned, tune

MOST_ROWS = 40
SCREEN_DIGITS = 4


def advise(
    project: Path,
    vary: Sequence[str],
    held: Sequence[str],
    class_name: str | None,
    out: Path | None,
    plugin_files: Sequence[Path] = (),
) -> ExitCode:
    """Vary, write the advice, and show its head."""
    registry = load_plugins(files=plugin_files)
    tuned = tune(project, registry, vary, held, class_name=class_name, out=out)
    _show(tuned)
    return tuned.exit_code


def _show(tuned: Tuned) -> None:
    screen = console()
    screen.print(tuned.project.title, style="bold")
    if not tuned.advice:
        screen.print("every section has an adequate class: there is nothing to tune")
    if tuned.held:
        screen.print(f"with {', '.join(tuned.held)}", soft_wrap=True)
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
        made.add_row(
            *row(
                metres(float(tuned.sections["chainage_m"][one.position])),
                str(tuned.sections["ground_unit"][one.position]),
                one.trade_off.name,
                *_ends(one),
                one.trade_off.unit,
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
    for what, reason in tuned.missing:
        screen.print(f"not evaluated: {what}: {reason}", style="bold")
    screen.print(f"written: {tuned.folder}", soft_wrap=True)


def _ends(advice: Advice) -> tuple[str, str]:
    if advice.words:
        return " or ".join(advice.words), ""
    if advice.helps:
        return advice.ends(SCREEN_DIGITS, rounded)
    return ("no", "word") if advice.trade_off.of_words else ("none in", "range")
