"""A head of water under a stated drainage: it must leave the ground some effective stress."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import UNITS, content
from unit.inputs.arriving import ground, ground_key, table
from unit.inputs.levelled import AXIS, levelled
from unit.inputs.reading import read, told

DRAINED = ground_key("  drainage: drained\n")
LIMIT_M = 25 * (60 + 3) / 9.81
"""Head over sandstone, 25 kN/m3, under 60 m of cover over a radius of 3 m, that weighs as much."""


def heads(*cells: str):
    """Cover and head of each interval."""
    covers = ("60", "75", "90", "200")
    return ground(
        ",cover_m,water_head_m", *(f",{c},{h}" for c, h in zip(covers, cells, strict=True))
    )


def test_drainage_is_what_the_project_says(tmp_path: Path):
    assert read(tmp_path / "none").drainage == ""
    assert read(tmp_path / "drained", DRAINED).drainage == "drained"
    watertight = ground_key("  drainage: watertight\n")
    assert read(tmp_path / "watertight", watertight).drainage == "watertight"


def test_a_word_that_is_no_drainage_is_refused(tmp_path: Path):
    (first,) = told(tmp_path, ground_key("  drainage: partly\n"))
    assert 'key "ground.drainage" holds "partly"' in first


def test_a_head_just_below_the_weight_of_the_cover_is_accepted(tmp_path: Path):
    project = read(tmp_path, DRAINED, heads(f"{LIMIT_M - 0.001:.6f}", "10", "0", ""))
    assert project.ground["water_head_m"][0] == pytest.approx(LIMIT_M - 0.001, abs=1e-5)


def test_a_head_of_the_table_that_reaches_the_stress_is_refused_in_its_cell(tmp_path: Path):
    assert told(tmp_path, DRAINED, heads(f"{LIMIT_M + 0.001:.3f}", "10", "0", "")) == [
        f'ground.csv:2:5: "water_head_m" is {LIMIT_M + 0.001:g}: its pressure, 1.575 MPa, is '
        "not below the vertical stress, 1.575 MPa"
    ]


def test_without_stated_drainage_the_head_is_not_looked_at(tmp_path: Path):
    project = read(tmp_path, heads("1000", "", "", ""))
    assert any("ground: drainage is not" in text for text in project.warnings)


def test_a_measured_stress_counts_in_place_of_the_cover(tmp_path: Path):
    measured = ground(
        ",cover_m,vertical_stress_mpa,water_head_m", ",60,0.5,60", ",75,,", ",90,,", ",200,,"
    )
    (first,) = told(tmp_path, DRAINED, measured)
    assert first.startswith("ground.csv:2:6:")
    assert "0.5886 MPa, is not below the vertical stress, 0.5 MPa" in first


def test_a_head_of_a_ground_unit_is_told_once_where_the_unit_stands(tmp_path: Path):
    lines = UNITS.splitlines()
    wet = [f"{lines[0]},water_head_m", f"{lines[1]},250", f"{lines[2]},5", f"{lines[3]},5"]
    # Sandstone lies on two intervals, under 60 m and under 90 m.
    found = told(tmp_path, DRAINED, content("units.csv", "\n".join(wet).encode()))
    assert len(found) == 2
    assert all(first.startswith('units.csv:2:11: "water_head_m" is 250') for first in found)
    assert "stress, 1.575 MPa" in found[0]
    assert "stress, 2.325 MPa" in found[1]


def test_a_head_that_follows_from_the_water_table_is_told_at_its_key(tmp_path: Path):
    water = (
        ground_key("  water_table: water.csv\n"),
        table("water.csv", "chainage_m,level_m", "0,900", "150,900"),
    )
    found = told(tmp_path, levelled(AXIS, *water, DRAINED))
    project_lines = [first for first in found if first.startswith("project.yaml:")]
    assert project_lines == found
    assert all('"water_head_m" is ' in first for first in found)
    assert len(found) == 4  # each interval once


def test_heads_are_told_by_interval_once_though_it_has_many_sections(tmp_path: Path):
    found = told(tmp_path, DRAINED, heads("500", "10", "0", ""))
    assert len(found) == 1
    sections = read(tmp_path / "dry", DRAINED, heads("5", "10", "0", "")).ground
    assert np.count_nonzero(sections["water_head_m"] == 5) > 1
