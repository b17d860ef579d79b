"""At which points a curve is computed, so that straight lines between them show it."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve

FIRST_POINTS = 25
MOST_POINTS = 600
"""From so many points on no step is halved any more."""
LARGEST_BEND = 5e-4
"""By how much a point between two neighbours may lie off the straight line between them, as a
share of the closure there: a thin line on paper hides that."""
NEAREST = 1e-6
"""Of the in-situ stress: pressures are not told apart any closer."""
FURTHEST_RADII = 10.0
REACH_BEHIND_FACE = 3.5
"""Plastic radii behind the face at which next to all closure has taken place."""
AHEAD_RADII = 4.0
"""Radii ahead of the face within which the wall begins to move."""


def section_curve(curve: GroundCurve) -> Callable[[Array], CurvePoint]:
    """The curve of a single section as a function of pressures (m,)."""

    def at(pressure_mpa: Array) -> CurvePoint:
        return curve.take(np.zeros(pressure_mpa.size, dtype=np.intp)).at(pressure_mpa)

    return at


def pressures_mpa(curve: GroundCurve, exact: Sequence[float]) -> Array:
    """Support pressures (m,) from 0 to p0 of a single section, close where its curve bends.

    Steps are halved where the curve is bent over them, measured by the closure there and not by
    the largest one, since a wall without support may move without bound.

    Parameters
    ----------
    curve : the curve of one section.
    exact : pressures that must be among the points; NaN is ignored. [MPa]

    Returns
    -------
    (m,) ascending; empty where p0 is not known. [MPa]
    """
    top = float(curve.in_situ_stress_mpa[0])
    if not np.isfinite(top) or top <= 0:
        return np.empty(0)
    critical = float(curve.critical_pressure_mpa[0])
    wanted = np.array([0.0, critical, top, *exact])
    wanted = wanted[(wanted >= 0) & (wanted <= top)]
    pressures = np.union1d(np.linspace(0, top, FIRST_POINTS), wanted)
    closure_at = section_curve(curve)
    closures = closure_at(pressures).closure_ratio
    while pressures.size < MOST_POINTS:
        low, high = pressures[:-1], pressures[1:]
        middle = 0.5 * (low + high)
        between = closure_at(middle).closure_ratio
        wide = (high - low > NEAREST * top) & _bent(closures, between)
        if not np.any(wide):
            break
        pressures = np.concatenate([pressures, middle[wide]])
        closures = np.concatenate([closures, between[wide]])
        order = np.argsort(pressures, kind="stable")
        pressures, closures = pressures[order], closures[order]
    return pressures


def _bent(closures: Array, between: Array) -> Array:
    """Over which steps a curve is bent, from the closures at their ends and middles."""
    low, high = closures[:-1], closures[1:]
    known = np.isfinite(low) & np.isfinite(high) & np.isfinite(between)
    low, high, between = (np.where(known, values, 0.0) for values in (low, high, between))
    return np.abs(0.5 * low + 0.5 * high - between) > LARGEST_BEND * np.abs(between)


def distances_m(radius_m: float, plastic_radius_m: float, installed_at_m: Sequence[float]) -> Array:
    """Distances from the face (m,), positive behind it, close where the wall moves fast.

    The face itself and the places of installation are among them. [m]
    """
    known = np.isfinite(plastic_radius_m)
    reach = REACH_BEHIND_FACE * plastic_radius_m if known else 0.0
    furthest = max(FURTHEST_RADII * radius_m, reach, 1.25 * max(installed_at_m, default=0.0))
    near = np.linspace(-AHEAD_RADII, AHEAD_RADII, 65) * radius_m
    far = np.geomspace(AHEAD_RADII * radius_m, furthest, 40)
    return np.unique(np.concatenate([near, far, np.array(installed_at_m)]))


def minor_stresses_mpa(least: float, most: float, exact: Sequence[float]) -> Array:
    """Minor stresses (m,) of an envelope, close at its tip where it is steep. [MPa]"""
    from_tip = np.linspace(0, 1, 61) ** 2
    points = np.concatenate([least + (most - least) * from_tip, np.array([least, most, *exact])])
    points = points[np.isfinite(points) & (points >= least) & (points <= most)]
    return np.unique(points)
