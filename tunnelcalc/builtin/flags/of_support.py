"""Flags on support and schedule."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import PRACTICE, Array, Condition, Flag, Sections
from tunnelcalc.builtin.flags.parts import ASSUMPTION, advisory_below, where_set

FACTORS = "class_factor_of_safety"


def _least_factor(sections: Sections) -> Array:
    """Of all classes; infinity where none has a factor, since nothing is loaded there."""
    factors = sections[FACTORS]
    return np.min(np.where(np.isnan(factors), np.inf, factors), axis=1, initial=np.inf)


FLAGS = (
    where_set(
        "rule_not_applied",
        "a zoning rule had no adequate class to give: the section keeps its class",
        "decide the zone by hand, or add a class that is adequate there",
        "no adequate class as heavy as the rule asks for",
        "rule_not_applied",
        ASSUMPTION,
    ),
    where_set(
        "dead_weight_not_required",
        "the weight of the plastic zone over the crown does not count against any class",
        "state criteria: crown_dead_weight: yes, or no",
        "criteria: crown_dead_weight is absent",
        "dead_weight_not_required",
        ASSUMPTION,
    ),
    Flag(
        "element_below_one",
        "an element of some class is beyond its limit: other factors of that class say nothing",
        "read no single factor of such a class; see checks.csv",
        "least factor of safety of all classes",
        "",
        (advisory_below(1, PRACTICE),),
        (),
        _least_factor,
        may_be_missing=(FACTORS,),
        applies=Condition(
            "an element is loaded", lambda sections: np.isfinite(_least_factor(sections))
        ),
    ),
    where_set(
        "anchorage_in_plastic_zone",
        "in some class the anchorage of a bolt lies in the plastic zone and is not credited",
        "lengthen the bolts of that class, or read it without them",
        "the check length_beyond_plastic_zone fails in some class",
        "fails_length_beyond_plastic_zone",
        PRACTICE,
    ),
)
