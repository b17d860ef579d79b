"""End-anchored bolts whose anchor moves with the ground.

A bolt is stretched by what the wall moves beyond what its anchor moves. The plastic ring and the
elastic ground beyond give both. Inside the plastic ring a state is that of a smaller opening: a
circle of radius r, with the radial stress there as its support, stands on the same ground
reaction curve. Beyond, in elastic ground, displacement falls with 1 / r.

For zero dilation and an anchor beyond the plastic ring the stretch is nearly
1 - R / (2 (1 - nu) (R + l)) of the wall's movement: 0.5 to 0.7 for usual lengths. In elastic
ground it is l / (R + l).
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import Array, GroundCurve

HALVINGS = 60
"""Halves of the pressure range until only rounding is left."""


def anchor_displacement_m(
    curve: GroundCurve,
    support_pressure_mpa: Array,
    radius_m: Array,
    depth_m: float,
) -> Array:
    """Inward displacement of the ground at a depth, by the ground reaction curve.

    Parameters
    ----------
    curve : of the n sections.
    support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]
    radius_m : (n,) R of the opening. [m]
    depth_m : l from the wall, 0 or more: the free length of a bolt. [m]

    Returns
    -------
    (n,) displacement at R + l. [m]  NaN rows stay NaN.

    Limits
    ------
    Ground of one law in ring and beyond, small strain, no change by the bolt itself; perfectly
    plastic or brittle, where the state in the ring depends on the radial stress alone.

    Source
    ------
    Self-similarity of the plastic ring; elastic ground outside a circle under uniform pressure
    (Lame).
    """
    wall = curve.at(support_pressure_mpa)
    depth_ratio = (radius_m + depth_m) / radius_m
    beyond = wall.plastic_ratio <= depth_ratio
    edge_pressure = np.where(
        wall.plastic_ratio > 1, curve.critical_pressure_mpa, support_pressure_mpa
    )
    edge = curve.at(edge_pressure).closure_ratio * wall.plastic_ratio
    outside = edge * wall.plastic_ratio / depth_ratio
    inside = np.full(outside.shape, np.nan)
    # Only rows whose anchor lies in the ring are searched; each by halvings of its own range.
    rows = np.flatnonzero(wall.plastic_ratio > depth_ratio)
    if rows.size:
        wanted = wall.plastic_ratio[rows] / depth_ratio[rows]
        ratio = _closure_ratio_at(curve.take(rows), support_pressure_mpa[rows], wanted)
        inside[rows] = ratio * depth_ratio[rows]
    return np.where(beyond, outside, inside) * radius_m


def displacement_beyond_ring_m(
    anchor_radius_m: Array,
    plastic_radius_m: Array,
    edge_pressure_mpa: Array,
    in_situ_stress_mpa: Array,
    shear_modulus_mpa: Array,
) -> Array:
    """Inward displacement of elastic ground around a plastic ring, without its curve.

    Parameters
    ----------
    anchor_radius_m : (n,) r = R + l. [m]
    plastic_radius_m : (n,) Rp, the radius of the opening where the wall does not yield. [m]
    edge_pressure_mpa : (n,) radial stress at Rp: the critical pressure, or the support pressure
        where the wall does not yield. [MPa]
    in_situ_stress_mpa : (n,) p0. [MPa]
    shear_modulus_mpa : (n,) G of the ground. [MPa]

    Returns
    -------
    (n,) (p0 - edge pressure) Rp^2 / (2 G r). [m]  NaN for an anchor inside the plastic ring,
    which is not credited.

    Source
    ------
    Lame, elastic ground outside a circle under uniform pressure.
    """
    movement = (in_situ_stress_mpa - edge_pressure_mpa) * plastic_radius_m**2
    movement = movement / (2 * shear_modulus_mpa * anchor_radius_m)
    return np.where(anchor_radius_m >= plastic_radius_m, movement, np.nan)


def stretch_m(
    wall_closure_m: Array,
    anchor_displacement_m: Array,
    wall_closure_installed_m: Array,
    anchor_displacement_installed_m: Array,
) -> Array:
    """How much a bolt has been stretched since its installation.

    Parameters
    ----------
    wall_closure_m, anchor_displacement_m : (n,) inward, at the wall and at the anchor, now. [m]
    wall_closure_installed_m, anchor_displacement_installed_m : (n,) the same when the bolt was
        installed. [m]

    Returns
    -------
    (n,) movement of the wall less that of the anchor. [m]

    Source
    ------
    Geometry of a radial bolt.
    """
    wall = wall_closure_m - wall_closure_installed_m
    return wall - (anchor_displacement_m - anchor_displacement_installed_m)


def stretch_share(stretch_m: Array, wall_movement_m: Array) -> Array:
    """Stretch of a bolt as a share of the wall's movement since its installation.

    Parameters
    ----------
    stretch_m : (n,) of the bolt. [m]
    wall_movement_m : (n,) of the wall since installation. [m]

    Returns
    -------
    (n,) ratio: the force of the bolt on a still anchor is 1 / ratio too high. [-]  NaN where the
    wall has not moved.

    Source
    ------
    By definition.
    """
    moved = wall_movement_m > 0
    return np.where(moved, stretch_m / np.where(moved, wall_movement_m, 1), np.nan)


def moving_anchor_pressure_mpa(stretch_m: Array, stiffness_mpa_per_m: float) -> Array:
    """Pressure of the bolts on the wall.

    Parameters
    ----------
    stretch_m : (n,) of the bolts since installation. [m]
    stiffness_mpa_per_m : K of the bolt between plate and anchor, spread over its share of the
        wall: that of a still anchor. [MPa/m]

    Returns
    -------
    (n,) K stretch, 0 for a bolt that hangs loose. [MPa]

    Source
    ------
    Hoek & Brown, Underground Excavations in Rock (1980), ungrouted bolts, with the stretch in
    place of the wall's movement.
    """
    return stiffness_mpa_per_m * np.maximum(stretch_m, 0)


def undilating_share(poisson_ratio: Array, radius_m: Array, depth_m: float) -> Array:
    """Limit of the share for yielding ground without dilation and an anchor beyond the ring.

    Parameters
    ----------
    poisson_ratio : (n,) nu of the ground. [-]
    radius_m : (n,) R of the opening. [m]
    depth_m : l, free length of the bolt. [m]

    Returns
    -------
    (n,) 1 - R / (2 (1 - nu) (R + l)). [-]  For a quick look: the share itself tends to this as
    the plastic ring grows, and follows from `stretch_share`.

    Source
    ------
    Zero dilation gives 2 G u / R = 2 (1 - nu) (p0 - pcr) (Rp/R)^2 - (1 - 2 nu) (p0 - pi) at the
    wall and 2 G u / r = (p0 - pcr) (Rp/r)^2 beyond the ring; the second term of the wall is
    small where the ring is large.
    """
    return 1 - radius_m / (2 * (1 - poisson_ratio) * (radius_m + depth_m))


def _closure_ratio_at(curve: GroundCurve, support_pressure_mpa: Array, wanted: Array) -> Array:
    """u / r of the circle in the ring that has the edge of the ring at `wanted` radii."""
    low, high = support_pressure_mpa, curve.critical_pressure_mpa
    for _ in range(HALVINGS):
        middle = (low + high) / 2
        deeper = curve.at(middle).plastic_ratio > wanted
        low, high = np.where(deeper, middle, low), np.where(deeper, high, middle)
    return curve.at((low + high) / 2).closure_ratio
