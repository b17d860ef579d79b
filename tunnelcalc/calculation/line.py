"""Lines and blocks of a calculation sheet."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field, replace

from tunnelcalc.calculation.formula import FormulaError, evaluate, renamed, sides

CLOSED_FORM = 1e-10
QUADRATURE = 1e-8
"""Of the result: how far a line may lie from what its formula gives, by the sort of formula."""
INPUT_ROUNDING = 1e-12
"""Of each number put in. Where a formula takes the difference of nearly equal numbers, a change of
this size explains more than the above."""
STEP = 1e-6


@dataclass(frozen=True, slots=True)
class SheetLine:
    """One step of a calculation.

    `formula` is an expression that gives `result` from `inputs`; or an equation, of which `result`
    is the root and stands among the inputs under `symbol`; or empty for a number that was given.
    `source` is the publication of the formula, or where a given number comes from.
    """

    symbol: str
    meaning: str
    formula: str
    inputs: Mapping[str, float]
    result: float
    unit: str = ""
    source: str = ""
    on_screen: bool = True
    """else it is one of many alike, and stands in files alone"""

    def with_names(self, names: Mapping[str, str]) -> SheetLine:
        """The line with other names for some quantities."""
        inputs = {names.get(name, name): value for name, value in self.inputs.items()}
        symbol = names.get(self.symbol, self.symbol)
        return replace(self, symbol=symbol, formula=renamed(self.formula, names), inputs=inputs)

    @property
    def tolerance(self) -> float:
        """How far the two sides may lie apart, as a share of the larger."""
        exact = "integral" not in self.formula and "=" not in self.formula
        return CLOSED_FORM if exact else QUADRATURE

    def recomputed(self) -> tuple[float, float]:
        """The two sides that must agree: the result and the formula's value, or both sides of an
        equation. Raises `FormulaError`."""
        return self._sides(self.inputs)

    def disagrees(self, tolerance: float | None = None) -> bool:
        """Whether the formula does not give the result, to a share of it."""
        if not self.formula:
            return False
        try:
            left, right = self._sides(self.inputs)
            if left == right or (math.isnan(left) and math.isnan(right)):
                return False
            share = self.tolerance if tolerance is None else tolerance
            allowed = share * max(abs(left), abs(right))
            apart = abs(left - right)
            return not (apart <= allowed or apart <= allowed + self._by_rounding(left - right))
        except FormulaError:
            return True

    def _sides(self, inputs: Mapping[str, float]) -> tuple[float, float]:
        parts = sides(self.formula) if self.formula else ()
        if not parts:
            return self.result, self.result
        if len(parts) == 1:
            return self.result, evaluate(parts[0], inputs)
        if not math.isclose(self.inputs.get(self.symbol, math.nan), self.result, rel_tol=1e-15):
            raise FormulaError(f"{self.symbol} is not the root that is put in")
        return evaluate(parts[0], inputs), evaluate(parts[1], inputs)

    def _by_rounding(self, apart: float) -> float:
        """How far the sides may part by rounding of the inputs."""
        total = 0.0
        for name, value in self.inputs.items():
            left, right = self._sides({**self.inputs, name: value * (1 + STEP)})
            total += abs(left - right - apart) * INPUT_ROUNDING / STEP
        return total


@dataclass(frozen=True, slots=True)
class SheetBlock:
    """Lines that belong together, and what is to be said of them in words."""

    title: str
    lines: tuple[SheetLine, ...] = ()
    notes: tuple[str, ...] = field(default=())

    @property
    def disagreements(self) -> tuple[SheetLine, ...]:
        """Lines whose formula does not give their result."""
        return tuple(line for line in self.lines if line.disagrees())


@dataclass(frozen=True, slots=True)
class Sheet:
    """A calculation sheet: blocks in order, and what in it does not agree with itself or a run."""

    title: str
    blocks: tuple[SheetBlock, ...]
    differences: tuple[str, ...]
