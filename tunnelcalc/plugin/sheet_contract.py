"""What may stand beside the things that plugins offer, so that a calculation sheet shows formulas.

All of it is optional: what has no `lines` is printed by its result alone, as given by its plugin.
The result of each line is to come from the functions that computed the run; the formula is text,
and the sheet tells where both disagree. `tunnelcalc.api.Working` puts lines together.

`values` holds the columns of one section. What a run computed from the same thing is compared
with the line of this symbol, if there is one:

    kinds of support    K stiffness [MPa/m], pmax capacity [MPa]; at an age, too
    checks              demand, capacity, in the unit of the check
    closure profiles    share [-]
    laws of the ground  X = Rp / R [-], u_R = u / R [-], and pcr where they have it
    moduli              E_est [MPa]
    strengths           those of the vocabulary: mb, s, a, phi, c, sc, st, scm

The last line of a symbol counts.
"""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol, runtime_checkable

from tunnelcalc.calculation.line import SheetLine
from tunnelcalc.plugin.contract import SectionValues
from tunnelcalc.project import Element
from tunnelcalc.support.reaction import GroundRing


@runtime_checkable
class ValueLines(Protocol):
    """Strengths and moduli."""

    def lines(self, values: SectionValues) -> Sequence[SheetLine]:
        """The lines of one section."""


@runtime_checkable
class ClassLines(Protocol):
    """Checks of a class as a whole."""

    def lines(self, values: SectionValues, elements: tuple[Element, ...]) -> Sequence[SheetLine]:
        """The lines of a class of these elements on one section."""


@runtime_checkable
class ProfileLines(Protocol):
    """Closure profiles."""

    def lines(self, values: SectionValues, distance_m: float) -> Sequence[SheetLine]:
        """The lines at a distance behind the face, `share` the last."""


@runtime_checkable
class ReactionLines(Protocol):
    """Laws of the ground."""

    def lines(self, values: SectionValues, pressure_mpa: float) -> Sequence[SheetLine]:
        """The state of the wall under a pressure, `u_R` the last."""


@runtime_checkable
class RingedReactionLines(Protocol):
    """Laws of the ground that hold with a ring of other strength, as bolts make it."""

    def lines_with_ring(
        self, values: SectionValues, ring: GroundRing, pressure_mpa: float
    ) -> Sequence[SheetLine]:
        """The state of the wall with the ring from the beginning, `u_R` the last."""


@runtime_checkable
class AgeingLines(Protocol):
    """Kinds of support that harden."""

    def lines_at_age(
        self, values: SectionValues, element: Element, age_days: float
    ) -> Sequence[SheetLine]:
        """Stiffness K and then capacity pmax at an age, which formulas call `age`; they may use the
        results of `lines` by their symbols."""


@runtime_checkable
class ElementLines(Protocol):
    """Kinds of support, and checks of their elements."""

    def lines(self, values: SectionValues, element: Element) -> Sequence[SheetLine]:
        """The lines of an element."""
