"""Measures of squeezing, of the face and of spalling."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.rock_mass import brittle_failure, dead_weight, squeezing

HOEK_MARINOS = "Hoek & Marinos (2000), Tunnels & Tunnelling Int. 32"
MARTIN = "Martin, Kaiser & McCreath (1999), Can. Geotech. J. 36, 136-151"


def _checks() -> Iterator[VerificationCheck]:
    memory, apart = Standing.FROM_MEMORY, Standing.INDEPENDENT
    for ratio, band in ((0.447, 1.0), (0.283, 2.5), (0.200, 5.0), (0.141, 10.0)):
        yield VerificationCheck(
            "squeezing",
            f"strength over stress {ratio}: strain at the limit of a band",
            HOEK_MARINOS,
            memory,
            "%",
            0.07 * band / 10 + 0.003,
            band,
            partial(number, squeezing.squeezing_strain_pct, ratio, 1),
        )
    for gsi, strength in ((25, 1.557), (45, 3.505), (75, 11.841)):
        yield VerificationCheck(
            "squeezing",
            f"own strength, sci 35 MPa, mi 7, GSI {gsi}",
            HOEK_MARINOS,
            apart,
            "MPa",
            5e-4,
            strength,
            partial(number, squeezing.squeezing_strength_mpa, 35, 7, gsi),
        )
    for ratio, strain in ((0.1, 7.11), (0.2, 1.97), (0.5, 0.36)):
        yield VerificationCheck(
            "face_stability",
            f"strain of the face, strength over stress {ratio}",
            HOEK_MARINOS,
            apart,
            "%",
            5e-3,
            strain,
            partial(number, squeezing.face_strain_pct, ratio, 1, 0),
        )
    for ratio, depth in ((0.408, 0.0), (0.6, 0.24), (0.8, 0.49), (1.0, 0.74)):
        yield VerificationCheck(
            "spalling",
            f"depth over R, smax/sci {ratio}",
            MARTIN,
            memory,
            "",
            1e-9,
            depth,
            partial(number, brittle_failure.spalling_depth_m, ratio, 1, 1),
        )
    yield VerificationCheck(
        "crown_dead_weight",
        "25 kN/m3, ring 4 m deep: weight",
        "statics: weight of a column; Hoek & Brown (1980), Underground Excavations in Rock",
        Standing.EXACT,
        "MPa",
        1e-12,
        0.1,
        partial(number, dead_weight.plastic_zone_weight_mpa, 25, 9, 5),
    )


HAZARD_CHECKS = tuple(_checks())
