"""The support kind `steel_sets` and its check."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    Profile,
    blocked_capacity_mpa,
    blocked_stiffness_mpa_per_m,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)
from tunnelcalc_steel_sets.lines import reaction_lines, yield_lines

M_PER_MM = 1e-3
M2_PER_MM2 = 1e-6
M4_PER_MM4 = 1e-12
MPA_PER_GPA = 1e3
STEEL_DENSITY_KG_M3 = 7850.0
"""EN 1991-1-1:2002, Table A.4: 77.0 to 78.5 kN/m3; 7850 kg/m3 is common practice."""

EMBEDDED = "embedded"
BLOCKED = "blocked"
WHEN_BLOCKED = ("contact", BLOCKED)


class SteelSets:
    """Closed rings of rolled steel, embedded in shotcrete or blocked to the rock."""

    name = "steel_sets"
    is_ring = True
    meaning = (
        "closed steel rings, embedded (thin ring) or blocked (elastic ring on blocks; stiffness "
        "Hoek & Brown (1980), capacity by statics)"
    )
    parameters = (
        Parameter("section_area_mm2", "area of the profile", "mm2", Limits(100, 1e6)),
        Parameter(
            "section_inertia_mm4", "second moment of area of the profile", "mm4", Limits(1e3, 1e11)
        ),
        Parameter("section_depth_mm", "depth of the profile", "mm", Limits(10, 2000)),
        Parameter("yield_strength_mpa", "yield strength", "MPa", Limits(50, 2000)),
        Parameter("steel_modulus_gpa", "Young's modulus", "GPa", Limits(10, 300)),
        Parameter("spacing_m", "spacing along the drive", "m", Limits(0.1, 10)),
        Parameter("contact", "contact with the ground", choices=(EMBEDDED, BLOCKED)),
        Parameter(
            "block_spacing_deg",
            "angle between neighbouring blocks",
            "deg",
            Limits(1, 120),
            only_if=WHEN_BLOCKED,
        ),
        Parameter(
            "block_thickness_mm",
            "thickness of the blocks",
            "mm",
            Limits(0, 2000),
            only_if=WHEN_BLOCKED,
        ),
        Parameter(
            "block_width_mm", "width of the blocks", "mm", Limits(10, 2000), only_if=WHEN_BLOCKED
        ),
        Parameter(
            "block_modulus_gpa",
            "Young's modulus of the blocks",
            "GPa",
            Limits(0, 300, above=True),
            only_if=WHEN_BLOCKED,
        ),
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        depth = element.number("section_depth_mm") * M_PER_MM
        if element.choice("contact") == BLOCKED:
            depth += element.number("block_thickness_mm") * M_PER_MM
        if depth >= smallest_radius_m / 2:
            yield api.Misfit(
                "section_depth_mm",
                f"with blocks takes {depth:g} m, more than half the radius",
                "correct the depth and block thickness, which are in mm",
            )
        # No profile of this depth can have more than all its area at the two faces.
        most = element.number("section_area_mm2") * element.number("section_depth_mm") ** 2 / 4
        inertia = element.number("section_inertia_mm4")
        if inertia > most:
            yield api.Misfit(
                "section_inertia_mm4",
                f"is {inertia:g} mm4, more than this area and depth can have, {most:g} mm4",
                "correct the units: area in mm2, depth in mm, second moment in mm4",
            )

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        radius = sections["radius_m"]
        profile = _profile(element)
        if element.choice("contact") == EMBEDDED:
            return api.LinearSpring(
                hoop_stiffness_mpa_per_m(radius, profile), hoop_capacity_mpa(radius, profile)
            )
        blocks = _blocks(element)
        return api.LinearSpring(
            blocked_stiffness_mpa_per_m(radius, profile, blocks),
            blocked_capacity_mpa(radius, profile, blocks),
        )

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        radius = sections["radius_m"]
        profile = _profile(element)
        sets = np.full(sections.count, 1 / profile.spacing_m)
        axis: Array = 2 * np.pi * (radius - profile.depth_m / 2)
        yield api.Amount("steel_sets", "no", sets)
        yield api.Amount("steel", "kg", sets * profile.area_m2 * axis * STEEL_DENSITY_KG_M3)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        spring = self.reaction(api.one_section(values), element)
        assert isinstance(spring, api.LinearSpring)
        found = (float(spring.stiffness_mpa_per_m[0]), float(spring.capacity_mpa[0]))
        blocks = _blocks(element) if element.choice("contact") == BLOCKED else None
        return reaction_lines(values, element, _profile(element), blocks, found)


class Yield:
    """Pressure on the sets against the pressure at which they begin to yield.

    For blocked sets the capacity is not the one that is often printed: see the head of the
    module with the formulas for the reason.
    """

    name = "yield"
    meaning = "pressure on the sets against the pressure at first yield; statics of the ring"
    applies_to = (SteelSets.name,)
    unit = "MPa"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        return api.Evaluation(sections["element_pressure_mpa"], sections["element_capacity_mpa"])

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return yield_lines(values)


def _profile(element: api.Element) -> Profile:
    return Profile(
        area_m2=element.number("section_area_mm2") * M2_PER_MM2,
        inertia_m4=element.number("section_inertia_mm4") * M4_PER_MM4,
        depth_m=element.number("section_depth_mm") * M_PER_MM,
        yield_strength_mpa=element.number("yield_strength_mpa"),
        modulus_mpa=element.number("steel_modulus_gpa") * MPA_PER_GPA,
        spacing_m=element.number("spacing_m"),
    )


def _blocks(element: api.Element) -> Blocks:
    return Blocks(
        half_angle_rad=math.radians(element.number("block_spacing_deg") / 2),
        thickness_m=element.number("block_thickness_mm") * M_PER_MM,
        width_m=element.number("block_width_mm") * M_PER_MM,
        modulus_mpa=element.number("block_modulus_gpa") * MPA_PER_GPA,
    )
