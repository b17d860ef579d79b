"""The support kind `steel_sets`."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from typing import Literal

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    blocked_capacity_mpa,
    blocked_stiffness_mpa_per_m,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)
from tunnelcalc_steel_sets.joints import SlidingSets, joints_of
from tunnelcalc_steel_sets.lines import reaction_lines
from tunnelcalc_steel_sets.parameters import (
    BEYOND_YIELD,
    JOINTS,
    STEEL,
    YIELDS,
    beyond_yield,
    joint_misfits,
)
from tunnelcalc_steel_sets.plausible import AREA, DEPTH, INERTIA, SECTION, section_misfits
from tunnelcalc_steel_sets.profile import (
    M_PER_MM,
    MPA_PER_GPA,
    OWN,
    packaged_sections,
    profile_of,
    section_of,
)
from tunnelcalc_steel_sets.ring_section import ring_section_of

STEEL_DENSITY_KG_M3 = 7850.0
"""EN 1991-1-1:2002, Table A.4: 77.0 to 78.5 kN/m3; 7850 kg/m3 is common practice."""

EMBEDDED = "embedded"
BLOCKED = "blocked"
WHEN_BLOCKED = ("contact", (BLOCKED,))
WHEN_OWN = ("profile", (OWN,))


class SteelSets:
    """Closed rings of rolled steel, embedded in shotcrete or blocked to the rock."""

    name = "steel_sets"
    is_ring = True
    meaning = (
        "closed steel rings, embedded (thin ring) or blocked (elastic ring on blocks; stiffness "
        "Hoek & Brown (1980), capacity by statics), with rigid or sliding joints"
    )
    parameters = (
        Parameter(
            "profile",
            "the project's own section, or a designation of EN 10365, nominal dimensions from "
            "memory and checked against their own area and inertia",
            choices=(OWN, *packaged_sections()),
            default=OWN,
            words_from=api.WordTable("designation", SECTION, section_misfits),
        ),
        Parameter(
            AREA,
            "area of the profile",
            "mm2",
            Limits(100, 1e6),
            only_if=WHEN_OWN,
        ),
        Parameter(
            INERTIA,
            "second moment of area of the profile",
            "mm4",
            Limits(1e3, 1e11),
            only_if=WHEN_OWN,
        ),
        Parameter(DEPTH, "depth of the profile", "mm", Limits(10, 2000), only_if=WHEN_OWN),
        *STEEL,
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
            "block_width_mm",
            "width of the blocks; of a designated profile no more than its flange bears",
            "mm",
            Limits(10, 2000),
            only_if=WHEN_BLOCKED,
        ),
        Parameter(
            "block_modulus_gpa",
            "Young's modulus of the blocks",
            "GPa",
            Limits(0, 300, above=True),
            only_if=WHEN_BLOCKED,
        ),
        *JOINTS,
        BEYOND_YIELD,
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        section = section_of(element)
        own = element.values.get("profile", OWN) == OWN
        of_depth = DEPTH if own else "profile"
        depth = section.depth_mm * M_PER_MM
        if element.choice("contact") == BLOCKED:
            depth += element.number("block_thickness_mm") * M_PER_MM
        if depth >= smallest_radius_m / 2:
            yield api.Misfit(
                of_depth,
                f"with blocks takes {depth:g} m, more than half the radius",
                "correct the depth and block thickness, which are in mm",
            )
        if own:
            yield from section_misfits({name: element.number(name) for name in SECTION})
        yield from joint_misfits(element)

    def reaction_form(self, element: api.Element) -> str:
        slides = joints_of(element) is not None
        return api.PressureOfClosure.form if slides else api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        return ring_reaction(sections["radius_m"], element, *spring_of(sections, element))

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        radius = sections["radius_m"]
        profile = profile_of(element)
        sets = np.full(sections.count, 1 / profile.spacing_m)
        axis: Array = 2 * np.pi * (radius - profile.depth_m / 2)
        yield api.Amount("steel_sets", "no", sets)
        yield api.Amount("steel", "kg", sets * profile.area_m2 * axis * STEEL_DENSITY_KG_M3)
        joints = joints_of(element)
        if joints is not None:
            yield api.Amount("sliding_joints", "no", sets * joints.count)

    def ring_section(self, element: api.Element) -> api.RingSection:
        return ring_section_of(element)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        stiffness, capacity = spring_of(api.one_section(values), element)
        found = (float(stiffness[0]), float(capacity[0]))
        return reaction_lines(values, element, blocks_of(element), found)


def spring_of(sections: api.Sections, element: api.Element) -> tuple[Array, Array]:
    """Stiffness (n,) [MPa/m] of sets or girders whose joints stand, and capacity (n,) [MPa]."""
    radius, profile, blocks = sections["radius_m"], profile_of(element), blocks_of(element)
    if blocks is None:
        return hoop_stiffness_mpa_per_m(radius, profile), hoop_capacity_mpa(radius, profile)
    return (
        blocked_stiffness_mpa_per_m(radius, profile, blocks),
        blocked_capacity_mpa(radius, profile, blocks),
    )


def ring_reaction(
    radius_m: Array, element: api.Element, stiffness_mpa_per_m: Array, capacity_mpa: Array
) -> api.Reaction:
    """The reaction of a ring of steel, by its joints and by what it does beyond yield."""
    joints, yields = joints_of(element), beyond_yield(element) == YIELDS
    if joints is None:
        beyond: Literal["yields", "not_declared"] = "yields" if yields else "not_declared"
        return api.LinearSpring(stiffness_mpa_per_m, capacity_mpa, beyond)
    ceiling = capacity_mpa if yields else np.full(radius_m.shape, np.inf)
    slip = joints.slip_pressure_mpa(radius_m)
    sets = SlidingSets(joints, stiffness_mpa_per_m, slip, ceiling)
    return api.PressureOfClosure(sets, capacity_mpa, turns=sets.turns_m())


def blocks_of(element: api.Element) -> Blocks | None:
    """The blocks of an element; None for one in full contact."""
    if element.values.get("contact", EMBEDDED) != BLOCKED:
        return None
    bearing = min(element.number("block_width_mm"), section_of(element).flange_width_mm)
    return Blocks(
        half_angle_rad=math.radians(element.number("block_spacing_deg") / 2),
        thickness_m=element.number("block_thickness_mm") * M_PER_MM,
        width_m=bearing * M_PER_MM,
        modulus_mpa=element.number("block_modulus_gpa") * MPA_PER_GPA,
    )
