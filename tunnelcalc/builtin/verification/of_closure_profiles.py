"""Closure profiles at the face, behind it and far behind it."""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import partial

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.ground_reaction import closure_profile as profiles

OWN_FORM = "the published form, evaluated by hand"

FACE = (
    # method, what besides the distance, share at the face
    (
        "vlachopoulos_diederichs_2009",
        profiles.vlachopoulos_diederichs_2009,
        (1.0, 1.0),
        math.exp(-0.15) / 3,
        "Vlachopoulos & Diederichs (2009), Rock Mech. Rock Eng. 42, 131-146",
    ),
    ("panet_1995", profiles.panet_1995, (1.0,), 0.25, "Panet (1995), Presses ENPC"),
    (
        "panet_guenot_1982",
        profiles.panet_guenot_1982,
        (1.0,),
        0.28,
        "Panet & Guenot (1982), Tunnelling '82",
    ),
    (
        "unlu_gercek_2003",
        profiles.unlu_gercek_2003,
        (1.0, 0.25),
        0.245,
        "Unlu & Gercek (2003), Tunn. Undergr. Space Technol. 18, 547-553",
    ),
    (
        "hoek_2002",
        profiles.hoek_2002,
        (1.0,),
        2**-1.7,
        "Hoek (2002), fit to measurements of Chern et al. (1998)",
    ),
)
TWO_RADII = {
    "vlachopoulos_diederichs_2009": 0.9645,
    "panet_1995": 0.9442,
    "panet_guenot_1982": 0.9370,
    "unlu_gercek_2003": 0.9441,
    "hoek_2002": 0.7744,
}
"""Two radii behind the face, elastic ground, nu 0.25: from the formulas, worked apart."""


def _checks() -> Iterator[VerificationCheck]:
    for method, profile, more, at_face, source in FACE:
        share = partial(number, profile)
        exact = Standing.EXACT
        yield VerificationCheck(
            method,
            "share at the face, R 1 m, elastic",
            source,
            exact,
            "",
            1e-15,
            at_face,
            partial(share, 0, *more),
        )
        yield VerificationCheck(
            method,
            "share far behind the face",
            source,
            exact,
            "",
            1e-9,
            1.0,
            partial(share, 1e6, *more),
        )
        yield VerificationCheck(
            method,
            "share two radii behind the face",
            source,
            Standing.INDEPENDENT,
            "",
            5e-5,
            TWO_RADII[method],
            partial(share, 2, *more),
        )


CLOSURE_PROFILE_CHECKS = tuple(_checks())
