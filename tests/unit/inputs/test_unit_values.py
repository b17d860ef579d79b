"""Stated, most probable and cautious values of ground units.

Student's quantiles, one-sided 95 %, as printed in any table: 6.314 for 1 degree of freedom, 2.132
for 4, 1.833 for 9. The tolerance is that of their last digit.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest
from end_to_end.projects import UNITS, Damage, all_of
from unit.inputs.arriving import ground, ground_key, table
from unit.inputs.reading import read, told

from tunnelcalc.project import Project

T_1, T_4, T_9 = 6.314, 2.132, 1.833
UNIT_ROWS = ("sandstone", "siltstone", "gouge")


def with_columns(header: str, *cells: str) -> Damage:
    """More columns of the units table: by unit, what follows."""
    lines = UNITS.splitlines()
    more = (header, *cells)
    return table("units.csv", *(f"{line},{cell}" for line, cell in zip(lines, more, strict=True)))


def values(chosen: str, rule: str = "") -> Damage:
    key = f"  values: {chosen}\n" + (f"  cautious_rule: {rule}\n" if rule else "")
    return ground_key(key)


STRENGTH = with_columns(
    "intact_strength_mpa_mean,intact_strength_mpa_sd,intact_strength_mpa_tests,"
    "intact_strength_mpa_probable,intact_strength_mpa_cautious",
    "50,10,5,48,41",
    "18,3,10,,",
    ",,,,2",
)
"""Stated are 55, 20 and 3 MPa."""


def by_unit(project: Project, name: str) -> dict[str, float]:
    found = {}
    for unit in UNIT_ROWS:
        here = project.ground["ground_unit"] == unit
        (found[unit],) = set(project.ground[name][here].tolist())
    return found


def methods(project: Project, name: str) -> dict[str, tuple[str, str]]:
    """Origin and method of each unit's value, by its first interval."""
    starts = {"sandstone": 0, "siltstone": 45, "gouge": 120}
    (origins,) = [found for found in project.origins if found.quantity == name]
    place = {unit: origins.from_m.tolist().index(start) for unit, start in starts.items()}
    return {unit: (origins.origin[k], origins.method[k]) for unit, k in place.items()}


CASES = {
    "stated": (values("stated"), [55, 20, 3], ["", "", ""]),
    "not-said": (all_of(), [55, 20, 3], ["", "", ""]),
    "probable": (values("probable"), [48, 18, 3], ["most probable", "most probable", ""]),
    "nominal": (
        values("cautious", "nominal"),
        [41, 20, 2],
        ["cautious, nominal", "", "cautious, nominal"],
    ),
    "mean": (
        values("cautious", "mean_95"),
        [41, 18 - T_9 * 3 / math.sqrt(10), 2],
        ["cautious, nominal", "cautious, mean_95", "cautious, nominal"],
    ),
    "fractile": (
        values("cautious", "fractile_5"),
        [41, 18 - T_9 * 3 * math.sqrt(1.1), 2],
        ["cautious, nominal", "cautious, fractile_5", "cautious, nominal"],
    ),
    "half-deviation": (
        values("cautious", "half_deviation"),
        [41, 16.5, 2],
        ["cautious, nominal", "cautious, half_deviation", "cautious, nominal"],
    ),
}


@pytest.mark.parametrize(("chosen", "expected", "words"), CASES.values(), ids=CASES)
def test_each_unit_has_the_value_that_the_project_asks_for(tmp_path, chosen, expected, words):
    project = read(tmp_path, STRENGTH, chosen)
    found = by_unit(project, "intact_strength_mpa")
    assert list(found.values()) == pytest.approx(expected, abs=0.0005 * 3 * math.sqrt(1.1))
    assert [how for _, how in methods(project, "intact_strength_mpa").values()] == words
    assert {origin for origin, _ in methods(project, "intact_strength_mpa").values()} == {"unit"}


RULES = {
    "mean_95": 50 - T_4 * 10 / math.sqrt(5),
    "fractile_5": 50 - T_4 * 10 * math.sqrt(1.2),
    "half_deviation": 45,
}


@pytest.mark.parametrize(("rule", "expected"), RULES.items(), ids=RULES)
def test_a_rule_works_from_mean_deviation_and_number_of_tests(tmp_path, rule, expected):
    statistics = with_columns(
        "intact_strength_mpa_mean,intact_strength_mpa_sd,intact_strength_mpa_tests",
        "50,10,5",
        ",,",
        ",,",
    )
    project = read(tmp_path, statistics, values("cautious", rule))
    assert by_unit(project, "intact_strength_mpa")["sandstone"] == pytest.approx(
        expected, abs=0.0005 * 10 * math.sqrt(1.2)
    )


def test_without_a_mean_the_stated_value_is_the_mean(tmp_path: Path):
    """gsi 62 with deviation 4 of 2 tests: 62 - 6.314 4 / sqrt(2)."""
    project = read(
        tmp_path,
        with_columns("gsi_sd,gsi_tests", "4,2", ",", ","),
        values("cautious", "mean_95"),
    )
    expected = 62 - T_1 * 4 / math.sqrt(2)
    assert by_unit(project, "gsi")["sandstone"] == pytest.approx(expected, abs=0.0015)


