"""Small alignments written as words, one character a section: `0`, `1`, `2` are classes, lightest
first, and `x` is a section without an adequate class."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.schedule.zoning import zone_classes

CLASSES = 3
NONE = "x"


def numbers(word: str) -> Array:
    """Class numbers (n,) of a word."""
    return np.array([NONE_ADEQUATE if c == NONE else int(c) for c in word], dtype=np.int32)


def word(classes: Array) -> str:
    """The word of class numbers (n,)."""
    return "".join(NONE if number == NONE_ADEQUATE else str(number) for number in classes)


def ends(lengths_m: Sequence[float], gap_before: Mapping[int, float]) -> tuple[Array, Array]:
    """Chainages of sections of these lengths; `gap_before[i]` m are left out before section i."""
    from_m, to_m, at = [], [], 0.0
    for position, length in enumerate(lengths_m):
        at += gap_before.get(position, 0.0)
        from_m.append(at)
        at += length
        to_m.append(at)
    return np.array(from_m), np.array(to_m)


def adequacy(required: str, only: Mapping[int, str]) -> Array:
    """(n, 3) bool: every class from the required one on, or those that `only` lists."""
    rows = []
    for position, character in enumerate(required):
        heavier = "" if character == NONE else "012"[int(character) :]
        adequate = only.get(position, heavier)
        rows.append([str(number) in adequate for number in range(CLASSES)])
    return np.array(rows, dtype=bool)


def zoned(
    required: str,
    *,
    lengths_m: Sequence[float] | float = 10.0,
    gap_before: Mapping[int, float] | None = None,
    only: Mapping[int, str] | None = None,
    carry_m: float = 0.0,
    minimum_zone_m: float = 0.0,
) -> tuple[str, list[int]]:
    """The scheduled word, and the sections where a rule could not be applied."""
    lengths = [lengths_m] * len(required) if isinstance(lengths_m, float) else lengths_m
    assert len(lengths) == len(required)
    zoning = zone_classes(
        numbers(required),
        adequacy(required, only or {}),
        *ends(lengths, gap_before or {}),
        carry_m=carry_m,
        minimum_zone_m=minimum_zone_m,
    )
    return word(zoning.scheduled), np.flatnonzero(zoning.rule_not_applied).tolist()
