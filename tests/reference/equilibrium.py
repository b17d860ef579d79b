"""Where one section's ground and its springs come to rest, by bracketed roots."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import NamedTuple

from scipy.optimize import brentq

from reference.ground_curve import GroundCurve


class Spring(NamedTuple):
    """p = stiffness (u - installed) where positive. [MPa/m, m]"""

    stiffness: float
    installed: float


class State(NamedTuple):
    """At rest: pressure [MPa], closure [m], Rp / R, and the pressure of each spring [MPa]."""

    pressure: float
    closure: float
    plastic_ratio: float
    shares: tuple[float, ...]


class Held(NamedTuple):
    """What springs that carry a pressure are like: closure [m], acting stiffness, shares."""

    closure: float
    stiffness: float
    shares: tuple[float, ...]


def state_at_rest(curve: GroundCurve, radius: float, springs: Sequence[Spring]) -> State:
    """The pressure at which ground and springs have the same closure.

    The root is bracketed on the interpolated curve, then polished with a fresh integration. Good
    to about 1e-10 of the pressure; where springs are installed so late that hardly any closure is
    left, to about 1e-13 of the in-situ stress.
    """
    free = curve.unsupported[1] * radius
    if not math.isfinite(free):
        return State(math.nan, math.nan, math.nan, tuple(math.nan for _ in springs))
    springs_that_act = [s for s in springs if s.stiffness > 0 and s.installed < free]
    if not springs_that_act:
        ratio, closure = curve.unsupported
        return State(0.0, closure * radius, ratio, tuple(0.0 for _ in springs))

    def mismatch(pressure: float) -> float:
        ground = curve.closure_between(pressure) * radius
        support = held(springs_that_act, pressure).closure
        return (ground - support) / (ground + support)

    def correction(pressure: float) -> float:
        closure = curve.at(pressure)[1]
        support = held(springs_that_act, pressure)
        give = 1 / support.stiffness - curve.slope(pressure, closure) * radius
        return (closure * radius - support.closure) / give

    pressure = _root(mismatch, correction, curve.p0)
    ratio, closure = curve.at(pressure)
    return State(pressure, closure * radius, ratio, held(springs, pressure).shares)


def held(springs: Sequence[Spring], pressure: float) -> Held:
    """Springs, some of which act, under a pressure above 0: load them one after the other."""
    in_order = sorted((s for s in springs if s.stiffness > 0), key=lambda s: s.installed)
    first = in_order[0].installed
    moved, carried, stiffness = 0.0, 0.0, 0.0
    for spring in in_order:
        until_it_acts = spring.installed - first - moved
        if carried + stiffness * until_it_acts >= pressure and stiffness > 0:
            break
        carried += stiffness * until_it_acts
        moved += until_it_acts
        stiffness += spring.stiffness
    moved += (pressure - carried) / stiffness
    shares = (s.stiffness * max(moved - (s.installed - first), 0.0) for s in springs)
    return Held(first + moved, stiffness, tuple(shares))


def pressure_at_closure(curve: GroundCurve, radius: float, closure: float) -> float:
    """Pressure that alone would hold the closure; 0 where none is needed; NaN where the
    unsupported closure is beyond the range of a double."""
    free = curve.unsupported[1] * radius
    if not free > closure:
        return 0.0 if free <= closure else math.nan

    def mismatch(pressure: float) -> float:
        ground = curve.closure_between(pressure) * radius
        return (ground - closure) / (ground + closure)

    def correction(pressure: float) -> float:
        ratio = curve.at(pressure)[1]
        return (ratio * radius - closure) / (-curve.slope(pressure, ratio) * radius)

    return _root(mismatch, correction, curve.p0)


def _root(
    mismatch: Callable[[float], float], correction: Callable[[float], float], highest: float
) -> float:
    """Root of a falling function, and one Newton step of the same equation, better computed."""
    root = float(brentq(mismatch, 0.0, highest, xtol=1e-12 * highest, rtol=1e-9))
    return min(max(float(root + correction(root)), 0.0), highest)
