"""Columns on the limits of a support system, by hand on one section of elastic ground.

Ground and classes are invented. The ground is so strong that it stays elastic, so that every
number follows in a few lines: the wall moves R (1 + nu) / E (p0 - p), as Lame has it; by
Vlachopoulos & Diederichs, Rock Mech. Rock Eng. 42 (2009) 131-146, the share
1 - (1 - exp(-0.15) / 3) exp(-1.5 x / R) of it has come x behind the face.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest
from end_to_end.projects import completed, rows

RADIUS_M, FREE_MM, STRESS_MPA = 3.0, 15.0, 4.0
"""3 m (1 + 0.25) / 1000 MPa x 4 MPa = 15 mm."""

GROUND = (
    "from_m,to_m,cover_m,unit_weight_kn_m3,vertical_stress_mpa,stress_ratio,intact_strength_mpa,"
    "mi,gsi,disturbance,poisson_ratio,dilation_deg,rock_mass_modulus_mpa\n"
    "0,10,160,25,4,1,200,12,90,0,0.25,0,1000\n"
)
RING = """\
      - kind: shotcrete
        installed_at_m: 1
        thickness_mm: 200
        strength_mpa: {strength}
        modulus_gpa: 10
        poisson_ratio: 0.2
"""
RING_STIFFNESS = 1e4 * (9 - 7.84) / (1.2 * 3 * (0.6 * 9 + 7.84))
"""Lame's cylinder from 2.8 to 3 m in plane strain. [MPa/m]"""
BOLTS = """\
      - kind: rock_bolts
        installed_at_m: 3
        diameter_mm: 25
        length_m: 3.5
        spacing_around_m: 1.5
        spacing_along_m: 1.5
        capacity_kn: 150
        steel_modulus_gpa: 200
        anchor_deformation_m_per_mn: 0.05
        anchorage_length_m: 1.0
        pattern_rules: none
"""
BOLTS_STIFFNESS = 1 / (1.5 * 1.5 * (4 * 3.5 / (math.pi * 0.025**2 * 2e5) + 0.05))
"""Hoek & Brown, Underground Excavations in Rock (1980). [MPa/m]"""
BOLTS_CAPACITY = 0.150 / 2.25


def ring_capacity(strength: float) -> float:
    return strength / 2 * (1 - 7.84 / 9)


def closure_at(distance_m: float) -> float:
    """[mm]"""
    at_face = math.exp(-0.15) / 3
    return FREE_MM * (1 - (1 - at_face) * math.exp(-1.5 * distance_m / RADIUS_M))


def only_row(folder: Path, elements: str, closure_pct: float) -> dict[str, str]:
    folder.mkdir()
    (folder / "ground.csv").write_text(GROUND, encoding="utf-8")
    (folder / "project.yaml").write_text(
        "title: Invented adit\nopening: {radius_m: 3}\nground: {table: ground.csv}\n"
        f"support_classes:\n  - name: only\n    elements:\n{elements}"
        f"criteria: {{factor_of_safety: 1.5, closure_pct: {closure_pct}}}\n"
        "schedule: {minimum_zone_m: 0, carry_m: 0}\n",
        encoding="utf-8",
    )
    (row,) = rows(completed(folder) / "classes.csv")
    assert float(row["supported_plastic_radius_m"]) == RADIUS_M
    return row


def told(row: dict[str, str], *names: str) -> list[float]:
    return [float(row[name]) for name in names]


FIRST = ("first_failure_closure_mm", "first_failure_pressure_mpa")
FULL = ("full_mobilisation_closure_mm", "full_mobilisation_pressure_mpa")


def test_of_one_spring_both_limits_are_its_capacity(tmp_path):
    row = only_row(tmp_path / "project", BOLTS, 1.0)
    closure = closure_at(3) + 1e3 * BOLTS_CAPACITY / BOLTS_STIFFNESS
    expected = [closure, BOLTS_CAPACITY]
    assert told(row, *FIRST) == pytest.approx(expected, rel=1e-8)
    assert told(row, *FULL) == pytest.approx(expected, rel=1e-8)


