"""Stages from ground properties to the ground's reaction without support."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.dispatch import Chosen, curves
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.method_contract import (
    STRENGTH_COLUMNS,
    GroundReactionMethod,
    ModulusMethod,
    StrengthMethod,
)
from tunnelcalc.project import DRAINED, WATERTIGHT
from tunnelcalc.rock_mass.in_situ_stress import mean_stress_mpa, vertical_stress_mpa
from tunnelcalc.rock_mass.water import effective_stresses_mpa, water_pressure_mpa
from tunnelcalc.sections import Sections

MM_PER_M = 1000.0
NEARLY_EQUAL_STRESS = (0.8, 1.25)
"""Stress ratios between which the mean stress stands for both. Common practice, no source."""


def in_situ_stress_stage(drainage: str) -> Stage:
    """A measured vertical stress overrides the weight of the cover; water is taken off where
    the drainage of the lining is stated."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        of_cover = vertical_stress_mpa(
            sections["cover_m"], sections["unit_weight_kn_m3"], sections["radius_m"]
        )
        measured, ratio = sections["vertical_stress_mpa"], sections["stress_ratio"]
        total = np.where(np.isnan(measured), of_cover, measured)
        head = sections["water_head_m"]
        wet = head > 0
        water = np.where(wet & (drainage != ""), water_pressure_mpa(head), 0.0)
        effective = effective_stresses_mpa(total, ratio, water)
        vertical, horizontal = effective.vertical_mpa, effective.horizontal_mpa
        least, most = NEARLY_EQUAL_STRESS
        unequal = (ratio < least) | (ratio > most)
        return {
            "vertical_stress_mpa": total,
            "water_pressure_mpa": water,
            "lining_water_mpa": np.where(drainage == WATERTIGHT, water, 0.0),
            "effective_vertical_stress_mpa": vertical,
            "effective_horizontal_stress_mpa": horizontal,
            "in_situ_stress_mpa": mean_stress_mpa(vertical, ratio),
            "larger_stress_mpa": np.where(unequal, np.maximum(vertical, horizontal), np.nan),
            "seepage_forces": wet & (drainage == DRAINED),
            "water_left_out": wet & (drainage == ""),
        }

    return Stage(
        "in_situ_stress",
        "vertical stress from the cover unless measured, less water pressure where drainage is "
        "stated; mean stress in the plane of the section, and the larger one where they are far "
        "from equal",
        (
            "cover_m",
            "unit_weight_kn_m3",
            "radius_m",
            "vertical_stress_mpa",
            "stress_ratio",
            "water_head_m",
        ),
        (
            "vertical_stress_mpa",
            "water_pressure_mpa",
            "lining_water_mpa",
            "effective_vertical_stress_mpa",
            "effective_horizontal_stress_mpa",
            "in_situ_stress_mpa",
            "larger_stress_mpa",
            "seepage_forces",
            "water_left_out",
        ),
        compute,
    )


def mass_disturbance_stage(reaction: Chosen[GroundReactionMethod]) -> Stage:
    """Disturbance weakens the whole mass, unless it is confined to a ring that the law of the
    ground knows."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        disturbance = np.array(sections["disturbance"])
        for method, positions in reaction.positions(sections):
            if knows_ring(method):
                confined = ~np.isnan(sections["disturbed_thickness_m"][positions])
                disturbance[positions[confined]] = 0.0
        return {"mass_disturbance": disturbance}

    return Stage(
        "mass_disturbance",
        "disturbance of the mass: 0 where it is confined to a ring around the opening",
        ("disturbance", "disturbed_thickness_m", *reaction.which),
        ("mass_disturbance",),
        compute,
    )


def knows_ring(method: GroundReactionMethod) -> bool:
    """Whether a law of the ground computes a disturbed ring."""
    return "ring_mb" in method.needs


def strength_stage(chosen: Chosen[StrengthMethod]) -> Stage:
    """Strength of the rock mass, each section by its own method."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        return strengths(chosen, sections)

    return Stage("strength", chosen.names, chosen.needs, STRENGTH_COLUMNS, compute)


def strengths(chosen: Chosen[StrengthMethod], sections: Sections) -> dict[str, Array]:
    """Every column of the strength; NaN where a section's method does not give it."""
    columns = {name: np.full(sections.count, np.nan) for name in STRENGTH_COLUMNS}
    for method, positions, part in chosen.parts(sections):
        given = method.compute(part)
        for name in method.gives:
            columns[name][positions] = given[name]
    return columns


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


def deformation_modulus_stage(chosen: Chosen[ModulusMethod]) -> Stage:
    """A measured modulus wins; an estimate above the intact modulus is capped and marked."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        intact, measured = sections["intact_modulus_mpa"], sections["rock_mass_modulus_mpa"]
        estimate = estimated_modulus_mpa(chosen, sections)
        unmeasured = np.isnan(measured)
        capped = unmeasured & (estimate > intact)
        modulus = np.where(unmeasured, np.where(capped, intact, estimate), measured)
        return {
            "deformation_modulus_mpa": modulus,
            "modulus_capped": capped,
            "modulus_above_intact": measured > intact,
            "modulus_relations_mixed": unmeasured & (len(chosen.methods) > 1),
        }

    return Stage(
        "deformation_modulus",
        f"measured, else {chosen.names}",
        tuple(dict.fromkeys((*chosen.needs, "intact_modulus_mpa", "rock_mass_modulus_mpa"))),
        (
            "deformation_modulus_mpa",
            "modulus_capped",
            "modulus_above_intact",
            "modulus_relations_mixed",
        ),
        compute,
    )


def estimated_modulus_mpa(chosen: Chosen[ModulusMethod], sections: Sections) -> Array:
    """(n,) modulus by each section's own method. [MPa]"""
    estimate = np.full(sections.count, np.nan)
    for method, positions, part in chosen.parts(sections):
        estimate[positions] = method.modulus_mpa(part)
    return estimate


def ground_reaction_stage(chosen: Chosen[GroundReactionMethod]) -> Stage:
    """The opening without support, far from the face."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        finite = np.zeros(sections.count, dtype=bool)
        for method, positions in chosen.positions(sections):
            finite[positions] = method.finite_strain
        return {**unsupported(chosen, sections), "finite_strain": finite}

    return Stage(
        "ground_reaction",
        f"unsupported opening by {chosen.names}",
        tuple(dict.fromkeys((*chosen.needs, "radius_m"))),
        ("critical_pressure_mpa", "plastic_radius_m", "closure_mm", "closure_pct", "finite_strain"),
        compute,
    )


def unsupported(chosen: Chosen[GroundReactionMethod], sections: Sections) -> dict[str, Array]:
    """Critical pressure, plastic radius and closure without support."""
    radius = sections["radius_m"]
    curve = curves(chosen, sections)
    free = curve.at(np.zeros(sections.count))
    return {
        "critical_pressure_mpa": curve.critical_pressure_mpa,
        "plastic_radius_m": free.plastic_ratio * radius,
        "closure_mm": free.closure_ratio * radius * MM_PER_M,
        "closure_pct": free.closure_ratio * 100,
    }
