"""Laws of the ground against published values, closed forms and integration by scipy."""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import GroundCurve, Standing, VerificationCheck
from tunnelcalc.builtin.verification.grounds import (
    GENERAL,
    HARD,
    SOFT,
    WEAK,
    Case,
    apart_value,
    line_curve,
    wall_value,
)
from tunnelcalc.builtin.verification.independent import Ground, line_strength
from tunnelcalc.ground_reaction.elastic import ElasticCurve

APART, MEMORY, EXACT = Standing.INDEPENDENT, Standing.FROM_MEMORY, Standing.EXACT
SOFT_ROCK = "inputs from memory: Hoek & Brown (1980), Brown et al. (1983), highway tunnel"
HARD_ROCK = "inputs from memory: after Sharan (2003), Int. J. Rock Mech. Min. Sci. 40, 817-824"
BRITTLE_2008 = "inputs from memory: after Sharan (2008), generalised brittle ground"
SAMPLE = "Brady & Brown, Rock Mechanics for Underground Mining, sample problem"


def _by_integration() -> Iterator[VerificationCheck]:
    plastic, brittle = "hoek_brown_perfectly_plastic", "hoek_brown_brittle"
    rows = (
        (brittle, "soft rock, pi 0", SOFT, True, 0.0, SOFT_ROCK),
        (brittle, "soft rock, pi 0.3 MPa", SOFT, True, 0.3, SOFT_ROCK),
        (brittle, "hard rock, pi 0", HARD, True, 0.0, HARD_ROCK),
        (brittle, "generalised criterion, pi 1 MPa", GENERAL, True, 1.0, BRITTLE_2008),
        (plastic, "soft rock, pi 0.1 MPa", SOFT, False, 0.1, SOFT_ROCK),
        (plastic, "weak rock, psi 10 deg, pi 0.2 MPa", WEAK, False, 0.2, "invented ground"),
    )
    for method, subject, case, residual, pressure, source in rows:
        make = case.brittle if residual else case.plastic
        ground = case.apart(residual)
        for quantity, unit, tolerance in (
            ("critical_pressure_mpa", "MPa", 1e-9),
            ("plastic_ratio", "", 1e-7),
            ("closure_ratio", "", 1e-9),
        ):
            yield VerificationCheck(
                method,
                f"{subject}: {quantity}",
                f"equilibrium and flow rule; {source}",
                APART,
                unit,
                tolerance,
                partial(apart_value, ground, pressure, quantity),
                partial(wall_value, make, pressure, quantity),
            )


def _closed_form(case: Case, pressure: float) -> float:
    """u / R for a = 0.5, perfectly plastic, with dilation."""
    mb, s, _ = case.peak
    sci, nu, shear = case.sci, case.nu, case.modulus / (2 * (1 + case.nu))
    sine = math.sin(math.radians(case.dilation))
    k = (1 + sine) / (1 - sine)
    wall, far = (p / (mb * sci) + s / mb**2 for p in (pressure, case.p0))
    edge = (1 - math.sqrt(1 + 16 * far)) ** 2 / 16
    critical = (edge - s / mb**2) * mb * sci
    log = 2 * (math.sqrt(edge) - math.sqrt(wall))
    power = math.exp((k + 1) * log)
    bracket = (1 - 2 * nu) / (k + 1) * math.sqrt(edge) / (far - edge)
    bracket += (1 - nu) / 2 * (k - 1) / ((k + 1) ** 2 * (far - edge))
    shape = (k - 1) / (k + 1) + 2 / (k + 1) * power
    shape += (1 - 2 * nu) / (4 * (far - edge)) * log**2
    shape -= bracket * ((k + 1) * log - power + 1)
    return (case.p0 - critical) / (2 * shear) * shape


