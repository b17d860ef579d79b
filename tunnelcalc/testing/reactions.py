"""The four forms of reaction as plain arrays, so that one test serves them all."""

from __future__ import annotations

from itertools import pairwise

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.support.reaction import (
    AdvanceIncrements,
    GroundRing,
    LinearSpring,
    PressureOfClosure,
    Reaction,
)

CLOSURES_M = (0.0, 1e-5, 1e-4, 1e-3, 3e-3, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1.0)
AGES_DAYS = (0.0, 0.01, 0.1, 0.5, 1.0, 3.0, 7.0, 28.0, 90.0, 1e3, 1e6)
BEYOND = ("not_declared", "yields", "breaks")
CHANGED = frozenset({"mb", "s", "a", "friction_angle_deg", "cohesion_mpa"})


def capacity_of(reaction: Reaction) -> Array:
    """(n,) the pressure that checks find as `element_capacity_mpa`. [MPa]"""
    if isinstance(reaction, AdvanceIncrements):
        return reaction.final_capacity_mpa
    return reaction.capacity_mpa


def moved_mm(reaction: Reaction, pressure_mpa: float | Array) -> Array:
    """(n,) movement of the wall that stands for a pressure. [mm]"""
    capacity = capacity_of(reaction)
    if isinstance(reaction, LinearSpring):
        return 1e3 * pressure_mpa / reaction.stiffness_mpa_per_m
    return 10.0 * pressure_mpa / capacity


def arrays_of(reaction: Reaction, count: int) -> dict[str, Array]:
    """Every array of a reaction by name; of functions, those of many closures or ages."""
    found = {"capacity": capacity_of(reaction)}
    if isinstance(reaction, LinearSpring):
        found["stiffness"] = reaction.stiffness_mpa_per_m
    elif isinstance(reaction, PressureOfClosure):
        for closure in CLOSURES_M:
            pressure, slope = reaction.pressure_and_slope(np.full(count, closure))
            found |= {f"pressure at {closure} m": pressure, f"slope at {closure} m": slope}
    elif isinstance(reaction, AdvanceIncrements):
        for age in AGES_DAYS:
            stiffness, capacity = reaction.at_age(np.full(count, age))
            found |= {f"stiffness at {age} d": stiffness, f"capacity at {age} d": capacity}
    elif isinstance(reaction, GroundRing):
        found["thickness"] = reaction.thickness_m
        found |= {f"changed {name}": column for name, column in reaction.changed.items()}
    return found


def rising(found: dict[str, Array], first_words: str) -> bool:
    """Whether arrays of like names never fall, one after the other."""
    series = [array for name, array in found.items() if name.startswith(first_words + " ")]
    return all(np.all(after >= before) for before, after in pairwise(series))
