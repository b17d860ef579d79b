"""Levels of the flags on validity: plain data, and how a value becomes a level.

A flag gives a value for each section; here it is compared with the thresholds in force, those of
the flag or those that the project states in their place.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from enum import Enum, IntEnum

import numpy as np

from tunnelcalc.arrays import SAME_PLACE_M, Array

PRACTICE = "common practice, no source"
PROJECT_SETTING = "project setting"
YES_OR_NO = "yes or no"
"""Unit of a flag whose value is 1 where something is so, else 0: it has no threshold to edit."""
NO_OVERRIDE = -1


class Level(IntEnum):
    """What a flag says of a section, by the number in the column `flag_level`."""

    CLEAR = 0
    ADVISORY = 1
    OUTSIDE = 2
    NOT_ASSESSED = 3
    OVERRIDDEN = 4

    @property
    def word(self) -> str:
        return self.name.lower()


LEVEL_WORDS = tuple(level.word for level in Level)
NOT_ASSESSED_RULES = (Level.ADVISORY.word, Level.OUTSIDE.word)
"""What `not_assessed` may count as. It is never read as clear."""


class Side(Enum):
    """On which side of a threshold the level begins; at the threshold it does not."""

    ABOVE = "above"
    BELOW = "below"


@dataclass(frozen=True, slots=True)
class Threshold:
    """A level begins strictly beyond a value. `origin` is a publication, `PRACTICE`, or what the
    project says of its own setting."""

    level: Level
    side: Side
    value: float
    origin: str

    @property
    def key(self) -> str:
        """The word by which a project edits it: `advisory_above`."""
        return f"{self.level.word}_{self.side.value}"

    def beyond(self, values: Array) -> Array:
        """Mask (n,) of the values strictly beyond it; NaN is not."""
        return values > self.value if self.side is Side.ABOVE else values < self.value

    def words(self, unit: str) -> str:
        if unit == YES_OR_NO:
            return f"{self.level.word} where yes"
        return f"{self.level.word} {self.side.value} {self.value:.6g}"


@dataclass(frozen=True, slots=True)
class ThresholdSetting:
    """A threshold of a flag that the project states in place of the flag's own."""

    flag: str
    level: Level
    side: Side
    value: float
    origin: str


@dataclass(frozen=True, slots=True)
class Override:
    """Sections on which a person accepted a flag, and why."""

    flag: str
    from_m: float
    to_m: float
    person: str
    reason: str


@dataclass(frozen=True, slots=True)
class FlagSettings:
    """What a project says of the flags."""

    not_assessed: str = NOT_ASSESSED_RULES[0]
    """As which level `not_assessed` counts: one of NOT_ASSESSED_RULES."""
    thresholds: tuple[ThresholdSetting, ...] = ()
    overrides: tuple[Override, ...] = ()

    def overrides_of(self, flag: str) -> tuple[Override, ...]:
        return tuple(override for override in self.overrides if override.flag == flag)


@dataclass(frozen=True, slots=True)
class ScreeningLine:
    """A flag as it is put to a project: in words, with the thresholds in force."""

    name: str
    meaning: str
    remedy: str
    quantity: str
    unit: str
    needs: tuple[str, ...]
    thresholds: tuple[Threshold, ...]
    applies_where: str = ""
    outside_where: str = ""
    overrides: tuple[Override, ...] = field(default=())

    @property
    def threshold(self) -> str:
        """The thresholds in words."""
        parts = []
        for threshold in self.thresholds:
            words = threshold.words(self.unit)
            if threshold.level is Level.OUTSIDE and self.outside_where:
                words += f" where {self.outside_where}"
            parts.append(words)
        if self.applies_where:
            parts.append(f"only where {self.applies_where}")
        return "; ".join(parts)

    @property
    def origin(self) -> str:
        """Where the thresholds come from: one text, or each threshold with its own."""
        origins = list(dict.fromkeys(threshold.origin for threshold in self.thresholds))
        if len(origins) == 1:
            return origins[0]
        return "; ".join(f"{t.words(self.unit)}: {t.origin}" for t in self.thresholds)


def in_force(
    flag: str, thresholds: Sequence[Threshold], settings: FlagSettings
) -> tuple[Threshold, ...]:
    """The thresholds of a flag, those that the project edits replaced and marked so."""
    found = {(t.level, t.side): t for t in thresholds}
    for setting in settings.thresholds:
        key = (setting.level, setting.side)
        if setting.flag == flag and key in found:
            origin = f"{PROJECT_SETTING}: {setting.origin}" if setting.origin else PROJECT_SETTING
            found[key] = replace(found[key], value=setting.value, origin=origin)
    return tuple(found.values())


def levels(values: Array, thresholds: Sequence[Threshold], outside_applies: Array) -> Array:
    """(n,) int8 levels of values (n,): clear, advisory, outside; not assessed where NaN.

    `outside_applies` (n,) bool: elsewhere a value beyond an outside threshold does not make it
    `outside`; it is advisory where an advisory threshold says so.
    """
    found = np.zeros(values.shape, dtype=np.int8)
    for threshold in sorted(thresholds, key=lambda t: t.level):
        beyond = threshold.beyond(values)
        if threshold.level is Level.OUTSIDE:
            beyond &= outside_applies
        found[beyond] = threshold.level
    found[np.isnan(values)] = Level.NOT_ASSESSED
    return found


def severity(values: Array, thresholds: Sequence[Threshold]) -> Array:
    """(n,) distance beyond the softest threshold of a side, below 0 on its safe side.

    It orders the values of a stretch. Where a flag has thresholds on both sides, distances are
    taken relative to their thresholds, so that half of 0.8 is as far as one and a half of 1.25.
    NaN is minus infinity.
    """
    softest: dict[Side, Threshold] = {}
    for threshold in sorted(thresholds, key=lambda t: t.level):
        softest.setdefault(threshold.side, threshold)
    found = np.full(values.shape, -np.inf)
    for side, threshold in softest.items():
        sign = 1.0 if side is Side.ABOVE else -1.0
        scale = abs(threshold.value) if len(softest) > 1 and threshold.value else 1.0
        distance = sign * (values - threshold.value) / scale
        found = np.fmax(found, distance)
    return found


def override_numbers(overrides: Sequence[Override], from_m: Array, to_m: Array) -> Array:
    """(n,) position among the overrides of the one that a section lies wholly inside, else
    NO_OVERRIDE."""
    found = np.full(from_m.shape, NO_OVERRIDE, dtype=np.int64)
    for number, override in enumerate(overrides):
        inside = (from_m >= override.from_m - SAME_PLACE_M) & (to_m <= override.to_m + SAME_PLACE_M)
        found[inside] = number
    return found


def overridden(found: Array, numbers: Array) -> Array:
    """(n,) levels with those that a person accepted; what is clear stays clear."""
    accepted = (numbers != NO_OVERRIDE) & (found != Level.CLEAR)
    return np.where(accepted, np.int8(Level.OVERRIDDEN), found)


def is_raised(found: Array) -> Array:
    """Mask of the levels that a designer must see: advisory, outside and overridden."""
    return (found == Level.ADVISORY) | (found == Level.OUTSIDE) | (found == Level.OVERRIDDEN)
