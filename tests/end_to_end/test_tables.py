"""The tables of a run, against the contract on names, order and meanings."""

from __future__ import annotations

import math
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import rows

from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.run import run_project

GROUND_COLUMNS = (
    "ground_unit,cover_m,unit_weight_kn_m3,vertical_stress_mpa,stress_ratio,intact_strength_mpa,"
    "mi,gsi,disturbance,poisson_ratio,dilation_deg,modulus_ratio,block_width_m"
)
HEADERS = {
    "sections.csv": (
        f"chainage_m,from_m,to_m,{GROUND_COLUMNS},radius_m,water_pressure_mpa,"
        "effective_vertical_stress_mpa,effective_horizontal_stress_mpa,in_situ_stress_mpa,"
        "larger_stress_mpa,mb,s,a,rock_mass_strength_mpa,tensile_strength_mpa,global_strength_mpa,friction_angle_deg,"
        "cohesion_mpa,deformation_modulus_mpa,critical_pressure_mpa,plastic_radius_m,closure_mm,"
        "closure_pct,squeezing_strength_mpa,squeezing_strain_pct,face_strain_pct,spalling_depth_m,"
        "required_class,scheduled_class,flags"
    ),
    "classes.csv": (
        "chainage_m,support_class,stress_case,installation_closure_mm,support_pressure_mpa,"
        "supported_closure_mm,supported_closure_pct,supported_plastic_radius_m,"
        "first_failure_pressure_mpa,first_failure_closure_mm,full_mobilisation_pressure_mpa,"
        "full_mobilisation_closure_mm,missing_pressure_mpa,"
        "factor_of_safety,governing_check,adequate"
    ),
    "checks.csv": (
        "chainage_m,support_class,stress_case,element,check,demand,capacity,unit,"
        "factor_of_safety,outcome,reason"
    ),
    "schedule.csv": (
        "from_m,to_m,length_m,support_class,least_factor_of_safety,governing_check,"
        "governing_chainage_m,needed_pressure_mpa,ground_units,flags"
    ),
    "quantities.csv": "support_class,item,unit,amount",
}
BOLT_CHECKS = [
    "length_beyond_plastic_zone",
    "pattern_largest_spacing",
    "pattern_length_by_block",
    "pattern_length_by_spacing",
    "pattern_length_by_span",
    "pattern_spacing_by_block",
    "tension",
]
CHECKS = [
    *(("light", "rock_bolts", check) for check in BOLT_CHECKS),
    ("light", "class", "crown_dead_weight"),
    ("heavy", "shotcrete", "hoop_stress"),
    ("heavy", "steel_sets", "yield"),
    ("heavy", "class", "crown_dead_weight"),
]
LOAD_CHECKS = {"tension", "hoop_stress", "yield", "crown_dead_weight"}
NOT_REQUIRED = {"crown_dead_weight"}
"""The small project does not say that it counts."""
ENDS_M = [*(9 * n for n in range(5)), *(45 + 25 / 3 * n for n in range(3))]
ENDS_M += [*(70 + 10 * n for n in range(8)), 150]


@pytest.fixture(scope="module")
def folder(finished: Path) -> Path:
    return finished / "runs" / "0001"


@pytest.mark.parametrize(("table", "header"), HEADERS.items(), ids=HEADERS.keys())
def test_headers_are_those_of_the_vocabulary(folder: Path, table: str, header: str):
    assert (folder / table).read_text(encoding="utf-8").splitlines()[0] == header


def test_sections_stand_by_increasing_chainage_and_cover_each_interval(folder: Path):
    sections = rows(folder / "sections.csv")
    np.testing.assert_allclose([float(row["from_m"]) for row in sections], ENDS_M[:-1], rtol=1e-9)
    np.testing.assert_allclose([float(row["to_m"]) for row in sections], ENDS_M[1:], rtol=1e-9)
    middles = [(start + end) / 2 for start, end in pairwise(ENDS_M)]
    np.testing.assert_allclose([float(row["chainage_m"]) for row in sections], middles, rtol=1e-9)


def test_classes_stand_by_chainage_and_then_as_listed(folder: Path):
    at = [row["chainage_m"] for row in rows(folder / "sections.csv")]
    found = [(row["chainage_m"], row["support_class"]) for row in rows(folder / "classes.csv")]
    assert found == [(chainage, name) for chainage in at for name in ("light", "heavy")]


def test_checks_stand_by_chainage_class_element_and_name(folder: Path):
    at = [row["chainage_m"] for row in rows(folder / "sections.csv")]
    found = [
        (row["chainage_m"], row["support_class"], row["element"], row["check"])
        for row in rows(folder / "checks.csv")
    ]
    assert found == [(chainage, *check) for chainage in at for check in CHECKS]


