"""What must hold whenever a run refuses its input."""

from __future__ import annotations

from pathlib import Path

from end_to_end.projects import Damage, files_of, run

Case = tuple[Damage | str, ...]
"""What is done to the project, then the message, line by line."""


def assert_refused(project: Path, case: Case) -> None:
    """Exit code 2, exactly this message, no traceback, and not a byte changed on the disk."""
    damage, *lines = case
    assert callable(damage)
    damage(project)
    before = files_of(project.parent)
    ended = run(project)
    assert ended.stderr == message(lines)
    assert ended.stdout == ""
    assert ended.returncode == 2
    assert "runs/0001/run.json" in "\n".join(before)
    assert files_of(project.parent) == before


def message(lines: list[str]) -> str:
    """The lines with their count of problems: each begins at the margin, its details do not."""
    count = sum(not line.startswith("  ") for line in lines)
    return "\n".join([*lines, f"{count} problem{'' if count == 1 else 's'} found", ""])
