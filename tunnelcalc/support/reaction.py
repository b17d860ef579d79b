"""What a support element does to the ground: the four forms in which it may react.

Closures and pressures are those of the wall, inward positive. Every array is (n,), one value
a section. An element acts from its own distance behind the face, or from `acts_from_m` where that
is further: a ring does not react before it is closed.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import ClassVar, Literal

from tunnelcalc.arrays import Array

Beyond = Literal["not_declared", "yields", "breaks"]
"""What an element does beyond its capacity: nothing is known, it goes on giving its capacity, or
it carries nothing any more."""


@dataclass(frozen=True, slots=True)
class LinearSpring:
    """Pressure proportional to the closure since the element acts, p = K (u - u_acting).

    `stiffness_mpa_per_m` is K, MPa of wall pressure a metre of wall movement: the K = k / R of
    books that write u = u0 + p R / k. `capacity_mpa` is the pressure at the element's limit;
    unless it `yields` or `breaks` there, the spring itself is not capped.
    """

    form: ClassVar[str] = "linear_spring"
    stiffness_mpa_per_m: Array
    capacity_mpa: Array
    beyond: Beyond = "not_declared"
    acts_from_m: float = 0.0


@dataclass(frozen=True, slots=True)
class PressureOfClosure:
    """Pressure as any non-decreasing function of the closure since the element acts.

    `pressure_and_slope(closure_m)` takes (n,) and returns pressure (n,) [MPa] and its slope
    (n,) [MPa/m]; `capacity_mpa` is the pressure at the element's limit. It is called with as
    many closures as there are sections. `turns` names the closures (n,) at which the element
    changes its ways, for drawings: NaN where it never does. [m]
    """

    form: ClassVar[str] = "pressure_of_closure"
    pressure_and_slope: Callable[[Array], tuple[Array, Array]]
    capacity_mpa: Array
    acts_from_m: float = 0.0
    turns: Mapping[str, Array] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class AdvanceIncrements:
    """Stiffness and capacity that grow with age while the face moves on, dp = K du.

    `at_age(age_days)` takes (n,) days since installation, 0 and very large ones too, and returns
    stiffness (n,) [MPa/m] and capacity (n,) [MPa] at that age; `final_capacity_mpa` is the one
    that the element is in the end checked against. The class must state its rate of advance.
    `trusted_from_days` is the first age at which the capacity is known; checks find the pressure
    on the element at that age.
    """

    form: ClassVar[str] = "advance_increments"
    at_age: Callable[[Array], tuple[Array, Array]]
    final_capacity_mpa: Array
    acts_from_m: float = 0.0
    trusted_from_days: float = 0.0


@dataclass(frozen=True, slots=True)
class GroundRing:
    """A change of the ground in a ring around the opening, without a spring at the wall.

    `thickness_m` (n,) is the depth of the ring from the wall; `changed` gives the ground columns
    that hold inside it, by name, (n,) each: mb, s, a, or friction_angle_deg and cohesion_mpa.
    `capacity_mpa` (n,) is a pressure that stands for the element where capacities are added up.
    """

    form: ClassVar[str] = "ground_ring"
    thickness_m: Array
    changed: Mapping[str, Array]
    capacity_mpa: Array


Reaction = LinearSpring | PressureOfClosure | AdvanceIncrements | GroundRing

FORMS = tuple(
    form.form for form in (LinearSpring, PressureOfClosure, AdvanceIncrements, GroundRing)
)
"""Names of all forms that the contract knows."""
