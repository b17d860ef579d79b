"""Triaxial and uniaxial tests by ground unit, as a project gives them."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import Damage, all_of, replaced
from unit.inputs.arriving import ground_key, table
from unit.inputs.reading import read, told

from tunnelcalc.project import Project, UnitTests

HEADER = "ground_unit,minor_stress_mpa,major_stress_mpa,specimen,date"
CONFINEMENTS = (0.0, 2.0, 4.0, 6.0, 8.0, 0.0)


def strength(minor: float, sci: float, mi: float) -> float:
    """The criterion of intact rock: Hoek & Brown (1980)."""
    return minor + math.sqrt(mi * sci * minor + sci**2)


def rows(unit: str, sci: float, mi: float, minors: tuple[float, ...] = CONFINEMENTS) -> list[str]:
    """Tests that lie on the criterion."""
    return [
        f"{unit},{minor!r},{strength(minor, sci, mi)!r},{unit[:2].upper()}{n},2024-05-0{n + 1}"
        for n, minor in enumerate(minors)
    ]


def with_tests(*lines: str, order: str = "[laboratory, measured]") -> Damage:
    """A project with this table of tests."""
    key = f"  tests: tests.csv\n  estimates: {{intact_strength_mpa: {order}, mi: {order}}}\n"
    return all_of(ground_key(key), table("tests.csv", HEADER, *lines))


def value(project: Project, unit: str, name: str) -> float:
    (only,) = set(project.ground[name][project.ground["ground_unit"] == unit].tolist())
    return only


def results_of(project: Project, unit: str) -> UnitTests:
    (found,) = [tests for tests in project.tests if tests.ground_unit == unit]
    return found


def test_tests_on_the_criterion_give_its_strength_and_mi_back(tmp_path: Path):
    project = read(tmp_path, with_tests(*rows("siltstone", 24, 9), *rows("gouge", 4.5, 6)))
    for unit, sci, mi in (("siltstone", 24, 9), ("gouge", 4.5, 6)):
        assert value(project, unit, "intact_strength_mpa") == pytest.approx(sci, rel=1e-9)
        assert value(project, unit, "mi") == pytest.approx(mi, rel=1e-9)
        result = results_of(project, unit).result
        assert result.r_squared == pytest.approx(1, abs=1e-12)
        assert result.least_squares.intact_strength_mpa == pytest.approx(sci, rel=1e-6)
        assert result.least_squares.mi == pytest.approx(mi, rel=1e-6)
        assert (result.least_confinement_mpa, result.greatest_confinement_mpa) == (0, 8)
        assert results_of(project, unit).outliers == ()
    assert value(project, "sandstone", "intact_strength_mpa") == 55


def test_the_result_says_that_it_is_estimated_and_how(tmp_path: Path):
    project = read(tmp_path, with_tests(*rows("siltstone", 24, 9)))
    (mi,) = [found for found in project.origins if found.quantity == "mi"]
    assert mi.origin.tolist() == ["unit", "estimated", "unit", "unit"]
    assert mi.method.tolist() == ["", "laboratory: regression of Hoek & Brown (1980)", "", ""]


def test_the_order_may_put_the_stated_value_first(tmp_path: Path):
    project = read(tmp_path, with_tests(*rows("siltstone", 24, 9), order="[measured, laboratory]"))
    assert value(project, "siltstone", "intact_strength_mpa") == 20
    assert value(project, "siltstone", "intact_strength_mpa_spread") == pytest.approx(4)
    assert value(project, "siltstone", "mi_spread") == pytest.approx(2)
    assert value(project, "siltstone", "estimates_differ")
    assert not value(project, "sandstone", "estimates_differ")


def test_tests_that_agree_with_the_stated_value_do_not_differ_from_it(tmp_path: Path):
    project = read(tmp_path, with_tests(*rows("siltstone", 20, 7)))
    assert value(project, "siltstone", "mi_spread") == 0
    assert not project.ground["estimates_differ"].any()


def test_the_confinement_that_was_reached_is_kept_where_mi_follows_from_tests(tmp_path: Path):
    project = read(tmp_path / "used", with_tests(*rows("siltstone", 24, 9)))
    assert value(project, "siltstone", "tested_confinement_mpa") == 8
    assert value(project, "sandstone", "tested_confinement_mpa") == math.inf
    stated = with_tests(*rows("siltstone", 24, 9), order="[measured, laboratory]")
    unused = read(tmp_path / "unused", stated)
    assert value(unused, "siltstone", "tested_confinement_mpa") == math.inf


def test_tests_of_a_unit_that_no_interval_has_are_told_not_used(tmp_path: Path):
    project = read(tmp_path, with_tests(*rows("siltstone", 24, 9), *rows("sandstnoe", 60, 18)))
    assert value(project, "sandstone", "mi") == 17
    assert (
        "laboratory tests of sandstnoe are not used: no interval has the unit" in project.warnings
    )


OUT = "siltstone,4,90,X9,2024-05-09"


@pytest.mark.parametrize("place", range(7))
def test_an_outlier_is_named_by_its_specimen_wherever_it_stands(tmp_path: Path, place: int):
    lines = rows("siltstone", 24, 9)
    lines.insert(place, OUT)
    project = read(tmp_path, with_tests(*lines))
    assert results_of(project, "siltstone").outliers == ("X9",)
    assert results_of(project, "siltstone").result.test_count == 7


def test_an_outlier_without_a_specimen_is_named_by_its_line(tmp_path: Path):
    lines = [*rows("gouge", 4, 6), *rows("siltstone", 24, 9), OUT.replace("X9", "")]
    assert results_of(read(tmp_path, with_tests(*lines)), "siltstone").outliers == ("line 14",)


def test_the_order_of_the_tests_changes_nothing(tmp_path: Path):
    lines = [*rows("siltstone", 24, 9), OUT]
    usual = read(tmp_path / "usual", with_tests(*lines)).ground
    other = read(tmp_path / "other", with_tests(*reversed(lines))).ground
    for name in ("intact_strength_mpa", "mi"):
        np.testing.assert_array_equal(usual[name], other[name])


NOT_STATED = (
    replaced("units.csv", "sandstone,25,1,55,17", "sandstone,25,1,,"),
    replaced("units.csv", "siltstone,25.5,0.9,20,7", "siltstone,25.5,0.9,,"),
    replaced("units.csv", "gouge,22,,3,8", "gouge,22,,,"),
)
ALL_UNITS = (*rows("sandstone", 60, 18), *rows("siltstone", 24, 9), *rows("gouge", 4.5, 6))


def test_where_only_tests_are_there_no_order_is_needed(tmp_path: Path):
    only = all_of(ground_key("  tests: tests.csv\n"), table("tests.csv", HEADER, *ALL_UNITS))
    project = read(tmp_path, only, *NOT_STATED)
    assert value(project, "sandstone", "mi") == pytest.approx(18)


REFUSED: dict[str, tuple[Damage, list[str]]] = {
    "no-order": (
        all_of(
            ground_key("  tests: tests.csv\n"),
            table("tests.csv", HEADER, *rows("siltstone", 24, 9)),
        ),
        [
            f'ground.csv:3: column "{name}" has {name} from measured and laboratory, and the '
            "project does not say which to take"
            for name in ("intact_strength_mpa", "mi")
        ],
    ),
    "too-few": (
        with_tests(*rows("siltstone", 24, 9)[:4]),
        [
            'tests.csv:2: the tests of "siltstone" give no strength: 4 tests, but at least 5 are '
            "needed"
        ],
    ),
    "one-confinement": (
        with_tests(*rows("siltstone", 24, 9, (0.0,) * 5)),
        [
            'tests.csv:2: the tests of "siltstone" give no strength: all tests have the same '
            "confinement, which leaves mi unknown"
        ],
    ),
    "too-few-and-nothing-stated": (
        all_of(*NOT_STATED, with_tests(*ALL_UNITS[:-2])),
        ['tests.csv:14: the tests of "gouge" give no strength: 4 tests, but at least 5 are needed'],
    ),
    "major-below-minor": (
        all_of(*NOT_STATED, with_tests(*ALL_UNITS, "gouge,8,7,G9,")),
        ['tests.csv:20:3: column "major_stress_mpa" is not above minor_stress_mpa'],
    ),
    "empty-stress": (
        with_tests(*rows("siltstone", 24, 9), "siltstone,,40,S9,"),
        ['tests.csv:8:2: column "minor_stress_mpa" is empty'],
    ),
    "no-unit": (
        with_tests(*rows("siltstone", 24, 9), ",1,40,S9,"),
        ['tests.csv:8:1: column "ground_unit" is empty'],
    ),
    "tensile": (
        with_tests(*rows("siltstone", 24, 9), "siltstone,-1,40,S9,"),
        ['tests.csv:8:2: column "minor_stress_mpa" holds "-1", which is out of range'],
    ),
    "no-number": (
        with_tests(*rows("siltstone", 24, 9), "siltstone,1,4O,S9,"),
        ['tests.csv:8:3: column "major_stress_mpa" holds "4O", which is not a number'],
    ),
    "header-only": (with_tests(), ["tests.csv: has a header and no rows"]),
    "column-missing-and-unknown": (
        all_of(*NOT_STATED, with_tests(*ALL_UNITS), replaced("tests.csv", "minor_stress", "minor")),
        [
            'tests.csv:1: column "minor_stress_mpa" is missing',
            'tests.csv:1:2: column "minor_mpa" is unknown',
        ],
    ),
    "no-file": (
        all_of(*NOT_STATED, ground_key("  tests: tests.csv\n")),
        [
            'project.yaml:8:3: key "ground.tests" names "tests.csv", which cannot be read: there '
            "is no such file"
        ],
    ),
}


@pytest.mark.parametrize(("damage", "lines"), REFUSED.values(), ids=REFUSED)
def test_tests_that_give_no_strength_are_refused_once(tmp_path: Path, damage, lines):
    assert told(tmp_path, damage) == lines


def test_several_faults_of_the_tests_are_told_at_once(tmp_path: Path):
    lines = told(
        tmp_path,
        with_tests(
            "siltstone,x,40,,",
            "gouge,2,1,,",
            *rows("sandstone", 60, 18)[:3],
            ",,1,,",
            order="[lab]",
        ),
    )
    assert [line.split(": ")[0] for line in lines] == [
        "project.yaml:9:37",
        "project.yaml:9:48",
        "tests.csv:2:2",
        "tests.csv:3:3",
        "tests.csv:4",
        "tests.csv:7:1",
        "tests.csv:7:2",
    ]
