"""Flags on ground that moves far: squeezing, the face, limits of the solutions."""

from __future__ import annotations

import numpy as np

from tunnelcalc.api import PRACTICE, Array, Condition, Flag, Sections
from tunnelcalc.builtin.flags.parts import (
    advisory_above,
    column,
    outside_above,
    over,
    ratio_of,
)
from tunnelcalc.rock_mass.squeezing import face_strain_pct

SQUEEZING = "Hoek & Marinos (2000), Tunnels & Tunnelling Int. 32, 11-12 [from memory]"
FACE_STRENGTH_RATIOS = (0.28, 0.14)
"""Strength over in-situ stress at which a face needs a check, and at which support of the wall
alone does not decide."""


def face_limits_pct() -> tuple[float, float]:
    """Strain of the face without support at both ratios. [%]"""
    ratios = np.array(FACE_STRENGTH_RATIOS)
    need, beyond = face_strain_pct(ratios, np.ones(2), np.zeros(2)).tolist()
    return need, beyond


FACE_CHECK_PCT, FACE_OUTSIDE_PCT = face_limits_pct()


def _plastic_ratio_over_limit(sections: Sections) -> Array:
    ratio = over(sections["plastic_radius_m"], sections["radius_m"])
    return over(ratio, sections["profile_plastic_limit"])


FLAGS = (
    Flag(
        "squeezing",
        "the ground squeezes: closure grows with time, and stiff support breaks",
        "allow for closure with ductile elements; check the face; follow closure over time",
        "closure without support by the squeezing relation",
        "%",
        (advisory_above(1, SQUEEZING), outside_above(5, SQUEEZING)),
        ("squeezing_strain_pct",),
        column("squeezing_strain_pct"),
    ),
    Flag(
        "critical_strain",
        "the unsupported closure is beyond the strain that such ground is taken to bear",
        "state the critical strain of this ground; follow closure by monitoring",
        "closure without support",
        "%",
        (advisory_above(1, PRACTICE),),
        ("closure_pct",),
        column("closure_pct"),
    ),
    Flag(
        "face_stability",
        "the face moves so much that it may need support of its own",
        "check the face; reinforce it, or drive smaller faces",
        "strain of the face without support",
        "%",
        (advisory_above(FACE_CHECK_PCT, SQUEEZING), outside_above(FACE_OUTSIDE_PCT, SQUEEZING)),
        ("face_strain_pct",),
        column("face_strain_pct"),
    ),
    Flag(
        "large_closure",
        "the unsupported closure is so large that small-strain theory overstates it",
        "treat the closure as an upper bound; consider a finite-strain analysis",
        "closure without support",
        "%",
        (
            advisory_above(
                10,
                "Vrakas & Anagnostou (2014), Int. J. Numer. Anal. Methods Geomech. 38, 1131-1148",
            ),
        ),
        ("closure_pct", "finite_strain"),
        column("closure_pct"),
        applies=Condition(
            "the law of the ground is one of small strain",
            lambda sections: ~sections["finite_strain"].astype(bool),
        ),
    ),
    Flag(
        "beyond_small_strain",
        "the unsupported closure is larger than the radius: it has no meaning as a movement",
        "read it as ground that does not stand without support",
        "closure without support",
        "%",
        (advisory_above(100, PRACTICE),),
        ("closure_pct",),
        column("closure_pct"),
    ),
    Flag(
        "deep_plastic_zone",
        "the plastic zone is deeper than the solution was proved for",
        "read it as ground that does not stand without support",
        "plastic_radius_m over radius_m",
        "",
        (advisory_above(20, PRACTICE),),
        ("plastic_radius_m", "radius_m"),
        ratio_of("plastic_radius_m", "radius_m"),
    ),
    Flag(
        "elastic_profile",
        "the closure profile of the project does not hold in ground that is this plastic",
        "choose a closure profile that follows the plastic radius",
        "plastic_radius_m over radius_m, over the limit of the closure profile",
        "",
        (advisory_above(1, PRACTICE),),
        ("plastic_radius_m", "radius_m", "profile_plastic_limit"),
        _plastic_ratio_over_limit,
    ),
)
