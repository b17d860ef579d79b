"""Puts lines together: each formula takes its numbers from what is known before it."""

from __future__ import annotations

from collections.abc import Mapping

from tunnelcalc.calculation.formula import names, renamed
from tunnelcalc.calculation.line import SheetLine


class Working:
    """Lines in order, and the value of each symbol so far.

    `known` holds the values that formulas may use by their symbols; `source` stands beside every
    line that names no other.
    """

    def __init__(self, known: Mapping[str, float], source: str = "") -> None:
        self.known = dict(known)
        self.source = source
        self.lines: list[SheetLine] = []

    def add(
        self,
        symbol: str,
        meaning: str,
        formula: str,
        result: float,
        unit: str = "",
        source: str | None = None,
        rename: Mapping[str, str] | None = None,
    ) -> float:
        """Add a line, whose result is known under its symbol from here on.

        `rename` gives other names to the symbol and in the formula.
        """
        if rename:
            symbol, formula = rename.get(symbol, symbol), renamed(formula, rename)
        value = float(result)
        self.known[symbol] = value
        put_in = {name: float(self.known[name]) for name in names(formula)} if formula else {}
        told = self.source if source is None else source
        self.lines.append(SheetLine(symbol, meaning, formula, put_in, value, unit, told))
        return value
