"""Checks of the program's methods against something outside it: plain data and its outcome."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from enum import StrEnum


class Standing(StrEnum):
    """What the expected value rests on."""

    PUBLISHED = "published"
    FROM_MEMORY = "published, from memory"
    INDEPENDENT = "independent calculation"
    EXACT = "exact"


@dataclass(frozen=True, slots=True)
class VerificationCheck:
    """One number of one method, and the number that it must agree with.

    `method` is the name of the method, kind or check that is verified; `subject` says which
    case and quantity. `source` is the publication that the expected value or the governing
    equations come from. `tolerance` is the largest difference that counts as agreement, in
    `unit`: half of the last printed digit of a published value, the error of the numerical
    solution of an independent one.
    """

    method: str
    subject: str
    source: str
    standing: Standing
    unit: str
    tolerance: float
    expected: float | Callable[[], float]
    computed: Callable[[], float]

    @property
    def name(self) -> str:
        """What tells it apart from every other check."""
        return f"{self.method}: {self.subject}"


@dataclass(frozen=True, slots=True)
class Verified:
    """A check with both numbers."""

    check: VerificationCheck
    expected: float
    computed: float
    fault: str = ""
    """What the check raised, where it has no numbers."""

    @property
    def difference(self) -> float:
        return self.computed - self.expected

    @property
    def agrees(self) -> bool:
        """False for NaN too."""
        return abs(self.difference) <= self.check.tolerance


def verified(checks: Iterable[VerificationCheck]) -> tuple[Verified, ...]:
    """Both numbers of every check, in order; a check that raises has none and does not agree."""
    return tuple(_verified(check) for check in checks)


def _verified(check: VerificationCheck) -> Verified:
    try:
        expected = check.expected() if callable(check.expected) else check.expected
        return Verified(check, float(expected), float(check.computed()))
    except Exception as error:  # a stranger's check may raise anything
        fault = f"{type(error).__name__}: {error}"
        return Verified(check, math.nan, math.nan, " ".join(fault.split())[:300])
