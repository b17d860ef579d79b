"""Pressure that one support element gives for the movement of the wall since its installation.

Every array is (n,), one value a section. Pressures never fall with the movement, except that of
an element that breaks: there the curve is the one up to the break, and `breaks` says so.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, fields
from enum import IntEnum
from typing import Any, ClassVar, Protocol, Self

import numpy as np

from tunnelcalc.arrays import Array

MOST_HALVINGS = 200
"""More than the bits of any bracket of doubles: the halving ends by itself before."""


class ElementState(IntEnum):
    """What has become of an element."""

    UNKNOWN = 0
    """The section could not be computed."""
    NOT_ACTING = 1
    """The wall has not moved since the element was installed."""
    ELASTIC = 2
    YIELDING = 3
    """It gives its capacity, and goes on giving it."""
    SLIPPING = 4
    """Its joint slides at the slip load."""
    TRAVEL_USED_UP = 5
    """Its joint has slid as far as it can: stiff again."""
    OVERLOADED = 6
    """Beyond its capacity, with nothing declared about what it then does."""
    FAILED = 7
    """Broken: it carries nothing."""


class ElementReaction(Protocol):
    """What the equilibrium needs to know of an element."""

    @property
    def breaks(self) -> bool:
        """Whether it carries nothing once the wall has moved beyond `reaches_capacity_m`."""

    @property
    def reaches_capacity_m(self) -> Array:
        """(n,) movement since installation at which it first gives its capacity; inf where it
        never does. [m]"""

    @property
    def holds_until_m(self) -> Array:
        """(n,) movement beyond which nothing is declared about it; inf where it yields or
        breaks, since then its behaviour is declared. [m]"""

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        """Pressure [MPa] and its slope [MPa/m] for a movement (n,) >= 0 since installation."""

    def state(self, moved_m: Array) -> Array:
        """(n,) `ElementState` as int8; a movement <= 0 is NOT_ACTING."""

    def take(self, index: Array) -> Self:
        """The element on the sections at `index`."""


@dataclass(frozen=True, slots=True)
class _OneStiffness:
    """p = K m up to the capacity; what is beyond is each element's own.

    `stiffness_mpa_per_m` is K >= 0, `capacity_mpa` the pressure at its limit; both (n,).
    """

    breaks: ClassVar[bool] = False
    beyond: ClassVar[ElementState]
    """The state of an element that is past its capacity."""
    stiffness_mpa_per_m: Array
    capacity_mpa: Array

    @property
    def reaches_capacity_m(self) -> Array:
        return _movement(self.capacity_mpa, self.stiffness_mpa_per_m)

    @property
    def holds_until_m(self) -> Array:
        return _endless(self.reaches_capacity_m)

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        return self.stiffness_mpa_per_m * moved_m, self.stiffness_mpa_per_m

    def state(self, moved_m: Array) -> Array:
        return _states(moved_m, (self.reaches_capacity_m, self.beyond))

    def take(self, index: Array) -> Self:
        return _taken(self, index)


@dataclass(frozen=True, slots=True)
class Spring(_OneStiffness):
    """p = K m, with nothing declared beyond the capacity: the spring goes on, and is overloaded."""

    beyond: ClassVar[ElementState] = ElementState.OVERLOADED

    @property
    def holds_until_m(self) -> Array:
        return self.reaches_capacity_m


@dataclass(frozen=True, slots=True)
class Plateau(_OneStiffness):
    """p = min(K m, capacity): an element that yields at its capacity and keeps it."""

    beyond: ClassVar[ElementState] = ElementState.YIELDING

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        spring = self.stiffness_mpa_per_m * moved_m
        slope = np.where(spring < self.capacity_mpa, self.stiffness_mpa_per_m, 0)
        return np.minimum(spring, self.capacity_mpa), slope


@dataclass(frozen=True, slots=True)
class Brittle(_OneStiffness):
    """p = K m up to the capacity, nothing at all once the wall has moved further.

    The curve is that of the unbroken element: whoever uses it heeds `breaks`.
    """

    breaks: ClassVar[bool] = True
    beyond: ClassVar[ElementState] = ElementState.FAILED


@dataclass(frozen=True, slots=True)
class SlidingJoint:
    """A yielding joint: stiff, then sliding at its slip load over a travel, then stiff again.

    All (n,): `stiffness_mpa_per_m` is K >= 0 before and after the slip, `slip_mpa` the wall
    pressure at which the joint slides, `travel_m` how far the wall moves meanwhile (j joints
    that each close by s let a ring's wall move j s / (2 pi)), `capacity_mpa` the pressure at the
    limit of the element itself. Beyond it nothing is declared, as for `Spring`.
    """

    breaks: ClassVar[bool] = False
    stiffness_mpa_per_m: Array
    slip_mpa: Array
    travel_m: Array
    capacity_mpa: Array

    @property
    def reaches_capacity_m(self) -> Array:
        """Counted with the travel where the capacity lies above the slip load."""
        stiff = _movement(self.capacity_mpa, self.stiffness_mpa_per_m)
        return stiff + np.where(self.capacity_mpa > self.slip_mpa, self.travel_m, 0)

    @property
    def holds_until_m(self) -> Array:
        """A joint that slides at just its capacity holds until its travel is used up."""
        stiff = _movement(self.capacity_mpa, self.stiffness_mpa_per_m)
        return stiff + np.where(self.capacity_mpa >= self.slip_mpa, self.travel_m, 0)

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        stiffness, slip = self.stiffness_mpa_per_m, self.slip_mpa
        before, after = stiffness * moved_m, stiffness * (moved_m - self.travel_m)
        pressure = np.maximum(np.minimum(before, slip), after)
        stiff = (before < slip) | (after > slip)
        return pressure, np.where(stiff, stiffness, 0)

    def state(self, moved_m: Array) -> Array:
        slips = _movement(self.slip_mpa, self.stiffness_mpa_per_m)
        return _states(
            moved_m,
            (slips, ElementState.SLIPPING),
            (slips + self.travel_m, ElementState.TRAVEL_USED_UP),
            (self.holds_until_m, ElementState.OVERLOADED),
        )

    def take(self, index: Array) -> Self:
        return _taken(self, index)


@dataclass(frozen=True, slots=True)
class FunctionReaction:
    """Any pressure that does not fall with the movement; made by `of_function`.

    `function` is only ever called with all `count` sections, whichever of them are asked for, so
    that it may hold arrays of its own.
    """

    breaks: ClassVar[bool] = False
    function: Callable[[Array], tuple[Array, Array]]
    count: int
    sections: Array
    capacity_mpa: Array
    reaches_capacity_m: Array
    holds_until_m: Array

    @classmethod
    def of_function(
        cls,
        function: Callable[[Array], tuple[Array, Array]],
        capacity_mpa: Array,
        most_movement_m: Array,
    ) -> Self:
        """The element whose `function` takes (n,) movements [m] and returns pressures (n,) [MPa]
        and slopes (n,) [MPa/m]; its capacity (n,) [MPa] is looked for up to a movement (n,) [m],
        such as the radius, and taken as never reached beyond.
        """
        count = capacity_mpa.size
        reached = _first_m(lambda moved: function(moved)[0] >= capacity_mpa, most_movement_m)
        passed = _first_m(lambda moved: function(moved)[0] > capacity_mpa, most_movement_m)
        return cls(function, count, np.arange(count), capacity_mpa, reached, passed)

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        every = np.zeros(self.count)
        every[self.sections] = moved_m
        pressure, slope = self.function(every)
        return pressure[self.sections], slope[self.sections]

    def state(self, moved_m: Array) -> Array:
        return _states(
            moved_m,
            (self.reaches_capacity_m, ElementState.YIELDING),
            (self.holds_until_m, ElementState.OVERLOADED),
        )

    def take(self, index: Array) -> Self:
        return type(self)(
            self.function,
            self.count,
            self.sections[index],
            self.capacity_mpa[index],
            self.reaches_capacity_m[index],
            self.holds_until_m[index],
        )


def _taken(element: Any, index: Array) -> Any:
    return type(element)(**{f.name: getattr(element, f.name)[index] for f in fields(element)})


def _movement(pressure_mpa: Array, stiffness_mpa_per_m: Array) -> Array:
    """Movement (n,) of a spring that gives a pressure; inf without stiffness, NaN stays."""
    never = np.where(np.isnan(pressure_mpa + stiffness_mpa_per_m), np.nan, np.inf)
    return np.divide(pressure_mpa, stiffness_mpa_per_m, out=never, where=stiffness_mpa_per_m > 0)


def _endless(movement_m: Array) -> Array:
    return np.where(np.isnan(movement_m), np.nan, np.inf)


def _states(moved_m: Array, *limits: tuple[Array, ElementState]) -> Array:
    """The last state whose limit the movement has passed."""
    state = np.where(moved_m > 0, ElementState.ELASTIC, ElementState.NOT_ACTING)
    for limit, beyond in limits:
        state = np.where((moved_m > limit) & (moved_m > 0), beyond, state)
    return np.where(np.isnan(moved_m), ElementState.UNKNOWN, state).astype(np.int8)


def _first_m(reached: Callable[[Array], Array], most_m: Array) -> Array:
    """Least movement (n,) at which a condition, once true true for good, holds; inf if none."""
    low, high = np.zeros(most_m.shape), np.array(most_m, float)
    never = ~reached(high)
    at_once = reached(low)
    for _ in range(MOST_HALVINGS):
        middle = 0.5 * (low + high)
        if not np.any((middle > low) & (middle < high)):
            break
        true = reached(middle)
        low, high = np.where(true, low, middle), np.where(true, middle, high)
    return np.where(at_once, 0.0, np.where(never, np.where(np.isnan(most_m), np.nan, np.inf), high))
