"""Flags on in-situ stress and on brittle failure under it."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import PRACTICE, Array, Condition, Flag, Sections
from tunnelcalc.builtin.flags.parts import (
    ASSUMPTION,
    advisory_above,
    advisory_below,
    column,
    outside_above,
    outside_below,
    over,
    where_set,
)

MASSIVE_GSI = 55
BRITTLE_MI = 8
BRITTLE_NEEDS = (
    "effective_vertical_stress_mpa",
    "effective_horizontal_stress_mpa",
    "intact_strength_mpa",
)


def _principal_mpa(sections: Sections) -> tuple[Array, Array]:
    """Major and minor in-plane stress."""
    vertical = sections["effective_vertical_stress_mpa"]
    horizontal = sections["effective_horizontal_stress_mpa"]
    return np.maximum(vertical, horizontal), np.minimum(vertical, horizontal)


def _wall_stress_over_strength(sections: Sections) -> Array:
    major, minor = _principal_mpa(sections)
    return over(3 * major - minor, sections["intact_strength_mpa"])


def _strength_over_stress(sections: Sections) -> Array:
    return over(sections["intact_strength_mpa"], _principal_mpa(sections)[0])


def _is_massive(sections: Sections) -> Array:
    return sections["gsi"] > MASSIVE_GSI


def _is_brittle(sections: Sections) -> Array:
    return _is_massive(sections) & (sections["mi"] > BRITTLE_MI)


FLAGS = (
    Flag(
        "stress_ratio",
        "the in-plane stresses are unequal: the mean stands for both and understates the stress at "
        "the wall",
        "take the class that also passes under the larger stress, and check the lining for bending",
        "stress_ratio",
        "",
        (
            advisory_below(0.8, PRACTICE),
            outside_below(0.5, PRACTICE),
            advisory_above(1.25, PRACTICE),
            outside_above(2, PRACTICE),
        ),
        ("stress_ratio",),
        column("stress_ratio"),
    ),
    where_set(
        "stress_ratio_assumed",
        "no stress ratio is given: 1 was taken",
        "state stress_ratio",
        "stress_ratio is absent",
        "stress_ratio_assumed",
        ASSUMPTION,
    ),
    Flag(
        "spalling",
        "the stress at the wall is high for the intact strength: massive rock may spall, which "
        "this strength criterion does not describe",
        "judge brittle failure separately; retain loose rock instead of relying on a ring",
        "(3 s1 - s3) over intact_strength_mpa, in-plane and effective",
        "",
        (
            advisory_above(0.35, PRACTICE),
            outside_above(0.4, "Martin, Kaiser & McCreath (1999), Can. Geotech. J. 36, 136-151"),
        ),
        (*BRITTLE_NEEDS, "gsi"),
        _wall_stress_over_strength,
        outside_applies=Condition(f"gsi is above {MASSIVE_GSI}", _is_massive),
    ),
    Flag(
        "rock_burst",
        "brittle rock under high stress may fail violently",
        "design support that absorbs energy; no check of a ring says anything here",
        "intact_strength_mpa over s1, in-plane and effective",
        "",
        (outside_below(5, "Grimstad & Barton (1993), stress table of the Q system [from memory]"),),
        (*BRITTLE_NEEDS, "gsi", "mi"),
        _strength_over_stress,
        applies=Condition(
            f"gsi is above {MASSIVE_GSI} and mi is above {BRITTLE_MI}",
            _is_brittle,
        ),
    ),
)
