"""Flags on what was put in: assumed, uncertain or at odds with itself."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import PRACTICE, Condition, Flag
from tunnelcalc.builtin.flags.parts import (
    ASSUMPTION,
    advisory_above,
    advisory_below,
    column,
    ratio_of,
    where_set,
)

FLAGS = (
    Flag(
        "uncertain_strength",
        "the intact strength scatters widely: one value says little",
        "test more, and run the project with low and high values",
        "intact_strength_mpa_sd over intact_strength_mpa",
        "",
        (
            advisory_above(
                0.25, "Hoek (1998), Int. J. Rock Mech. Min. Sci. 35, 63-68 [from memory]"
            ),
        ),
        ("intact_strength_mpa_sd", "intact_strength_mpa"),
        ratio_of("intact_strength_mpa_sd", "intact_strength_mpa"),
    ),
    Flag(
        "disturbance_whole_mass",
        "D above 0 weakens the whole rock mass, not only the ring that blasting disturbs",
        "take D = 0 for the mass, or confine it to a ring, or accept a result on the heavy side",
        "disturbance of the whole mass",
        "",
        (advisory_above(0, "Hoek & Brown (2019), J. Rock Mech. Geotech. Eng. 11, 445-463"),),
        ("mass_disturbance",),
        column("mass_disturbance"),
    ),
    where_set(
        "modulus_capped",
        "the estimated modulus was above that of the intact rock and was set to it",
        "check gsi and the intact modulus",
        "estimate above intact_modulus_mpa",
        "modulus_capped",
        PRACTICE,
    ),
    where_set(
        "modulus_above_intact",
        "the measured modulus is above that of the intact rock; it was used as it is",
        "check both measurements and their units",
        "rock_mass_modulus_mpa above intact_modulus_mpa",
        "modulus_above_intact",
        PRACTICE,
    ),
    where_set(
        "modulus_relations_mixed",
        "moduli along the tunnel come from several relations: steps between units may be theirs",
        "compare the relations on one unit before reading a step as ground",
        "more than one modulus relation in the project",
        "modulus_relations_mixed",
        PRACTICE,
    ),
    where_set(
        "dilation_assumed",
        "no dilation angle is given: 0 was taken",
        "state dilation_deg",
        "dilation_deg is absent",
        "dilation_assumed",
        ASSUMPTION,
    ),
    Flag(
        "dilation_high",
        "the dilation angle is high for the friction angle: closure is overstated",
        "justify dilation_deg, or lower it",
        "dilation_deg over friction_angle_deg",
        "",
        (
            advisory_above(
                0.25,
                "Hoek & Brown (1997), Int. J. Rock Mech. Min. Sci. 34, 1165-1186 [from memory]",
            ),
        ),
        ("dilation_deg", "friction_angle_deg"),
        ratio_of("dilation_deg", "friction_angle_deg"),
        applies=Condition("dilation_deg is above 0", lambda sections: sections["dilation_deg"] > 0),
    ),
    where_set(
        "estimates_differ",
        "sources of quality or strength give different values; the preferred one was taken",
        "find out why they differ: the spread stands in sections.csv",
        "two sources of gsi, intact_strength_mpa or mi differ",
        "estimates_differ",
        ASSUMPTION,
    ),
    Flag(
        "tests_below_confinement",
        "the triaxial tests did not reach the confinement that matters at this depth",
        "test at higher confinement, or take mi with care",
        "greatest minor stress tested over confinement_mpa",
        "",
        (
            advisory_below(
                1, "Hoek, Carranza-Torres & Corkum (2002), confinement relation for tunnels"
            ),
        ),
        ("tested_confinement_mpa", "confinement_mpa"),
        ratio_of("tested_confinement_mpa", "confinement_mpa"),
        applies=Condition(
            "mi comes from tests",
            lambda sections: np.isfinite(sections["tested_confinement_mpa"]),
        ),
    ),
)