def test_numbers_have_at_least_eight_significant_digits(
    finished: Path, folder: Path, tmp_path: Path
):
    """Read back, each cell is the number that was computed."""
    registry = load_plugins()
    result = run_project(finished, registry, out=tmp_path / "out").result
    table = rows(folder / "sections.csv")
    project = read_project(finished, registry)
    for name in table[0]:
        if name in result.sections and result.sections[name].dtype == float:
            cells = [float(row[name] or "nan") for row in table]
            np.testing.assert_allclose(cells, result.sections[name], rtol=5e-9, err_msg=name)
    assert {"closure_mm", "cohesion_mpa", *project.ground_columns} <= set(table[0])
    long = [row for row in table if len(row["closure_mm"].replace(".", "").lstrip("0")) >= 8]
    assert len(long) > len(table) / 2


def test_elastic_ground_has_no_critical_pressure_and_no_plastic_zone(folder: Path):
    strong = [row for row in rows(folder / "sections.csv") if row["ground_unit"] == "sandstone"]
    assert {(row["critical_pressure_mpa"], row["plastic_radius_m"]) for row in strong} == {
        ("0", "3")
    }


def test_a_class_has_the_least_factor_of_its_load_checks(folder: Path):
    least: dict[tuple[str, str], tuple[float, str]] = {}
    for row in rows(folder / "checks.csv"):
        if row["check"] in LOAD_CHECKS:
            if float(row["demand"]) == 0:
                assert row["factor_of_safety"] == ""
                continue
            factor = float(row["capacity"]) / float(row["demand"])
            np.testing.assert_allclose(float(row["factor_of_safety"]), factor, rtol=2e-9)
            if row["check"] in NOT_REQUIRED:
                continue
            key = (row["chainage_m"], row["support_class"])
            label = f"{row['element']}:{row['check']}"
            least[key] = min(least.get(key, (math.inf, "")), (factor, label))
        else:
            assert row["factor_of_safety"] == ""
    for row in rows(folder / "classes.csv"):
        factor, _ = least[row["chainage_m"], row["support_class"]]
        np.testing.assert_allclose(float(row["factor_of_safety"]), factor, rtol=2e-9)


def outcome_of(row: dict[str, str]) -> str:
    """By the meanings that the vocabulary gives: factor 1.5 for loads, none for rules."""
    if not row["demand"] or not row["capacity"]:
        return "not_evaluated"
    demand, capacity = float(row["demand"]), float(row["capacity"])
    if row["check"] in LOAD_CHECKS:
        return "pass" if capacity >= 1.5 * demand else "fail"
    return "pass" if demand <= capacity else "fail"


def test_outcomes_adequacy_and_governing_check_follow_from_the_numbers(folder: Path):
    own: dict[tuple[str, str], list[dict[str, str]]] = {}
    for row in rows(folder / "checks.csv"):
        assert row["outcome"] == outcome_of(row)
        silent = row["outcome"] != "not_evaluated" and row["check"] not in NOT_REQUIRED
        assert bool(row["reason"]) == (not silent)
        own.setdefault((row["chainage_m"], row["support_class"]), []).append(row)
    seen = set()
    for row in rows(folder / "classes.csv"):
        checks = own[row["chainage_m"], row["support_class"]]
        # Without a block width the two rules on blocks are listed and not counted.
        counted = [
            check
            for check in checks
            if check["reason"] != "block_width_m is not given"
            and check["check"] not in NOT_REQUIRED
        ]
        held = all(check["outcome"] == "pass" for check in counted)
        adequate = held and float(row["supported_closure_pct"]) <= 1.0
        assert row["adequate"] == ("yes" if adequate else "no")
        failed = [c for c in counted if c["outcome"] == "fail" and c["check"] not in LOAD_CHECKS]
        loaded = [c for c in counted if c["check"] in LOAD_CHECKS]
        first = failed[0] if failed else min(loaded, key=lambda c: float(c["factor_of_safety"]))
        assert row["governing_check"] == f"{first['element']}:{first['check']}"
        seen.add((row["adequate"], bool(failed)))
    assert seen == {("yes", False), ("no", True), ("no", False)}


def test_stresses_are_far_from_equal_nowhere_in_the_small_project(folder: Path):
    assert {row["stress_case"] for row in rows(folder / "classes.csv")} == {"mean"}
    assert {row["larger_stress_mpa"] for row in rows(folder / "sections.csv")} == {""}


