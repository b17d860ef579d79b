"""Which values of a parameter would make a class adequate, section by section."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.trade_off import TradeOff
from tunnelcalc.tune.changes import Change, Variation
from tunnelcalc.tune.ends import inward
from tunnelcalc.tune.trial import Trial

HALVINGS = 20


@dataclass(frozen=True, slots=True)
class Advice:
    """What a parameter does for the section at `position`: the range of its values that are
    adequate, NaN where none is, or the `words` that are. `evaluated` is False where something
    that was tried could not be judged."""

    position: int
    trade_off: TradeOff
    adequate_from: float
    adequate_to: float
    words: tuple[str, ...]
    evaluated: bool

    @property
    def helps(self) -> bool:
        return bool(self.words) or self.adequate_from == self.adequate_from

    def ends(self, digits: int, text: Callable[[float, int], str]) -> tuple[str, str]:
        """The range as it is printed to some significant digits: never wider than it is."""
        low, high, needed = inward(self.adequate_from, self.adequate_to, digits)
        return text(low, needed), text(high, needed)

    @property
    def verdict(self) -> str:
        of_words = self.trade_off.of_words
        if self.helps:
            return "adequate with these words" if of_words else "adequate within the range"
        told = "no word is adequate" if of_words else "none in range"
        return told if self.evaluated else f"{told}; not all could be evaluated"


def advice(
    trial: Trial, variation: Variation, held: Sequence[Change], found: TradeOff
) -> Iterator[Advice]:
    """For each section its words, or the first stretch of values, that are adequate.

    The ends of a stretch are found by halving; what lies between two values that were tried, and
    are alike, need not be seen.
    """
    for row in range(found.length_m.size):
        at = np.flatnonzero(found.adequate[:, row])
        low = high = np.nan
        words: tuple[str, ...] = ()
        if found.of_words:
            words = tuple(str(found.tried[index]) for index in at)
        elif at.size:
            low, high = _stretch(trial, variation, held, found, row)
        yield Advice(row, found, low, high, words, bool(np.all(found.evaluated[:, row])))


def _stretch(
    trial: Trial, variation: Variation, held: Sequence[Change], found: TradeOff, row: int
) -> tuple[float, float]:
    """The first stretch of adequate values, of which there is one."""
    values = [float(value) for value in found.tried]
    adequate = found.adequate[:, row]
    first = int(np.flatnonzero(adequate)[0])
    after = np.flatnonzero(~adequate[first:])
    last = first + int(after[0]) - 1 if after.size else len(values) - 1
    low, high = values[first], values[last]
    if variation.whole:
        return low, high

    def edge(good: float, bad: float) -> float:
        """The last adequate value between one that is and one that is not."""
        for _ in range(HALVINGS):
            middle = 0.5 * (good + bad)
            if trial.adequate((*held, variation.change(middle)), row):
                good = middle
            else:
                bad = middle
        return good

    return (
        edge(low, values[first - 1]) if first > 0 else low,
        edge(high, values[last + 1]) if last < len(values) - 1 else high,
    )