def test_of_a_load_the_cautious_value_is_a_high_one(tmp_path: Path):
    heavy = with_columns("unit_weight_kn_m3_sd,disturbance_sd", "1,0.1", "1,0.1", "1,0.2")
    project = read(tmp_path, heavy, values("cautious", "half_deviation"))
    assert list(by_unit(project, "unit_weight_kn_m3").values()) == [25.5, 26, 22.5]
    assert list(by_unit(project, "disturbance").values()) == pytest.approx([0.05, 0.05, 0.1])


def test_a_cell_of_the_ground_table_goes_before_any_value_of_the_unit(tmp_path: Path):
    own = ground(",cover_m,intact_strength_mpa", ",60,33", ",75,", ",90,33", ",200,")
    project = read(tmp_path, STRENGTH, own, values("cautious", "half_deviation"))
    assert by_unit(project, "intact_strength_mpa") == {
        "sandstone": 33,
        "siltstone": 16.5,
        "gouge": 2,
    }
    assert methods(project, "intact_strength_mpa")["sandstone"] == ("table", "")


WITHOUT = "no cautious value follows for some units, the stated one is used: "


def test_where_no_cautious_value_follows_the_stated_one_is_used_and_told(tmp_path: Path):
    few = with_columns("gsi_sd,gsi_tests,mi_sd", "4,1,", "4,5,2", ",,")
    project = read(tmp_path, few, values("cautious", "mean_95"))
    assert by_unit(project, "gsi")["sandstone"] == 62
    assert by_unit(project, "mi")["siltstone"] == 7
    (warning,) = [text for text in project.warnings if text.startswith(WITHOUT)]
    assert set(warning.removeprefix(WITHOUT).split(", ")) == {"gsi", "mi"}


def test_deviations_are_not_called_unused_where_the_rule_uses_them(tmp_path: Path):
    def idle(project: Project) -> bool:
        return any("gsi_sd" in text for text in project.warnings)

    deviation = with_columns("gsi_sd", "4", "4", "2")
    assert idle(read(tmp_path / "stated", deviation, values("stated")))
    assert not idle(read(tmp_path / "half", deviation, values("cautious", "half_deviation")))


REFUSED = {
    "cautious-without-rule": (
        (STRENGTH, values("cautious")),
        ['project.yaml:6:3: key "ground.cautious_rule" is missing'],
    ),
    "unknown-rule": (
        (STRENGTH, values("cautious", "mean")),
        ['project.yaml:9:3: key "ground.cautious_rule" holds "mean"'],
    ),
    "unknown-set": (
        (STRENGTH, values("careful")),
        ['project.yaml:8:3: key "ground.values" holds "careful"'],
    ),
    "cautious-below-zero": (
        (
            with_columns(
                "intact_strength_mpa_mean,intact_strength_mpa_sd,intact_strength_mpa_tests",
                "50,40,2",
                ",,",
                ",,",
            ),
            values("cautious", "mean_95"),
        ),
        [
            'units.csv:2:11: column "intact_strength_mpa_mean" gives the value -128.58 '
            "(cautious, mean_95), which is out of range"
        ],
    ),
    "cautious-of-the-stated-value-above-one": (
        (with_columns("disturbance_sd", "", "", "2.5"), values("cautious", "half_deviation")),
        [
            'units.csv:4:7: column "disturbance" gives the value 1.25 (cautious, half_deviation), '
            "which is out of range"
        ],
    ),
    "statistics-in-the-ground-table": (
        (ground(",cover_m,gsi_mean,gsi_cautious", *[",60,50,40"] * 4),),
        [
            'ground.csv:1:5: column "gsi_mean" belongs into the units table',
            'ground.csv:1:6: column "gsi_cautious" belongs into the units table',
        ],
    ),
    "broken-number-of-tests": (
        (with_columns("gsi_tests", "2.5", "", ""),),
        ['units.csv:2:11: column "gsi_tests" holds "2.5", which is out of range'],
    ),
    "negative-deviation": (
        (with_columns("gsi_sd", "-1", "", ""),),
        ['units.csv:2:11: column "gsi_sd" holds "-1", which is out of range'],
    ),
    "mean-out-of-range": (
        (with_columns("gsi_mean", "120", "", ""),),
        ['units.csv:2:11: column "gsi_mean" holds "120", which is out of range'],
    ),
    "misspelt-statistic": (
        (with_columns("gsi_meen", "50", "", ""),),
        ['units.csv:1:11: column "gsi_meen" is unknown'],
    ),
}


@pytest.mark.parametrize(("damages", "lines"), REFUSED.values(), ids=REFUSED)
def test_values_that_do_not_follow_are_refused(tmp_path: Path, damages, lines):
    assert told(tmp_path, *damages) == lines


def test_a_value_that_a_rule_takes_out_of_range_may_be_entered_instead(tmp_path: Path):
    """The remedy that the refusal names works."""
    entered = with_columns("disturbance_sd,disturbance_cautious", ",", ",", "2.5,0.8")
    project = read(tmp_path, entered, values("cautious", "half_deviation"))
    assert by_unit(project, "disturbance")["gouge"] == 0.8
