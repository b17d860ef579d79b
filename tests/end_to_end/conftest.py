"""Projects that tests may run and damage."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from end_to_end.projects import completed, write_project


@pytest.fixture(scope="session")
def finished(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A project that was run once. Tests only look at it."""
    project = write_project(tmp_path_factory.mktemp("finished") / "project")
    completed(project)
    return project


@pytest.fixture
def project(finished: Path, tmp_path: Path) -> Path:
    """A copy, with its run 0001, that a test may do anything to."""
    return shutil.copytree(finished, tmp_path / "project")
