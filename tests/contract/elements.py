"""Elements with values from the middle of each parameter's range, made from what a kind declares
and nothing else; and sections that have every column a check may ask for."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterator

import numpy as np

from tunnelcalc.api import Element, Parameter, Sections, SupportKind
from tunnelcalc.vocabulary import GROUND, Sort

RADII_M = np.array([2.0, 3.5, 5.2, 8.0])
SHARES = (0.5, 0.2, 0.05)
"""Of a range that begins at 0: where the middle values do not fit together, smaller ones."""


def middle(parameter: Parameter, share: float) -> float:
    """The geometric mean of a range, or a share of one that begins at 0."""
    low, high = parameter.limits.minimum, parameter.limits.maximum
    return math.sqrt(low * high) if low > 0 else share * high


def choices_of(kind: SupportKind) -> Iterator[dict[str, str]]:
    """Every combination of the choices that a kind leaves."""
    chosen = [parameter for parameter in kind.parameters if parameter.choices]
    for words in itertools.product(*(parameter.choices for parameter in chosen)):
        yield dict(zip((parameter.name for parameter in chosen), words, strict=True))


def elements_of(kind: SupportKind) -> list[Element]:
    """One element for every combination of choices."""
    return [_fitting(kind, choices) for choices in choices_of(kind)]


def _fitting(kind: SupportKind, choices: dict[str, str]) -> Element:
    for share in SHARES:
        values: dict[str, float | str] = dict(choices)
        for parameter in kind.parameters:
            other, word = parameter.only_if or ("", "")
            if choices.get(other, "") == word and not parameter.choices:
                values[parameter.name] = middle(parameter, share)
        element = Element(kind.name, kind.name, 1.0, values)
        if not list(kind.misfits(element, float(RADII_M.min()))):
            return element
    raise AssertionError(f"no values of {kind.name} with {choices} fit together")


def sections_for_checks(element_pressure_mpa: float, element_capacity_mpa: float) -> Sections:
    """One section a radius, with ground in the middle of its range and a wall at rest."""
    count = RADII_M.size
    columns = {
        "radius_m": RADII_M,
        "span_m": 2 * RADII_M,
        "chainage_m": np.arange(count, dtype=float),
    }
    for name, quantity in GROUND.items():
        if quantity.sort is Sort.NUMBER:
            columns[name] = np.full(count, 1.0)
    pressures = {
        "support_pressure_mpa": element_pressure_mpa,
        "element_pressure_mpa": element_pressure_mpa,
        "element_capacity_mpa": element_capacity_mpa,
        "supported_closure_mm": 10.0,
    }
    columns |= {name: np.full(count, value) for name, value in pressures.items()}
    columns["supported_plastic_radius_m"] = 1.1 * RADII_M
    return Sections(columns)


def bytes_of(sections: Sections) -> dict[str, bytes]:
    """The content of every column, to be compared later."""
    return {name: column.tobytes() for name, column in sections.items()}
