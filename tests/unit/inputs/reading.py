"""Reads the small invented project after some damage, in this process."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import Damage, write_project

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import Project

REGISTRY = load_plugins()


def read(folder: Path, *damages: Damage) -> Project:
    """The project in a new folder, damaged and read."""
    project = write_project(folder / "project")
    for damage in damages:
        damage(project)
    return read_project(project, REGISTRY)


def told(folder: Path, *damages: Damage) -> list[str]:
    """The first line of every problem of the damaged project."""
    with pytest.raises(InputError) as caught:
        read(folder, *damages)
    return [str(problem).splitlines()[0] for problem in caught.value.problems]
