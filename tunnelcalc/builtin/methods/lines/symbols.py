"""One section's columns by their symbols, and as arrays."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc.api import Array, SectionValues
from tunnelcalc.calculation.symbols import SYMBOLS


def number(values: SectionValues, column: str) -> float:
    """One section's value in a column of numbers; NaN where there is no such column."""
    value = values.get(column, np.nan)
    return np.nan if isinstance(value, str) else float(value)


def known(values: SectionValues, columns: Sequence[str]) -> dict[str, float]:
    """The values of columns by their symbols."""
    return {SYMBOLS[column]: number(values, column) for column in columns}


def arrays(values: SectionValues, columns: Sequence[str]) -> dict[str, Array]:
    """The columns as arrays of one section, (1,) each."""
    return {column: row(number(values, column)) for column in columns}


def row(value: float) -> Array:
    """A number as an array of one section."""
    return np.array([value], dtype=float)
