"""The relations by hand, on the inputs of worked examples."""

from __future__ import annotations

from collections.abc import Callable
from functools import partial

import numpy as np

from tunnelcalc.api import Array, Standing, VerificationCheck
from tunnelcalc_empirical.formulas import (
    q_bolt_length_m,
    q_support_pressure_mpa,
    rmr_support_pressure_mpa,
)

METHOD = "empirical"
CHAMBER = "inputs of the crusher chamber in E. Hoek, Practical Rock Engineering"


def _of(formula: Callable[..., Array], *values: float) -> float:
    return float(formula(*(np.array([value]) for value in values))[0])


CHECKS = (
    VerificationCheck(
        METHOD,
        "Q 4.5, Jn 4, Jr 3: support pressure",
        f"{CHAMBER}; Barton, Lien & Lunde (1974) by hand",
        Standing.INDEPENDENT,
        "MPa",
        5e-5,
        partial(float, 0.0269),
        partial(_of, q_support_pressure_mpa, 4.5, 4.0, 3.0),
    ),
    VerificationCheck(
        METHOD,
        "span 15 m, ESR 1.6: length of bolts",
        f"{CHAMBER}; Barton, Lien & Lunde (1974) by hand",
        Standing.INDEPENDENT,
        "m",
        5e-3,
        partial(float, 3.41),
        partial(_of, q_bolt_length_m, 15.0, 1.6),
    ),
    VerificationCheck(
        METHOD,
        "RMR 40, 26 kN/m3, span 10 m: load",
        "E. Unal (1983) [from memory], by hand",
        Standing.INDEPENDENT,
        "MPa",
        1e-12,
        partial(float, 0.156),
        partial(_of, rmr_support_pressure_mpa, 40.0, 26.0, 10.0),
    ),
)
