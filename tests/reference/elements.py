"""Stiffness, capacity and checks of support elements, from statics and elasticity.

An element is the mapping that a project file holds: its `kind` and parameters with their units.
K is MPa of wall pressure a metre of wall movement.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from typing import Any, NamedTuple

import numpy as np

Parameters = Mapping[str, Any]


class Reaction(NamedTuple):
    """Stiffness [MPa/m] and capacity [MPa] as pressures on the wall."""

    stiffness: float
    capacity: float


def rock_bolts(element: Parameters, radius: float) -> Reaction:
    """Bar and anchor in series, on the bolt's share of the wall. Hoek & Brown (1980)."""
    area = math.pi / 4 * (element["diameter_mm"] / 1000) ** 2
    stretch_per_mn = element["length_m"] / (element["steel_modulus_gpa"] * 1000 * area)
    stretch_per_mn += element["anchor_deformation_m_per_mn"]
    wall = element["spacing_around_m"] * element["spacing_along_m"]
    return Reaction(1 / stretch_per_mn / wall, element["capacity_kn"] / 1000 / wall)


def shotcrete(element: Parameters, radius: float) -> Reaction:
    """Thick cylinder in plane strain: u = A r + B / r, free inside, unit pressure outside."""
    inner = radius - element["thickness_mm"] / 1000
    modulus, nu = element["modulus_gpa"] * 1000, element["poisson_ratio"]
    double_shear = modulus / (1 + nu)
    # Radial stress, compression positive, for inward displacement A r + B / r.
    of_a = double_shear / (1 - 2 * nu)
    rows = [[of_a, -double_shear / r**2] for r in (radius, inner)]
    a, b = np.linalg.solve(rows, [1.0, 0.0])
    movement = float(a * radius + b / radius)
    inner_hoop = float(of_a * a + double_shear * b / inner**2)
    return Reaction(1 / movement, element["strength_mpa"] / inner_hoop)


def steel_sets(element: Parameters, radius: float) -> Reaction:
    """Thin ring where embedded; on blocks, Hoek & Brown's stiffness and statics' capacity."""
    area = element["section_area_mm2"] * 1e-6
    inertia = element["section_inertia_mm4"] * 1e-12
    modulus = element["steel_modulus_gpa"] * 1000
    strength, spacing = element["yield_strength_mpa"], element["spacing_m"]
    hoop_flexibility = radius**2 * spacing / (modulus * area)
    hoop_capacity = strength * area / (radius * spacing)
    if element["contact"] == "embedded":
        return Reaction(1 / hoop_flexibility, hoop_capacity)
    half = math.radians(element["block_spacing_deg"]) / 2
    thickness, width = element["block_thickness_mm"] / 1000, element["block_width_mm"] / 1000
    # Load of one block a unit of pressure: its piece of the wall.
    block_force = 2 * half * radius * spacing
    block_flexibility = block_force * thickness / (element["block_modulus_gpa"] * 1000 * width**2)
    shape = half * (half + math.sin(half) * math.cos(half)) / (2 * math.sin(half) ** 2) - 1
    bending = spacing * radius**4 / (modulus * inertia) * shape
    # Statics of the piece between two blocks, a unit of pressure on the wall.
    middle_thrust = block_force / (2 * math.sin(half))
    thrust = middle_thrust * math.cos(half)
    axis = radius - thickness - element["section_depth_mm"] / 2000
    moment = middle_thrust * axis * (math.sin(half) / half - math.cos(half))
    stress = thrust / area + moment * element["section_depth_mm"] / 2000 / inertia
    return Reaction(
        1 / (hoop_flexibility + bending + block_flexibility),
        min(strength / stress, hoop_capacity),
    )


REACTIONS: Mapping[str, Callable[[Parameters, float], Reaction]] = {
    "rock_bolts": rock_bolts,
    "shotcrete": shotcrete,
    "steel_sets": steel_sets,
}


class Check(NamedTuple):
    """Demand against capacity. A rule carries no load; NaN demand or capacity: left out."""

    name: str
    unit: str
    demand: float
    capacity: float
    carries_load: bool


def checks(
    element: Parameters,
    radius: float,
    pressure: float,
    plastic_radius: float,
    block_width: float | None,
) -> list[Check]:
    """The checks of an element that carries `pressure`, by name."""
    if element["kind"] == "rock_bolts":
        return _bolt_checks(element, radius, pressure, plastic_radius, block_width)
    capacity = REACTIONS[element["kind"]](element, radius).capacity
    if element["kind"] == "steel_sets":
        return [Check("yield", "MPa", pressure, capacity, True)]
    strength = element["strength_mpa"]
    return [Check("hoop_stress", "MPa", pressure / capacity * strength, strength, True)]


def _bolt_checks(
    element: Parameters,
    radius: float,
    pressure: float,
    plastic_radius: float,
    block_width: float | None,
) -> list[Check]:
    around, along = element["spacing_around_m"], element["spacing_along_m"]
    length, spacing = element["length_m"], max(around, along)
    needed = plastic_radius - radius + element["anchorage_length_m"]
    found = [
        Check("tension", "kN", pressure * around * along * 1000, element["capacity_kn"], True),
        Check("length_beyond_plastic_zone", "m", needed, length, False),
    ]
    if element["pattern_rules"] == "em_1110_1_2907":
        blocks = math.nan if block_width is None else block_width
        found += [
            Check("pattern_largest_spacing", "m", spacing, 2.0, False),
            Check("pattern_length_by_block", "m", 3 * blocks, length, False),
            Check("pattern_length_by_spacing", "m", 2 * spacing, length, False),
            Check("pattern_length_by_span", "m", length_for_span(2 * radius), length, False),
            Check("pattern_spacing_by_block", "m", spacing, 1.5 * blocks, False),
        ]
    return sorted(found)


def length_for_span(span: float) -> float:
    """Least bolt length, EM 1110-1-2907 (1980) [from memory]; NaN above 30 m. [m]"""
    if span < 6:
        return span / 2
    if span <= 18:
        return 3 + (span - 6) / 12 * 1.5
    return span / 4 if span <= 30 else math.nan
