"""`tunnelcalc validate`: read everything, compute nothing, list every problem."""

from __future__ import annotations

import sys
from pathlib import Path

from tunnelcalc.cli.screen import print_problems
from tunnelcalc.errors import ExitCode, InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins


def validate(path: Path) -> ExitCode:
    """Print the problems of a project, or what it holds."""
    try:
        project = read_project(path, load_plugins())
    except InputError as error:
        print_problems(error.problems, sys.stdout)
        return ExitCode.INPUT
    for warning in project.warnings:
        print(f"note: {warning}")
    print(
        f"no problems found: {project.ground.count} sections, "
        f"{len(project.support_classes)} support classes"
    )
    return ExitCode.COMPLETE
