"""Ground table and units table, put together."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import GROUND, content, replaced
from unit.inputs.reading import REGISTRY, read, told

from tunnelcalc.inputs.ground_tables import own_columns
from tunnelcalc.pipeline.chain import build_stages
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.project import Gap, Project


def column(name: str, *cells: str):
    """One more column of the ground table."""
    lines = [
        f"{line},{cell}" for line, cell in zip(GROUND.splitlines(), (name, *cells), strict=True)
    ]
    return content("ground.csv", ("\n".join(lines) + "\n").encode())


def by_unit(project: Project, name: str) -> dict[str, set[float]]:
    units = project.ground["ground_unit"]
    return {
        unit: set(project.ground[name][units == unit].tolist()) for unit in dict.fromkeys(units)
    }


def test_a_cell_of_the_table_overrides_its_unit_and_an_empty_one_does_not(tmp_path: Path):
    project = read(tmp_path, column("gsi", "70", "", " ", "20"))
    values = project.ground["gsi"][project.ground["cover_m"] == 60]
    assert set(values.tolist()) == {70}
    assert by_unit(project, "gsi") == {"sandstone": {70, 62}, "siltstone": {35}, "gouge": {20}}


def test_an_intact_modulus_in_the_table_overrides_the_ratio_of_the_unit(tmp_path: Path):
    project = read(tmp_path, column("intact_modulus_mpa", "", "9000", "", ""))
    assert by_unit(project, "intact_modulus_mpa")["siltstone"] == {9000}
    assert np.all(np.isnan(list(by_unit(project, "modulus_ratio")["siltstone"])))
    assert by_unit(project, "modulus_ratio")["sandstone"] == {275}


def test_what_is_assumed_is_marked_section_by_section(tmp_path: Path):
    project = read(tmp_path)
    assert by_unit(project, "stress_ratio") == {
        "sandstone": {1},
        "siltstone": {0.9},
        "gouge": {1},
    }
    for name in ("stress_ratio_assumed", "dilation_assumed"):
        assert by_unit(project, name) == {"sandstone": {0}, "siltstone": {0}, "gouge": {1}}


def test_what_is_not_given_at_all_is_assumed_everywhere(tmp_path: Path):
    project = read(
        tmp_path,
        replaced("units.csv", "dilation_deg", "q"),
        replaced("units.csv", ",0,275", ",1,275"),
    )
    assert np.all(project.ground["dilation_assumed"])
    assert set(project.ground["dilation_deg"].tolist()) == {0}
    assert "dilation_deg" in project.ground_columns


def test_a_measured_stress_stands_in_for_the_cover(tmp_path: Path):
    project = read(
        tmp_path,
        column("vertical_stress_mpa", "", "", "", "4.2"),
        replaced("ground.csv", "gouge,200", "gouge,"),
    )
    assert by_unit(project, "vertical_stress_mpa")["gouge"] == {4.2}
    assert np.all(np.isnan(list(by_unit(project, "cover_m")["gouge"])))


def test_columns_that_are_not_computed_with_are_told(tmp_path: Path):
    project = read(tmp_path, column("rqd_pct", "90", "40", "85", ""))
    assert project.warnings[0] == (
        "read, checked and carried along, but not computed with: rqd_pct"
    )
    assert by_unit(project, "rqd_pct")["siltstone"] == {40}


def test_a_standard_deviation_may_be_given_of_any_number(tmp_path: Path):
    assert "gsi_sd" in read(tmp_path, column("gsi_sd", "3", "4", "3", "6")).ground_columns


def test_a_standard_deviation_of_a_word_is_unknown(tmp_path: Path):
    assert told(tmp_path, column("swelling_minerals_sd", "1", "1", "1", "1")) == [
        'ground.csv:1:6: column "swelling_minerals_sd" is unknown'
    ]


def test_a_column_of_the_users_own_is_carried_along_if_the_project_says_so(tmp_path: Path):
    own = replaced(
        "project.yaml", "  units: units.csv\n", "  units: units.csv\n  other_columns: [logged by]\n"
    )
    project = read(tmp_path, own, column("logged by", "A. B.", '"B, C"', "", "A. B."))
    assert project.ground_columns[-1] == "logged by"
    assert by_unit(project, "logged by") == {
        "sandstone": {"A. B.", ""},
        "siltstone": {"B, C"},
        "gouge": {"A. B."},
    }


def stage_columns(project: Project) -> set[str]:
    stages = build_stages(project, REGISTRY, plan_classes(project, REGISTRY), Incidents())
    return {name for stage in stages for name in stage.gives}


def test_no_column_that_the_program_fills_can_be_the_users_own(tmp_path: Path):
    project = read(tmp_path)
    taken = own_columns(REGISTRY)
    assert stage_columns(project) <= taken
    assert set(project.ground) - {"ground_unit"} <= taken


@pytest.mark.parametrize(
    "name",
    [
        *("radius_m", "from_m", "flags", "class_adequate", "modulus_capped", "height_m"),
        *("fails_crown_dead_weight", "strength_method", "class_stress_case"),
    ],
)
def test_a_name_of_the_programs_own_is_refused_for_a_column(tmp_path: Path, name: str):
    own = replaced(
        "project.yaml", "  units: units.csv\n", f"  units: units.csv\n  other_columns: [{name}]\n"
    )
    assert told(tmp_path, own) == [
        f'project.yaml:8:19: key "ground.other_columns" names "{name}", a column of the '
        "program's own"
    ]


def test_declared_gaps_are_kept_by_chainage(tmp_path: Path):
    gaps = "[{from_m: 150, to_m: 160, reason: no access}, {from_m: 60, to_m: 70, reason: fault}]"
    project = read(
        tmp_path,
        replaced("ground.csv", "45,70", "45,60"),
        replaced("ground.csv", "200,\n", "200,\n160,170,gouge,200,\n"),
        replaced("project.yaml", "  section_length_m: 10\n", f"  gaps: {gaps}\n"),
    )
    assert project.gaps == (Gap(60, 70, "fault"), Gap(150, 160, "no access"))
    assert project.ground.count == 5


def test_a_project_without_units_table_needs_no_ground_unit(tmp_path: Path):
    names = "unit_weight_kn_m3,intact_strength_mpa,mi,gsi,disturbance,poisson_ratio"
    table = f"from_m,to_m,cover_m,{names}\n0,10,60,25,55,17,62,0,0.25\n"
    project = read(
        tmp_path,
        content("ground.csv", table.encode()),
        replaced("project.yaml", "  units: units.csv\n", ""),
    )
    assert project.ground["ground_unit"].tolist() == [""]
    assert {file.path for file in project.files} == {"project.yaml", "ground.csv"}


def test_too_many_sections_are_refused_before_they_are_made(tmp_path: Path):
    assert told(
        tmp_path,
        replaced("ground.csv", "120,150", "120,99999"),
        replaced("project.yaml", "section_length_m: 10", "section_length_m: 0.01"),
    ) == ["ground.csv: gives 9999900 sections"]


@pytest.mark.parametrize("length", ["0", "0.001", "1e-300", "1e400"])
def test_sections_are_no_shorter_than_a_centimetre(tmp_path: Path, length: str):
    assert told(
        tmp_path, replaced("project.yaml", "section_length_m: 10", f"section_length_m: {length}")
    ) == [
        f'project.yaml:8:3: key "ground.section_length_m" holds "{length}", which is out of range'
    ]
