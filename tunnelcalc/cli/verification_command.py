"""`tunnelcalc verification`: every check of a method with both numbers."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.screen import console, row, table
from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.verification import verified


def verification(plugin_files: Sequence[Path] = ()) -> ExitCode:
    """Print the table; a difference beyond its tolerance ends with its own exit code."""
    registry = load_plugins(files=plugin_files)
    screen = console()
    numeric = ("expected", "computed", "difference")
    made = table(
        "Verification",
        "method and case",
        "expected",
        "computed",
        "unit",
        "difference",
        "standing and source",
        right=numeric,
        wide=("method and case", "standing and source"),
    )
    outcomes = verified(registry.verification_checks())
    for found in outcomes:
        check = found.check
        made.add_row(
            *row(
                check.name,
                f"{found.expected:.7g}",
                f"{found.computed:.7g}",
                check.unit,
                f"{found.difference:.1e}" if found.agrees else f"{found.difference:.1e} !",
                f"{check.standing.value}: {check.source}",
            )
        )
    screen.print(made)
    differing = [found for found in outcomes if not found.agrees]
    for found in differing:
        fault = f": {found.fault}" if found.fault else ""
        screen.print(f"differs: {found.check.name}{fault}", style="bold")
    screen.print(f"{len(outcomes) - len(differing)} of {len(outcomes)} checks agree")
    return ExitCode.DIFFERENCE if differing else ExitCode.COMPLETE
