"""One profile or several, by their limits."""

from __future__ import annotations

import math
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import replaced
from unit.inputs.arriving import ground_key, opening
from unit.inputs.reading import read, told

THREE = """\
  profiles:
    - {name: lay-by, from_m: 50, to_m: 83, span_m: 8, height_m: 6, area_m2: 40,
       equivalent_radius: RULE}
    - {name: running, from_m: 0, to_m: 50, radius_m: 3}
    - {name: enlarged, from_m: 83, to_m: 150, radius_m: 4}
"""


def three(rule: str = "equal_area"):
    return opening(THREE.replace("RULE", rule))


def by_profile(project, name: str) -> dict[str, set[float]]:
    profiles = project.ground["profile"]
    return {p: set(project.ground[name][profiles == p].tolist()) for p in dict.fromkeys(profiles)}


def test_each_section_has_the_radius_and_span_of_its_profile(tmp_path: Path):
    project = read(tmp_path, three())
    by_area = math.sqrt(40 / math.pi)
    assert by_profile(project, "radius_m") == {"running": {3}, "lay-by": {by_area}, "enlarged": {4}}
    assert by_profile(project, "span_m") == {"running": {6}, "lay-by": {8}, "enlarged": {8}}


def test_half_the_larger_dimension_is_the_other_rule(tmp_path: Path):
    project = read(tmp_path, three("half_larger_dimension"))
    assert by_profile(project, "radius_m")["lay-by"] == {4}
    tall = replaced("project.yaml", "height_m: 6, area_m2: 40", "height_m: 10, area_m2: 60")
    project = read(tmp_path / "tall", three("half_larger_dimension"), tall)
    assert by_profile(project, "radius_m")["lay-by"] == {5}


def test_only_a_profile_that_is_no_circle_raises_its_flag(tmp_path: Path):
    project = read(tmp_path, three())
    assert by_profile(project, "equivalent_radius") == {
        "running": {False},
        "lay-by": {True},
        "enlarged": {False},
    }


def test_limits_of_profiles_cut_sections(tmp_path: Path):
    """Intervals 45-70 and 70-120 are cut at 50 and 83, then into sections of at most 10 m."""
    ends = read(tmp_path, three()).ground["from_m"]
    expected = np.concatenate(
        [
            np.linspace(0, 45, 6)[:-1],
            [45],
            np.linspace(50, 70, 3)[:-1],
            np.linspace(70, 83, 3)[:-1],
            np.linspace(83, 120, 5)[:-1],
            np.linspace(120, 150, 4)[:-1],
        ]
    )
    np.testing.assert_allclose(ends, expected, rtol=0, atol=1e-9)


def test_the_limits_alone_cut_where_sections_may_be_of_any_length(tmp_path: Path):
    whole = replaced("project.yaml", "  section_length_m: 10\n", "")
    ends = read(tmp_path, three(), whole).ground["from_m"]
    assert ends.tolist() == [0, 45, 50, 70, 83, 120]


def test_a_list_of_profiles_may_stand_directly_under_the_opening(tmp_path: Path):
    listed = THREE.replace("  profiles:\n", "").replace("RULE", "equal_area")
    direct = read(tmp_path / "direct", opening(listed)).ground
    below = read(tmp_path / "below", three()).ground
    for name in ("from_m", "to_m", "radius_m", "span_m"):
        np.testing.assert_array_equal(direct[name], below[name])


def test_one_profile_without_limits_is_the_whole_alignment(tmp_path: Path):
    shape = "  span_m: 6\n  height_m: 6\n  area_m2: 30\n  equivalent_radius: equal_area\n"
    sections = read(tmp_path, opening(shape)).ground
    np.testing.assert_allclose(sections["radius_m"], math.sqrt(30 / math.pi), rtol=1e-15)
    assert set(sections["profile"].tolist()) == {""}
    assert sections["equivalent_radius"].all()


def one(text: str):
    return opening(f"  profiles:\n    - {{{text}}}\n")


def two(first: str, second: str):
    return opening(f"  profiles:\n    - {{{first}}}\n    - {{{second}}}\n")


