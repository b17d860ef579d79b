"""Bolts and their checks as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc import api
from tunnelcalc_rock_bolts.formulas import (
    M_PER_MM,
    MPA_PER_GPA,
    capacity_pressure_mpa,
    end_anchored_stiffness_mpa_per_m,
)

HOEK_BROWN = "Hoek & Brown, Underground Excavations in Rock (1980)"
BRADY_BROWN = "Brady & Brown, Rock Mechanics for Underground Mining, App. C, k = K R"
PROJECT = "project"
PRACTICE = "common practice, no source"
SHARE = "share of the wall that a bolt holds"


def reaction_lines(values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of the pattern."""
    number = element.number
    work = api.Working(
        {
            "d_mm": number("diameter_mm"),
            "Es_gpa": number("steel_modulus_gpa"),
            "l": number("length_m"),
            "Q_a": number("anchor_deformation_m_per_mn"),
            "ba": number("spacing_around_m"),
            "bl": number("spacing_along_m"),
            "T_kn": number("capacity_kn"),
        }
    )
    diameter, modulus = number("diameter_mm") * M_PER_MM, number("steel_modulus_gpa") * MPA_PER_GPA
    work.add("d", "diameter of the bar", "d_mm/1000", diameter, "m", PROJECT)
    work.add("Es", "Young's modulus of the bar", "Es_gpa*1000", modulus, "MPa", PROJECT)
    stiffness = end_anchored_stiffness_mpa_per_m(
        spacing_around_m=number("spacing_around_m"),
        spacing_along_m=number("spacing_along_m"),
        free_length_m=number("length_m"),
        diameter_mm=number("diameter_mm"),
        steel_modulus_gpa=number("steel_modulus_gpa"),
        anchor_deformation_m_per_mn=number("anchor_deformation_m_per_mn"),
    )
    formula = "1/(ba*bl*(4*l/(pi*d^2*Es) + Q_a))"
    work.add("K", "stiffness of the pattern", formula, stiffness, "MPa/m", BRADY_BROWN)
    capacity = capacity_pressure_mpa(
        capacity_kn=number("capacity_kn"),
        spacing_around_m=number("spacing_around_m"),
        spacing_along_m=number("spacing_along_m"),
    )
    formula = "T_kn/1000/(ba*bl)"
    work.add("pmax", "capacity of the pattern", formula, capacity, "MPa", HOEK_BROWN)
    return work.lines


def tension_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Force in a bolt against its capacity."""
    work = api.Working(
        {
            "p": float(values["element_pressure_mpa"]),
            "ba": element.number("spacing_around_m"),
            "bl": element.number("spacing_along_m"),
        }
    )
    demand, capacity = float(found.demand[0]), float(found.capacity[0])
    work.add("demand", "force in a bolt", "p*ba*bl*1000", demand, "kN", HOEK_BROWN)
    work.add("capacity", "the least of bar, anchor and plate", "", capacity, "kN", PROJECT)
    return work.lines


def length_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Depth of the supported plastic zone and anchorage against the length."""
    work = api.Working(
        {
            "Rps": float(values["supported_plastic_radius_m"]),
            "R": float(values["radius_m"]),
            "l_a": element.number("anchorage_length_m"),
        }
    )
    demand, capacity = float(found.demand[0]), float(found.capacity[0])
    meaning = "supported plastic zone and anchorage"
    work.add("demand", meaning, "Rps - R + l_a", demand, "m", PRACTICE)
    work.add("capacity", "length of the bolt", "", capacity, "m", PROJECT)
    return work.lines
