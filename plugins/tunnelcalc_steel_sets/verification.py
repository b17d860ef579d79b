"""Sets against the statics of half a ring, and of a ring between two blocks.

Between blocks the ring is free of load: an angle x from the middle the thrust is cos x and the
moment M0 + r (1 - cos x) for unit thrust in the middle, with M0 such that the ends do not turn.
"""

from __future__ import annotations

import math

import numpy as np

from tunnelcalc.api import Array, Standing, VerificationCheck
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    Profile,
    blocked_capacity_mpa,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)

RADIUS_M = 5.0
SET = Profile(0.0043, 1.45e-5, 0.14, 235.0, 200_000.0, 1.5)
BLOCKS = Blocks(math.radians(11.25), 0.075, 0.25, 10_000.0)
"""Invented."""
CASE = "4300 mm2, 235 MPa, every 1.5 m, R 5 m"


def _half_ring() -> tuple[float, float]:
    """Stiffness and pressure at yield: two thrusts hold half a ring against p 2 R S."""
    thrust = 2 * RADIUS_M * SET.spacing_m / 2
    stress = thrust / SET.area_m2
    shortening = stress / SET.modulus_mpa * 2 * math.pi * RADIUS_M
    return 1 / (shortening / (2 * math.pi)), SET.yield_strength_mpa / stress


def _at_block() -> float:
    """Pressure at which the outermost fibre at a block yields. [MPa]"""
    from scipy.integrate import quad

    half = BLOCKS.half_angle_rad
    axis = RADIUS_M - BLOCKS.thickness_m - SET.depth_m / 2
    middle = -float(quad(lambda x: axis * (1 - math.cos(x)), 0, half)[0]) / half
    moment = middle + axis * (1 - math.cos(half))
    stress = math.cos(half) / SET.area_m2 + moment * SET.depth_m / 2 / SET.inertia_m4
    # A block's force, p over its piece of the wall, is held by two thrusts that meet at an angle.
    thrust = 2 * half * RADIUS_M * SET.spacing_m / (2 * math.sin(half))
    return SET.yield_strength_mpa / (thrust * stress)


def _radius() -> Array:
    return np.array([RADIUS_M])


SET_CHECKS = (
    VerificationCheck(
        "steel_sets",
        f"embedded, {CASE}: stiffness",
        "statics of half a ring and Hooke's law",
        Standing.INDEPENDENT,
        "MPa/m",
        1e-11,
        lambda: _half_ring()[0],
        lambda: float(hoop_stiffness_mpa_per_m(_radius(), SET)[0]),
    ),
    VerificationCheck(
        "steel_sets",
        f"embedded, {CASE}: capacity",
        "statics of half a ring",
        Standing.INDEPENDENT,
        "MPa",
        1e-13,
        lambda: _half_ring()[1],
        lambda: float(hoop_capacity_mpa(_radius(), SET)[0]),
    ),
    VerificationCheck(
        "steel_sets",
        f"blocks every 22.5 deg, {CASE}: capacity",
        "statics and slope of an elastic ring between two blocks, by quadrature",
        Standing.INDEPENDENT,
        "MPa",
        1e-11,
        _at_block,
        lambda: float(blocked_capacity_mpa(_radius(), SET, BLOCKS)[0]),
    ),
)
