"""The curves of one section and one support class: plain data for tables and figures.

Closure is the radial movement of the wall, inward. Pressures and stresses are in MPa,
compression positive. Every array is (m,), one value a point of its curve; a value that could not
be computed is NaN.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array

PEAK, RESIDUAL, RING = "peak", "residual", "ring"
"""Whose strength an envelope shows: of the mass, of the mass once it has failed, or of the
disturbed ring."""

INSTALLED, CAPACITY, BEYOND = "installed", "capacity", "beyond_capacity"
"""Points that the line of an element may have; a plugin may name more."""


@dataclass(frozen=True, slots=True)
class ReactionOfGround:
    """Closure and plastic radius under support pressures from 0 to the in-situ stress.

    The curve holds the critical pressure exactly, and the pressure at rest.
    """

    in_situ_stress_mpa: float
    critical_pressure_mpa: float
    support_pressure_mpa: Array
    closure_mm: Array
    plastic_radius_m: Array

    @property
    def free_closure_mm(self) -> float:
        """Closure without support."""
        return float(self.closure_mm[0]) if self.closure_mm.size else float("nan")


@dataclass(frozen=True, slots=True)
class ClosureAlongDrive:
    """Closure without support at distances from the face, positive behind it."""

    distance_m: Array
    closure_mm: Array
    closure_share: Array


@dataclass(frozen=True, slots=True)
class ReactionOfElement:
    """An element: its line from installation to some way beyond its capacity, and its state at
    rest. `water_mpa` is the water pressure that a ring of a watertight lining carries besides;
    `marks` says what is special about a point of the line."""

    label: str
    installed_at_m: float
    installation_closure_mm: float
    stiffness_mpa_per_m: float
    capacity_mpa: float
    rest_pressure_mpa: float
    water_mpa: float
    closure_mm: Array
    pressure_mpa: Array
    marks: Mapping[int, str]

    @property
    def capacity_closure_mm(self) -> float:
        """Closure at which the element reaches its capacity; NaN where its line never does."""
        at = [point for point, name in self.marks.items() if CAPACITY in name.split(";")]
        return float(self.closure_mm[at[0]]) if at else float("nan")

    def line_to(self, rest_closure_mm: float) -> tuple[Array, Array]:
        """Closures and pressures, followed to the state at rest where that lies beyond them."""
        closure, pressure = self.closure_mm, self.pressure_mpa
        if rest_closure_mm > closure[-1]:
            closure = np.append(closure, rest_closure_mm)
            pressure = np.append(pressure, self.rest_pressure_mpa)
        return closure, pressure


@dataclass(frozen=True, slots=True)
class ReactionOfClass:
    """All elements together, and the state at rest of ground and support.

    The line of the class ends where a first element is some way beyond its capacity.
    """

    elements: tuple[ReactionOfElement, ...]
    closure_mm: Array
    pressure_mpa: Array
    rest_pressure_mpa: float
    rest_closure_mm: float
    rest_plastic_radius_m: float

    @property
    def first_capacity_closure_mm(self) -> float:
        """Closure at which a first element reaches its capacity; NaN without elements."""
        closures = [element.capacity_closure_mm for element in self.elements]
        known = [closure for closure in closures if closure == closure]
        return min(known, default=float("nan"))


@dataclass(frozen=True, slots=True)
class ThrustAndMoment:
    """Forces of a ring of the lining at angles from the springline to the crown, and what its
    section bears. `ring` is its element, and when, where it is looked at before it is at rest.

    `angle_deg`, `thrust_mn_per_m` and `moment_mnm_per_m` (m,); `limit_thrust_mn_per_m` (k,),
    rising, and `limit_moment_mnm_per_m` (k,), the moment that the section bears with it, of either
    sign, without a factor of safety; straight in between.
    """

    ring: str
    angle_deg: Array
    thrust_mn_per_m: Array
    moment_mnm_per_m: Array
    limit_thrust_mn_per_m: Array
    limit_moment_mnm_per_m: Array


@dataclass(frozen=True, slots=True)
class CaseCurves:
    """Ground and support under one in-plane stress, one of `results.STRESS_CASES`."""

    stress_case: str
    ground: ReactionOfGround
    profile: ClosureAlongDrive
    support: ReactionOfClass
    lining: tuple[ThrustAndMoment, ...] = ()
    """Of each ring of a class whose lining is checked for thrust and moment."""
    before: ReactionOfGround | None = None
    """Of a class that changes the ground in a ring, the ground without that ring; `ground` is
    with it, from the closure at which it is installed."""

    @property
    def alone(self) -> ReactionOfGround:
        """The ground as no element has changed it."""
        return self.ground if self.before is None else self.before


@dataclass(frozen=True, slots=True)
class StrengthEnvelope:
    """A strength criterion in principal and in normal and shear stresses, and a straight line.

    `of` is one of PEAK, RESIDUAL, RING. The line is the equivalent one over the range up to
    `confinement_mpa` where the criterion is curved; else it is the criterion itself. Without a
    line its arrays are NaN. `line_shear_stress_mpa` is that at the criterion's normal stress.
    `marks` says what is special about a point.
    """

    of: str
    curved: bool
    confinement_mpa: float
    cohesion_mpa: float
    friction_angle_deg: float
    minor_stress_mpa: Array
    major_stress_mpa: Array
    normal_stress_mpa: Array
    shear_stress_mpa: Array
    line_major_stress_mpa: Array
    line_shear_stress_mpa: Array
    marks: Mapping[int, str]


@dataclass(frozen=True, slots=True)
class SectionCurves:
    """All curves of one section with one support class.

    `governing_case` is the stress case that the class is told of in the tables of a run.
    `unknown` lists what could not be computed, each with its reason.
    """

    title: str
    chainage: str
    chainage_m: float
    from_m: float
    to_m: float
    ground_unit: str
    radius_m: float
    closure_limit_pct: float
    methods: Mapping[str, str]
    support_class: str
    required_class: str
    governing_case: str
    cases: tuple[CaseCurves, ...]
    envelopes: tuple[StrengthEnvelope, ...]
    unknown: tuple[tuple[str, str], ...]

    @property
    def governing(self) -> CaseCurves:
        """The curves of the governing stress case."""
        return next(case for case in self.cases if case.stress_case == self.governing_case)

    @property
    def closure_limit_mm(self) -> float:
        """The largest supported closure that the project allows."""
        return 10 * self.radius_m * self.closure_limit_pct