def test_of_two_springs_the_ring_is_first_and_the_bolts_carry_what_they_then_do(tmp_path):
    row = only_row(tmp_path / "project", RING.format(strength=25) + BOLTS, 1.0)
    closure = closure_at(1) + 1e3 * ring_capacity(25) / RING_STIFFNESS
    assert closure_at(3) < closure < closure_at(3) + 1e3 * BOLTS_CAPACITY / BOLTS_STIFFNESS
    bolts = BOLTS_STIFFNESS * (closure - closure_at(3)) / 1e3
    expected = [closure, ring_capacity(25) + bolts]
    assert told(row, *FIRST) == pytest.approx(expected, rel=1e-8)
    # What springs do beyond their capacity is not declared: nothing is counted after the first.
    assert told(row, *FULL) == pytest.approx(expected, rel=1e-8)


def test_an_element_not_yet_installed_carries_nothing_when_the_first_fails(tmp_path):
    """The weak ring is at its limit before the bolts are there."""
    row = only_row(tmp_path / "project", RING.format(strength=5) + BOLTS, 1.0)
    closure = closure_at(1) + 1e3 * ring_capacity(5) / RING_STIFFNESS
    assert closure < closure_at(3)
    assert told(row, *FIRST) == pytest.approx([closure, ring_capacity(5)], rel=1e-8)


@pytest.mark.parametrize(
    ("closure_pct", "strength", "given"),
    [
        # 9 mm: the ring has moved half a millimetre, the bolts are not there yet.
        pytest.param(0.3, 25, RING_STIFFNESS * (9 - closure_at(1)) / 1e3, id="by-stiffness"),
        # 13.5 mm: of the weak ring, its capacity over 1.5 counts; the bolts help by stiffness.
        pytest.param(
            0.45,
            5,
            ring_capacity(5) / 1.5 + BOLTS_STIFFNESS * (13.5 - closure_at(3)) / 1e3,
            id="by-capacity-over-the-factor",
        ),
        # 6 mm: the wall is past the limit before anything is installed.
        pytest.param(0.2, 25, 0.0, id="limit-before-installation"),
    ],
)
def test_missing_pressure_is_what_the_limit_needs_less_what_is_given_there(
    tmp_path, closure_pct, strength, given
):
    row = only_row(tmp_path / "project", RING.format(strength=strength) + BOLTS, closure_pct)
    needed = STRESS_MPA * (1 - closure_pct / 100 * RADIUS_M * 1e3 / FREE_MM)
    assert 0 <= given < needed
    assert told(row, "missing_pressure_mpa") == pytest.approx([needed - given], rel=1e-7)


def test_no_pressure_is_missing_where_the_class_gives_more_than_the_limit_needs(tmp_path):
    """13.5 mm need 0.4 MPa; the ring alone gives its 1.61 MPa over 1.5."""
    row = only_row(tmp_path / "project", RING.format(strength=25) + BOLTS, 0.45)
    assert row["missing_pressure_mpa"] == "0"


def test_no_pressure_is_missing_where_the_ground_alone_stays_within_the_limit(tmp_path):
    """15 mm are half of 1 %."""
    assert only_row(tmp_path / "project", BOLTS, 1.0)["missing_pressure_mpa"] == "0"


SETS = """\
      - kind: steel_sets
        installed_at_m: 1
        section_area_mm2: 4300
        section_inertia_mm4: 14500000
        section_depth_mm: 140
        yield_strength_mpa: 235
        steel_modulus_gpa: 200
        spacing_m: 1.5
        contact: embedded
        beyond_yield: yields
"""
SETS_STIFFNESS = 2e5 * 0.0043 / (1.5 * RADIUS_M**2)
SETS_CAPACITY = 235 * 0.0043 / (1.5 * RADIUS_M)
"""Hoop of a thin ring: Es As / (S R^2) and sy As / (S R)."""


def test_sets_that_yield_go_on_carrying_until_the_bolts_have_given_all(tmp_path):
    row = only_row(tmp_path / "project", SETS + BOLTS, 1.0)
    first = closure_at(1) + 1e3 * SETS_CAPACITY / SETS_STIFFNESS
    assert first < closure_at(3)
    assert told(row, *FIRST) == pytest.approx([first, SETS_CAPACITY], rel=1e-8)
    full = closure_at(3) + 1e3 * BOLTS_CAPACITY / BOLTS_STIFFNESS
    assert told(row, *FULL) == pytest.approx([full, SETS_CAPACITY + BOLTS_CAPACITY], rel=1e-8)
