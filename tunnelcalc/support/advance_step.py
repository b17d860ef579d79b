"""One step of the advance: what the elements carry when the wall has moved a little further."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.root_finding import increasing_roots
from tunnelcalc.support.element_reactions import ElementReaction
from tunnelcalc.support.pressure_table import PressureTable


@dataclass(frozen=True, slots=True)
class Ageing:
    """An element that hardens, dp = K(age) du.

    `stiffness_at` takes ages (n,) [day] and returns stiffness (n,) >= 0 [MPa/m];
    `installed_at_m` (n,) is the distance behind the face where its age is 0, `acts_from_m` (n,)
    that from which it reacts, as of a ring that is closed later; not less than the first. [m]
    Its state at `trusted_from_days` is among those computed, unless 0.
    """

    stiffness_at: Callable[[Array], Array]
    installed_at_m: Array
    acts_from_m: Array
    trusted_from_days: float = 0.0

    def trusted_at_m(self, advance_m_per_day: Array) -> Array:
        """Distance (n,) behind the face at which it has that age; where it acts later, or for a
        face that is far at once, where it begins to act. [m]"""
        days = np.where(np.isfinite(advance_m_per_day), self.trusted_from_days, 0)
        rate = np.where(np.isfinite(advance_m_per_day), advance_m_per_day, 0)
        return np.maximum(self.installed_at_m + days * rate, self.acts_from_m)

    def age_days(self, distance_m: Array, advance_rate_m_per_day: Array) -> Array:
        """Age at distances (n,) or (k, n) behind the face [m]; 0 before installation. [day]"""
        return np.maximum(distance_m - self.installed_at_m, 0) / advance_rate_m_per_day


@dataclass(frozen=True, slots=True)
class Constant:
    """An element whose reaction does not change with time, acting from `acts_from_m` (n,). [m]

    The reaction must not break.
    """

    reaction: ElementReaction
    acts_from_m: Array


@dataclass(frozen=True, slots=True)
class Step:
    """The state at the beginning of a step, and the stiffness of the ageing elements over it.

    `closure_m` (n,) of the wall; `begins_m` (e, n) closure from which each element counts, NaN
    where it does not act yet; `pressure_mpa` (e, n); `stiffness_mpa_per_m` of each element (n,),
    None for one that does not age.
    """

    elements: Sequence[Ageing | Constant]
    closure_m: Array
    begins_m: Array
    pressure_mpa: Array
    stiffness_mpa_per_m: Sequence[Array | None]

    def element(self, row: int, moved_m: Array, index: Array) -> tuple[Array, Array]:
        """Pressure (k,) [MPa] of an element and its slope (k,) [MPa/m], when the wall has moved by
        (k,) since the beginning of the step [m], on the sections at `index`."""
        element, stiffness = self.elements[row], self.stiffness_mpa_per_m[row]
        begins = self.begins_m[row, index]
        acts = ~np.isnan(begins)
        before = np.where(acts, self.closure_m[index] - begins, -np.inf)
        since = moved_m + before
        moving = acts & ~(since <= 0)
        if isinstance(element, Constant):
            since = np.where(moving, since, 0)
            pressure, slope = element.reaction.take(index).pressure_and_slope(since)
        else:
            assert stiffness is not None
            slope = stiffness[index]
            gained = np.maximum(since, 0) - np.maximum(before, 0)
            pressure = self.pressure_mpa[row, index] + np.where(acts, slope * gained, 0)
        return pressure, np.where(moving, slope, 0)

    def carried(self, moved_m: Array, index: Array) -> tuple[Array, Array]:
        """Pressure (k,) [MPa] and slope (k,) [MPa/m] of all elements, as for one."""
        total, slopes = np.zeros((2, moved_m.size))
        for row in range(len(self.elements)):
            pressure, slope = self.element(row, moved_m, index)
            total, slopes = total + pressure, slopes + slope
        return total, slopes

    def moved_m(
        self, table: PressureTable, face_mpa: Array, unsupported_m: Array, start_m: Array
    ) -> Array:
        """Movement (n,) of the wall over the step [m], which ends with a pressure (n,) that stands
        for the face [MPa] and an unsupported closure (n,) [m]; first estimate (n,) [m]."""

        def excess(moved: Array, index: Array) -> tuple[Array, Array]:
            held, stiffness = self.carried(moved, index)
            ground, slope = table.pressure_and_slope(self.closure_m[index] + moved, index)
            return held + face_mpa[index] - ground, stiffness - slope

        # Held by nothing more the wall would close as without support: the root lies below.
        upper = np.maximum(unsupported_m - self.closure_m, 0)
        start = np.minimum(np.maximum(start_m, 0), upper)
        roots = increasing_roots(excess, np.zeros(upper.size), upper, start)
        return np.where(roots.converged, roots.value, np.nan)
