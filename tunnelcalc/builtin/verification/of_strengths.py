"""Strength of the rock mass against worked examples and identities."""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.rock_mass import hoek_brown
from tunnelcalc.rock_mass.mohr_coulomb import unconfined_strength_mpa

PAPER_2002 = "Hoek, Carranza-Torres & Corkum (2002), worked example"
EXAMPLES = "Hoek, rock mass properties, worked examples"
OF_GSI = "hoek_brown_2002"


def constants(gsi: float, mi: float, disturbance: float) -> tuple[float, float, float]:
    """mb, s and a of one section."""
    found = hoek_brown.hoek_brown_constants(*(np.array([x]) for x in (gsi, mi, disturbance)))
    mb, s, a = (float(value[0]) for value in found)
    return mb, s, a


def _line(slope: bool, which: int) -> float:
    """The paper's example: sci 50 MPa, mi 10, GSI 45, 100 m deep or high, 27 kN/m3."""
    mb, s, a = constants(45, 10, 1 if slope else 0)
    whole = number(hoek_brown.global_strength_mpa, 50, mb, s, a)
    weight = 0.027 * 100
    if slope:
        confinement = 0.72 * whole * (whole / weight) ** -0.91
    else:
        confinement = number(hoek_brown.tunnel_confinement_mpa, whole, weight)
    arrays = (np.array([x]) for x in (50.0, mb, s, a, confinement))
    return float(hoek_brown.equivalent_mohr_coulomb(*arrays)[which][0])


def _worked_example() -> Iterator[VerificationCheck]:
    rows = (
        ("tunnel, D 0, friction angle", False, 0, "deg", 0.005, 47.16),
        ("tunnel, D 0, cohesion", False, 1, "MPa", 0.005, 0.58),
        ("slope, D 1, friction angle", True, 0, "deg", 0.005, 27.61),
        ("slope, D 1, cohesion", True, 1, "MPa", 0.005, 0.35),
    )
    for subject, slope, which, unit, tolerance, expected in rows:
        computed = partial(_line, slope, which)
        standing = Standing.FROM_MEMORY
        yield VerificationCheck(
            OF_GSI, subject, PAPER_2002, standing, unit, tolerance, expected, computed
        )


def _rock_masses() -> Iterator[VerificationCheck]:
    rows = (
        ("breccia, mi 19.1, GSI 75: mb", 75, 19.1, 0, 0.005, 7.82),
        ("breccia, mi 19.1, GSI 75: s", 75, 19.1, 1, 0.0005, 0.062),
        ("breccia, mi 19.1, GSI 75: a", 75, 19.1, 2, 0.0005, 0.501),
        ("gneiss, mi 28, GSI 75: mb", 75, 28, 0, 0.01, 11.46),
        ("schist, mi 9.6, GSI 20: mb", 20, 9.6, 0, 0.005, 0.55),
        ("schist, mi 9.6, GSI 20: a", 20, 9.6, 2, 0.0005, 0.544),
    )
    for subject, gsi, mi, which, tolerance, expected in rows:
        computed = partial(lambda g, m, w: constants(g, m, 0)[w], gsi, mi, which)
        standing = Standing.FROM_MEMORY
        yield VerificationCheck(
            OF_GSI, subject, EXAMPLES, standing, "", tolerance, expected, computed
        )


def _unconfined_by_line(which: int) -> float:
    """2 c cos phi / (1 - sin phi) of the line up to sci / 4 is the global strength."""
    mb, s, a = constants(40, 12, 0)
    whole = number(hoek_brown.global_strength_mpa, 60, mb, s, a)
    arrays = (np.array([x]) for x in (60.0, mb, s, a, 15.0))
    phi, c = (float(value[0]) for value in hoek_brown.equivalent_mohr_coulomb(*arrays))
    return (whole, number(unconfined_strength_mpa, c, phi))[which]


def _others() -> Iterator[VerificationCheck]:
    yield VerificationCheck(
        OF_GSI,
        "line up to sci/4: its unconfined strength is the global strength",
        "Hoek, Carranza-Torres & Corkum (2002), identity of their derivation",
        Standing.EXACT,
        "MPa",
        1e-12,
        partial(_unconfined_by_line, 0),
        partial(_unconfined_by_line, 1),
    )
    yield VerificationCheck(
        OF_GSI,
        "intact rock, GSI 100, D 0: exponent a",
        "Hoek, Carranza-Torres & Corkum (2002), intact rock",
        Standing.EXACT,
        "",
        0.0,
        0.5,
        lambda: constants(100, 10, 0)[2],
    )
    yield VerificationCheck(
        "hoek_brown_constants",
        "original form, a 0.5, s 0.004, sci 30 MPa: unconfined strength sci sqrt(s)",
        "Hoek & Brown (1980), J. Geotech. Eng. Div. 106, original criterion",
        Standing.EXACT,
        "MPa",
        1e-12,
        30 * math.sqrt(0.004),
        lambda: number(hoek_brown.rock_mass_strength_mpa, 30, 0.004, 0.5),
    )
    yield VerificationCheck(
        "mohr_coulomb",
        "phi 45 deg, c 2.414 MPa: unconfined strength",
        "Brady & Brown, Rock Mechanics for Underground Mining, sample problem",
        Standing.FROM_MEMORY,
        "MPa",
        0.005,
        11.66,
        lambda: number(unconfined_strength_mpa, 2.414, 45),
    )


STRENGTH_CHECKS = (*_worked_example(), *_rock_masses(), *_others())
