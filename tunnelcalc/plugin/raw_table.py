"""A table as it was found in a file: text cells, and where each one stands."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from tunnelcalc.errors import Problem, Where


@dataclass(frozen=True, slots=True)
class RawTable:
    """Cells by column, and the line of the file on which each row stands.

    `header` has the names as written, `header_line` their line; `columns[c][r]` is the text
    of row r in column c, blank rows left out; `lines[r]` is its line in the file.
    """

    file: str
    header: tuple[str, ...]
    header_line: int
    columns: tuple[Sequence[str], ...]
    lines: Sequence[int]
    problems: tuple[Problem, ...] = ()
    """What is wrong with rows that were left out; the others are read on."""

    def place(self, row: int, column: int) -> Where:
        """Where a cell stands; columns are counted from 1, as a spreadsheet does."""
        return Where(self.file, self.lines[row], column + 1)

    def head(self, column: int) -> Where:
        """Where a header cell stands."""
        return Where(self.file, self.header_line, column + 1)
