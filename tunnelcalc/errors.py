"""What can go wrong, in two families: the user can act on it, or it is our bug.

`InputError` carries problems that a user can mend: each says where, what, what is allowed and
what to do. Everything else that is raised is a defect of the program or of the machine.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from enum import IntEnum


class ExitCode(IntEnum):
    """How a command ended."""

    COMPLETE = 0
    """The command did all that it was asked."""
    INTERNAL = 1
    """A defect of the program, or the machine failed: disk full, no permission."""
    INPUT = 2
    """The input is wrong; every problem was listed."""
    NOT_EVALUATED = 3
    """The run is complete, but something could not be evaluated."""
    NO_ADEQUATE_CLASS = 4
    """With `--strict`: a section has no adequate support class."""
    DIFFERENCE = 5
    """A comparison or verification found a difference."""
    HELD = 6
    """Another run holds the folder."""
    INTERRUPTED = 130
    """Stopped by the user."""


@dataclass(frozen=True, slots=True)
class Where:
    """A place in a file. `line` and `column` count from 1; 0 means the whole file.

    `sheet` is the sheet of a workbook: lines and columns then count its rows and columns.
    """

    file: str
    line: int = 0
    column: int = 0
    sheet: str = ""

    @property
    def cell(self) -> str:
        """The cell of a sheet as spreadsheets write it, B7; empty for what is no cell."""
        if not (self.sheet and self.line and self.column):
            return ""
        letters, rest = "", self.column
        while rest:
            rest, letter = divmod(rest - 1, 26)
            letters = chr(ord("A") + letter) + letters
        return f"{letters}{self.line}"

    def __str__(self) -> str:
        if self.sheet:
            row = f" row {self.line}" if self.line else ""
            return f"{self.file}:{self.sheet}{'!' + self.cell if self.cell else row}"
        parts = [self.file] + [str(number) for number in (self.line, self.column) if number]
        return ":".join(parts)


_VALUE = re.compile(r'(?:holds|names) "(.*?)"(?=,|$)')
"""How a message begins that says which value stands there."""


@dataclass(frozen=True, slots=True)
class Problem:
    """One thing that a user has to mend.

    `name` is the key or column concerned, `message` what is wrong, `allowed` what would be
    right, `fix` what to do, `context` what helps to find the place (an interval, a class).
    """

    where: Where
    message: str
    fix: str
    name: str = ""
    allowed: str = ""
    context: str = ""

    @property
    def value(self) -> str | None:
        """The value complained about, as the message shows it; None where it shows none."""
        found = _VALUE.match(self.message)
        return found[1] if found else None

    def as_record(self) -> dict[str, str | int | None]:
        """For other programs: always the same keys, None where there is nothing to tell."""
        where = self.where
        return {
            "file": where.file,
            "line": where.line or None,
            "column": where.column or None,
            "sheet": where.sheet or None,
            "cell": where.cell or None,
            "name": self.name or None,
            "message": self.message,
            "value": self.value,
            "allowed": self.allowed or None,
            "context": self.context or None,
            "fix": self.fix,
        }

    def __str__(self) -> str:
        head = f"{self.where}: {self.name + ' ' if self.name else ''}{self.message}"
        detail = "; ".join(
            part
            for part in (self.context, f"allowed: {self.allowed}" if self.allowed else "")
            if part
        )
        lines = [head] + ([f"  {detail}"] if detail else []) + [f"  fix: {self.fix}"]
        return "\n".join(lines)


class InputError(Exception):
    """The input is wrong. `problems` lists everything that was found, by file and line."""

    def __init__(self, problems: tuple[Problem, ...]) -> None:
        self.problems = problems
        super().__init__(problems)

    def __str__(self) -> str:
        return "\n".join(str(problem) for problem in self.problems)


@dataclass(slots=True)
class Problems:
    """Collects problems while files are read, so that all of them are told at once."""

    found: list[Problem] = field(default_factory=list)

    def add(
        self,
        where: Where,
        message: str,
        *,
        fix: str,
        name: str = "",
        allowed: str = "",
        context: str = "",
    ) -> None:
        self.found.append(Problem(where, message, fix, name, allowed, context))

    def __iter__(self) -> Iterator[Problem]:
        return iter(self.found)

    def __len__(self) -> int:
        return len(self.found)

    def raise_if_any(self) -> None:
        """Raise `InputError` with all problems, in the order of the files.

        Files keep the order in which they were first complained about.
        """
        if not self.found:
            return
        order: dict[str, int] = {}
        for problem in self.found:
            order.setdefault(problem.where.file, len(order))
        ranked = sorted(
            self.found,
            key=lambda p: (order[p.where.file], p.where.sheet, p.where.line, p.where.column),
        )
        raise InputError(tuple(dict.fromkeys(ranked)))


class ShapeError(ValueError):
    """Arrays that must have the same length differ."""


class StageError(Exception):
    """A stage of the pipeline needs a column that neither the inputs nor an earlier stage give."""


class PluginError(Exception):
    """A plugin failed where nothing can be told without it."""


class DuplicateNameError(Exception):
    """Two plugins offer the same thing under one name."""


class FolderHeldError(Exception):
    """The folder of the results was filled by another run in the meantime."""
