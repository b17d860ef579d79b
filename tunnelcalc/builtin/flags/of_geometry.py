"""Flags on the opening and what lies near it: cover, shape, stages, portals, neighbours, faults."""

from __future__ import annotations

from tunnelcalc.api import PRACTICE, Array, Condition, Flag, Sections
from tunnelcalc.builtin.flags.parts import (
    advisory_above,
    advisory_below,
    outside_above,
    outside_below,
    over,
    ratio_of,
    where_declared,
    where_set,
)


def _plastic_zones_over_spacing(sections: Sections) -> Array:
    """Both openings taken as alike: their plastic radii over the distance of their axes."""
    spacing = sections["neighbour_clear_distance_m"] + 2 * sections["radius_m"]
    return over(2 * sections["plastic_radius_m"], spacing)


FLAGS = (
    Flag(
        "shallow_cover",
        "the opening is not deep: stress differs from crown to invert and may reach the surface",
        "check the section by a method for shallow tunnels, and the settlement of the surface",
        "cover_m over radius_m",
        "",
        (advisory_below(10, PRACTICE), outside_below(4, PRACTICE)),
        ("cover_m", "radius_m"),
        ratio_of("cover_m", "radius_m"),
    ),
    Flag(
        "profile_shape",
        "the opening is much wider than high or higher than wide: a circle stands badly for it",
        "analyse ground and lining with the profile as it is",
        "span_m over height_m",
        "",
        (
            advisory_below(0.8, PRACTICE),
            outside_below(0.6, PRACTICE),
            advisory_above(1.25, PRACTICE),
            outside_above(1.6, PRACTICE),
        ),
        ("span_m", "height_m"),
        ratio_of("span_m", "height_m"),
    ),
    where_set(
        "equivalent_radius",
        "the opening is not a circle: a circle of the stated rule stands for it",
        "check the lining and the ground at flat parts of the profile separately",
        "profile given by span, height and area",
        "equivalent_radius",
        PRACTICE,
    ),
    where_declared(
        "staged_excavation",
        "the section is driven in stages: one ring, closed at once, stands for all of them",
        "close the invert within one to two diameters of the top heading, or compute the stages",
        ("excavation", "staged"),
        PRACTICE,
    ),
    Flag(
        "portal",
        "the portal is near: cover, weathering and the slope govern",
        "design the portal by itself, with a class of its own",
        "portal_distance_m over the diameter",
        "",
        (outside_below(2, PRACTICE),),
        ("portal_distance_m", "radius_m"),
        lambda sections: over(sections["portal_distance_m"], 2 * sections["radius_m"]),
    ),
    Flag(
        "neighbour",
        "a neighbouring opening is near: the pillar between them carries more than is computed",
        "analyse both openings and the pillar together",
        "neighbour_clear_distance_m over span_m",
        "",
        (advisory_below(2, PRACTICE), outside_below(1, PRACTICE)),
        ("neighbour_clear_distance_m", "span_m"),
        ratio_of("neighbour_clear_distance_m", "span_m"),
    ),
    Flag(
        "neighbour_plastic_zones",
        "the plastic zones of this opening and of a like neighbour meet",
        "analyse both openings and the pillar together",
        "sum of both plastic radii over the distance of the axes, openings taken as alike",
        "",
        (outside_above(1, PRACTICE),),
        ("neighbour_clear_distance_m", "radius_m", "plastic_radius_m"),
        _plastic_zones_over_spacing,
    ),
    Flag(
        "fault",
        "a fault zone narrower than the opening: the ground around the opening is not of one kind",
        "judge collapse, water and squeezing at the fault by itself; probe ahead",
        "fault_width_m over the diameter",
        "",
        (outside_below(1, PRACTICE),),
        ("fault_width_m", "radius_m"),
        lambda sections: over(sections["fault_width_m"], 2 * sections["radius_m"]),
        applies=Condition(
            "fault_width_m is above 0", lambda sections: sections["fault_width_m"] > 0
        ),
    ),
)
