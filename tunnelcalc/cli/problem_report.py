"""The problems of a command: the first on the screen, all in a file; or one JSON document."""

from __future__ import annotations

import json
import os
import sys
import tempfile
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, TextIO

import tunnelcalc
from tunnelcalc.cli.output_file import OutputFile
from tunnelcalc.errors import ExitCode, Problem

MOST_SHOWN = 50
"""Problems on the screen. More than these do not help whoever reads them there."""
TEXT_MARK = "# Problems found by tunnelcalc"
JSON_MARK = '{"tunnelcalc": '


def problem_file(path: Path) -> OutputFile:
    """The file of the option `--problems`."""
    return OutputFile(path, "--problems", (TEXT_MARK, JSON_MARK))


def counted(count: int) -> str:
    """How many problems there are, in words."""
    return f"{count or 'no'} problem{'' if count == 1 else 's'} found"


def listing(problems: Sequence[Problem]) -> str:
    """Every problem and their number, for a file."""
    return "\n".join([TEXT_MARK, *map(str, problems), counted(len(problems)), ""])


def document(
    command: str,
    exit_code: ExitCode,
    problems: Sequence[Problem] = (),
    outcome: Mapping[str, Any] | None = None,
) -> str:
    """One JSON document on how a command ended: a line a problem, then what it found."""
    head = {"tunnelcalc": tunnelcalc.__version__, "command": command, "exit_code": int(exit_code)}
    rows = ",\n".join(json.dumps(problem.as_record()) for problem in problems)
    rows = f"\n{rows}\n" if rows else ""
    tail = json.dumps({"count": len(problems), **(outcome or {})})
    return f'{json.dumps(head)[:-1]}, "problems": [{rows}], {tail[1:]}\n'


def print_problems(problems: Sequence[Problem], stream: TextIO, file: Path | None = None) -> None:
    """The first problems, and how many there are. `file` has all of them already.

    Without it, problems that are not shown stand in a new temporary file, or if that cannot
    be, on the screen after all.
    """
    shown = problems[:MOST_SHOWN]
    if file is None and len(problems) > MOST_SHOWN:
        file = _temporary(problems)
        shown = problems if file is None else shown
    for problem in shown:
        print(problem, file=stream)
    part = f", {len(shown)} shown" if len(shown) < len(problems) else ""
    print(f"{counted(len(problems))}{part}{f'; all in {file}' if file else ''}", file=stream)


def _temporary(problems: Sequence[Problem]) -> Path | None:
    try:
        handle, name = tempfile.mkstemp(prefix="tunnelcalc-problems-", suffix=".txt")
    except OSError:
        return None
    try:
        with os.fdopen(handle, "w", encoding="utf-8", errors="backslashreplace") as stream:
            stream.write(listing(problems))
    except OSError:
        Path(name).unlink(missing_ok=True)
        return None
    return Path(name)


@dataclass(frozen=True, slots=True)
class Report:
    """How a command tells its end: as text or as JSON, and its problems in a file too."""

    command: str
    as_json: bool = False
    file: OutputFile | None = None

    def refused(self, problems: Sequence[Problem]) -> None:
        """The input is wrong. What `validate` finds is its result; else it is an error."""
        if self.as_json:
            text = document(self.command, ExitCode.INPUT, problems)
            sys.stdout.write(text)
            self._keep(text)
            return
        stream = sys.stdout if self.command == "validate" else sys.stderr
        try:
            if self.file is not None:
                self._keep(listing(problems))
        except OSError:
            print_problems(problems, stream)  # the disk must not cost the user his list
            raise
        print_problems(problems, stream, None if self.file is None else self.file.path)

    def ended(self, exit_code: ExitCode, outcome: Mapping[str, Any]) -> None:
        """There were no problems: says so in the file and, as JSON, what the command found."""
        if self.as_json:
            text = document(self.command, exit_code, (), outcome)
            self._keep(text)
            sys.stdout.write(text)
        else:
            self._keep(listing(()))

    def _keep(self, text: str) -> None:
        if self.file is not None:
            self.file.write(text)
