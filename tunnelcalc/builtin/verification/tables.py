"""Helps to write tables of checks: one number from functions of arrays."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np

from tunnelcalc.api import Array


def number(function: Callable[..., Array], *values: float) -> float:
    """A function of arrays (n,), for one section."""
    return float(function(*(np.array([value]) for value in values))[0])
