"""What must hold whenever a run refuses its input."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from pathlib import Path

import pytest
from end_to_end.projects import Damage, files_of, run

from tunnelcalc.cli.main import main

Case = tuple[Damage | str, ...]
"""What is done to the project, then the message, line by line."""

Ending = tuple[int, str, str]
"""Exit code, standard output, standard error."""


def assert_refused(project: Path, case: Case) -> None:
    """Exit code 2, exactly this message, no traceback, and not a byte changed on the disk."""

    def in_a_process() -> Ending:
        ended = run(project)
        return ended.returncode, ended.stdout, ended.stderr

    _assert_refused(project, case, in_a_process)


def assert_refused_here(project: Path, case: Case, capsys: pytest.CaptureFixture[str]) -> None:
    """The same by the command line's own function, without the second that a process takes."""

    def here() -> Ending:
        code = main(["run", str(project)])
        return code, *capsys.readouterr()

    _assert_refused(project, case, here)


def _assert_refused(project: Path, case: Case, ending: Callable[[], Ending]) -> None:
    damage, *lines = case
    assert callable(damage)
    damage(project)
    before = files_of(project.parent)
    code, out, error = ending()
    assert error == message(lines)
    assert (code, out) == (2, "")
    assert "project/runs/0001/run.json" in before
    assert files_of(project.parent) == before


def message(lines: Sequence[Damage | str]) -> str:
    """The lines with their count of problems: each begins at the margin, its details do not."""
    text = [str(line) for line in lines]
    count = sum(not line.startswith("  ") for line in text)
    return "\n".join([*text, f"{count} problem{'' if count == 1 else 's'} found", ""])
