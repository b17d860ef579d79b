"""The ends of a range as they are printed: rounded towards its inside, so that they hold."""

from __future__ import annotations

from decimal import ROUND_CEILING, ROUND_FLOOR, Decimal
from typing import NamedTuple

MOST_DIGITS = 17
"""Significant digits that tell any number from the next."""


class Ends(NamedTuple):
    """The ends of a range, and the significant digits that they need."""

    low: float
    high: float
    digits: int


def inward(low: float, high: float, digits: int) -> Ends:
    """The ends to some significant digits, the lower one up and the upper one down; to more where
    nothing would be left between them. NaN stays NaN."""
    if low != low or high != high:
        return Ends(low, high, digits)
    for more in range(digits, MOST_DIGITS):
        up, down = _to(low, more, ROUND_CEILING), _to(high, more, ROUND_FLOOR)
        if up <= down:
            return Ends(up, down, more)
    return Ends(low, high, MOST_DIGITS)


def _to(value: float, digits: int, rounding: str) -> float:
    exact = Decimal(repr(value))
    if not exact:
        return 0.0
    last = Decimal(1).scaleb(exact.adjusted() - digits + 1)
    return float(exact.quantize(last, rounding=rounding))
