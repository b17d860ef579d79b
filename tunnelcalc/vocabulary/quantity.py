"""What an entry of the vocabulary is: name, symbol, unit, meaning, allowed range."""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import Enum

import numpy as np

from tunnelcalc.arrays import Array


@dataclass(frozen=True, slots=True)
class Limits:
    """Allowed range of a number; `above` and `below` exclude the end itself."""

    minimum: float = -math.inf
    maximum: float = math.inf
    above: bool = False
    below: bool = False
    whole: bool = False

    def contain(self, values: Array) -> Array:
        """Mask of the values inside the range; NaN and infinity are not."""
        low = values > self.minimum if self.above else values >= self.minimum
        high = values < self.maximum if self.below else values <= self.maximum
        inside = low & high & np.isfinite(values)
        return inside & (values == np.floor(values)) if self.whole else inside

    def describe(self, unit: str = "") -> str:
        """The range in words: "a number above 0, at most 100, in MPa"."""
        words = []
        if math.isfinite(self.minimum):
            words.append(f"{'above' if self.above else 'at least'} {self.minimum:g}")
        if math.isfinite(self.maximum):
            words.append(f"{'below' if self.below else 'at most'} {self.maximum:g}")
        kind = "a whole number" if self.whole else "a number"
        text = f"{kind} {', '.join(words)}" if words else kind
        return f"{text}, in {unit}" if unit else text


UNLIMITED = Limits()


class Sort(Enum):
    """What a value is."""

    NUMBER = "number"
    CHOICE = "choice"
    TEXT = "text"


@dataclass(frozen=True, slots=True)
class Quantity:
    """One entry of the vocabulary.

    `used` is False for a ground column that is read, checked and carried along although no
    method of this version computes with it; a run that has such values says so.
    """

    name: str
    symbol: str
    unit: str
    meaning: str
    limits: Limits = UNLIMITED
    sort: Sort = Sort.NUMBER
    choices: tuple[str, ...] = ()
    used: bool = True

    def allowed(self) -> str:
        """The allowed values in words."""
        if self.sort is Sort.CHOICE:
            return " or ".join(self.choices)
        if self.sort is Sort.TEXT:
            return "text"
        return self.limits.describe(self.unit)