A = "name: a, from_m: 0, to_m: 60, radius_m: 3"
PROFILE = 'key "opening.profiles[1].'
REFUSED = {
    "gap": (
        two(A, "name: b, from_m: 61, to_m: 150, radius_m: 3"),
        ["project.yaml:6:7: no profile is given from 60 to 61 m"],
    ),
    "overlap": (
        two(A, "name: b, from_m: 50, to_m: 150, radius_m: 3"),
        [
            "project.yaml:6:7: the profile 50 to 150 m overlaps the profile 0 to 60 m of "
            "project.yaml:5:7 by 10 m"
        ],
    ),
    "ends-too-soon": (
        one(A),
        ['project.yaml:4:3: key "opening.profiles" leave 60 to 150 m without a profile'],
    ),
    "begins-too-late": (
        one("name: a, from_m: 20, to_m: 150, radius_m: 3"),
        ['project.yaml:4:3: key "opening.profiles" leave 0 to 20 m without a profile'],
    ),
    "list-ends-too-soon": (
        opening(f"  - {{{A}}}\n"),
        ['project.yaml:3:1: key "opening" leave 60 to 150 m without a profile'],
    ),
    "name-twice": (
        two(A, "name: a, from_m: 60, to_m: 150, radius_m: 3"),
        [
            'project.yaml:6:8: key "opening.profiles[2].name" holds "a", which is taken',
        ],
    ),
    "reversed": (
        one("name: a, from_m: 150, to_m: 0, radius_m: 3"),
        [f'project.yaml:5:30: {PROFILE}to_m" is not beyond from_m'],
    ),
    "no-limits": (
        one("name: a, radius_m: 3"),
        [
            f'project.yaml:5:7: {PROFILE}from_m" is missing',
            f'project.yaml:5:7: {PROFILE}to_m" is missing',
        ],
    ),
    "empty-list": (
        opening("  profiles: []\n"),
        ['project.yaml:4:3: key "opening.profiles" is an empty list'],
    ),
    "area-too-large": (
        opening("  span_m: 8\n  height_m: 6\n  area_m2: 50\n  equivalent_radius: equal_area\n"),
        ['project.yaml:6:3: key "opening.area_m2" is 50 m2, which does not fit 8 m by 6 m'],
    ),
    "area-too-small": (
        opening("  span_m: 8\n  height_m: 6\n  area_m2: 20\n  equivalent_radius: equal_area\n"),
        ['project.yaml:6:3: key "opening.area_m2" is 20 m2, which does not fit 8 m by 6 m'],
    ),
    "radius-too-large": (
        opening("  span_m: 60\n  height_m: 60\n  area_m2: 3000\n  equivalent_radius: equal_area\n"),
        ['project.yaml:6:3: key "opening.area_m2" gives a radius of 30.9019 m'],
    ),
    "radius-beside-span": (
        opening(
            "  radius_m: 3\n  span_m: 8\n  height_m: 6\n  area_m2: 40\n"
            "  equivalent_radius: equal_area\n"
        ),
        ['project.yaml:4:3: key "opening.radius_m" stands beside span, height and area'],
    ),
    "no-rule": (
        opening("  span_m: 8\n  height_m: 6\n  area_m2: 40\n"),
        ['project.yaml:4:3: key "opening.equivalent_radius" is missing'],
    ),
    "limit-on-no-stretch": (
        one("name: a, from_m: 0, to_m: 1e9, radius_m: 3"),
        [f'project.yaml:5:28: {PROFILE}to_m" holds "1e9", which is beyond 10000 km'],
    ),
}


@pytest.mark.parametrize(("damage", "lines"), REFUSED.values(), ids=REFUSED)
def test_profiles_that_do_not_make_an_alignment_are_refused(tmp_path: Path, damage, lines):
    assert told(tmp_path, damage) == lines


def test_a_gap_in_the_profiles_is_told_beside_what_else_is_wrong(tmp_path: Path):
    both = told(tmp_path, REFUSED["gap"][0], ground_key("  terrian: x.csv\n"))
    assert both == [
        REFUSED["gap"][1][0],
        'project.yaml:10:3: key "ground.terrian" is unknown',
    ]
