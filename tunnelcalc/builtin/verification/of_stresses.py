"""Stress in the ground, the water in it and the water on the lining: statics by hand."""

from __future__ import annotations

from collections.abc import Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import Sections, Standing, VerificationCheck
from tunnelcalc.builtin.class_checks import WaterOnLining
from tunnelcalc.pipeline.ground_stages import in_situ_stress_stage
from tunnelcalc.project import DRAINED, WATERTIGHT

WEIGHT = "weight of a column of ground: statics, by hand"
TERZAGHI = "Terzaghi (1943), Theoretical Soil Mechanics, effective stress: by hand"
LARGER = "the larger of sv and k0 sv: by hand"
WATER = "weight of a column of water, 9.81 kN/m3: statics, by hand"

COVER_M, RADIUS_M, WEIGHT_KN_M3, HEAD_M = 196.0, 4.0, 25.0, 100.0
"""Vertical stress 25 (196 + 4) / 1000 = 5 MPa, water 9.81 * 100 / 1000 = 0.981 MPa: 4.019 MPa
are left to the grains."""
CASE = "25 kN/m3, 196 m over the crown, R 4 m"
WET = f"{CASE}, head 100 m"


def _stressed(drainage: str, stress_ratio: float, head_m: float) -> Sections:
    """One section with its stresses, as a run computes them."""
    given = {
        "cover_m": COVER_M,
        "unit_weight_kn_m3": WEIGHT_KN_M3,
        "radius_m": RADIUS_M,
        "vertical_stress_mpa": np.nan,
        "stress_ratio": stress_ratio,
        "water_head_m": head_m,
    }
    sections = Sections({name: np.array([value]) for name, value in given.items()})
    return sections.with_columns(in_situ_stress_stage(drainage).compute(sections))


def _stress(column: str, drainage: str, stress_ratio: float, head_m: float) -> float:
    return float(_stressed(drainage, stress_ratio, head_m)[column][0])


def _on_lining(drainage: str) -> float:
    """What the check of the rings is asked to carry. [MPa]"""
    sections = _stressed(drainage, 1.0, HEAD_M)
    sections = sections.with_columns({"ring_capacity_mpa": np.array([2.0])})
    return float(WaterOnLining().evaluate(sections, ()).demand[0])


def _checks() -> Iterator[VerificationCheck]:
    total, mean, larger = "vertical_stress_mpa", "in_situ_stress_mpa", "larger_stress_mpa"
    vertical, horizontal = "effective_vertical_stress_mpa", "effective_horizontal_stress_mpa"
    rows: tuple[tuple[str, str, str, float, str, str, float, float], ...] = (
        ("vertical_stress", f"{CASE}: sv", WEIGHT, 5.0, total, "", 1.0, np.nan),
        (
            "effective_stress",
            f"{WET}: sv less water",
            TERZAGHI,
            4.019,
            vertical,
            DRAINED,
            0.5,
            HEAD_M,
        ),
        (
            "effective_stress",
            f"{WET}, k0 0.5: sh",
            TERZAGHI,
            2.0095,
            horizontal,
            DRAINED,
            0.5,
            HEAD_M,
        ),
        ("effective_stress", f"{WET}, k0 0.5: p0", TERZAGHI, 3.01425, mean, DRAINED, 0.5, HEAD_M),
        ("effective_stress", f"{WET}, drainage not stated: p0", WEIGHT, 5.0, mean, "", 1.0, HEAD_M),
        ("second_stress_case", f"{CASE}, k0 0.5: p0", LARGER, 5.0, larger, "", 0.5, np.nan),
        ("second_stress_case", f"{CASE}, k0 2: p0", LARGER, 10.0, larger, "", 2.0, np.nan),
        ("second_stress_case", f"{WET}, k0 2: p0", LARGER, 8.038, larger, WATERTIGHT, 2.0, HEAD_M),
    )
    for method, subject, source, expected, column, drainage, ratio, head in rows:
        computed = partial(_stress, column, drainage, ratio, head)
        yield VerificationCheck(
            method, subject, source, Standing.EXACT, "MPa", 1e-12, expected, computed
        )
    for subject, expected, drainage in (
        ("head 100 m, watertight: pressure on the rings", 0.981, WATERTIGHT),
        ("head 100 m, drained: pressure on the rings", 0.0, DRAINED),
    ):
        computed = partial(_on_lining, drainage)
        yield VerificationCheck(
            "water_on_lining", subject, WATER, Standing.EXACT, "MPa", 1e-12, expected, computed
        )


STRESS_CHECKS = tuple(_checks())
