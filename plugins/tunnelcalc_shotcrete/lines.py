"""The ring and its check as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_shotcrete.formulas import (
    M_PER_MM,
    MPA_PER_GPA,
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
)

LAME = "Lame, thick-walled cylinder (Timoshenko & Goodier (1970), art. 28)"
HOEK_BROWN = "Hoek & Brown, Underground Excavations in Rock (1980)"
PROJECT = "project"


def reaction_lines(values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of the ring."""
    work, radius, thickness = _ring(values, element)
    modulus = element.number("modulus_gpa") * MPA_PER_GPA
    work.known |= {
        "E_gpa": element.number("modulus_gpa"),
        "nu_c": element.number("poisson_ratio"),
        "scc": element.number("strength_mpa"),
    }
    work.add("Ec", "Young's modulus", "E_gpa*1000", modulus, "MPa", PROJECT)
    stiffness = ring_stiffness_mpa_per_m(
        radius, thickness, modulus, element.number("poisson_ratio")
    )
    formula = "Ec*(R^2 - r^2)/((1 + nu_c)*R*((1 - 2*nu_c)*R^2 + r^2))"
    work.add("K", "stiffness of the ring", formula, float(stiffness[0]), "MPa/m", LAME)
    capacity = ring_capacity_mpa(radius, thickness, element.number("strength_mpa"))
    formula = "scc/2*(1 - r^2/R^2)"
    work.add("pmax", "capacity of the ring", formula, float(capacity[0]), "MPa", HOEK_BROWN)
    return work.lines


def stress_lines(values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
    """Hoop stress at the inner face against the strength."""
    work, radius, thickness = _ring(values, element)
    pressure = float(values["element_pressure_mpa"])
    work.known["p"] = pressure
    stress = inner_hoop_stress_mpa(np.array([pressure]), radius, thickness)
    formula = "2*p*R^2/(R^2 - r^2)"
    work.add("demand", "hoop stress at the inner face", formula, float(stress[0]), "MPa", LAME)
    strength = element.number("strength_mpa")
    work.add("capacity", "compressive strength", "", strength, "MPa", PROJECT)
    return work.lines


def _ring(values: api.SectionValues, element: api.Element) -> tuple[api.Working, api.Array, float]:
    """Lines of the ring's radii, its outer radius and its thickness."""
    radius = float(values["radius_m"])
    thickness = element.number("thickness_mm") * M_PER_MM
    work = api.Working({"R": radius, "t_mm": element.number("thickness_mm")})
    work.add("t", "thickness", "t_mm/1000", thickness, "m", PROJECT)
    work.add("r", "inner radius", "R - t", radius - thickness, "m", "geometry")
    return work, np.array([radius]), thickness
