"""Projects that tests may run and damage."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from end_to_end.explained import write
from end_to_end.projects import completed, write_project

from tunnelcalc.plugin.registry import Registry, load_plugins
from tunnelcalc.run import run_project


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


@pytest.fixture(scope="session")
def registry() -> Registry:
    return load_plugins()


@pytest.fixture(scope="session")
def whole(registry: Registry, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A run whose sections are explained. Tests only look at it."""
    folder = tmp_path_factory.mktemp("explained")
    project = write(folder / "project", {}, {})
    return run_project(project, registry, out=folder / "run").folder


@pytest.fixture
def run(whole: Path, tmp_path: Path) -> Path:
    """A copy that a test may do anything to."""
    return shutil.copytree(whole, tmp_path / "run")