def test_the_first_adequate_class_is_required(folder: Path):
    adequate: dict[str, list[str]] = {}
    for row in rows(folder / "classes.csv"):
        names = adequate.setdefault(row["chainage_m"], [])
        names.extend([row["support_class"]] * (row["adequate"] == "yes"))
    required = [row["required_class"] for row in rows(folder / "sections.csv")]
    assert required == [[*names, "none_adequate"][0] for names in adequate.values()]
    assert set(required) == {"light", "heavy", "none_adequate"}


def test_flags_are_sorted_and_joined(folder: Path):
    flags = [row["flags"].split(";") for row in rows(folder / "sections.csv")]
    assert all(names == sorted(set(names)) for names in flags)
    assert flags[-1] == [
        "anchorage_in_plastic_zone",
        "beyond_small_strain",
        "critical_strain",
        "dead_weight_not_required",
        "deep_plastic_zone",
        "dilation_assumed",
        "element_below_one",
        "face_stability",
        "large_closure",
        "low_gsi",
        "low_intact_strength",
        "spalling",
        "squeezing",
        "stress_ratio_assumed",
        "water_not_declared",
    ]
    assert flags[0] == ["dead_weight_not_required", "water_not_declared"]


def test_the_schedule_covers_the_alignment_in_zones(folder: Path):
    zones = rows(folder / "schedule.csv")
    ends = [(float(zone["from_m"]), float(zone["to_m"])) for zone in zones]
    assert (ends[0][0], ends[-1][1]) == (0, 150)
    assert all(before[1] == after[0] for before, after in pairwise(ends))
    assert [zone["support_class"] for zone in zones] == ["light", "heavy", "light", "none_adequate"]
    for zone, (start, end) in zip(zones, ends, strict=True):
        np.testing.assert_allclose(float(zone["length_m"]), end - start, rtol=1e-9)
        within = [
            row for row in rows(folder / "sections.csv") if start < float(row["chainage_m"]) < end
        ]
        assert {row["scheduled_class"] for row in within} == {zone["support_class"]}
        assert zone["ground_units"] == ";".join(sorted({row["ground_unit"] for row in within}))
        names = {name for row in within for name in row["flags"].split(";") if name}
        assert zone["flags"] == ";".join(sorted(names))


def test_a_zone_without_adequate_class_says_what_pressure_it_needs(folder: Path):
    *others, last = rows(folder / "schedule.csv")
    assert (last["least_factor_of_safety"], last["governing_check"]) == ("", "")
    assert 0 < float(last["needed_pressure_mpa"]) < 4.466 * 1.0001  # p0 = 22 (200 + 3) / 1000
    assert all(zone["needed_pressure_mpa"] == "" for zone in others)
    assert all(float(zone["least_factor_of_safety"]) >= 1.5 for zone in others)


def test_quantities_are_those_of_the_scheduled_lengths(folder: Path):
    """Theoretical amounts of the full ring, by the definitions of the vocabulary."""
    length = dict.fromkeys(("light", "heavy", "none_adequate"), 0.0)
    for row in rows(folder / "sections.csv"):
        length[row["scheduled_class"]] += float(row["to_m"]) - float(row["from_m"])
    light, heavy = length["light"], length["heavy"]
    bolts, sets = 2 * math.pi * 3 * light / (1.5 * 1.5), heavy / 1.5
    expected = [
        ("light", "length", "m", light),
        ("light", "excavation", "m3", math.pi * 9 * light),
        ("light", "bolts", "no", bolts),
        ("light", "bolt_length", "m", bolts * 3.5),
        ("heavy", "length", "m", heavy),
        ("heavy", "excavation", "m3", math.pi * 9 * heavy),
        ("heavy", "shotcrete", "m3", math.pi * (3**2 - 2.85**2) * heavy),
        ("heavy", "steel_sets", "no", sets),
        ("heavy", "steel", "kg", sets * 4300e-6 * 2 * math.pi * (3 - 0.07) * 7850),
        ("none_adequate", "length", "m", length["none_adequate"]),
        ("none_adequate", "excavation", "m3", math.pi * 9 * length["none_adequate"]),
    ]
    found = rows(folder / "quantities.csv")
    assert [(row["support_class"], row["item"], row["unit"]) for row in found] == [
        line[:3] for line in expected
    ]
    amounts = [float(row["amount"]) for row in found]
    np.testing.assert_allclose(amounts, [line[3] for line in expected], rtol=1e-8)
    assert min(amounts) > 0
    assert math.isclose(sum(length.values()), 150)
