"""From the class that each section requires to zones that can be built.

Two rules, repeated until nothing changes. Carry: the heavier class is carried a stated length
into lighter ground, on both sides. Minimum zone: a short zone joins a heavier neighbour, or
takes sections from lighter ones. A rule only ever gives a class that is adequate on the
section. Declared gaps and the ends stop every rule. A section without an adequate class keeps
that answer: no zone grows over it, but a carried length that reaches beyond it counts there.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array
from tunnelcalc.schedule.selection import NONE_ADEQUATE, next_adequate


class Zoning(NamedTuple):
    """`scheduled` (n,) class numbers; `rule_not_applied` (n,) bool: the rule had no adequate
    class to give."""

    scheduled: Array
    rule_not_applied: Array


def stretches(from_m: Array, to_m: Array) -> Array:
    """Number the unbroken stretches of the alignment.

    Parameters
    ----------
    from_m, to_m : (n,) chainages of the sections' ends, increasing. [m]

    Returns
    -------
    (n,) 0 for the sections before the first gap, 1 up to the next, and so on.

    Source
    ------
    Definition: ends within 1 mm meet.
    """
    breaks = np.zeros(from_m.size, dtype=np.int64)
    breaks[1:] = from_m[1:] - to_m[:-1] > SAME_PLACE_M
    return np.cumsum(breaks)


def zone_starts(classes: Array, stretch: Array) -> Array:
    """Positions (z,) of the first section of each zone.

    Parameters
    ----------
    classes : (n,) class numbers.
    stretch : (n,) numbers of the unbroken stretches.

    Source
    ------
    Definition: a zone is a row of consecutive sections of one class without a gap.
    """
    new = np.ones(classes.size, dtype=bool)
    new[1:] = (classes[1:] != classes[:-1]) | (stretch[1:] != stretch[:-1])
    return np.flatnonzero(new)


def zone_classes(
    required: Array,
    adequate: Array,
    from_m: Array,
    to_m: Array,
    *,
    carry_m: float,
    minimum_zone_m: float,
) -> Zoning:
    """Apply both rules to an alignment.

    Parameters
    ----------
    required : (n,) class numbers, lightest 0, or NONE_ADEQUATE.
    adequate : (n, c) bool.
    from_m, to_m : (n,) chainages of the sections' ends, increasing. [m]
    carry_m : length by which heavier ground's class reaches into lighter ground; 0: off. [m]
    minimum_zone_m : shortest zone; 0: off. [m]

    Returns
    -------
    Zoning. No section gets a class lighter than required or not adequate on it.

    Source
    ------
    Zoning of a schedule by minimum length and carry: common practice, no source.
    """
    board = _Board(required, adequate, from_m, to_m)
    while board.carry(carry_m) | board.mend_short_zones(minimum_zone_m):
        pass
    return Zoning(board.scheduled, board.rule_not_applied)


class _Board:
    """The schedule while rules work on it. Classes only ever get heavier, so every rule ends."""

    def __init__(self, required: Array, adequate: Array, from_m: Array, to_m: Array) -> None:
        self.required = required
        self.class_count = adequate.shape[1]
        self.following = next_adequate(adequate)
        self.from_m, self.to_m = from_m, to_m
        self.stretch = stretches(from_m, to_m)
        self.scheduled = required.copy()
        self.rule_not_applied = np.zeros(required.size, dtype=bool)

    def give(self, sections: Array, number: int) -> bool:
        """Raise `sections` to a class, or to the next heavier one that is adequate there."""
        sections = sections[self.scheduled[sections] < number]
        target = self.following[sections, number]
        possible = target != NONE_ADEQUATE
        self.rule_not_applied[sections[~possible]] = True
        self.scheduled[sections[possible]] = target[possible]
        return bool(np.any(possible))

    def carry(self, carry_m: float) -> bool:
        """Carry the class that the ground requires, not one that a rule gave: else each
        repetition would carry it further."""
        changed = False
        if carry_m <= 0:
            return changed
        for number in range(self.class_count):
            source = self.required == number
            if not np.any(source):
                continue
            reached = self._reached(source, carry_m)
            lighter = (self.scheduled != NONE_ADEQUATE) & (self.scheduled < number)
            changed |= self.give(np.flatnonzero(reached & lighter), number)
        return changed

    def _reached(self, source: Array, carry_m: float) -> Array:
        """Sections that a length carried from any source section overlaps by more than 1 mm."""
        position = np.arange(source.size)
        before = np.maximum.accumulate(np.where(source, position, -1))
        after = np.where(source, position, source.size)
        after = np.minimum.accumulate(after[::-1])[::-1]
        reached = np.zeros(source.size, dtype=bool)
        for nearest in (before, after):
            exists = (nearest >= 0) & (nearest < source.size)
            at = np.where(exists, nearest, 0)
            same = exists & (self.stretch[at] == self.stretch)
            start = np.maximum(self.from_m, self.from_m[at] - carry_m)
            end = np.minimum(self.to_m, self.to_m[at] + carry_m)
            reached |= same & (end - start > SAME_PLACE_M)
        return reached

    def mend_short_zones(self, minimum_m: float) -> bool:
        """Lengthen or merge zones shorter than the minimum, from low to high chainage."""
        changed = False
        while minimum_m > 0:
            starts = zone_starts(self.scheduled, self.stretch)
            lasts = np.append(starts[1:], self.scheduled.size) - 1
            short = self.to_m[lasts] - self.from_m[starts] < minimum_m - SAME_PLACE_M
            short &= self.scheduled[starts] != NONE_ADEQUATE
            mended = [self._mend(int(start), minimum_m) for start in starts[short]]
            if not any(mended):
                break
            changed = True
        return changed

    def _mend(self, inside: int, minimum_m: float) -> bool:
        """Mend the zone around the section `inside`, if it is still short."""
        changed = False
        number = int(self.scheduled[inside])
        refused: set[int] = set()
        lower_first = True
        while True:
            first, last = self._extent(inside)
            if self.to_m[last] - self.from_m[first] >= minimum_m - SAME_PLACE_M:
                return changed
            neighbours = [self._open(first, first - 1), self._open(last, last + 1)]
            beside = [place for place in neighbours if place is not None]
            heavier = [
                int(self.scheduled[place]) for place in beside if self.scheduled[place] > number
            ]
            if heavier:
                return self.give(np.arange(first, last + 1), min(heavier)) or changed
            order = neighbours if lower_first else neighbours[::-1]
            willing = [place for place in order if place is not None and place not in refused]
            if not willing:
                return changed
            taken = willing[0]
            lower_first = taken > last
            if self.give(np.array([taken]), number):
                changed = True
            else:
                refused.add(taken)

    def _open(self, edge: int, place: int) -> int | None:
        """The section beside an edge, unless a gap, an end or `none_adequate` is there."""
        if not 0 <= place < self.scheduled.size or self.stretch[place] != self.stretch[edge]:
            return None
        return place if self.scheduled[place] != NONE_ADEQUATE else None

    def _extent(self, inside: int) -> tuple[int, int]:
        """First and last section of the zone around a section."""
        first = last = inside
        alike = self.scheduled[inside]
        while (lower := self._open(first, first - 1)) is not None and (
            self.scheduled[lower] == alike
        ):
            first = lower
        while (upper := self._open(last, last + 1)) is not None and (
            self.scheduled[upper] == alike
        ):
            last = upper
        return first, last
