"""`tunnelcalc curves`: the curves of one section, and its state at rest on the screen."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.screen import console, metres, rounded, row, table
from tunnelcalc.curves import Shown, show_section
from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins

NUMERIC = (
    "p0 MPa",
    "pcr MPa",
    "closure without mm",
    "support MPa",
    "closure with mm",
    "limit mm",
)


def curves(
    project: Path,
    at: str,
    class_name: str | None,
    out: Path | None,
    plugin_files: Sequence[Path] = (),
) -> ExitCode:
    """Write the curves of a section, and tell what they come to."""
    registry = load_plugins(files=plugin_files)
    shown = show_section(project, registry, at, class_name=class_name, out=out)
    _print(shown)
    return shown.exit_code


def _print(shown: Shown) -> None:
    screen, of = console(), shown.curves
    screen.print(of.title, style="bold")
    written = "" if of.chainage == f"{of.chainage_m:.2f}" else f" ({of.chainage})"
    screen.print(
        f"section {metres(of.from_m)} to {metres(of.to_m)} m, middle {metres(of.chainage_m)} m"
        f"{written}, {of.ground_unit or 'no ground unit'}"
    )
    screen.print(f"class {of.support_class}; required: {of.required_class}")
    made = table("Ground and support", "stress case", *NUMERIC, right=NUMERIC)
    for case in of.cases:
        ground, support = case.ground, case.support
        numbers = (
            ground.in_situ_stress_mpa,
            ground.critical_pressure_mpa,
            case.alone.free_closure_mm,
            support.rest_pressure_mpa,
            support.rest_closure_mm,
            of.closure_limit_mm,
        )
        made.add_row(*row(case.stress_case, *(rounded(number) for number in numbers)))
    screen.print(made)
    if shown.without_figures:
        screen.print("note: no plugin draws figures: tables alone were written")
    for what, reason in shown.missing:
        screen.print(f"not evaluated: {what}: {reason}", style="bold")
    screen.print(f"written: {shown.folder}: {', '.join(shown.files)}", soft_wrap=True)
