"""What can go wrong, in two families: the user can act on it, or it is our bug.

`InputError` carries problems that a user can mend: each says where, what, what is allowed and
what to do. Everything else that is raised is a defect of the program or of the machine.
"""

from __future__ import annotations

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
    """A place in a file. `line` and `column` count from 1; 0 means the whole file."""

    file: str
    line: int = 0
    column: int = 0

    def __str__(self) -> str:
        parts = [self.file] + [str(number) for number in (self.line, self.column) if number]
        return ":".join(parts)


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
        super().__init__("\n".join(str(problem) for problem in problems))


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

        Files keep the order in which they were first complained about: the project file comes
        before the tables that it names.
        """
        if not self.found:
            return
        order: dict[str, int] = {}
        for problem in self.found:
            order.setdefault(problem.where.file, len(order))
        ranked = sorted(
            self.found, key=lambda p: (order[p.where.file], p.where.line, p.where.column)
        )
        raise InputError(tuple(dict.fromkeys(ranked)))


class ShapeError(ValueError):
    """Arrays that must have the same length differ."""


class StageError(Exception):
    """A stage of the pipeline needs a column that neither the inputs nor an earlier stage give."""


class DuplicateNameError(Exception):
    """Two plugins offer the same thing under one name."""


class FolderHeldError(Exception):
    """The folder of the results was filled by another run in the meantime."""
