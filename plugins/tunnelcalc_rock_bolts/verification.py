"""Bolts against springs in series and the load on one bolt's share of the wall."""

from __future__ import annotations

import math

import numpy as np

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc_rock_bolts.formulas import (
    capacity_pressure_mpa,
    end_anchored_stiffness_mpa_per_m,
)

AROUND_M, ALONG_M, LENGTH_M, DIAMETER_MM, MODULUS_GPA, GIVE_M_PER_MN = 1.5, 1.2, 4.0, 25, 200, 0.04
"""Invented."""


def _in_series() -> float:
    """Movement of the plate under 1 MN, from the equilibrium of plate and joint between the bar
    and the anchor's give; spread over the bolt's share of the wall. [MPa/m]"""
    area = math.pi * (DIAMETER_MM / 2000) ** 2
    bar, anchor = MODULUS_GPA * 1000 * area / LENGTH_M, 1 / GIVE_M_PER_MN
    springs = np.array([[bar, -bar], [-bar, bar + anchor]])
    plate, _ = np.linalg.solve(springs, np.array([1.0, 0.0])).tolist()
    return 1 / (plate * AROUND_M * ALONG_M)


def _stiffness() -> float:
    return end_anchored_stiffness_mpa_per_m(
        spacing_around_m=AROUND_M,
        spacing_along_m=ALONG_M,
        free_length_m=LENGTH_M,
        diameter_mm=DIAMETER_MM,
        steel_modulus_gpa=MODULUS_GPA,
        anchor_deformation_m_per_mn=GIVE_M_PER_MN,
    )


BOLT_CHECKS = (
    VerificationCheck(
        "rock_bolts",
        "25 mm, 4 m, give 0.04 m/MN, every 1.5 by 1.2 m: stiffness",
        "two springs in series, equilibrium of their joints",
        Standing.INDEPENDENT,
        "MPa/m",
        1e-11,
        _in_series,
        _stiffness,
    ),
    VerificationCheck(
        "rock_bolts",
        "200 kN on every 4 m2: capacity",
        "statics: force over area, by hand",
        Standing.EXACT,
        "MPa",
        1e-15,
        lambda: 0.05,
        lambda: capacity_pressure_mpa(capacity_kn=200, spacing_around_m=2, spacing_along_m=2),
    ),
)
