"""Checks of the kinds of bolts against published relations and closed forms."""

from __future__ import annotations

import math

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc_rock_bolts.anchor_share import stretch_share_of_section
from tunnelcalc_rock_bolts.formulas import end_anchored_stiffness_mpa_per_m
from tunnelcalc_rock_bolts.grouted import improved_mohr_coulomb, neutral_radius_m
from tunnelcalc_rock_bolts.grouted_force import MohrCoulombGround, force_in_mohr_coulomb_kn
from tunnelcalc_rock_bolts.parts import FRICTION_BOLTS, GROUTED_BOLTS, ROCK_BOLTS, bond_kn

INDRARATNA_KAISER = "B. Indraratna, P. K. Kaiser, Int. J. Rock Mech. Min. Sci. 27 (1990) 269-281"
ONE = np.ones(1)
FRICTION_DEG, COHESION_MPA, BETA = 25.0, 0.2, 0.12
RADIUS_M, LENGTH_M, PRESSURE_MPA, SHARE_M2 = 5.0, 4.0, 0.1, 1.5


def _stiffness() -> float:
    return end_anchored_stiffness_mpa_per_m(
        spacing_around_m=2.0,
        spacing_along_m=1.5,
        free_length_m=4.0,
        diameter_mm=25.0,
        steel_modulus_gpa=200.0,
        anchor_deformation_m_per_mn=0.04,
    )


def _share(plastic_radius_m: float, closure_mm: float) -> float:
    found = stretch_share_of_section(
        radius_m=5 * ONE,
        free_length_m=3.0,
        in_situ_stress_mpa=5 * ONE,
        deformation_modulus_mpa=1000 * ONE,
        poisson_ratio=0.25 * ONE,
        dilation_deg=0 * ONE,
        critical_pressure_mpa=2 * ONE,
        plastic_radius_m=plastic_radius_m * ONE,
        closure_mm=closure_mm * ONE,
    )
    return float(found[0])


def _bond() -> float:
    values = {"length_m": 4.0, "bond_kn_per_m": 50.0, "service_factor": 0.8}
    element = api.Element(FRICTION_BOLTS, FRICTION_BOLTS, 1.0, values)
    section = {"radius_m": 5 * ONE, "supported_plastic_radius_m": 6.5 * ONE}
    return float(bond_kn(api.Sections(section), element)[0])


def _force() -> float:
    ground = MohrCoulombGround(FRICTION_DEG * ONE, COHESION_MPA * ONE)
    neutral = neutral_radius_m(RADIUS_M * ONE, LENGTH_M)
    found = force_in_mohr_coulomb_kn(
        ground, BETA * ONE, RADIUS_M * ONE, 9 * ONE, neutral, PRESSURE_MPA * ONE, SHARE_M2
    )
    return float(found[0])


def _force_in_closed_form() -> float:
    """The integral of pi d lambda st from the wall to the neutral point, solved by hand."""
    sine = math.sin(math.radians(FRICTION_DEG))
    passive = (1 + sine) / (1 - sine)
    unconfined = 2 * COHESION_MPA * math.sqrt(passive)
    slope = (1 + BETA) * passive - 1
    at_wall = slope * PRESSURE_MPA + (1 + BETA) * unconfined
    neutral = LENGTH_M / math.log(1 + LENGTH_M / RADIUS_M)
    steady = (PRESSURE_MPA - at_wall / slope) * (neutral - RADIUS_M)
    growing = (neutral / RADIUS_M) ** (slope + 1) - 1
    growing *= at_wall * (1 + 1 / slope) * RADIUS_M / (slope + 1)
    return 1000 * SHARE_M2 / RADIUS_M * BETA / (1 + BETA) * (steady + growing)


CHECKS = (
    VerificationCheck(
        ROCK_BOLTS,
        "stiffness of 25 mm, 4 m, 2 m by 1.5 m, 40 mm/MN",
        "stretch of bar and anchor under 1 MN, by hand",
        Standing.EXACT,
        "MPa/m",
        1e-9,
        lambda: 1 / 3 / (4 / (200_000 * math.pi * 0.0125**2) + 0.04),
        _stiffness,
    ),
    VerificationCheck(
        ROCK_BOLTS,
        "stretch share of a moving anchor in elastic ground, R 5 m, l 3 m",
        "Lame: displacement falls with 1 / r",
        Standing.EXACT,
        "1",
        1e-12,
        lambda: 3 / 8,
        lambda: _share(5.0, 31.25),
    ),
    VerificationCheck(
        ROCK_BOLTS,
        "stretch share of a moving anchor beyond a plastic zone of 7 m",
        "Lame: (p0 - pcr) Rp^2 (1 + nu) / (E ra) = 22.96875 mm of 70 mm, by hand",
        Standing.EXACT,
        "1",
        1e-12,
        lambda: 1 - 22.96875 / 70,
        lambda: _share(7.0, 70.0),
    ),
    VerificationCheck(
        FRICTION_BOLTS,
        "bond of 50 kN/m over 2.5 m beyond the plastic zone, 0.8 of it",
        "50 x 2.5 x 0.8, by hand",
        Standing.EXACT,
        "kN",
        1e-9,
        lambda: 100.0,
        _bond,
    ),
    VerificationCheck(
        GROUTED_BOLTS,
        "friction angle of bolted ground, 30 degrees and a density of 0.1",
        f"{INDRARATNA_KAISER}: asin(2.3 / 4.3)",
        Standing.FROM_MEMORY,
        "deg",
        1e-9,
        lambda: math.degrees(math.asin(2.3 / 4.3)),
        lambda: float(improved_mohr_coulomb(30 * ONE, ONE, 0.1 * ONE).friction_angle_deg[0]),
    ),
    VerificationCheck(
        GROUTED_BOLTS,
        "neutral point of 3 m in a radius of 5 m",
        f"{INDRARATNA_KAISER}: 3 / ln 1.6",
        Standing.FROM_MEMORY,
        "m",
        1e-9,
        lambda: 3 / math.log(1.6),
        lambda: float(neutral_radius_m(5 * ONE, 3.0)[0]),
    ),
    VerificationCheck(
        GROUTED_BOLTS,
        "force at the neutral point, Mohr-Coulomb ground yielded beyond it",
        "integral of the assumed shear over the bolt, in closed form",
        Standing.INDEPENDENT,
        "kN",
        1e-7,
        _force_in_closed_form,
        _force,
    ),
)
