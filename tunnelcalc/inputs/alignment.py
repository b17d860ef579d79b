"""Intervals along the alignment: order, gaps and overlaps, and cutting into sections."""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Problems, Where

MOST_SECTIONS = 5_000_000
COUNT_TOLERANCE = 1e-9
"""A length that is a whole number of sections but for rounding is not cut once more."""


@dataclass(frozen=True, slots=True)
class Piece:
    """An interval or a declared gap, with the place where it is written."""

    from_m: float
    to_m: float
    where: Where
    is_gap: bool


@dataclass(frozen=True, slots=True)
class Words:
    """How pieces of the alignment are spoken of."""

    piece: str
    what: str
    allowed: str
    fix: str


INTERVALS = Words(
    "interval",
    "ground",
    "intervals that meet, or a declared gap",
    "add the missing interval, or declare the gap under ground: gaps",
)
PROFILES = Words(
    "profile",
    "profile",
    "profiles that meet",
    "extend a profile, or add the missing one",
)


class Cut(NamedTuple):
    """Sections: the interval that each belongs to (n,), and its ends (n,) [m]."""

    interval: Array
    from_m: Array
    to_m: Array


def span(from_m: float, to_m: float) -> str:
    """A stretch in words."""
    return f"{from_m:.10g} to {to_m:.10g} m"


def check_order(
    pieces: list[Piece], complete: bool, problems: Problems, words: Words | None = None
) -> None:
    """Tell overlaps, repetitions and undeclared gaps among intervals and declared gaps.

    Where the intervals are not `complete`, because some could not be read, gaps are not told:
    the unreadable ones would fill them.
    """
    words = words or INTERVALS
    ordered = sorted(pieces, key=lambda piece: (piece.from_m, piece.to_m))
    if not ordered:
        return
    furthest = ordered[0]
    for piece in ordered[1:]:
        distance = piece.from_m - furthest.to_m
        if distance < -SAME_PLACE_M:
            _tell_overlap(furthest, piece, problems, words)
        elif distance > SAME_PLACE_M and complete:
            problems.add(
                piece.where,
                f"no {words.what} is given from {span(furthest.to_m, piece.from_m)}",
                context=f"before {_named(piece, words)}",
                allowed=words.allowed,
                fix=words.fix,
            )
        if piece.to_m > furthest.to_m:
            furthest = piece
    if not complete:
        return
    for end, side in ((ordered[0], "before"), (furthest, "after")):
        if end.is_gap:
            problems.add(
                end.where,
                f"{_named(end, words)} lies {side} all intervals",
                allowed="a gap between two intervals",
                fix="remove it",
            )


def _named(piece: Piece, words: Words) -> str:
    kind = "the declared gap" if piece.is_gap else f"the {words.piece}"
    return f"{kind} {span(piece.from_m, piece.to_m)}"


def _tell_overlap(first: Piece, second: Piece, problems: Problems, words: Words) -> None:
    same = first.from_m == second.from_m and first.to_m == second.to_m
    length = min(first.to_m, second.to_m) - second.from_m
    how = "repeats" if same else "overlaps"
    by = "" if same else f" by {length:.10g} m"
    problems.add(
        second.where,
        f"{_named(second, words)} {how} {_named(first, words)} of {first.where}{by}",
        allowed=f"each metre of the alignment in one {words.piece}",
        fix="correct the ends, or remove one of the two",
    )


def cut_into_sections(from_m: Array, to_m: Array, longest_m: float | None) -> Cut:
    """Equal sections no longer than `longest_m`; one an interval where that is None.

    `from_m`, `to_m` are (i,) the ends of the intervals, by increasing chainage.
    """
    length = to_m - from_m
    counts = section_counts(length, longest_m)
    interval = np.repeat(np.arange(from_m.size), counts)
    first = np.cumsum(counts) - counts
    position = np.arange(interval.size) - first[interval]
    share = length[interval] / counts[interval]
    start = from_m[interval] + position * share
    last = position + 1 == counts[interval]
    end = np.where(last, to_m[interval], from_m[interval] + (position + 1) * share)
    return Cut(interval, start, end)


def section_counts(length_m: Array, longest_m: float | None) -> Array:
    """Number of sections (i,) in each interval."""
    if longest_m is None:
        return np.ones(length_m.size, dtype=np.int64)
    return np.maximum(np.ceil(length_m / longest_m - COUNT_TOLERANCE), 1).astype(np.int64)


def split_at(from_m: Array, to_m: Array, limits_m: Array) -> Cut:
    """Intervals cut where a limit lies inside one.

    `from_m`, `to_m` are (i,) the ends of the intervals, by increasing chainage; `limits_m` (k,).
    """
    interval, start, end = [], [], []
    for number, (first, last) in enumerate(zip(from_m.tolist(), to_m.tolist(), strict=True)):
        inside = limits_m[(limits_m - first > SAME_PLACE_M) & (last - limits_m > SAME_PLACE_M)]
        ends = [first, *inside.tolist(), last]
        interval += [number] * (len(ends) - 1)
        start += ends[:-1]
        end += ends[1:]
    return Cut(np.array(interval, dtype=np.int64), np.array(start), np.array(end))
