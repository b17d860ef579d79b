"""Steel sets and their check as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc import api
from tunnelcalc_steel_sets.formulas import Blocks, Profile

HOOP = "thin elastic ring under uniform pressure"
HOEK_BROWN = "Hoek & Brown (1980); Brady & Brown, App. C, k = K R"
STATICS = "statics of the elastic ring between two blocks"
PROJECT = "project"
GEOMETRY = "geometry"


def reaction_lines(
    values: api.SectionValues,
    element: api.Element,
    profile: Profile,
    blocks: Blocks | None,
    stiffness_and_capacity: tuple[float, float],
) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of the sets."""
    number = element.number
    stiffness, capacity = stiffness_and_capacity
    work = api.Working(
        {
            "R": float(values["radius_m"]),
            "As_mm2": number("section_area_mm2"),
            "Is_mm4": number("section_inertia_mm4"),
            "Ds_mm": number("section_depth_mm"),
            "Es_gpa": number("steel_modulus_gpa"),
            "sy": number("yield_strength_mpa"),
            "S": number("spacing_m"),
        }
    )
    work.add("As", "area of the profile", "As_mm2*1e-6", profile.area_m2, "m2", PROJECT)
    work.add("Es", "Young's modulus", "Es_gpa*1000", profile.modulus_mpa, "MPa", PROJECT)
    if blocks is None:
        formula = "Es*As/(S*R^2)"
        work.add("K", "stiffness of the sets", formula, stiffness, "MPa/m", HOOP)
        work.add("pmax", "capacity of the sets", "sy*As/(S*R)", capacity, "MPa", HOOP)
        return work.lines
    _add_blocks(work, element, profile, blocks)
    formula = (
        "1/(S*R^2/(Es*As) + S*R^4/(Es*Is)*(th*(th + sin(th)*cos(th))/(2*sin(th)^2) - 1)"
        " + 2*S*th*tB*R/(EB*bB^2))"
    )
    work.add("K", "stiffness of the sets on blocks", formula, stiffness, "MPa/m", HOEK_BROWN)
    formula = "min(sy/(S*R*th*(1/(tan(th)*As) + r*Ds*(1/th - 1/tan(th))/(2*Is))), sy*As/(S*R))"
    meaning = "capacity: yield at a block, never above the hoop limit"
    work.add("pmax", meaning, formula, capacity, "MPa", STATICS)
    return work.lines


def _add_blocks(work: api.Working, element: api.Element, profile: Profile, blocks: Blocks) -> None:
    number = element.number
    work.known |= {
        "angle": number("block_spacing_deg"),
        "tB_mm": number("block_thickness_mm"),
        "bB_mm": number("block_width_mm"),
        "EB_gpa": number("block_modulus_gpa"),
    }
    inertia, thickness = profile.inertia_m4, blocks.thickness_m
    work.add("Is", "second moment of area", "Is_mm4*1e-12", inertia, "m4", PROJECT)
    work.add("Ds", "depth of the profile", "Ds_mm/1000", profile.depth_m, "m", PROJECT)
    half = blocks.half_angle_rad
    work.add("th", "half the angle between blocks", "radians(angle/2)", half, "rad", PROJECT)
    work.add("tB", "thickness of the blocks", "tB_mm/1000", thickness, "m", PROJECT)
    work.add("bB", "width of the blocks", "bB_mm/1000", blocks.width_m, "m", PROJECT)
    work.add("EB", "modulus of the blocks", "EB_gpa*1000", blocks.modulus_mpa, "MPa", PROJECT)
    ring = float(work.known["R"]) - thickness - profile.depth_m / 2
    work.add("r", "radius of the set's axis", "R - tB - Ds/2", ring, "m", GEOMETRY)


def yield_lines(values: api.SectionValues) -> Sequence[api.SheetLine]:
    """Pressure on the sets against the pressure at first yield."""
    demand, capacity = (
        float(values[name]) for name in ("element_pressure_mpa", "element_capacity_mpa")
    )
    work = api.Working({"p": demand, "pmax": capacity})
    work.add("demand", "pressure on the sets", "p", demand, "MPa", "equilibrium")
    work.add("capacity", "pressure at first yield", "pmax", capacity, "MPa", STATICS)
    return work.lines
