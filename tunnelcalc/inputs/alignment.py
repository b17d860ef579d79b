"""Intervals along the alignment: order, gaps and overlaps, and cutting into sections."""

from __future__ import annotations

from dataclasses import dataclass
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.errors import Problems, Where
from tunnelcalc.project import Gap

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


class Cut(NamedTuple):
    """Sections: the interval that each belongs to (n,), and its ends (n,) [m]."""

    interval: Array
    from_m: Array
    to_m: Array


def span(from_m: float, to_m: float) -> str:
    """A stretch in words."""
    return f"{from_m:.10g} to {to_m:.10g} m"


def check_order(pieces: list[Piece], complete: bool, problems: Problems) -> None:
    """Tell overlaps, repetitions and undeclared gaps among intervals and declared gaps.

    Where the intervals are not `complete`, because some could not be read, gaps are not told:
    the unreadable ones would fill them.
    """
    ordered = sorted(pieces, key=lambda piece: (piece.from_m, piece.to_m))
    if not ordered:
        return
    furthest = ordered[0]
    for piece in ordered[1:]:
        distance = piece.from_m - furthest.to_m
        if distance < -SAME_PLACE_M:
            _tell_overlap(furthest, piece, problems)
        elif distance > SAME_PLACE_M and complete:
            problems.add(
                piece.where,
                f"no ground is given from {span(furthest.to_m, piece.from_m)}",
                context=f"before {_named(piece)}",
                allowed="intervals that meet, or a declared gap",
                fix="add the missing interval, or declare the gap under ground: gaps",
            )
        if piece.to_m > furthest.to_m:
            furthest = piece
    if not complete:
        return
    for end, side in ((ordered[0], "before"), (furthest, "after")):
        if end.is_gap:
            problems.add(
                end.where,
                f"{_named(end)} lies {side} all intervals",
                allowed="a gap between two intervals",
                fix="remove it",
            )


def _named(piece: Piece) -> str:
    kind = "the declared gap" if piece.is_gap else "the interval"
    return f"{kind} {span(piece.from_m, piece.to_m)}"


def _tell_overlap(first: Piece, second: Piece, problems: Problems) -> None:
    same = first.from_m == second.from_m and first.to_m == second.to_m
    length = min(first.to_m, second.to_m) - second.from_m
    how = "repeats" if same else "overlaps"
    by = "" if same else f" by {length:.10g} m"
    problems.add(
        second.where,
        f"{_named(second)} {how} {_named(first)} of {first.where}{by}",
        allowed="each metre of the alignment in one interval",
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


def gap_pieces(gaps: list[tuple[Gap, Where]]) -> list[Piece]:
    """Declared gaps as pieces of the alignment."""
    return [Piece(gap.from_m, gap.to_m, where, True) for gap, where in gaps]
