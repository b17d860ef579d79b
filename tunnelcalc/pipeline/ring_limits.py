"""Where an element that changes the ground is itself at its limit.

It carries nothing at the wall, so that no pressure says when it gives way: its own load checks do,
by the state of the ground around it. The ground is followed along the line that the element
improves, and the limit is the closure at which a first load check finds more demand than capacity.
Beyond it that line no longer holds.
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedElement
from tunnelcalc.plugin.isolation import contained_evaluation
from tunnelcalc.sections import Sections
from tunnelcalc.support.equilibrium import pressure_at_closure

SCAN = 16
"""States from installation to the unsupported ground, at which the checks are first asked."""
HALVINGS = 40
"""Between two of them: to 1e-13 of the pressure at installation."""


def ring_limit_m(
    curve: GroundCurve,
    sections: Sections,
    item: PlannedElement,
    capacity_mpa: Array,
    acting_m: Array,
    known: Array,
) -> Array:
    """(n,) movement since installation at which the element is at its limit, inf where the ground
    never asks so much of it, NaN where it is not known. [m]

    `curve` is the line with the element, `acting_m` (n,) the closure at its installation, `known`
    the numbers of the sections that can be computed. Looked for between states evenly in the
    pressure of the ground: a check that fails only between two of them is not seen.
    """
    checks = [check for check in item.checks if check.carries_load]
    found = np.full(sections.count, np.nan)

    def surplus(pressure: Array, chosen: Array) -> Array:
        """Least capacity less demand of the checks."""
        radius = sections["radius_m"][chosen]
        point = curve.take(chosen).at(pressure)
        closure = point.closure_ratio * radius
        state = sections.take(chosen).with_columns(
            {
                "support_pressure_mpa": pressure,
                "supported_closure_mm": closure * MM_PER_M,
                "supported_plastic_radius_m": point.plastic_ratio * radius,
                "element_pressure_mpa": np.zeros(chosen.size),
                "element_capacity_mpa": capacity_mpa[chosen],
                "element_moved_mm": (closure - acting_m[chosen]) * MM_PER_M,
            }
        )
        least = np.full(chosen.size, np.inf)
        for check in checks:
            result, left_out = contained_evaluation(check, state, item.element)
            demand, capacity = result.values
            least = np.minimum(least, np.where(left_out, np.inf, capacity - demand))
        return least

    first = pressure_at_closure(curve.take(known), sections["radius_m"][known], acting_m[known])
    low, high = np.zeros((2, known.size))
    at_once, gives_way, unknown = np.zeros((3, known.size), dtype=bool)
    for step in range(SCAN + 1):
        pressure = first * (1 - step / SCAN)
        left = surplus(pressure, known)
        unknown |= np.isnan(left)
        new = (left < 0) & ~gives_way
        low, high = np.where(new, pressure, low), np.where(gives_way | new, high, pressure)
        at_once |= new & (step == 0)
        gives_way |= new
    found[known] = np.where(unknown, np.nan, np.where(at_once, 0, np.inf))
    later = np.flatnonzero(gives_way & ~at_once & ~unknown)
    chosen, low, high = known[later], low[later], high[later]
    for _ in range(HALVINGS if later.size else 0):
        middle = 0.5 * (low + high)
        holds = surplus(middle, chosen) >= 0
        low, high = np.where(holds, low, middle), np.where(holds, middle, high)
    if later.size:
        closure = curve.take(chosen).at(high).closure_ratio * sections["radius_m"][chosen]
        found[chosen] = np.maximum(closure - acting_m[chosen], 0)
    return found
