"""A table as it was found in a file: text cells, and where each one stands."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from tunnelcalc.errors import Problem, Where
from tunnelcalc.text import DECIMAL


@dataclass(frozen=True, slots=True)
class RawTable:
    """Cells by column, and the line of the file on which each row stands.

    `header` has the names as written, `header_line` their line; `columns[c][r]` is the text
    of row r in column c, blank rows left out; `lines[r]` is its line in the file. Numbers have
    a decimal point, whatever the file has.
    """

    file: str
    header: tuple[str, ...]
    header_line: int
    columns: tuple[Sequence[str], ...]
    lines: Sequence[int]
    sheet: str = ""
    """The sheet of a workbook."""
    column_numbers: tuple[int, ...] = ()
    """The number in the file of each column, from 1, where blank columns were left out."""
    decimal_sign: str = "."
    """The decimal sign of the file: `written` gives it back to a number."""
    notes: tuple[str, ...] = ()
    """What a user should know about the table: what was left out, what was averaged."""
    problems: tuple[Problem, ...] = ()
    """What is wrong with rows that were left out; the others are read on."""

    told: frozenset[tuple[int, int]] = frozenset()
    """Line and column in the file of cells about which `problems` says all: they are empty."""

    @property
    def name(self) -> str:
        """The file, and the sheet if it has sheets."""
        return str(self.whole())

    def whole(self) -> Where:
        """The table as a whole."""
        return Where(self.file, sheet=self.sheet)

    def row(self, row: int) -> Where:
        """Where a row stands."""
        return Where(self.file, self.lines[row], sheet=self.sheet)

    def place(self, row: int, column: int) -> Where:
        """Where a cell stands; columns are counted from 1, as a spreadsheet does."""
        return Where(self.file, self.lines[row], self.number_of(column), self.sheet)

    def head(self, column: int | None = None) -> Where:
        """Where a header cell stands, or the whole header."""
        number = 0 if column is None else self.number_of(column)
        return Where(self.file, self.header_line, number, self.sheet)

    def number_of(self, column: int) -> int:
        """The number of a column in the file, from 1."""
        return self.column_numbers[column] if self.column_numbers else column + 1

    def written(self, row: int, column: int) -> str:
        """A cell with the decimal sign that the file has."""
        text = self.columns[column][row]
        if self.decimal_sign == "." or not DECIMAL.fullmatch(text):
            return text
        return text.replace(".", self.decimal_sign)
