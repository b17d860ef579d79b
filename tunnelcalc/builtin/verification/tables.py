"""Helps to write tables of checks: one number from functions of arrays."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from tunnelcalc.api import Array, Standing, VerificationCheck


def number(function: Callable[..., Array], *values: float) -> float:
    """A function of arrays (n,), for one section."""
    return float(function(*(np.array([value]) for value in values))[0])


def check(
    method: str,
    subject: str,
    source: str,
    standing: Standing,
    unit: str,
    tolerance: float,
    expected: float | Callable[[], float],
    computed: Callable[[], float],
) -> VerificationCheck:
    """A check whose expected value may be a plain number."""
    wanted = expected if callable(expected) else lambda: float(expected)
    return VerificationCheck(method, subject, source, standing, unit, tolerance, wanted, computed)
