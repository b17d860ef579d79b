"""Flags on ground that is no isotropic rock mass, or that does more than yield."""

from __future__ import annotations

from tunnelcalc.api import PRACTICE, Array, Condition, Flag, Level, Sections
from tunnelcalc.builtin.flags.parts import (
    advisory_above,
    advisory_below,
    column,
    outside_above,
    ratio_of,
    where_declared,
)

FEW_SETS = (1, 3)


def _has_few_sets(sections: Sections) -> Array:
    least, most = FEW_SETS
    return (sections["joint_set_count"] >= least) & (sections["joint_set_count"] <= most)


FLAGS = (
    Flag(
        "blocks",
        "few joint sets, widely spaced for the opening: blocks fail, not the rock mass",
        "choose the class by the kinematics of blocks and wedges",
        "joint_spacing_m over span_m",
        "",
        (outside_above(0.1, PRACTICE),),
        ("joint_set_count", "joint_spacing_m", "span_m"),
        ratio_of("joint_spacing_m", "span_m"),
        applies=Condition("joint_set_count is 1 to 3", _has_few_sets),
    ),
    Flag(
        "blocks_at_low_stress",
        "good rock that does not yield: blocks and wedges govern",
        "choose the class by the kinematics of blocks and wedges",
        "gsi",
        "",
        (advisory_above(65, PRACTICE), outside_above(70, PRACTICE)),
        ("gsi", "plastic_radius_m", "radius_m"),
        column("gsi"),
        applies=Condition(
            "the ground stays elastic without support",
            lambda sections: sections["plastic_radius_m"] <= sections["radius_m"],
        ),
    ),
    Flag(
        "intact_rock",
        "the rock is near to intact: a strength index of a jointed mass does not describe it",
        "take the strength of intact rock, and judge brittle failure",
        "gsi",
        "",
        (advisory_above(85, PRACTICE),),
        ("gsi",),
        column("gsi"),
    ),
    where_declared(
        "heterogeneous_ground",
        "layers of unlike rock alternate: one strength and one index stand for all of them",
        "record how strength and mi were weighted, and vary them",
        ("heterogeneous_ground", "present"),
        PRACTICE,
    ),
    Flag(
        "low_intact_strength",
        "the intact rock is so weak that the ground behaves more and more like soil",
        "compare with strength constants of soil",
        "intact_strength_mpa",
        "MPa",
        (advisory_below(15, PRACTICE),),
        ("intact_strength_mpa",),
        column("intact_strength_mpa"),
    ),
    Flag(
        "low_gsi",
        "the rock mass is so broken that it behaves more and more like soil",
        "compare with strength constants of soil",
        "gsi",
        "",
        (advisory_below(25, PRACTICE),),
        ("gsi",),
        column("gsi"),
    ),
    where_declared(
        "swelling",
        "swelling minerals: pressure and heave grow with time and water, mostly at the invert",
        "design the invert by experience in this ground; keep water away",
        ("swelling_minerals", "present"),
        PRACTICE,
        Level.OUTSIDE,
    ),
    where_declared(
        "creep",
        "the ground creeps: closure and load go on after the computed equilibrium",
        "base the final lining on monitoring over a long time",
        ("creeping_ground", "present"),
        PRACTICE,
    ),
    where_declared(
        "site_hazards",
        "earthquake, gas, aggressive ground or heat are declared: they are carried, not computed",
        "treat each of them in the design basis",
        ("site_hazards", "present"),
        PRACTICE,
    ),
)
