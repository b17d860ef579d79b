"""A ready flag on validity, of values: a plugin gives the numbers, the core makes the level."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from tunnelcalc.arrays import Array
from tunnelcalc.project import Project
from tunnelcalc.sections import Sections
from tunnelcalc.validity import Threshold


@dataclass(frozen=True, slots=True)
class Condition:
    """Where something holds: in words ("gsi is above 55"), and the mask (n,) of the sections."""

    words: str
    test: Callable[[Sections], Array]


@dataclass(frozen=True, slots=True)
class NumberOfFlag:
    """A number behind the value of a flag, told beside it: what it is, unit, and (n,) values."""

    meaning: str
    unit: str
    compute: Callable[[Sections], Array]


@dataclass(frozen=True, slots=True)
class Flag:
    """One flag; `compute` gives the value of each section.

    A flag that has to know more of the project than stands in its sections, such as the elements
    of its classes, has `of_project`, which gives the flag of a project.
    """

    name: str
    meaning: str
    remedy: str
    quantity: str
    unit: str
    thresholds: tuple[Threshold, ...]
    needs: tuple[str, ...]
    compute: Callable[[Sections], Array]
    may_be_missing: tuple[str, ...] = ()
    applies: Condition | None = None
    outside_applies: Condition | None = None
    numbers: tuple[NumberOfFlag, ...] = ()
    of_project: Callable[[Project], Flag] | None = None

    def value(self, sections: Sections) -> Array:
        return self.compute(sections)
