"""Each command in a process of its own ends as its function does in the process of the tests."""

from __future__ import annotations

import re
import shutil
from collections.abc import Callable
from pathlib import Path
from subprocess import CompletedProcess

import pytest
from end_to_end.projects import files_of, process, tunnelcalc

from tunnelcalc.cli.main import build_parser

COMMANDS = {
    "run": (".", "--strict", "--out", "out"),
    "validate": (".", "--format", "json"),
    "new": ("fresh",),
    "schema": ("--out", "schema.json"),
    "explain": ("runs/0001", "--at", "15"),
    "tune": (".", "--vary", "shotcrete.thickness_mm=40:400", "--out", "out"),
    "curves": (".", "--at", "15", "--out", "out"),
    "plugins": (),
    "verification": (),
    "stages": (".",),
}
TIMED = {"out/run.json", "out/tune.json"}
"""Files that tell when they were written."""


def test_every_command_is_here():
    listed = re.findall(r"^    ([a-z]+)(?= |$)", build_parser().format_help(), re.MULTILINE)
    assert listed == list(COMMANDS)


def ending(
    way: Callable[..., CompletedProcess[str]], project: Path, command: str
) -> tuple[int, str, str, dict[str, bytes]]:
    ended = way(command, *COMMANDS[command], folder=project)
    files = {name: b"" if name in TIMED else data for name, data in files_of(project).items()}
    return ended.returncode, ended.stdout, ended.stderr, files


@pytest.mark.parametrize("command", COMMANDS)
def test_a_process_prints_writes_and_ends_the_same(project: Path, tmp_path: Path, command: str):
    untouched = shutil.copytree(project, tmp_path / "untouched")
    code, out, error, files = ending(process, project, command)
    shutil.rmtree(project)
    untouched.rename(project)  # the same place, since some of what is printed names it
    assert (code, out, error, files) == ending(tunnelcalc, project, command)
    assert code == (4 if command == "run" else 0)
    assert out
    assert error == ""


@pytest.mark.parametrize("arguments", [("--version",), ("--help",), (), ("run",), ("run", "none")])
def test_what_is_told_before_a_command_begins_is_the_same(tmp_path: Path, arguments):
    one, other = (way(*arguments, folder=tmp_path) for way in (process, tunnelcalc))
    assert (one.returncode, one.stdout, one.stderr) == (
        other.returncode,
        other.stdout,
        other.stderr,
    )
