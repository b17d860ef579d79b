"""What the flags share: thresholds in short, values of yes and no, ratios."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from tunnelcalc.api import YES_OR_NO, Array, Flag, Level, Sections, Side, Threshold

ASSUMPTION = "assumption of this program"


def advisory_above(value: float, origin: str) -> Threshold:
    return Threshold(Level.ADVISORY, Side.ABOVE, value, origin)


def advisory_below(value: float, origin: str) -> Threshold:
    return Threshold(Level.ADVISORY, Side.BELOW, value, origin)


def outside_above(value: float, origin: str) -> Threshold:
    return Threshold(Level.OUTSIDE, Side.ABOVE, value, origin)


def outside_below(value: float, origin: str) -> Threshold:
    return Threshold(Level.OUTSIDE, Side.BELOW, value, origin)


def column(name: str) -> Callable[[Sections], Array]:
    """The value is a column as it stands."""
    return lambda sections: sections[name]


def ratio_of(top: str, bottom: str) -> Callable[[Sections], Array]:
    """The value is one column over another."""
    return lambda sections: over(sections[top], sections[bottom])


def over(top: Array, bottom: Array) -> Array:
    """(n,) top over bottom; NaN where bottom is 0."""
    with np.errstate(over="ignore", invalid="ignore"):
        return np.divide(top, bottom, out=np.full(np.shape(top), np.nan), where=bottom != 0)


def where_set(
    name: str,
    meaning: str,
    remedy: str,
    quantity: str,
    flagged: str,
    origin: str,
    level: Level = Level.ADVISORY,
) -> Flag:
    """A flag on a column of yes and no that the program fills."""
    return Flag(
        name,
        meaning,
        remedy,
        quantity,
        YES_OR_NO,
        (Threshold(level, Side.ABOVE, 0, origin),),
        (flagged,),
        lambda sections: sections[flagged].astype(float),
    )


def where_declared(
    name: str,
    meaning: str,
    remedy: str,
    declared: tuple[str, str],
    origin: str,
    level: Level = Level.ADVISORY,
) -> Flag:
    """A flag on a word in a column of the ground: (column, word)."""
    flagged, word = declared
    return Flag(
        name,
        meaning,
        remedy,
        f"{flagged} is {word}",
        YES_OR_NO,
        (Threshold(level, Side.ABOVE, 0, origin),),
        (flagged,),
        lambda sections: (sections[flagged] == word).astype(float),
    )
