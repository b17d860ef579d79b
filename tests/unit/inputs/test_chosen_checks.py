"""Checks of a class that count only where the project says so, and what they need then."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import UNITS, Damage, all_of, content, replaced
from unit.inputs.arriving import ground
from unit.inputs.reading import REGISTRY, read, told

from tunnelcalc.errors import ExitCode
from tunnelcalc.run import run_project


def criteria(text: str) -> Damage:
    return replaced("project.yaml", "  closure_pct: 1.0\n", f"  closure_pct: 1.0\n  {text}\n")


def without_weight() -> Damage:
    """Measured stress, and no unit weight for the gouge."""
    units = UNITS.replace("gouge,22,", "gouge,,")
    stresses = ground(",cover_m,vertical_stress_mpa", ",60,", ",75,", ",90,", ",,4.5")
    return all_of(content("units.csv", units.encode()), stresses)


@pytest.mark.parametrize(
    ("word", "said"),
    [("yes", True), ("true", True), ("'yes'", True), ("no", False), ("false", False)],
)
def test_a_project_says_yes_or_no(tmp_path: Path, word: str, said: bool):
    project = read(tmp_path, criteria(f"crown_dead_weight: {word}"))
    assert project.criteria.chosen_checks == {"crown_dead_weight": said}


def test_a_project_may_say_nothing(tmp_path: Path):
    assert read(tmp_path).criteria.chosen_checks == {}


def test_another_word_is_refused(tmp_path: Path):
    (first,) = told(tmp_path, criteria("crown_dead_weight: perhaps"))
    assert 'key "criteria.crown_dead_weight" holds "perhaps"' in first


def test_a_check_that_always_counts_is_no_choice(tmp_path: Path):
    (first,) = told(tmp_path, criteria("water_on_lining: yes"))
    assert 'key "criteria.water_on_lining" is unknown' in first


def test_where_it_counts_the_unit_weight_is_needed_everywhere(tmp_path: Path):
    assert told(tmp_path, without_weight(), criteria("crown_dead_weight: yes")) == [
        'ground.csv:5: column "unit_weight_kn_m3" has no value here and none for its ground unit'
    ]


@pytest.mark.parametrize("key", ["", "crown_dead_weight: no"])
def test_where_it_does_not_count_a_missing_weight_stops_nothing(tmp_path: Path, key: str):
    read(tmp_path / "read", without_weight(), criteria(key))
    ended = run_project(tmp_path / "read" / "project", REGISTRY)
    assert ended.exit_code == ExitCode.COMPLETE
    assert ended.result.incidents == ()
    checks = (ended.folder / "checks.csv").read_text().splitlines()
    last = [line for line in checks if "crown_dead_weight" in line][-1]
    assert last.endswith("not_evaluated,unit_weight_kn_m3 is not given")


LINING = "composite_lining: yes\n  lining_interface: no_slip\n  lining_tensile_strength_mpa: 1.5"


def with_stress_ratio() -> Damage:
    """The gouge has one too."""
    return content("units.csv", UNITS.replace("gouge,22,,", "gouge,22,0.9,").encode())


def test_a_check_with_options_is_read_with_them(tmp_path: Path):
    project = read(tmp_path, with_stress_ratio(), criteria(LINING))
    assert project.criteria.chosen_checks == {"composite_lining": True}
    assert project.criteria.options == {
        "lining_interface": "no_slip",
        "lining_tensile_strength_mpa": 1.5,
    }


@pytest.mark.parametrize(
    ("text", "found"),
    [
        pytest.param(
            LINING.replace("  lining_interface: no_slip\n", ""),
            'key "criteria.lining_interface" is missing',
            id="one-is-missing",
        ),
        pytest.param(
            LINING.replace("1.5", "-1"),
            'key "criteria.lining_tensile_strength_mpa" holds "-1"',
            id="out-of-range",
        ),
        pytest.param(
            "lining_interface: no_slip",
            'key "criteria.lining_interface" has no use without composite_lining',
            id="not-chosen",
        ),
        pytest.param(
            "composite_lining: no\n  lining_interface: no_slip",
            'key "criteria.lining_interface" has no use without composite_lining',
            id="chosen-not",
        ),
    ],
)
def test_options_are_asked_for_where_the_check_is_chosen_and_nowhere_else(
    tmp_path: Path, text: str, found: str
):
    (first,) = told(tmp_path, with_stress_ratio(), criteria(text))
    assert found in first


def test_a_check_with_options_is_made_of_classes_that_it_concerns_alone(tmp_path: Path):
    """The class of bolts has no lining: it has no row of the check."""
    read(tmp_path, with_stress_ratio(), criteria(LINING))
    ended = run_project(tmp_path / "project", REGISTRY)
    rows = [
        line.split(",")
        for line in (ended.folder / "checks.csv").read_text().splitlines()
        if ",composite_lining," in line
    ]
    with_rings = {
        planned.name
        for planned in ended.result.project.support_classes
        if any(element.kind == "shotcrete" for element in planned.elements)
    }
    assert {row[1] for row in rows} == with_rings != set(ended.result.project.class_names)
    assert "not_evaluated" not in {row[-2] for row in rows}


def test_a_check_with_options_that_is_not_chosen_is_not_made(tmp_path: Path):
    read(tmp_path)
    ended = run_project(tmp_path / "project", REGISTRY)
    assert "composite_lining" not in (ended.folder / "checks.csv").read_text()
