"""Flags on water."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import PRACTICE, YES_OR_NO, Flag, Level
from tunnelcalc.builtin.flags.parts import (
    ASSUMPTION,
    advisory_above,
    column,
    outside_above,
    where_set,
)

INFLOW_CLASSES = "Bieniawski (1989), inflow classes of the rock mass rating [from memory]"

FLAGS = (
    Flag(
        "water_inflow",
        "water flows in: pressure on the lining, erosion and an unstable face are not computed",
        "probe ahead, drain or grout, and check lining and face under water",
        "inflow_l_min_10m",
        "L/min/10m",
        (advisory_above(25, INFLOW_CLASSES), outside_above(125, INFLOW_CLASSES)),
        ("inflow_l_min_10m",),
        column("inflow_l_min_10m"),
    ),
    Flag(
        "water_above_crown",
        "the water table stands above the crown",
        "check drainage, inflow and the pressure on the lining",
        "water head above the crown",
        "m",
        (advisory_above(0, PRACTICE),),
        ("water_head_m", "radius_m"),
        lambda sections: sections["water_head_m"] - sections["radius_m"],
    ),
    where_set(
        "seepage_forces",
        "the lining is drained under a water head: seepage forces load the ground and are left out",
        "compute the ground with its flow of water",
        "a water head is given and the lining is drained",
        "seepage_forces",
        PRACTICE,
        Level.OUTSIDE,
    ),
    Flag(
        "water_not_declared",
        "no water head is given: stresses and strength are total",
        "state water_head_m, 0 where the ground is dry",
        "water_head_m is absent",
        YES_OR_NO,
        (advisory_above(0, ASSUMPTION),),
        (),
        lambda sections: np.isnan(sections["water_head_m"]).astype(float),
        may_be_missing=("water_head_m",),
    ),
    where_set(
        "water_pressure_left_out",
        "a water head is given, but not the drainage of the lining: water pressure is left out",
        "state ground: drainage",
        "a water head is given without drainage",
        "water_left_out",
        ASSUMPTION,
    ),
)
