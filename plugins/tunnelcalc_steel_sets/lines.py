"""Steel sets, lattice girders and their checks as lines of a calculation sheet."""

from __future__ import annotations

import math
from collections.abc import Sequence

from tunnelcalc import api
from tunnelcalc_steel_sets.formulas import Blocks, Profile
from tunnelcalc_steel_sets.joints import Joints, joints_of
from tunnelcalc_steel_sets.profile import THREE_BARS, profile_of, section_of

HOOP = "thin elastic ring under uniform pressure"
HOEK_BROWN = "Hoek & Brown (1980); Brady & Brown, App. C, k = K R"
STATICS = "statics of the elastic ring between two blocks"
HALF_RING = "statics of half a ring"
CIRCUMFERENCE = "circumference of the ring"
PROJECT = "project"
GEOMETRY = "geometry"


def reaction_lines(
    values: api.SectionValues,
    element: api.Element,
    blocks: Blocks | None,
    stiffness_and_capacity: tuple[float, float],
) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of the sets, and where they slide."""
    number, profile = element.number, profile_of(element)
    stiffness, capacity = stiffness_and_capacity
    work = api.Working(
        {
            "R": float(values["radius_m"]),
            "Es_gpa": number("steel_modulus_gpa"),
            "sy": number("yield_strength_mpa"),
            "S": number("spacing_m"),
        }
    )
    _add_area(work, element, profile)
    work.add("Es", "Young's modulus", "Es_gpa*1000", profile.modulus_mpa, "MPa", PROJECT)
    if blocks is None:
        formula = "Es*As/(S*R^2)"
        work.add("K", "stiffness of the sets", formula, stiffness, "MPa/m", HOOP)
        work.add("pmax", "capacity of the sets", "sy*As/(S*R)", capacity, "MPa", HOOP)
    else:
        _add_blocks(work, element, profile, blocks)
        formula = (
            "1/(S*R^2/(Es*As) + S*R^4/(Es*Is)*(th*(th + sin(th)*cos(th))/(2*sin(th)^2) - 1)"
            " + 2*S*th*tB*R/(EB*bB^2))"
        )
        work.add("K", "stiffness of the sets on blocks", formula, stiffness, "MPa/m", HOEK_BROWN)
        formula = "min(sy/(S*R*th*(1/(tan(th)*As) + r*Ds*(1/th - 1/tan(th))/(2*Is))), sy*As/(S*R))"
        meaning = "capacity: yield at a block, never above the hoop limit"
        work.add("pmax", meaning, formula, capacity, "MPa", STATICS)
    joints = joints_of(element)
    if joints is not None:
        _add_slip(work, element, joints)
    return work.lines


def _add_area(work: api.Working, element: api.Element, profile: Profile) -> None:
    """Area of the profile, from the project, the table or the bars."""
    section = section_of(element)
    if "bars" not in element.values:
        work.known |= {"As_mm2": section.area_mm2}
        work.add("As", "area of the profile", "As_mm2*1e-6", profile.area_m2, "m2", section.source)
        return
    work.known |= {
        "d_l": element.number("lower_bar_diameter_mm"),
        "d_u": element.number("upper_bar_diameter_mm"),
        "n_u": 1.0 if element.choice("bars") == THREE_BARS else 2.0,
    }
    formula = "pi/4*(2*d_l^2 + n_u*d_u^2)*1e-6"
    work.add("As", "area of the longitudinal bars", formula, profile.area_m2, "m2", GEOMETRY)


def _add_blocks(work: api.Working, element: api.Element, profile: Profile, blocks: Blocks) -> None:
    number, section = element.number, section_of(element)
    work.known |= {
        "Is_mm4": section.inertia_mm4,
        "Ds_mm": section.depth_mm,
        "angle": number("block_spacing_deg"),
        "tB_mm": number("block_thickness_mm"),
        "bB_mm": number("block_width_mm"),
        "EB_gpa": number("block_modulus_gpa"),
    }
    source, inertia, thickness = section.source, profile.inertia_m4, blocks.thickness_m
    work.add("Is", "second moment of area", "Is_mm4*1e-12", inertia, "m4", source)
    work.add("Ds", "depth of the profile", "Ds_mm/1000", profile.depth_m, "m", source)
    half = blocks.half_angle_rad
    work.add("th", "half the angle between blocks", "radians(angle/2)", half, "rad", PROJECT)
    work.add("tB", "thickness of the blocks", "tB_mm/1000", thickness, "m", PROJECT)
    if math.isfinite(section.flange_width_mm):
        work.known |= {"bf_mm": section.flange_width_mm}
        meaning = "width of the blocks that bears, no more than the flange"
        work.add("bB", meaning, "min(bB_mm, bf_mm)/1000", blocks.width_m, "m", source)
    else:
        work.add("bB", "width of the blocks", "bB_mm/1000", blocks.width_m, "m", PROJECT)
    work.add("EB", "modulus of the blocks", "EB_gpa*1000", blocks.modulus_mpa, "MPa", PROJECT)
    ring = float(work.known["R"]) - thickness - profile.depth_m / 2
    work.add("r", "radius of the set's axis", "R - tB - Ds/2", ring, "m", GEOMETRY)


def _add_slip(work: api.Working, element: api.Element, joints: Joints) -> None:
    """Pressure at which the joints slide, and closure over which they do."""
    work.known |= {
        "N_slip": joints.slip_load_kn,
        "j": float(joints.count),
        "travel": joints.travel_mm,
    }
    slip = joints.slip_load_kn / 1000 / (element.number("spacing_m") * work.known["R"])
    work.add(
        "p_slip", "pressure while the joints slide", "N_slip/1000/(S*R)", slip, "MPa", HALF_RING
    )
    closure = joints.slip_closure_m
    meaning = "closure while they slide"
    work.add("u_slip", meaning, "j*travel/1000/(2*pi)", closure, "m", CIRCUMFERENCE)


def yield_lines(values: api.SectionValues) -> Sequence[api.SheetLine]:
    """Pressure on the sets against the pressure at first yield."""
    demand, capacity = (
        float(values[name]) for name in ("element_pressure_mpa", "element_capacity_mpa")
    )
    work = api.Working({"p": demand, "pmax": capacity})
    work.add("demand", "pressure on the sets", "p", demand, "MPa", "equilibrium")
    work.add("capacity", "pressure at first yield", "pmax", capacity, "MPa", STATICS)
    return work.lines


def travel_lines(
    values: api.SectionValues, element: api.Element, stiffness: float, demand: float
) -> Sequence[api.SheetLine]:
    """Sliding that the closure asks of each joint against its travel."""
    joints = joints_of(element)
    assert joints is not None
    work = api.Working(
        {
            "R": float(values["radius_m"]),
            "S": element.number("spacing_m"),
            "K": stiffness,
            "moved": float(values["element_moved_mm"]),
        }
    )
    _add_slip(work, element, joints)
    formula = "2*pi*max(moved - 1000*p_slip/K, 0)/j"
    meaning = "sliding asked of each joint, the elastic closure before it taken off"
    work.add("demand", meaning, formula, demand, "mm", CIRCUMFERENCE)
    work.add("capacity", "travel of a joint", "travel", joints.travel_mm, "mm", PROJECT)
    return work.lines
