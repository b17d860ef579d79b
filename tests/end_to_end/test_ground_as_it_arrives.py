"""One project with profiles, levels, falling chainage, observations and tests, run from outside."""

from __future__ import annotations

import json
import math
import re
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import PROJECT, UNITS, completed, rows

CHAINAGE = (
    'chainage: {notation: km+m, prefix: "K ", direction: descending, start: "5+000",\n'
    '  equations: [{back: "4+950", ahead: "4+900"}]}\n'
)
"""The drive falls from K 5+000; at K 4+950, axis metre 50, it goes on as K 4+900."""
OPENING = """\
opening:
  axis: {table: axis.csv, level_of: crown}
  profiles:
    - {name: running, from_m: K 5+000, to_m: K 4+880, radius_m: 3}
    - {name: lay-by, from_m: K 4+880, to_m: K 4+800, span_m: 8, height_m: 6, area_m2: 40,
       equivalent_radius: equal_area}
"""
KEYS = """\
  terrain: terrain.csv
  water_table: water.csv
  tests: tests.csv
  values: cautious
  cautious_rule: half_deviation
  estimates:
    gsi: [jcond89_rqd, measured]
    intact_strength_mpa: [laboratory, measured]
    mi: [laboratory, measured]
"""
GROUND = """\
from_m,to_m,ground_unit,jcond89,rqd_pct,block_width_m
K 5+000.00,K 4+955.00,sandstone,,,1.1
K 4+955.00,K 4+880.00,siltstone,10,50,0.4
K 4+880.00,K 4+850.00,sandstone,20,64,1.1
K 4+850.00,K 4+800.00,gouge,,,
"""
LEVELS = {
    "axis.csv": (("K 5+000", 103.0), ("K 4+800", 106.0)),
    "terrain.csv": (("K 5+000", 160.0), ("K 4+880", 190.0), ("K 4+800", 170.0)),
    "water.csv": (("K 5+000", 90.0), ("K 4+800", 180.0)),
}
AXIS_M = {"K 5+000": 0.0, "K 4+880": 70.0, "K 4+800": 150.0}
CONFINEMENTS = (0.0, 0.1, 0.2, 0.3, 0.4)
"""Of the tests: far below what matters."""
TABLES = ("sections.csv", "classes.csv", "checks.csv", "schedule.csv", "ground_values.csv")


def triaxial(minor: float, sci: float = 24.0, mi: float = 9.0) -> float:
    """Hoek & Brown (1980), intact rock."""
    return minor + math.sqrt(mi * sci * minor + sci**2)


