"""What a support element does to the ground: the four forms in which it may react.

Closures and pressures are those of the wall, inward positive. Every array is (n,), one value
a section.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import ClassVar

from tunnelcalc.arrays import Array


@dataclass(frozen=True, slots=True)
class LinearSpring:
    """Pressure proportional to the closure since installation, p = K (u - u_installed).

    `stiffness_mpa_per_m` is K, MPa of wall pressure a metre of wall movement: the K = k / R of
    books that write u = u0 + p R / k. `capacity_mpa` is the pressure at the element's limit;
    the spring itself is not capped there.
    """

    form: ClassVar[str] = "linear_spring"
    stiffness_mpa_per_m: Array
    capacity_mpa: Array


@dataclass(frozen=True, slots=True)
class PressureOfClosure:
    """Pressure as any non-decreasing function of the closure since installation.

    `pressure_and_slope(closure_m)` takes (n,) and returns pressure (n,) [MPa] and its slope
    (n,) [MPa/m]; `capacity_mpa` is the pressure at the element's limit.
    """

    form: ClassVar[str] = "pressure_of_closure"
    pressure_and_slope: Callable[[Array], tuple[Array, Array]]
    capacity_mpa: Array


@dataclass(frozen=True, slots=True)
class AdvanceIncrements:
    """Stiffness and capacity that change while the face moves on, dp = K du.

    `at_distance(distance_m)` takes (n,) the distance behind the face and returns the present
    stiffness (n,) [MPa/m] and capacity (n,) [MPa].
    """

    form: ClassVar[str] = "advance_increments"
    at_distance: Callable[[Array], tuple[Array, Array]]


@dataclass(frozen=True, slots=True)
class GroundRing:
    """A change of the ground in a ring around the opening, without a spring at the wall.

    `thickness_m` is the depth of the ring from the wall; `changed` gives the ground columns that
    hold inside it, by name.
    """

    form: ClassVar[str] = "ground_ring"
    thickness_m: Array
    changed: Mapping[str, Array]


Reaction = LinearSpring | PressureOfClosure | AdvanceIncrements | GroundRing

FORMS = tuple(
    reaction.form for reaction in (LinearSpring, PressureOfClosure, AdvanceIncrements, GroundRing)
)
SOLVED_FORMS = (LinearSpring.form,)
"""The forms that `equilibrium` solves; the others are part of the contract and refused by name."""
