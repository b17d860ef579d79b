"""What plugins offer to a run. Ours and a stranger's meet the same contract.

Every array is (n,): one value a section. Plugins see sections and elements, never a file,
the screen or another plugin, and must not change what they are given.

Whatever is offered here may also have `lines`, by which a calculation sheet shows how a result
came about: see the protocols `...Lines` in `tunnelcalc.plugin.sheet_contract`. Where it has none
the sheet prints the result alone.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Protocol, runtime_checkable

from tunnelcalc.arrays import Array
from tunnelcalc.plugin.flag import Condition
from tunnelcalc.plugin.parameter import Misfit, Parameter
from tunnelcalc.plugin.raw_table import RawTable
from tunnelcalc.project import Element, Project
from tunnelcalc.results import RunResult
from tunnelcalc.section_curves import SectionCurves, ThrustAndMoment
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import Reaction
from tunnelcalc.support.ring_section import RingSection
from tunnelcalc.trade_off import TradeOff
from tunnelcalc.validity import Threshold
from tunnelcalc.vocabulary import Limits

SectionValues = Mapping[str, float | str]
"""The columns of one section by name, a number or a text each."""


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

    @property
    def is_ring(self) -> bool:
        """Whether it is a ring at the wall, on which water presses if the lining is watertight."""

    def misfits(self, element: Element, smallest_radius_m: float) -> Iterable[Misfit]:
        """Values that are each in range but do not fit together or into the opening."""

    def reaction_form(self, element: Element) -> str:
        """The form of the reaction: `form` of one of the four reaction classes."""

    def reaction(self, sections: Sections, element: Element) -> Reaction:
        """How the element reacts on each section. Needs `radius_m`."""

    def amounts(self, sections: Sections, element: Element) -> Iterable[Amount]:
        """Quantities a metre of tunnel. Needs `radius_m`."""


@runtime_checkable
class RingKind(SupportKind, Protocol):
    """A kind of ring that tells its section, so that checks of a class can put rings together."""

    def ring_section(self, element: Element) -> RingSection:
        """The section of an element, in a metre of tunnel; stands in `Element.section`."""


@dataclass(frozen=True, slots=True)
class Evaluation:
    """Demand and capacity (n,) of a check, in the check's unit, both 0 or more.

    A rule may leave sections out that lack an optional input: `left_out` marks them, and
    `left_out_reason` says what is missing. They are listed as not evaluated and do not count
    against the class. A load check that leaves a section out makes the class not adequate
    there. `note` stands beside every row that is evaluated.
    """

    demand: Array
    capacity: Array
    left_out: Array | None = None
    left_out_reason: str = ""
    note: str = ""


class SupportCheck(Protocol):
    """A demand against a capacity, for elements of some kinds.

    `evaluate` finds in the sections, besides the ground and the radius: `support_pressure_mpa`,
    `supported_closure_mm`, `supported_plastic_radius_m` of the class, and `element_pressure_mpa`,
    `element_capacity_mpa` of the element. Of one that ages also `worst_pressure_mpa`,
    `worst_capacity_mpa`, `worst_age_days` and `worst_distance_m`, where along the advance it is
    used most, and `early_pressure_mpa`, with water, at the age from which its capacity is trusted.
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