@pytest.fixture(scope="module")
def arrived(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The folder of the run."""
    project = tmp_path_factory.mktemp("arrived") / "project"
    project.mkdir()
    text = PROJECT.replace("opening:\n  radius_m: 3.0\n", CHAINAGE + OPENING)
    text = text.replace("  section_length_m: 10\n", "  section_length_m: 10\n" + KEYS)
    units = [
        line + more
        for line, more in zip(
            UNITS.splitlines(), (",unit_weight_kn_m3_sd", ",1", ",1", ",1"), strict=True
        )
    ]
    tests = [f"siltstone,{s3},{triaxial(s3)!r},S{n}" for n, s3 in enumerate(CONFINEMENTS)]
    contents = {
        "project.yaml": text.splitlines(),
        "ground.csv": GROUND.splitlines(),
        "units.csv": units,
        "tests.csv": ["ground_unit,minor_stress_mpa,major_stress_mpa,specimen", *tests],
    }
    for name, points in LEVELS.items():
        contents[name] = ["chainage_m,level_m", *(f"{at},{level}" for at, level in points)]
    for name, lines in contents.items():
        (project / name).write_text("\n".join(lines) + "\n", encoding="utf-8", newline="")
    return completed(project)


def columns(arrived: Path, *names: str) -> tuple[np.ndarray, ...]:
    table = rows(arrived / "sections.csv")
    return tuple(np.array([float(row[name] or "nan") for row in table]) for name in names)


def level(name: str, middle: np.ndarray) -> np.ndarray:
    points = LEVELS[name]
    return np.interp(middle, [AXIS_M[at] for at, _ in points], [value for _, value in points])


def read_back(text: str) -> float:
    """Axis metre of a written chainage, by the two stretches' own rules."""
    found = re.fullmatch(r"K (\d+)\+(\d{3}\.\d\d)", text)
    assert found, text
    number = 1000 * int(found[1]) + float(found[2])
    assert not 4900.005 < number < 4949.995, f"{text} does not exist"
    return 5000 - number if number > 4925 else 4950 - number


WRITTEN = {
    "chainage": "chainage_m",
    "from_chainage": "from_m",
    "to_chainage": "to_m",
    "governing_chainage": "governing_chainage_m",
}
EXPECTED = {
    "sections.csv": ("chainage", "from_chainage", "to_chainage"),
    "classes.csv": ("chainage",),
    "checks.csv": ("chainage",),
    "schedule.csv": ("from_chainage", "to_chainage", "governing_chainage"),
    "ground_values.csv": ("from_chainage", "to_chainage"),
}


@pytest.mark.parametrize("name", TABLES)
def test_every_table_has_the_written_chainage_beside_metres(arrived: Path, name: str):
    table = rows(arrived / name)
    assert table
    assert tuple(column for column in WRITTEN if column in table[0]) == EXPECTED[name]
    for row in table:
        for column in EXPECTED[name]:
            if row[column] or row[WRITTEN[column]]:
                assert read_back(row[column]) == pytest.approx(
                    float(row[WRITTEN[column]]), abs=0.0051
                )


def test_an_equation_is_met_within_an_interval(arrived: Path):
    """The siltstone lies from axis metre 45 to 70, across the equation at 50."""
    silt = [r for r in rows(arrived / "sections.csv") if r["ground_unit"] == "siltstone"]
    assert (silt[0]["from_m"], silt[0]["from_chainage"]) == ("45", "K 4+955.00")
    assert (silt[-1]["to_m"], silt[-1]["to_chainage"]) == ("70", "K 4+880.00")
    assert sum(float(r["to_m"]) - float(r["from_m"]) for r in silt) == pytest.approx(25)


def test_the_sections_name_their_profile_and_span(arrived: Path):
    for row in rows(arrived / "sections.csv"):
        name, span, radius = (
            ("running", "6", 3.0)
            if float(row["chainage_m"]) < 70
            else ("lay-by", "8", math.sqrt(40 / math.pi))
        )
        assert (row["profile"], row["span_m"]) == (name, span)
        assert float(row["radius_m"]) == pytest.approx(radius, rel=1e-9)
        assert ("equivalent_radius" in row["flags"].split(";")) == (name == "lay-by")


def test_cover_water_head_and_stress_follow_from_the_levels(arrived: Path):
    middle, radius, cover, head, weight, stress = columns(
        arrived,
        "chainage_m",
        "radius_m",
        "cover_m",
        "water_head_m",
        "unit_weight_kn_m3",
        "vertical_stress_mpa",
    )
    crown = level("axis.csv", middle)
    np.testing.assert_allclose(cover, level("terrain.csv", middle) - crown, rtol=1e-9)
    above = level("water.csv", middle) - (crown - radius)
    np.testing.assert_allclose(head, np.maximum(above, 0), rtol=1e-8, atol=1e-8)
    np.testing.assert_allclose(stress, weight * (cover + radius) / 1000, rtol=1e-8)


def test_values_are_cautious_estimated_or_from_tests(arrived: Path):
    for row in rows(arrived / "sections.csv"):
        unit, late = row["ground_unit"], float(row["chainage_m"]) > 70
        weight = {"sandstone": "25.5", "siltstone": "26", "gouge": "22.5"}[unit]
        gsi = {"sandstone": "62", "siltstone": "40", "gouge": "12"}[unit]
        assert (row["unit_weight_kn_m3"], row["gsi"]) == (weight, gsi)
        strength, mi = {"sandstone": (55, 17), "siltstone": (24, 9), "gouge": (3, 8)}[unit]
        assert float(row["intact_strength_mpa"]) == pytest.approx(strength, rel=1e-8)
        assert float(row["mi"]) == pytest.approx(mi, rel=1e-8)
        spread = {"siltstone": "5", "sandstone": "0" if late else "", "gouge": ""}[unit]
        assert row["gsi_spread"] == spread


def test_flags_are_raised_where_estimates_differ_or_tests_fall_short(arrived: Path):
    for row in rows(arrived / "sections.csv"):
        flags = row["flags"].split(";")
        for name in ("estimates_differ", "tests_below_confinement"):
            assert (name in flags) == (row["ground_unit"] == "siltstone")
    told = json.loads((arrived / "run.json").read_text(encoding="utf-8"))
    assert (
        "water heads are given, but ground: drainage is not: stresses and strength are total"
        in str(told)
    )


def test_each_value_says_where_it_came_from(arrived: Path):
    found = {
        (row["quantity"], row["from_m"]): (row["value"], row["origin"], row["method"])
        for row in rows(arrived / "ground_values.csv")
    }
    assert found["cover_m", "0"] == ("", "levels", "axis.csv, terrain.csv")
    assert found["water_head_m", "0"] == ("", "levels", "axis.csv, water.csv")
    assert found["block_width_m", "45"] == ("0.4", "table", "")
    assert found["poisson_ratio", "45"] == ("0.28", "unit", "")
    assert found["unit_weight_kn_m3", "45"] == ("26", "unit", "cautious, half_deviation")
    source = "jcond89_rqd: Hoek, Carter & Diederichs (2013), ARMA 13-672"
    assert found["gsi", "45"] == ("40", "estimated", source)
    assert found["gsi", "0"] == ("62", "unit", "")
    assert found["stress_ratio", "100"] == ("1", "assumed", "")
    laboratory = ("estimated", "laboratory: regression of Hoek & Brown (1980)")
    assert found["mi", "45"][1:] == laboratory
    assert "vertical_stress_mpa" not in {quantity for quantity, _ in found}


def test_the_origins_of_a_quantity_cover_the_alignment_once(arrived: Path):
    ends: dict[str, list[tuple[float, float]]] = {}
    for row in rows(arrived / "ground_values.csv"):
        ends.setdefault(row["quantity"], []).append((float(row["from_m"]), float(row["to_m"])))
    for quantity in ("gsi", "mi", "poisson_ratio", "cover_m", "stress_ratio"):
        pieces = ends[quantity]
        assert pieces[0][0] == 0
        assert pieces[-1][1] == 150
        assert [end for _, end in pieces[:-1]] == [start for start, _ in pieces[1:]]


def test_the_laboratory_table_has_both_fits(arrived: Path):
    by_line, by_squares = rows(arrived / "laboratory.csv")
    assert (by_line["method"], by_squares["method"]) == ("regression", "least_squares")
    for row in (by_line, by_squares):
        assert (row["ground_unit"], row["tests"], row["outliers"]) == ("siltstone", "5", "")
        assert (row["least_confinement_mpa"], row["greatest_confinement_mpa"]) == ("0", "0.4")
        assert float(row["intact_strength_mpa"]) == pytest.approx(24, rel=1e-6)
        assert float(row["mi"]) == pytest.approx(9, rel=1e-6)
    assert float(by_line["r_squared"]) == pytest.approx(1)


def test_every_table_of_the_project_is_kept_with_the_run(arrived: Path):
    kept = {path.name for path in (arrived / "inputs").iterdir()}
    assert kept == {"project.yaml", "ground.csv", "units.csv", "tests.csv", *LEVELS}
