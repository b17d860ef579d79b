"""What a project says, read and checked: plain data that the stages compute with."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field

from tunnelcalc.arrays import Array
from tunnelcalc.chainage import Notation
from tunnelcalc.rock_mass.laboratory import IntactTests
from tunnelcalc.sections import Sections
from tunnelcalc.support.ring_section import RingSection
from tunnelcalc.validity import FlagSettings

DEFAULT_METHODS: Mapping[str, str] = {
    "strength": "hoek_brown_2002",
    "deformation_modulus": "hoek_diederichs_2006",
    "ground_reaction": "hoek_brown_perfectly_plastic",
    "closure_profile": "vlachopoulos_diederichs_2009",
}
"""The method of each step when the project names none. Every output states which was used."""


DRAINED, WATERTIGHT = "drained", "watertight"
DRAINAGE = (DRAINED, WATERTIGHT)
"""What a project may say of the lining, so that stresses become effective under a water head."""


@dataclass(frozen=True, slots=True)
class MethodChoice:
    """The methods of one step: `names` each once, the first for all ground units but those in
    `by_unit`."""

    names: tuple[str, ...]
    by_unit: Mapping[str, str] = field(default_factory=dict)

    def of_unit(self, ground_unit: str) -> str:
        """The method of a ground unit."""
        return self.by_unit.get(ground_unit, self.names[0])


def method_column(step: str) -> str:
    """The column that holds the number of each section's method among a step's names."""
    return f"{step}_method"


@dataclass(frozen=True, slots=True)
class Element:
    """One support element of a class: its kind and the values of the kind's parameters.

    `label` tells elements of one kind in a class apart; it stands in the outputs.
    """

    kind: str
    label: str
    installed_at_m: float
    values: Mapping[str, float | str] = field(repr=False)
    section: RingSection | None = field(default=None, repr=False)
    """Of a ring, what its kind tells of its section; known once the checks are planned."""

    def number(self, parameter: str) -> float:
        """Value of a numeric parameter, in the parameter's unit."""
        value = self.values[parameter]
        if isinstance(value, str):
            raise TypeError(f"parameter {parameter!r} of {self.kind} is a choice")
        return value

    def choice(self, parameter: str) -> str:
        """Value of a parameter that is one of several words."""
        value = self.values[parameter]
        if not isinstance(value, str):
            raise TypeError(f"parameter {parameter!r} of {self.kind} is a number")
        return value


@dataclass(frozen=True, slots=True)
class SupportClass:
    """A named set of elements. Classes are listed lightest first."""

    name: str
    elements: tuple[Element, ...]
    advance_m_per_day: float = math.nan
    """Rate at which the face moves on; NaN where the project does not say."""


AddedWords = Mapping[tuple[str, str], Mapping[str, Mapping[str, float | str]]]
"""Words that tables of a project add to a choice, by kind and parameter, each with the values of
the element that it stands for."""


@dataclass(frozen=True, slots=True)
class Criteria:
    """What makes a class adequate."""

    factor_of_safety: float
    closure_pct: float
    chosen_checks: Mapping[str, bool] = field(default_factory=dict)
    """Checks of a class that count only by choice, where the project says yes or no."""
    options: Mapping[str, float | str] = field(default_factory=dict)
    """Options of the checks that were chosen, by name."""


@dataclass(frozen=True, slots=True)
class ScheduleRules:
    """Lengths of the zoning rules; 0 switches a rule off. [m]"""

    minimum_zone_m: float
    carry_m: float


@dataclass(frozen=True, slots=True)
class Gap:
    """A stretch without ground data that the project declares."""

    from_m: float
    to_m: float
    reason: str


@dataclass(frozen=True, slots=True)
class ValueOrigins:
    """Where one ground quantity came from: stretches (k,) on which value and origin hold.

    `value` is NaN where it changes with every section; `origin` and `method` are text.
    """

    quantity: str
    from_m: Array
    to_m: Array
    value: Array
    origin: Array
    method: Array


@dataclass(frozen=True, slots=True)
class UnitTests:
    """The laboratory tests of one ground unit and their result; outliers are kept."""

    ground_unit: str
    result: IntactTests
    outliers: tuple[str, ...]

    def value(self, quantity: str) -> float:
        """`intact_strength_mpa` or `mi` by the regression."""
        return float(getattr(self.result.regression, quantity))


@dataclass(frozen=True, slots=True)
class InputFile:
    """A file that the project was read from: path relative to the project, bytes as read."""

    path: str
    content: bytes = field(repr=False)


@dataclass(frozen=True, slots=True)
class Project:
    """A checked project. `ground` holds its sections by increasing chainage."""

    title: str
    methods: Mapping[str, MethodChoice]
    support_classes: tuple[SupportClass, ...]
    criteria: Criteria
    schedule: ScheduleRules
    plugins: tuple[str, ...]
    gaps: tuple[Gap, ...]
    ground: Sections
    ground_columns: tuple[str, ...]
    """Columns of `ground` that came from tables, in the order in which they are written."""
    origins: tuple[ValueOrigins, ...]
    tests: tuple[UnitTests, ...]
    notation: Notation
    drainage: str
    """One of DRAINAGE, or empty: water is then left out."""
    warnings: tuple[str, ...]
    files: tuple[InputFile, ...]
    flags: FlagSettings = field(default_factory=FlagSettings)
    words: AddedWords = field(default_factory=dict)

    @property
    def class_names(self) -> tuple[str, ...]:
        return tuple(support_class.name for support_class in self.support_classes)