class ClassCheck(Protocol):
    """A demand against a capacity of a support class as a whole.

    `evaluate` finds in the sections, besides the ground and the radius: `support_pressure_mpa`,
    `supported_closure_mm`, `supported_plastic_radius_m` of the class, `class_capacity_mpa`, the
    sum of its elements' capacities, `ring_capacity_mpa`, that of its rings alone, and
    `lining_water_mpa`, the water pressure on a watertight lining. What the checks of its elements
    find, `element_water_mpa`, of the water the share of an element, and `element_acts_from_m`, the
    distance behind the face from which it acts, stand under `of_element(name, position)`.
    """

    @property
    def name(self) -> str:
        """Its name in the outputs."""

    @property
    def meaning(self) -> str:
        """One line on what is compared, with the source."""

    @property
    def unit(self) -> str:
        """Unit of demand and capacity."""

    @property
    def carries_load(self) -> bool:
        """True: capacity / demand must reach the project's factor. False: a rule."""

    @property
    def by_choice(self) -> bool:
        """True: it counts only where the project says `criteria: NAME: yes`."""

    @property
    def requires(self) -> Mapping[str, Limits]:
        """Ground columns that it cannot do without where it counts."""

    def concerns(self, project: Project) -> bool:
        """Whether the check is made in this project at all."""

    def evaluate(self, sections: Sections, elements: tuple[Element, ...]) -> Evaluation:
        """Demand and capacity on each section of a class of these elements."""


@runtime_checkable
class ClassCheckWithOptions(ClassCheck, Protocol):
    """A check of a class by choice that asks for more where it is chosen.

    A project states the options beside the choice, under `criteria`, by their names; where the
    check is not chosen they are refused, and it is not made at all.
    """

    @property
    def options(self) -> tuple[Parameter, ...]:
        """The options, each with unit and range; without `only_if`."""

    def configured(self, values: Mapping[str, float | str]) -> ClassCheck:
        """The check with the project's values of its options, by name."""

    def concerns_class(self, elements: tuple[Element, ...]) -> bool:
        """Whether the check is made for a class of these elements at all."""


@runtime_checkable
class LiningCheck(ClassCheck, Protocol):
    """A check of a class that tells the forces around its lining, for `tunnelcalc curves`."""

    def thrust_and_moment(
        self, sections: Sections, elements: tuple[Element, ...]
    ) -> Sequence[ThrustAndMoment]:
        """The forces of each ring in one section; none where the class has no lining that bears
        together."""


class ValidityFlag(Protocol):
    """A hazard or a limit of the method that every section is screened for.

    It gives a value; the core compares it with the thresholds in force and makes the level. A
    ready one is `Flag`.
    """

    @property
    def name(self) -> str: ...
    @property
    def meaning(self) -> str: ...
    @property
    def remedy(self) -> str: ...
    @property
    def quantity(self) -> str:
        """What is compared with the thresholds, in words."""

    @property
    def unit(self) -> str:
        """Unit of the value; `YES_OR_NO` where it is 1 or 0."""

    @property
    def thresholds(self) -> tuple[Threshold, ...]:
        """One at most of each level and side, `advisory` or `outside`, each with its origin."""

    @property
    def needs(self) -> tuple[str, ...]:
        """Columns that the flag reads. Where one is NaN or empty the flag is not assessed."""

    @property
    def may_be_missing(self) -> tuple[str, ...]:
        """Further columns that it reads, and that may be NaN or empty."""

    @property
    def applies(self) -> Condition | None:
        """Where the flag applies at all: elsewhere it is clear. None: everywhere."""

    @property
    def outside_applies(self) -> Condition | None:
        """Where its outside thresholds hold. None: everywhere."""

    def value(self, sections: Sections) -> Array:
        """(n,) in `unit`; NaN where it cannot be told.

        A flag may also have `numbers`, which are told beside the value, and `of_project`, which
        gives the flag of one project: see `Flag`.
        """


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


class SectionFigure(Protocol):
    """Draws curves of one section."""

    @property
    def name(self) -> str: ...

    def draw(self, curves: SectionCurves, folder: Path) -> Iterable[str]:
        """Write into `folder`; returns the names of the files written: none, or a sheet that
        says so, where the curves that it draws are not known. The same curves give the same
        bytes."""


class TradeOffFigure(Protocol):
    """Draws what a parameter of a class does, for `tunnelcalc tune`."""

    @property
    def name(self) -> str: ...

    def draw(self, trade_off: TradeOff, folder: Path) -> Iterable[str]:
        """Write into `folder` files that begin with `trade_off.file_name`; returns their names.
        The same trade-off gives the same bytes."""
