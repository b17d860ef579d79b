"""Quality and strength of the ground estimated from what was observed."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.rock_mass import observations

EXACT, APART = Standing.EXACT, Standing.INDEPENDENT
HOEK_1995 = "Hoek, Kaiser & Bawden (1995), published form, worked by hand"
HOEK_2013 = "Hoek, Carter & Diederichs (2013), ARMA 13-672, published form, worked by hand"
CAI_2006 = "Cai & Kaiser (2006), Geotech. Geol. Eng. 24, 1089-1102, published form, worked apart"
CAI_2007 = (
    "Cai et al. (2007), Int. J. Rock Mech. Min. Sci. 44, 247-265, published form, worked apart"
)
HALF_OF_LAST_DIGIT = 0.005

BLOCKS = ((1e3, 1, 39.65), (1e4, 1, 45.36), (1e6, 1, 59.86), (1e4, 3, 56.72), (1e4, 0.3, 32.33))
"""Block volume [cm3], joint condition, index."""
RESIDUAL = ((30, 20.07), (60, 26.85), (74, 27.45))
"""Index before and after failure."""


def _exact() -> Iterator[VerificationCheck]:
    by_condition = observations.gsi_from_jcond89_and_rqd
    by_load = observations.intact_strength_from_point_load_mpa
    rows = (
        ("jcond89_rqd", "JCond89 25, RQD 80 %: GSI", HOEK_2013, "", 77.5, by_condition, (25, 80)),
        ("jcond89_rqd", "JCond89 30, RQD 100 %: GSI", HOEK_2013, "", 95, by_condition, (30, 100)),
        ("rmr89_dry", "RMR89' 59: GSI", HOEK_1995, "", 54, observations.gsi_from_rmr89_dry, (59,)),
        ("q_prime", "Q' 1: GSI", HOEK_1995, "", 44, observations.gsi_from_q_prime, (1,)),
        (
            *("point_load", "Is50 4 MPa, factor 22: strength", "definition of the factor"),
            *("MPa", 88, by_load, (4, 22)),
        ),
    )
    for method, subject, source, unit, expected, function, values in rows:
        computed = partial(number, function, *values)
        yield VerificationCheck(method, subject, source, EXACT, unit, 1e-12, expected, computed)


def _worked_apart() -> Iterator[VerificationCheck]:
    for volume, condition, expected in BLOCKS:
        yield VerificationCheck(
            "block_volume",
            f"Vb {volume:g} cm3, Jc {condition:g}: GSI",
            CAI_2006,
            APART,
            "",
            HALF_OF_LAST_DIGIT,
            expected,
            partial(number, observations.gsi_from_block_volume, volume, condition),
        )
    for peak, expected in RESIDUAL:
        yield VerificationCheck(
            "cai_2007",
            f"GSI {peak}: residual GSI",
            CAI_2007,
            APART,
            "",
            HALF_OF_LAST_DIGIT,
            expected,
            partial(number, observations.residual_gsi, peak),
        )


OBSERVATION_CHECKS = (*_exact(), *_worked_apart())