def _closed_forms() -> Iterator[VerificationCheck]:
    for dilation in (0.0, 10.0, 30.0):
        case = Case(3.31, 1380, 0.25, 27.6, SOFT.peak, SOFT.peak, dilation)
        yield VerificationCheck(
            "hoek_brown_perfectly_plastic",
            f"soft rock, psi {dilation:g} deg: u / R",
            "Carranza-Torres & Fairhurst (1999), Int. J. Rock Mech. Min. Sci. 36, 777-809, "
            "closed form for a = 0.5",
            MEMORY,
            "",
            1e-10,
            partial(_closed_form, case, 0.1),
            partial(wall_value, case.plastic, 0.1, "closure_ratio"),
        )
    yield VerificationCheck(
        "elastic",
        "p0 10, pi 4 MPa, E 3000 MPa, nu 0.25: u / R = (p0 - pi) / (2 G)",
        "Lame; Timoshenko & Goodier, Theory of Elasticity",
        EXACT,
        "",
        1e-15,
        0.0025,
        partial(wall_value, _elastic, 4.0, "closure_ratio"),
    )


def _elastic() -> GroundCurve:
    return ElasticCurve.of_ground(
        in_situ_stress_mpa=np.array([10.0]),
        deformation_modulus_mpa=np.array([3000.0]),
        poisson_ratio=np.array([0.25]),
    )


def _duncan_fama(pressure: float, which: str) -> float:
    p0, modulus, nu, c, phi = 10.0, 1500.0, 0.25, 2.414, math.radians(45)
    k = (1 + math.sin(phi)) / (1 - math.sin(phi))
    q = 2 * c * math.cos(phi) / (1 - math.sin(phi))
    critical = (2 * p0 - q) / (1 + k)
    ratio = (2 * (p0 * (k - 1) + q) / ((1 + k) * ((k - 1) * pressure + q))) ** (1 / (k - 1))
    closure = 2 * (1 - nu) * (p0 - critical) * ratio**2 - (1 - 2 * nu) * (p0 - pressure)
    return {"plastic_ratio": ratio, "closure_ratio": (1 + nu) / modulus * closure}[which]


def _straight_line() -> Iterator[VerificationCheck]:
    plastic, brittle = "mohr_coulomb_perfectly_plastic", "mohr_coulomb_brittle"
    source = "Duncan Fama (1993), Comprehensive Rock Engineering 2, ch. 5, closed form"
    for quantity in ("plastic_ratio", "closure_ratio"):
        yield VerificationCheck(
            plastic,
            f"psi 0, pi 0.2 MPa: {quantity}",
            source,
            MEMORY,
            "",
            1e-13,
            partial(_duncan_fama, 0.2, quantity),
            partial(wall_value, line_curve, 0.2, quantity),
        )
    yield VerificationCheck(
        brittle,
        "phi 45 to 30 deg: critical pressure",
        SAMPLE,
        MEMORY,
        "MPa",
        0.005,
        1.22,
        partial(wall_value, partial(line_curve, 0.0, True), 0.0, "critical_pressure_mpa"),
    )
    # With a residual friction of 30 degrees and no cohesion, Rp / R = (pcr / pi)^(1/2).
    yield VerificationCheck(
        brittle,
        "phi 45 to 30 deg, pi 0.4 MPa: Rp / R",
        SAMPLE,
        MEMORY,
        "",
        0.0015,
        math.sqrt(1.222 / 0.4),
        partial(wall_value, partial(line_curve, 0.0, True), 0.4, "plastic_ratio"),
    )
    for method, residual in ((plastic, line_strength(2.414, 45)), (brittle, line_strength(0, 30))):
        ground = Ground(10, 1500, 0.25, 15, line_strength(2.414, 45), residual)
        make = partial(line_curve, 15.0, method == brittle)
        yield VerificationCheck(
            method,
            "psi 15 deg, pi 0.4 MPa: u / R",
            f"equilibrium and flow rule; {SAMPLE}",
            APART,
            "",
            1e-9,
            partial(apart_value, ground, 0.4, "closure_ratio"),
            partial(wall_value, make, 0.4, "closure_ratio"),
        )


GROUND_REACTION_CHECKS = (*_by_integration(), *_closed_forms(), *_straight_line())
