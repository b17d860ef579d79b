"""Every number of a run against a second way: one section at a time, integrated with scipy.

The ground is drawn anew from the stated ranges; no number here was looked at before. Nothing of
the second way is taken from the program.
"""

from __future__ import annotations

import csv
import math
from pathlib import Path
from typing import Any

import numpy as np
import pytest
import yaml
from end_to_end.projects import completed, rows
from reference import SectionResults, section_results

SEED = 20_260_117
INTERVALS = 40
TOLERANCE = 1e-8
"""Eight significant digits, as promised; ten are printed."""

BOLTS = {
    "kind": "rock_bolts",
    "diameter_mm": 25,
    "length_m": 5.0,
    "spacing_around_m": 1.4,
    "spacing_along_m": 1.2,
    "capacity_kn": 220,
    "steel_modulus_gpa": 205,
    "anchor_deformation_m_per_mn": 0.06,
    "anchorage_length_m": 1.2,
    "pattern_rules": "em_1110_1_2907",
}
RING = {
    "kind": "shotcrete",
    "thickness_mm": 90,
    "strength_mpa": 32,
    "modulus_gpa": 9,
    "poisson_ratio": 0.22,
}
SETS = {
    "kind": "steel_sets",
    "section_area_mm2": 5400,
    "section_inertia_mm4": 25_100_000,
    "section_depth_mm": 160,
    "yield_strength_mpa": 275,
    "steel_modulus_gpa": 210,
    "spacing_m": 1.1,
    "contact": "embedded",
}
BLOCKED = {
    "contact": "blocked",
    "block_spacing_deg": 24,
    "block_thickness_mm": 120,
    "block_width_mm": 180,
    "block_modulus_gpa": 9,
}
PROJECT: dict[str, Any] = {
    "title": "Invented ground, drawn at random",
    "opening": {"radius_m": 4.35},
    "ground": {"table": "ground.csv"},
    "support_classes": [
        {"name": "A", "installed_at_m": 5.0, "elements": [BOLTS]},
        {
            "name": "B",
            "installed_at_m": 2.5,
            "elements": [{**BOLTS, "installed_at_m": 4.0, "pattern_rules": "none"}, RING],
        },
        {
            "name": "C",
            "installed_at_m": 3.5,
            "elements": [
                {**RING, "thickness_mm": 350, "strength_mpa": 40},
                {**SETS, "installed_at_m": 6.0},
            ],
        },
        {"name": "D", "installed_at_m": 3.0, "elements": [{**SETS, **BLOCKED}]},
    ],
    "criteria": {"factor_of_safety": 1.4, "closure_pct": 1.2},
    "schedule": {"minimum_zone_m": 0, "carry_m": 0},
}


def drawn_ground() -> list[dict[str, str]]:
    """Intervals of 10 m; every optional column is left empty here and there."""
    random = np.random.default_rng(SEED)

    def some(low: float, high: float, share: float = 1.0) -> str:
        value = random.uniform(low, high)
        return f"{value:.4f}" if random.random() < share else ""

    table = []
    for number in range(INTERVALS):
        measured = random.random() < 0.3
        ratio = random.random() < 0.5
        table.append(
            {
                "from_m": f"{10 * number}",
                "to_m": f"{10 * number + 10}",
                "cover_m": "" if measured else some(30, 700),
                "unit_weight_kn_m3": "" if measured else some(21, 28),
                "vertical_stress_mpa": some(1, 15) if measured else "",
                "stress_ratio": some(0.5, 1.8, 0.8),
                "intact_strength_mpa": some(4, 90),
                "mi": some(4, 28),
                "gsi": some(14, 85),
                "disturbance": some(0, 0.6, 0.5) or "0",
                "poisson_ratio": some(0.12, 0.38),
                "dilation_deg": some(0, 9, 0.7),
                "modulus_ratio": some(180, 600, 0.7) if ratio else "",
                "intact_modulus_mpa": "" if ratio else some(1500, 30000, 0.7),
                "rock_mass_modulus_mpa": some(300, 9000, 0.15),
                "block_width_m": some(0.2, 1.5, 0.7),
            }
        )
    return table


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The run of the drawn ground by the command line."""
    project = tmp_path_factory.mktemp("drawn") / "project"
    project.mkdir()
    (project / "project.yaml").write_text(yaml.safe_dump(PROJECT, sort_keys=False))
    table = drawn_ground()
    with (project / "ground.csv").open("w", newline="") as stream:
        writer = csv.DictWriter(stream, table[0])
        writer.writeheader()
        writer.writerows(table)
    return completed(project)


@pytest.fixture(scope="module")
def expected() -> list[SectionResults]:
    """The same ground by the second way."""
    return [section_results(row, PROJECT) for row in drawn_ground()]


def assert_same(found: dict[str, str], wanted: dict[str, float | str], place: str) -> None:
    for name, value in wanted.items():
        if name not in found:
            assert name == "needed_pressure_mpa"
            continue
        cell = found[name]
        if isinstance(value, str):
            assert cell == value, f"{name} at {place}"
        elif math.isnan(value):
            assert cell == "", f"{name} at {place}"
        else:
            assert float(cell) == pytest.approx(value, rel=TOLERANCE, abs=0), f"{name} at {place}"


def test_sections_agree(folder: Path, expected: list[SectionResults]):
    table = rows(folder / "sections.csv")
    for row, wanted in zip(table, expected, strict=True):
        assert_same(row, wanted.section, row["chainage_m"])


def test_classes_agree(folder: Path, expected: list[SectionResults]):
    table = rows(folder / "classes.csv")
    wanted = [line for section in expected for line in section.classes]
    for row, line in zip(table, wanted, strict=True):
        assert_same(row, line, f"{row['chainage_m']}, class {row['support_class']}")


def test_checks_agree(folder: Path, expected: list[SectionResults]):
    table = rows(folder / "checks.csv")
    wanted = [line for section in expected for line in section.checks]
    for row, line in zip(table, wanted, strict=True):
        assert_same(row, line, f"{row['chainage_m']}, class {row['support_class']}")


def test_pressures_needed_agree(folder: Path, expected: list[SectionResults]):
    """Without zoning rules a zone is of one need: the largest of its sections."""
    needs = {
        row["chainage_m"]: wanted.section["needed_pressure_mpa"]
        for row, wanted in zip(rows(folder / "sections.csv"), expected, strict=True)
    }
    zones = [row for row in rows(folder / "schedule.csv") if row["needed_pressure_mpa"]]
    assert zones
    for zone in zones:
        start, end = float(zone["from_m"]), float(zone["to_m"])
        largest = max(need for at, need in needs.items() if start < float(at) < end)
        assert float(zone["needed_pressure_mpa"]) == pytest.approx(largest, rel=TOLERANCE)


def test_the_drawn_ground_asks_for_everything(expected: list[SectionResults]):
    """Elastic and squeezing ground, each class and none, every outcome of every check."""
    sections = [one.section for one in expected]
    assert {one["required_class"] for one in sections} >= {"A", "B", "C", "none_adequate"}
    ratios = [float(one["plastic_radius_m"]) / 4.35 for one in sections]
    assert min(ratios) == 1
    assert max(ratios) > 5
    outcomes = {(line["check"], line["outcome"]) for one in expected for line in one.checks}
    for check in ("tension", "hoop_stress", "yield", "length_beyond_plastic_zone"):
        assert {(check, "pass"), (check, "fail")} <= outcomes
    assert ("pattern_length_by_block", "not_evaluated") in outcomes
