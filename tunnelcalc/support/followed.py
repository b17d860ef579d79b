"""An element that hardened along the advance, told afterwards as a reaction to the wall's movement.

Age and movement went together along the advance that was computed; so the history of the element
is a pressure for each movement, as of any other element. After the face is far away the wall rests.
Where it is pushed further from there, the element answers with its final stiffness, up to its final
capacity. This is the reaction for the one advance alone: another ground, or other elements beside
it, would have made another.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import ClassVar, Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.support.element_reactions import Spring


@dataclass(frozen=True, slots=True)
class Followed:
    """Pressure by movement: straight between the states of the advance, then hard.

    (k, n), k states in the order of time: `moved_m` since the element acts, never falling,
    `pressure_mpa`, and `capacity_then_mpa` at the age of that time. (n,):
    `final_stiffness_mpa_per_m`, `capacity_mpa` in the end. Nothing is declared beyond a capacity.
    """

    breaks: ClassVar[bool] = False
    moved_m: Array
    pressure_mpa: Array
    capacity_then_mpa: Array
    final_stiffness_mpa_per_m: Array
    capacity_mpa: Array
    reaches_capacity_m: Array
    """The movement at which the pressure first is the capacity of the same time."""

    @classmethod
    def of_history(
        cls,
        moved_m: Array,
        pressure_mpa: Array,
        capacity_then_mpa: Array,
        final_stiffness_mpa_per_m: Array,
        capacity_mpa: Array,
    ) -> Self:
        """The element with these states; movements before it acts may be negative."""
        # The last state is solved with the ground itself, those before with its table.
        moved = np.maximum.accumulate(np.maximum(moved_m, 0), axis=0)
        left = np.maximum(capacity_mpa - pressure_mpa[-1], 0)
        later = moved[-1] + Spring(final_stiffness_mpa_per_m, left).reaches_capacity_m
        excess = pressure_mpa - capacity_then_mpa
        over = (pressure_mpa > 0) & (excess >= 0)
        after = np.maximum(np.argmax(over, axis=0), 1)
        sections = np.arange(capacity_mpa.size)
        below, above = excess[after - 1, sections], excess[after, sections]
        part = np.divide(
            -below, above - below, out=np.zeros_like(below), where=(below < 0) & (above > below)
        )
        start, end = moved[after - 1, sections], moved[after, sections]
        reaches = np.where(np.any(over, axis=0), start + part * (end - start), later)
        return cls(
            moved, pressure_mpa, capacity_then_mpa, final_stiffness_mpa_per_m, capacity_mpa, reaches
        )

    @property
    def holds_until_m(self) -> Array:
        return self.reaches_capacity_m

    def pressure_and_slope(self, moved_m: Array) -> tuple[Array, Array]:
        pressure, slope = self._along(self.pressure_mpa, moved_m)
        further = moved_m - self.moved_m[-1]
        beyond = self.pressure_mpa[-1] + self.final_stiffness_mpa_per_m * further
        later = further >= 0
        return (
            np.where(later, beyond, pressure),
            np.where(later, self.final_stiffness_mpa_per_m, slope),
        )

    def capacity_at_mpa(self, moved_m: Array) -> Array:
        """(n,) capacity of the time at which the wall has moved (n,) since the element acts [m];
        the final one beyond the state at rest. [MPa]"""
        then = self._along(self.capacity_then_mpa, moved_m)[0]
        return np.where(moved_m > self.moved_m[-1], self.capacity_mpa, then)

    def state(self, moved_m: Array) -> Array:
        return Spring(np.ones_like(self.reaches_capacity_m), self.reaches_capacity_m).state(moved_m)

    def take(self, index: Array) -> Self:
        return type(self)(**{f.name: getattr(self, f.name)[..., index] for f in fields(self)})

    def _along(self, values: Array, moved_m: Array) -> tuple[Array, Array]:
        """(n,) value at a movement, and its slope, between the states around it."""
        cell = np.sum(self.moved_m[1:-1] <= moved_m, axis=0)
        sections = np.arange(moved_m.size)
        start, end = self.moved_m[cell, sections], self.moved_m[cell + 1, sections]
        first, last = values[cell, sections], values[cell + 1, sections]
        slope = np.divide(last - first, end - start, out=np.zeros_like(first), where=end > start)
        within = np.minimum(moved_m, end) - start
        return first + slope * within, slope
