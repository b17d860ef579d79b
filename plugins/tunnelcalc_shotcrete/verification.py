"""The ring against Lame's thick cylinder, solved as two equations from the conditions at its faces.

Inward displacement A r + B / r; radial stress 2 (l + m) A - 2 m B / r^2, hoop stress with + in
place of -, in plane strain with Lame's constants l and m, compression positive.
"""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc_shotcrete.formulas import (
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
)

LAME = "Lame; Timoshenko & Goodier, Theory of Elasticity, art. 28: conditions at the two faces"
STRENGTH_MPA = 30.0
RINGS = ((5.0, 0.2, 15_000.0, 0.2), (3.0, 1.2, 20_000.0, 0.35))
"""Outer radius, thickness [m], modulus [MPa], Poisson ratio. Invented."""

Ring = tuple[float, float, float, float]


def _cylinder(ring: Ring) -> tuple[float, float]:
    """Displacement of the outer face [m] and hoop stress of the inner one [MPa] under 1 MPa."""
    radius, thickness, modulus, nu = ring
    inner = radius - thickness
    shear = modulus / (2 * (1 + nu))
    other = modulus * nu / ((1 + nu) * (1 - 2 * nu))
    uniform, varying = 2 * (other + shear), 2 * shear
    faces = np.array([[uniform, -varying / inner**2], [uniform, -varying / radius**2]])
    a, b = np.linalg.solve(faces, np.array([0.0, 1.0])).tolist()
    return a * radius + b / radius, uniform * a + varying * b / inner**2


def _expected(ring: Ring, which: str) -> float:
    movement, hoop = _cylinder(ring)
    return {"stiffness": 1 / movement, "hoop": hoop, "capacity": STRENGTH_MPA / hoop}[which]


def _computed(ring: Ring, which: str) -> float:
    radius, thickness, modulus, nu = np.array([ring[0]]), *ring[1:]
    if which == "stiffness":
        return float(ring_stiffness_mpa_per_m(radius, thickness, modulus, nu)[0])
    if which == "hoop":
        return float(inner_hoop_stress_mpa(np.array([1.0]), radius, thickness)[0])
    return float(ring_capacity_mpa(radius, thickness, STRENGTH_MPA)[0])


def _checks() -> Iterator[VerificationCheck]:
    for ring in RINGS:
        radius, thickness, modulus, nu = ring
        case = f"R {radius:g} m, t {thickness:g} m, Ec {modulus:g} MPa, nu {nu:g}"
        for method, which, subject, unit in (
            ("shotcrete", "stiffness", f"{case}: stiffness", "MPa/m"),
            ("shotcrete", "capacity", f"{case}, strength 30 MPa: capacity", "MPa"),
            ("hoop_stress", "hoop", f"{case}, 1 MPa outside: hoop stress inside", "MPa"),
        ):
            yield VerificationCheck(
                method,
                subject,
                LAME,
                Standing.INDEPENDENT,
                unit,
                1e-8,
                partial(_expected, ring, which),
                partial(_computed, ring, which),
            )


RING_CHECKS = tuple(_checks())
