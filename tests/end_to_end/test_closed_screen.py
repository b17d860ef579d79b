"""A screen that nobody reads, or that is full, does not unmake a run."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

from end_to_end.projects import write_project


def run_into(project: Path, sink: str) -> subprocess.CompletedProcess[str]:
    """Run with standard output led into something, by a shell that reports our exit code."""
    command = f'"{sys.executable}" -m tunnelcalc run "{project}" {sink}; exit ${{PIPESTATUS[0]}}'
    return subprocess.run(
        ["bash", "-c", command], capture_output=True, text=True, check=False, timeout=60
    )


def test_a_reader_that_leaves_early_leaves_a_complete_run(tmp_path: Path) -> None:
    project = write_project(tmp_path / "project")
    ended = run_into(project, "| head -n 1")
    assert ended.returncode == 0, ended.stderr
    assert ended.stderr == ""
    assert (project / "runs" / "0001" / "run.json").is_file()


def test_a_full_screen_is_told_with_the_place_of_the_complete_run(tmp_path: Path) -> None:
    project = write_project(tmp_path / "project")
    ended = run_into(project, "> /dev/full")
    assert ended.returncode == 1
    assert "the run is complete in" in ended.stderr
    assert "nothing was written" not in ended.stderr
    assert (project / "runs" / "0001" / "run.json").is_file()
