"""Invented ground and projects of any size."""

from __future__ import annotations

from pathlib import Path

import numpy as np

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.rock_mass.hoek_brown import hoek_brown_constants

RADIUS_M = 5.2
CLASS_COUNT = 5


def random_ground(count: int, seed: int = 7) -> dict[str, np.ndarray]:
    """Ground from massive to squeezing, by the names of the ground curve's arguments."""
    random = np.random.default_rng(seed)
    gsi = random.uniform(20, 85, count)
    constants = hoek_brown_constants(gsi, random.uniform(5, 30, count), np.zeros(count))
    return {
        "in_situ_stress_mpa": random.uniform(1, 15, count),
        "intact_strength_mpa": random.uniform(10, 150, count),
        "mb": constants.mb,
        "s": constants.s,
        "a": constants.a,
        "deformation_modulus_mpa": 10 ** random.uniform(2.5, 4.5, count),
        "poisson_ratio": random.uniform(0.2, 0.35, count),
        "dilation_deg": random.uniform(0, 12, count),
    }


def curve(ground: dict[str, np.ndarray]) -> HoekBrownCurve:
    """Ground reaction curves of random ground."""
    return HoekBrownCurve.of_ground(**ground)


def write_project(
    folder: Path, sections: int, classes: int = CLASS_COUNT, hardening: bool = False
) -> None:
    """A project of sections of 10 m; beyond 10,000 intervals each is cut into several."""
    folder.mkdir(parents=True)
    intervals = min(sections, 10_000)
    random = np.random.default_rng(11)
    length = 10.0
    header = (
        "from_m,to_m,ground_unit,cover_m,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,"
        "mi,gsi,disturbance,poisson_ratio,dilation_deg,modulus_ratio,block_width_m\n"
    )
    with (folder / "ground.csv").open("w", encoding="utf-8") as stream:
        stream.write(header)
        for number in range(intervals):
            stream.write(
                f"{number * length},{(number + 1) * length},unit {number % 8},"
                f"{random.uniform(40, 400):.1f},26,1,{random.uniform(10, 150):.1f},"
                f"{random.uniform(5, 30):.1f},{random.uniform(20, 85):.1f},0,0.27,"
                f"{random.integers(0, 10)},350,1.3\n"
            )
    cut = length * intervals / sections
    lines = [
        "title: Invented benchmark",
        f"opening: {{radius_m: {RADIUS_M}}}",
        f"ground: {{table: ground.csv, section_length_m: {cut}}}",
        "criteria: {factor_of_safety: 1.5, closure_pct: 1.5}",
        "schedule: {minimum_zone_m: 20, carry_m: 10}",
        "support_classes:",
    ]
    for number in range(classes):
        lines += _support_class(number, hardening)
    (folder / "project.yaml").write_text("\n".join(lines) + "\n", encoding="utf-8")


def _support_class(number: int, hardening: bool) -> list[str]:
    age = ", hardening: chang_stille_1993" if hardening else ""
    spacing = 1.8 - 0.15 * number
    return [
        f"  - name: C{number + 1}",
        f"    installed_at_m: {3 - 0.4 * number}",
        *(["    advance_m_per_day: 3"] if hardening else []),
        "    elements:",
        f"      - {{kind: rock_bolts, diameter_mm: 25, length_m: {4 + number}, "
        f"spacing_around_m: {spacing}, spacing_along_m: {spacing}, capacity_kn: 200, "
        "steel_modulus_gpa: 200, anchor_deformation_m_per_mn: 0.04, anchorage_length_m: 1, "
        "pattern_rules: em_1110_1_2907}",
        f"      - {{kind: shotcrete, thickness_mm: {80 + 60 * number}, strength_mpa: 30, "
        f"modulus_gpa: 10, poisson_ratio: 0.2{age}}}",
        "      - {kind: steel_sets, installed_at_m: 8, section_area_mm2: 4300, "
        "section_inertia_mm4: 14500000, section_depth_mm: 140, yield_strength_mpa: 355, "
        f"steel_modulus_gpa: 200, spacing_m: {1.5 - 0.1 * number}, contact: embedded}}",
    ]
