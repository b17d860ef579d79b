"""Measures of hazards that convergence-confinement does not compute: what the flags look at."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.rock_mass.brittle_failure import spalling_depth_m
from tunnelcalc.rock_mass.squeezing import (
    face_strain_pct,
    squeezing_strain_pct,
    squeezing_strength_mpa,
)
from tunnelcalc.sections import Sections


def hazard_stage() -> Stage:
    """Squeezing, strain of the face, depth of spalling."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        sci, p0 = sections["intact_strength_mpa"], sections["in_situ_stress_mpa"]
        vertical = sections["effective_vertical_stress_mpa"]
        horizontal = sections["effective_horizontal_stress_mpa"]
        strength = squeezing_strength_mpa(sci, sections["mi"], sections["gsi"])
        wall = 3 * np.maximum(vertical, horizontal) - np.minimum(vertical, horizontal)
        larger = sections["larger_stress_mpa"]
        return {
            "larger_squeezing_strain_pct": squeezing_strain_pct(strength, larger),
            "larger_face_strain_pct": face_strain_pct(strength, larger, np.zeros_like(p0)),
            "squeezing_strength_mpa": strength,
            "squeezing_strain_pct": squeezing_strain_pct(strength, p0),
            "face_strain_pct": face_strain_pct(strength, p0, np.zeros_like(p0)),
            "spalling_depth_m": spalling_depth_m(wall, sci, sections["radius_m"]),
        }

    return Stage(
        "hazards",
        "squeezing and strain of the face by Hoek & Marinos (2000), depth of spalling by Martin, "
        "Kaiser & McCreath (1999)",
        (
            "intact_strength_mpa",
            "mi",
            "gsi",
            "radius_m",
            "in_situ_stress_mpa",
            "larger_stress_mpa",
            "effective_vertical_stress_mpa",
            "effective_horizontal_stress_mpa",
        ),
        (
            "squeezing_strength_mpa",
            "squeezing_strain_pct",
            "face_strain_pct",
            "spalling_depth_m",
            "larger_squeezing_strain_pct",
            "larger_face_strain_pct",
        ),
        compute,
    )
