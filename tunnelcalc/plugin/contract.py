"""What plugins offer to a run. Ours and a stranger's meet the same contract.

Every array is (n,): one value a section. Plugins see sections and elements, never a file,
the screen or another plugin, and must not change what they are given.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Protocol, runtime_checkable

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.project import Element
from tunnelcalc.results import RunResult
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import Reaction
from tunnelcalc.vocabulary import UNLIMITED, Limits, Sort


@dataclass(frozen=True, slots=True)
class Parameter:
    """A parameter of a support kind: validation and listings are made from this alone.

    A parameter with `only_if = ("contact", "blocked")` is required when that choice is made and
    refused otherwise; every other parameter is required.
    """

    name: str
    meaning: str
    unit: str = ""
    limits: Limits = UNLIMITED
    choices: tuple[str, ...] = ()
    only_if: tuple[str, str] | None = None

    @property
    def sort(self) -> Sort:
        return Sort.CHOICE if self.choices else Sort.NUMBER

    def allowed(self) -> str:
        """The allowed values in words."""
        return " or ".join(self.choices) if self.choices else self.limits.describe(self.unit)


@dataclass(frozen=True, slots=True)
class Misfit:
    """Why the values of an element do not fit together, and what to do about it."""

    parameter: str
    message: str
    fix: str


@dataclass(frozen=True, slots=True)
class Amount:
    """A quantity of one item a metre of tunnel, (n,) in `unit` a metre."""

    item: str
    unit: str
    per_metre: Array


class SupportKind(Protocol):
    """A sort of support element: what it needs to know, how it reacts, what it amounts to."""

    @property
    def name(self) -> str:
        """The word for `kind:` in a project."""

    @property
    def meaning(self) -> str:
        """One line on what it is and how it is modelled, with the source."""

    @property
    def parameters(self) -> tuple[Parameter, ...]:
        """The parameters, each with unit and range."""

    def misfits(self, element: Element, smallest_radius_m: float) -> Iterable[Misfit]:
        """Values that are each in range but do not fit together or into the opening."""

    def reaction_form(self, element: Element) -> str:
        """The form of the reaction: `form` of one of the four reaction classes."""

    def reaction(self, sections: Sections, element: Element) -> Reaction:
        """How the element reacts on each section. Needs `radius_m`."""

    def amounts(self, sections: Sections, element: Element) -> Iterable[Amount]:
        """Quantities a metre of tunnel. Needs `radius_m`."""


@dataclass(frozen=True, slots=True)
class Evaluation:
    """Demand and capacity (n,) of a check, in the check's unit, both 0 or more.

    A rule may leave sections out that lack an optional input: `left_out` marks them, and
    `left_out_reason` says what is missing. They are listed as not evaluated and do not count
    against the class. A load check that leaves a section out makes the class not adequate
    there.
    """

    demand: Array
    capacity: Array
    left_out: Array | None = None
    left_out_reason: str = ""


class SupportCheck(Protocol):
    """A demand against a capacity, for elements of some kinds.

    `evaluate` finds in the sections, besides the ground and the radius: `support_pressure_mpa`,
    `supported_closure_mm`, `supported_plastic_radius_m` of the class, and `element_pressure_mpa`,
    `element_capacity_mpa` of the element.
    """

    @property
    def name(self) -> str:
        """Its name in the outputs."""

    @property
    def meaning(self) -> str:
        """One line on what is compared, with the source."""

    @property
    def applies_to(self) -> tuple[str, ...]:
        """The support kinds whose elements it checks."""

    @property
    def unit(self) -> str:
        """Unit of demand and capacity."""

    @property
    def carries_load(self) -> bool:
        """True: capacity / demand must reach the project's factor. False: a rule."""

    def concerns(self, element: Element) -> bool:
        """Whether the check is made for this element at all."""

    def evaluate(self, sections: Sections, element: Element) -> Evaluation:
        """Demand and capacity on each section."""


class StrengthMethod(Protocol):
    """Strength constants and derived strengths of the rock mass, from ground columns."""

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]: ...
    @property
    def gives(self) -> tuple[str, ...]: ...

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        """The columns named in `gives`, from those in `needs`."""


class ModulusMethod(Protocol):
    """An estimate of the deformation modulus of the rock mass."""

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]: ...

    def modulus_mpa(self, sections: Sections) -> Array:
        """(n,) modulus. [MPa]  `intact_modulus_mpa` is NaN where it is not known."""


class GroundReactionMethod(Protocol):
    """The law of the ground around a circular opening."""

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]: ...

    def curve(self, sections: Sections) -> GroundCurve:
        """Ground reaction curves of the sections."""


class ClosureProfileMethod(Protocol):
    """How far the unsupported wall has moved at a distance from the face."""

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]: ...

    def share(self, sections: Sections, distance_m: Array) -> Array:
        """(n,) closure at `distance_m` behind the face over the final closure, 0 to 1. [-]"""


class ValidityFlag(Protocol):
    """A warning on sections where the method reaches its limits, or an input was assumed."""

    @property
    def name(self) -> str: ...
    @property
    def meaning(self) -> str: ...
    @property
    def threshold(self) -> str: ...
    @property
    def origin(self) -> str:
        """The published source of the threshold, or "common practice, no source"."""

    @property
    def remedy(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]:
        """Columns that the flag reads. Where one is NaN the flag is counted as not assessed."""

    def raised(self, sections: Sections) -> Array:
        """(n,) bool."""


class GroundReader(Protocol):
    """Reads one file format into a table of text with places. Meaning is given to it later."""

    @property
    def name(self) -> str: ...
    @property
    def suffixes(self) -> tuple[str, ...]:
        """File name endings, in lower case, with the dot."""

    def read(self, name: str, content: bytes) -> RawTable:
        """Raises `InputError` where the content is not of this format."""


@runtime_checkable
class SheetReader(GroundReader, Protocol):
    """Reads a format whose files hold several tables: a project names one as FILE#SHEET."""

    def read_sheet(self, name: str, content: bytes, sheet: str) -> RawTable:
        """The table of that name. Raises `InputError` where there is none."""


class ReportWriter(Protocol):
    """Writes files about a finished run."""

    @property
    def name(self) -> str: ...

    def write(self, result: RunResult, folder: Path) -> Iterable[str]:
        """Write into `folder`; returns the names of the files written."""
