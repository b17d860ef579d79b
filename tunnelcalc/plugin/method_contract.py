"""Methods that a project chooses by name: what each says of itself, needs and gives."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Protocol

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import Limits

STRENGTH_COLUMNS = (
    "mb",
    "s",
    "a",
    "rock_mass_strength_mpa",
    "tensile_strength_mpa",
    "global_strength_mpa",
    "confinement_mpa",
    "friction_angle_deg",
    "cohesion_mpa",
    "residual_mb",
    "residual_s",
    "residual_a",
    "residual_friction_angle_deg",
    "residual_cohesion_mpa",
)
"""What the strength of the rock mass may be told by."""


class Method(Protocol):
    """What every method by name says of itself.

    A project names one for all its ground, or one for each ground unit.
    """

    @property
    def name(self) -> str: ...
    @property
    def source(self) -> str: ...
    @property
    def needs(self) -> tuple[str, ...]:
        """The columns that it reads."""

    @property
    def requires(self) -> Mapping[str, Limits]:
        """Ground columns that it cannot do without, each with the range in which it holds.

        What is missing, or outside, is a problem of the input and stops the run. A column
        that is needed and not required may be NaN.
        """


class StrengthMethod(Method, Protocol):
    """Strength constants and derived strengths of the rock mass, from ground columns."""

    @property
    def gives(self) -> tuple[str, ...]:
        """Which of `STRENGTH_COLUMNS` it computes; the others stay NaN."""

    @property
    def requires_of_residual(self) -> Mapping[str, Limits]:
        """What it cannot do without where the law of the ground needs residual strength."""

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        """The columns named in `gives`, from those in `needs`.

        `mass_disturbance` is the disturbance factor to use: 0 where disturbance is confined to
        a ring.
        """


class ModulusMethod(Method, Protocol):
    """An estimate of the deformation modulus of the rock mass.

    What it requires is asked for only where no modulus was measured.
    """

    def modulus_mpa(self, sections: Sections) -> Array:
        """(n,) modulus. [MPa]  `intact_modulus_mpa` is NaN where it is not known."""


class GroundReactionMethod(Method, Protocol):
    """The law of the ground around a circular opening."""

    @property
    def finite_strain(self) -> bool:
        """Whether it holds for large closures too."""

    def curve(self, sections: Sections) -> GroundCurve:
        """Ground reaction curves of the sections."""


class ClosureProfileMethod(Method, Protocol):
    """How far the unsupported wall has moved at a distance from the face."""

    @property
    def largest_plastic_ratio(self) -> float:
        """Rp / R up to which it holds; infinity where it follows the plastic zone."""

    def share(self, sections: Sections, distance_m: Array) -> Array:
        """(n,) closure at `distance_m` behind the face over the final closure, 0 to 1. [-]"""
