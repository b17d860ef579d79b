"""What part of a curve is shown: closures may be without bound, paper is not."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

import numpy as np

from tunnelcalc import api

MOST_OF_REST = 2.5
"""How far the enlarged view goes beyond the closure at rest, as a multiple of it."""
MOST_OF_LIMIT = 6.0
"""How far the whole view goes, as a multiple of the closure at rest or its limit."""
MOST_OF_PRESSURE = 6.0
BELOW_ZERO = 0.025
"""Of a height: room below zero, so that marks on the axis are whole."""
NARROW = 0.25
"""Closure since installation over closure at rest below which the enlarged view begins later."""
MOST_PLASTIC = 12.0
"""Plastic radius over radius up to which it is drawn."""


@dataclass(frozen=True, slots=True)
class View:
    """A window: closures [mm] and pressures [MPa]."""

    left: float
    right: float
    top: float


def whole(curves: api.SectionCurves) -> View:
    """All of the ground reaction, or what can be read of it."""
    free = _finite(case.alone.free_closure_mm for case in curves.cases)
    rest = _finite(case.support.rest_closure_mm for case in curves.cases)
    top = max(_finite(case.ground.in_situ_stress_mpa for case in curves.cases), default=1.0)
    most = MOST_OF_LIMIT * max([*rest, curves.closure_limit_mm])
    right = min(1.05 * max(free, default=np.inf), most)
    return View(0.0, right, 1.04 * top)


def enlarged(curves: api.SectionCurves) -> View:
    """Where support and ground meet."""
    case, all_of_it = curves.governing, whole(curves)
    support = case.support
    rest, pressure = support.rest_closure_mm, support.rest_pressure_mpa
    if not (rest > 0 and support.elements):
        return all_of_it
    at_capacity = capacity_pressure_mpa(support)
    top = 2.2 * pressure
    if at_capacity == at_capacity:
        most = MOST_OF_PRESSURE * pressure if pressure > 0 else np.inf
        top = max(top, min(1.15 * at_capacity, most))
    top = min(top, all_of_it.top) if top > 0 else all_of_it.top
    others = [other.support.rest_closure_mm for other in curves.cases]
    start = min(element.installation_closure_mm for element in support.elements)
    since = rest - start
    late = 0 < since < NARROW * rest
    left = max(0.0, start - 0.6 * since) if late else 0.0
    others = [other.support.rest_closure_mm for other in curves.cases]
    reach = [
        support.first_capacity_closure_mm,
        curves.closure_limit_mm,
        case.ground.free_closure_mm,
        *others,
    ]
    furthest = rest + 2.5 * since if late else MOST_OF_REST * rest
    near = [value for value in reach if rest < value < furthest]
    right = max(rest + 0.35 * (rest - left), *(left + 1.08 * (value - left) for value in near), 0.0)
    return View(left, right, top)


def capacity_pressure_mpa(support: api.ReactionOfClass) -> float:
    """What all elements carry when a first one reaches its capacity; NaN where none does. [MPa]"""
    closure = support.first_capacity_closure_mm
    if closure != closure or not support.closure_mm.size:
        return float("nan")
    return float(np.interp(closure, support.closure_mm, support.pressure_mpa))


def _finite(values: Iterable[float]) -> list[float]:
    return [value for value in values if np.isfinite(value)]
