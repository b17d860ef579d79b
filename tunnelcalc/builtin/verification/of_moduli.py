"""Deformation modulus against published tables and exact values."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.rock_mass import deformation_modulus as relations

BARTON = "Barton (2002), Int. J. Rock Mech. Min. Sci. 39, 185-216, table 6"
CLASSES_1997 = "Hoek & Brown (1997), Int. J. Rock Mech. Min. Sci. 34, 1165-1186, tables"
PAPER_2006 = "Hoek & Diederichs (2006), Int. J. Rock Mech. Min. Sci. 43, 203-215"


def _barton() -> Iterator[VerificationCheck]:
    # Q in full, from RQD/Jn Jr/Ja Jw/SRF of each row.
    rows = (
        ("row 1", 100 / 2 * 2, 100, 46, 0.5),
        ("row 2", 90 / 9, 100, 22, 0.5),
        ("row 3", 60 / 12 * 1.5 / 2 * 0.66, 50, 10.7, 0.05),
        ("row 4", 30 / 15 * 1 / 4 * 0.66 / 2.5, 33, 3.5, 0.05),
    )
    for row, q, strength, expected, tolerance in rows:
        yield VerificationCheck(
            "barton_2002",
            f"{row}: Q {q:.3g}, sci {strength} MPa",
            BARTON,
            Standing.PUBLISHED,
            "GPa",
            tolerance,
            expected,
            partial(lambda q, sci: number(relations.barton_2002_mpa, q, sci) / 1000, q, strength),
        )


def _of_2002() -> Iterator[VerificationCheck]:
    rows = (
        ("very good rock: GSI 75, sci 150 MPa", 75, 150, 42000, 500),
        ("average rock: GSI 50, sci 80 MPa", 50, 80, 9000, 500),
        ("very poor rock: GSI 30, sci 20 MPa", 30, 20, 1400, 50),
    )
    for subject, gsi, strength, expected, tolerance in rows:
        yield VerificationCheck(
            "hoek_2002",
            subject,
            CLASSES_1997,
            Standing.FROM_MEMORY,
            "MPa",
            tolerance,
            expected,
            partial(number, relations.hoek_2002_mpa, gsi, 0, strength),
        )
    yield VerificationCheck(
        "hoek_2002",
        "schist: GSI 20, sci 5 MPa",
        "Hoek, rock mass properties, worked examples",
        Standing.FROM_MEMORY,
        "MPa",
        0.5,
        398,
        partial(number, relations.hoek_2002_mpa, 20, 0, 5),
    )


def _exact() -> Iterator[VerificationCheck]:
    simplified = relations.hoek_diederichs_simplified_mpa
    detailed = relations.hoek_diederichs_with_intact_modulus_mpa
    rows = (
        (
            "hoek_diederichs_2006_simplified",
            "GSI 75, D 0",
            PAPER_2006,
            50000.0,
            partial(number, simplified, 75, 0),
        ),
        (
            "hoek_diederichs_2006",
            "GSI 60, D 0, Ei 10 GPa: 0.52 Ei",
            PAPER_2006,
            5200.0,
            partial(number, detailed, 60, 0, 10000),
        ),
        (
            "serafim_pereira_1983",
            "RMR 50: 10 GPa",
            "Serafim & Pereira (1983), Int. Symp. Eng. Geol. Underground Constr., Lisbon",
            10000.0,
            partial(number, relations.serafim_pereira_1983_mpa, 50),
        ),
        (
            "bieniawski_1978",
            "RMR 75: 50 GPa",
            "Bieniawski (1978), Int. J. Rock Mech. Min. Sci. 15, 237-247",
            50000.0,
            partial(number, relations.bieniawski_1978_mpa, 75),
        ),
    )
    for method, subject, source, expected, computed in rows:
        yield VerificationCheck(
            method, subject, source, Standing.EXACT, "MPa", 1e-8, expected, computed
        )


MODULUS_CHECKS = (*_barton(), *_of_2002(), *_exact())
