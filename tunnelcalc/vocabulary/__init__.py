"""The one list of quantities: name, symbol, unit, meaning, allowed range.

Readers, checks, table headers and listings take their labels from here. A name is the trade's
own term in full, followed by its unit, and is the same in input tables, project files, output
tables and code.
"""

from __future__ import annotations

from tunnelcalc.vocabulary.ground import (
    DEVIATION_SUFFIX,
    GROUND,
    UNIT_SUFFIXES,
    ground_quantity,
)
from tunnelcalc.vocabulary.quantity import UNLIMITED, Limits, Quantity, Sort
from tunnelcalc.vocabulary.results import RESULTS
from tunnelcalc.vocabulary.words import WORDS

__all__ = [
    "DEVIATION_SUFFIX",
    "GROUND",
    "QUANTITIES",
    "UNIT_SUFFIXES",
    "UNLIMITED",
    "WORDS",
    "Limits",
    "Quantity",
    "Sort",
    "ground_quantity",
]

QUANTITIES = GROUND | RESULTS
"""Every quantity by name."""
