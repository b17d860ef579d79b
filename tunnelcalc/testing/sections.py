"""Sections that have every column which a kind or a check may ask for, with plausible rock."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import GROUND, Sort

RADII_M = np.array([2.0, 3.5, 5.2, 8.0])
SMALLEST_RADIUS_M = float(RADII_M.min())
P0_MPA = 5.0

ROCK: Mapping[str, float] = {
    # Invented: fair rock under 200 m.
    "cover_m": 200.0,
    "unit_weight_kn_m3": 25.0,
    "vertical_stress_mpa": P0_MPA,
    "stress_ratio": 0.8,
    "intact_strength_mpa": 50.0,
    "mi": 10.0,
    "gsi": 45.0,
    "disturbance": 0.0,
    "poisson_ratio": 0.25,
    "dilation_deg": 0.0,
    "mb": 1.4,
    "s": 0.002,
    "a": 0.508,
    "friction_angle_deg": 40.0,
    "cohesion_mpa": 0.5,
    "residual_mb": 0.7,
    "residual_s": 0.0005,
    "residual_a": 0.52,
    "residual_friction_angle_deg": 33.0,
    "residual_cohesion_mpa": 0.2,
    "residual_gsi": 30.0,
    "rock_mass_modulus_mpa": 3000.0,
    "rmr89": 50.0,
    "q": 1.0,
}
COMPUTED: Mapping[str, float] = {
    "deformation_modulus_mpa": 3000.0,
    "rock_mass_strength_mpa": 2.2,
    "tensile_strength_mpa": 0.07,
    "global_strength_mpa": 6.0,
    "confinement_mpa": 2.5,
    "water_pressure_mpa": 0.0,
    "lining_water_mpa": 0.0,
    "effective_vertical_stress_mpa": P0_MPA,
    "effective_horizontal_stress_mpa": 0.8 * P0_MPA,
    "in_situ_stress_mpa": 0.9 * P0_MPA,
    "mass_disturbance": 0.0,
    "critical_pressure_mpa": 1.0,
    "closure_mm": 40.0,
}


def sections_of_ground() -> Sections:
    """One section a radius, with all that stands in the sections when an element reacts."""
    count = RADII_M.size
    columns: dict[str, Array] = {
        "chainage_m": np.arange(count, dtype=float),
        "radius_m": RADII_M,
        "span_m": 2 * RADII_M,
        "plastic_radius_m": 1.4 * RADII_M,
        "closure_pct": 4.0 / RADII_M,
        "ground_unit": np.full(count, "rock", dtype=object),
    }
    for name, quantity in GROUND.items():
        if quantity.sort is Sort.NUMBER:
            columns[name] = np.full(count, ROCK.get(name, 1.0))
    columns |= {name: np.full(count, value) for name, value in COMPUTED.items()}
    return Sections(columns)


def sections_at_rest(
    pressure_mpa: float | Array, capacity_mpa: float | Array, moved_mm: float | Array
) -> Sections:
    """The same with what checks find besides: an element, alone in its class, under a pressure.

    Its worst state along the advance is that at rest, and its final capacity its capacity then.
    """
    ground = sections_of_ground()
    pressure, capacity, moved = (
        np.broadcast_to(np.asarray(value, dtype=float), RADII_M.shape).copy()
        for value in (pressure_mpa, capacity_mpa, moved_mm)
    )
    return ground.with_columns(
        {
            "support_pressure_mpa": pressure,
            "supported_closure_mm": 10.0 + moved,
            "supported_plastic_radius_m": 1.1 * RADII_M,
            "element_pressure_mpa": pressure,
            "element_capacity_mpa": capacity,
            "element_moved_mm": moved,
            "worst_pressure_mpa": pressure,
            "worst_capacity_mpa": capacity,
            "worst_age_days": np.full(RADII_M.shape, 28.0),
            "worst_distance_m": 4 * RADII_M,
            "early_pressure_mpa": np.zeros(RADII_M.shape),
            "ring_capacity_mpa": capacity,
            "class_capacity_mpa": capacity,
        }
    )


def bytes_of(sections: Sections) -> dict[str, bytes]:
    """The content of every column, to be compared later."""
    return {name: column.tobytes() for name, column in sections.items()}
