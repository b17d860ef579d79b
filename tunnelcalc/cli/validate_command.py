"""`tunnelcalc validate`: read everything, compute nothing, list every problem."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.problem_report import Report
from tunnelcalc.errors import ExitCode
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins


def validate(path: Path, report: Report, plugin_files: Sequence[Path] = ()) -> ExitCode:
    """Say what a project holds. Raises `InputError` with its problems."""
    project = read_project(path, load_plugins(files=plugin_files))
    outcome = {
        "sections": project.ground.count,
        "support_classes": list(project.class_names),
        "notes": list(project.warnings),
    }
    report.ended(ExitCode.COMPLETE, outcome)
    if report.as_json:
        return ExitCode.COMPLETE
    for warning in project.warnings:
        print(f"note: {warning}")
    print(
        f"no problems found: {project.ground.count} sections, "
        f"{len(project.support_classes)} support classes"
    )
    return ExitCode.COMPLETE
