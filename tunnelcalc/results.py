"""What a run found: plain data for writers and the screen."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace

from tunnelcalc.project import Project
from tunnelcalc.sections import Sections


@dataclass(frozen=True, slots=True)
class CheckLine:
    """One check of one element of one class: what a row of `checks.csv` is about."""

    class_number: int
    class_name: str
    element: str
    check: str
    unit: str
    carries_load: bool

    @property
    def label(self) -> str:
        return f"{self.element}:{self.check}"


STRESS_CASES = ("mean", "larger")
"""Which in-plane stress stands for all sides: the mean, or the larger where they are far from
equal. By the number in `class_stress_case`."""

CLOSURE_GOVERNS = "closure"


def governing_labels(checks: Sequence[CheckLine], class_number: int) -> list[str]:
    """What `class_governing` counts through, in one class: its checks, then the closure."""
    own = [line.label for line in checks if line.class_number == class_number]
    return [*own, CLOSURE_GOVERNS]


@dataclass(frozen=True, slots=True)
class Zone:
    """Consecutive sections of one scheduled class. `first` and `last` are section positions."""

    first: int
    last: int
    from_m: float
    to_m: float
    support_class: str
    least_factor_of_safety: float
    governing_check: str
    governing_chainage_m: float
    needed_pressure_mpa: float
    ground_units: tuple[str, ...]
    flags: tuple[str, ...]

    @property
    def length_m(self) -> float:
        return self.to_m - self.from_m


@dataclass(frozen=True, slots=True)
class ItemTotal:
    """Amount of one item in one scheduled class."""

    support_class: str
    item: str
    unit: str
    amount: float


@dataclass(frozen=True, slots=True)
class FlagCount:
    """On how many sections a flag has each level, the levels in the order of their numbers."""

    name: str
    meaning: str
    quantity: str
    unit: str
    threshold: str
    origin: str
    remedy: str
    clear: int
    advisory: int
    outside: int
    not_assessed: int
    overridden: int

    @property
    def raised(self) -> int:
        """What a designer must see; what is not assessed is counted apart."""
        return self.advisory + self.outside + self.overridden


@dataclass(frozen=True, slots=True)
class Incident:
    """Something that could not be evaluated: who, why, on how many sections, where first."""

    what: str
    reason: str
    sections: int
    first_chainage_m: float


@dataclass(frozen=True, slots=True)
class RunResult:
    """The whole of a run. `sections` holds every column that outlives its chunk."""

    project: Project
    sections: Sections
    checks: tuple[CheckLine, ...]
    zones: tuple[Zone, ...]
    quantities: tuple[ItemTotal, ...]
    flags: tuple[FlagCount, ...]
    incidents: tuple[Incident, ...]
    warnings: tuple[str, ...]
    methods: Mapping[str, str]

    def with_incidents(self, incidents: tuple[Incident, ...]) -> RunResult:
        return replace(self, incidents=incidents)

    @property
    def without_adequate_class(self) -> int:
        """Number of sections that no class satisfies."""
        return int((self.sections["required_class"] < 0).sum())
