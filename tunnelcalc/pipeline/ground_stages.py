"""Stages from ground properties to the ground's reaction without support."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.contract import GroundReactionMethod, ModulusMethod, StrengthMethod
from tunnelcalc.rock_mass.in_situ_stress import mean_stress_mpa, vertical_stress_mpa
from tunnelcalc.sections import Sections

MM_PER_M = 1000.0


def in_situ_stress_stage() -> Stage:
    """A measured vertical stress overrides the weight of the cover."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        of_cover = vertical_stress_mpa(
            sections["cover_m"], sections["unit_weight_kn_m3"], sections["radius_m"]
        )
        measured = sections["vertical_stress_mpa"]
        vertical = np.where(np.isnan(measured), of_cover, measured)
        mean = mean_stress_mpa(vertical, sections["stress_ratio"])
        return {"vertical_stress_mpa": vertical, "in_situ_stress_mpa": mean}

    return Stage(
        "in_situ_stress",
        "vertical stress from the cover unless measured; mean stress in the plane of the section",
        ("cover_m", "unit_weight_kn_m3", "radius_m", "vertical_stress_mpa", "stress_ratio"),
        ("vertical_stress_mpa", "in_situ_stress_mpa"),
        compute,
    )


def strength_stage(method: StrengthMethod) -> Stage:
    """Strength of the rock mass by the project's method."""
    return Stage(
        "strength",
        f"{method.name}: {method.source}",
        method.needs,
        method.gives,
        method.compute,
    )


def intact_modulus_stage() -> Stage:
    """Intact modulus as given, or modulus ratio times intact strength; NaN where unknown."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        given = sections["intact_modulus_mpa"]
        by_ratio = sections["modulus_ratio"] * sections["intact_strength_mpa"]
        return {"intact_modulus_mpa": np.where(np.isnan(given), by_ratio, given)}

    return Stage(
        "intact_modulus",
        "modulus of the intact rock as given, else modulus ratio times intact strength",
        ("intact_modulus_mpa", "modulus_ratio", "intact_strength_mpa"),
        ("intact_modulus_mpa",),
        compute,
    )


def deformation_modulus_stage(method: ModulusMethod) -> Stage:
    """A measured modulus wins; an estimate above the intact modulus is capped and marked."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        intact, measured = sections["intact_modulus_mpa"], sections["rock_mass_modulus_mpa"]
        estimate = method.modulus_mpa(sections)
        unmeasured = np.isnan(measured)
        capped = unmeasured & (estimate > intact)
        modulus = np.where(unmeasured, np.where(capped, intact, estimate), measured)
        return {
            "deformation_modulus_mpa": modulus,
            "modulus_capped": capped,
            "modulus_above_intact": measured > intact,
        }

    return Stage(
        "deformation_modulus",
        f"measured, else {method.name}: {method.source}",
        tuple(dict.fromkeys((*method.needs, "intact_modulus_mpa", "rock_mass_modulus_mpa"))),
        ("deformation_modulus_mpa", "modulus_capped", "modulus_above_intact"),
        compute,
    )


def ground_reaction_stage(method: GroundReactionMethod) -> Stage:
    """The opening without support, far from the face."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        radius = sections["radius_m"]
        curve = method.curve(sections)
        free = curve.at(np.zeros(sections.count))
        return {
            "critical_pressure_mpa": curve.critical_pressure_mpa,
            "plastic_radius_m": free.plastic_ratio * radius,
            "closure_mm": free.closure_ratio * radius * MM_PER_M,
            "closure_pct": free.closure_ratio * 100,
        }

    return Stage(
        "ground_reaction",
        f"unsupported opening by {method.name}: {method.source}",
        tuple(dict.fromkeys((*method.needs, "radius_m"))),
        ("critical_pressure_mpa", "plastic_radius_m", "closure_mm", "closure_pct"),
        compute,
    )
