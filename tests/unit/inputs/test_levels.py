"""Cover, water head and vertical stress from levels along the alignment."""

from __future__ import annotations

from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import Damage, replaced
from unit.inputs.arriving import ground, ground_key, table
from unit.inputs.levelled import (
    AXIS,
    AXIS_TABLE,
    CROWN,
    LAYERED,
    LAYERS_TABLE,
    TERRAIN_TABLE,
    WATER_TABLE,
    WATERED,
    levelled,
)
from unit.inputs.reading import read, told

from tunnelcalc.arrays import Array
from tunnelcalc.project import Project


def line(lines: tuple[str, ...], chainage: Array) -> Array:
    points = np.array([row.split(",") for row in lines[1:]], dtype=float)
    return np.interp(chainage, points[:, 0], points[:, 1])


def axis_of(project: Project) -> Array:
    return line(AXIS_TABLE, project.ground["chainage_m"])


def terrain_of(project: Project) -> Array:
    return line(TERRAIN_TABLE, project.ground["chainage_m"])


def assert_same(got: Array, expected: Array) -> None:
    np.testing.assert_allclose(got, expected, rtol=1e-13, atol=1e-12)


def test_cover_is_terrain_less_crown_at_the_middle_of_each_section(tmp_path: Path):
    project = read(tmp_path, levelled())
    assert_same(project.ground["cover_m"], terrain_of(project) - axis_of(project) - 3)
    # The first section, 0 to 9 m, by hand: terrain 162.25, axis 100.09.
    assert project.ground["cover_m"][0] == pytest.approx(162.25 - 100.09 - 3, abs=1e-12)


def test_where_the_level_is_the_crowns_the_axis_lies_a_radius_below(tmp_path: Path):
    project = read(tmp_path, levelled(CROWN, *WATERED))
    assert_same(project.ground["cover_m"], terrain_of(project) - axis_of(project))
    water = line(WATER_TABLE, project.ground["chainage_m"])
    head = np.maximum(water - (axis_of(project) - 3), 0)
    assert_same(project.ground["water_head_m"], head)


def test_the_water_head_stands_over_the_axis_and_is_never_below_it(tmp_path: Path):
    project = read(tmp_path, levelled(AXIS, *WATERED))
    head = line(WATER_TABLE, project.ground["chainage_m"]) - axis_of(project)
    assert np.any(head < 0)
    assert_same(project.ground["water_head_m"], np.where(head > 0, head, 0))
    told = "water heads are given, but ground: drainage is not: stresses and strength are total"
    assert told in project.warnings


def test_heads_that_follow_from_levels_are_used_once_drainage_is_stated(tmp_path: Path):
    project = read(tmp_path, levelled(AXIS, *WATERED, ground_key("  drainage: drained\n")))
    assert project.drainage == "drained"
    assert not any("stresses and strength are total" in text for text in project.warnings)


def test_rows_of_levels_may_stand_in_any_order(tmp_path: Path):
    shuffled = (TERRAIN_TABLE[0], *TERRAIN_TABLE[:0:-1])
    usual = read(tmp_path / "usual", levelled())
    other = read(tmp_path / "other", levelled(AXIS, table("terrain.csv", *shuffled)))
    np.testing.assert_array_equal(usual.ground["cover_m"], other.ground["cover_m"])


def test_a_cover_in_the_table_goes_before_one_from_levels(tmp_path: Path):
    project = read(tmp_path, levelled(AXIS, ground(",cover_m", ",", ",77", ",", ",")))
    stated = project.ground["ground_unit"] == "siltstone"
    assert set(project.ground["cover_m"][stated].tolist()) == {77}
    followed = terrain_of(project) - axis_of(project) - 3
    assert_same(project.ground["cover_m"][~stated], followed[~stated])


def test_the_stress_under_layers_is_the_sum_of_their_weights(tmp_path: Path):
    """Gouge 22 to its base, siltstone 25.5 below it, then the section's own unit."""
    project = read(tmp_path, levelled(AXIS, *LAYERED))
    own = {"sandstone": 25, "siltstone": 25.5, "gouge": 22}
    for position, chainage in enumerate(project.ground["chainage_m"].tolist()):
        terrain = np.interp(chainage, [0, 60, 150], [160, 190, 170])
        axis = np.interp(chainage, [0, 150], [100, 103])
        first = min(terrain, 150.0)
        second = min(first, np.interp(chainage, [0, 60, 150], [120, 120, 150]))
        weight = own[project.ground["ground_unit"][position]]
        stress = 22 * (terrain - first) + 25.5 * (first - second) + weight * (second - axis)
        assert project.ground["vertical_stress_mpa"][position] == pytest.approx(stress / 1000)


def test_a_layer_weighs_only_between_terrain_and_axis(tmp_path: Path):
    """A first base that comes out of the ground, and a second one below the tunnel."""
    deep = ("0,gouge,165", "150,gouge,165", "0,siltstone,90", "150,siltstone,90")
    project = read(
        tmp_path, levelled(AXIS, LAYERED[0], table("layers.csv", LAYERS_TABLE[0], *deep))
    )
    terrain = terrain_of(project)
    assert np.any(terrain < 165)
    assert np.any(terrain > 165)
    first = np.minimum(terrain, 165)
    stress = 22 * (terrain - first) + 25.5 * (first - axis_of(project))
    assert_same(project.ground["vertical_stress_mpa"], stress / 1000)


def test_layers_all_of_one_weight_give_the_weight_of_the_cover(tmp_path: Path):
    """The stress at the axis: unit weight times cover and radius."""
    same = [line.replace("gouge,", "sandstone,") for line in LAYERS_TABLE[:3]]
    project = read(tmp_path, levelled(AXIS, LAYERED[0], table("layers.csv", *same)))
    own = project.ground["ground_unit"] == "sandstone"
    of_cover = 25 * (project.ground["cover_m"] + 3) / 1000
    assert own.any()
    assert_same(project.ground["vertical_stress_mpa"][own], of_cover[own])


def test_a_stress_in_the_table_goes_before_one_from_layers(tmp_path: Path):
    stated = ground(",vertical_stress_mpa", ",", ",4.5", ",", ",")
    project = read(tmp_path, levelled(AXIS, *LAYERED, stated))
    silt = project.ground["ground_unit"] == "siltstone"
    assert set(project.ground["vertical_stress_mpa"][silt].tolist()) == {4.5}


def origins(project: Project) -> dict[str, set[str]]:
    return {found.quantity: set(found.origin.tolist()) for found in project.origins}


def test_what_follows_from_levels_says_so(tmp_path: Path):
    found = origins(read(tmp_path, levelled(AXIS, *LAYERED, *WATERED)))
    for name in ("cover_m", "water_head_m", "vertical_stress_mpa"):
        assert found[name] == {"levels"}
    assert found["gsi"] == {"unit"}


REFUSED: dict[str, tuple[Damage, list[str]]] = {
    "terrain-too-short": (
        levelled(AXIS, table("terrain.csv", "chainage_m,level_m", "0,160", "140,170")),
        [
            'project.yaml:9:3: key "ground.terrain" reaches from 0 to 140 m, '
            "not to the section at 145 m"
        ],
    ),
    "axis-too-short": (
        levelled(AXIS, table("axis.csv", "chainage_m,level_m", "10,100", "150,103")),
        [
            'project.yaml:5:3: key "opening.axis" reaches from 10 to 150 m, '
            "not to the section at 4.5 m"
        ],
    ),
    "first-layer-too-short": (
        levelled(AXIS, *LAYERED, replaced("layers.csv", "150,gouge,150\n", "100,gouge,150\n")),
        [
            'project.yaml:9:3: key "ground.layers" reaches from 0 to 100 m, '
            "not to 5 sections from 105 to 145 m"
        ],
    ),
    "below-the-crown": (
        levelled(AXIS, table("terrain.csv", "chainage_m,level_m", "0,160", "150,95")),
        [
            'project.yaml:9:3: key "ground.terrain" lies up to 8.73333 m below the crown, '
            "in 2 sections from 130 to 140 m on"
        ],
    ),
    "no-axis": (
        levelled("  radius_m: 3.0\n"),
        [
            'project.yaml:8:3: key "ground.terrain" has no use without the level of the tunnel',
        ],
    ),
    "layers-without-terrain": (
        levelled(
            AXIS,
            ground(",cover_m", *[",100"] * 4),
            *LAYERED,
            replaced("project.yaml", "  terrain: terrain.csv\n", ""),
        ),
        ['project.yaml:9:3: key "ground.layers" has no use without terrain'],
    ),
    "layer-without-weight": (
        levelled(AXIS, *LAYERED, replaced("units.csv", "gouge,22,", "gouge,,")),
        [
            "ground.csv:5: the in-situ stress has no value here and none for its ground unit",
            'layers.csv:2:2: column "ground_unit" holds "gouge", which has no unit weight in the '
            "units table",
        ],
    ),
    "layer-of-no-unit": (
        levelled(AXIS, *LAYERED, replaced("layers.csv", "60,siltstone", "60,sitlstone")),
        [
            'layers.csv:5:2: column "ground_unit" holds "sitlstone", which has no unit weight in '
            "the units table",
        ],
    ),
    "layers-upside-down": (
        levelled(
            AXIS,
            LAYERED[0],
            table(
                "layers.csv",
                LAYERS_TABLE[0],
                "0,siltstone,120",
                "150,siltstone,120",
                "0,gouge,150",
                "150,gouge,150",
            ),
        ),
        [
            'layers.csv: column "base_level_m" has the base of "gouge" above that of "siltstone", '
            "which is listed before it"
        ],
    ),
    "level-twice": (
        levelled(AXIS, replaced("terrain.csv", "60,190", "60,190\n60.0005,191")),
        [
            'terrain.csv:4:1: column "chainage_m" holds "60.0005", where a level stands already',
        ],
    ),
    "one-level": (
        levelled(AXIS, table("terrain.csv", "chainage_m,level_m", "0,160")),
        ["terrain.csv: has fewer than two levels"],
    ),
    "no-level": (
        levelled(AXIS, table("terrain.csv", "chainage_m,level_m")),
        ["terrain.csv: has a header and no rows"],
    ),
    "empty-level": (
        levelled(AXIS, replaced("terrain.csv", "60,190", "60,")),
        ['terrain.csv:3:2: column "level_m" is empty'],
    ),
    "level-no-number": (
        levelled(AXIS, replaced("terrain.csv", "60,190", "60,19O")),
        ['terrain.csv:3:2: column "level_m" holds "19O", which is not a number'],
    ),
    "level-beyond-the-earth": (
        levelled(AXIS, replaced("terrain.csv", "60,190", "60,19000")),
        ['terrain.csv:3:2: column "level_m" holds "19000", which is out of range'],
    ),
    "unknown-column": (
        levelled(AXIS, replaced("terrain.csv", "level_m", "levels_m")),
        [
            'terrain.csv:1: column "level_m" is missing',
            'terrain.csv:1:2: column "levels_m" is unknown',
        ],
    ),
    "column-twice": (
        levelled(AXIS, table("terrain.csv", "chainage_m,level_m,level_m", "0,1,1", "150,1,1")),
        ['terrain.csv:1:3: column "level_m" stands twice'],
    ),
    "level-of-nothing": (
        levelled(AXIS.replace(", level_of: axis", "")),
        ['project.yaml:5:9: key "opening.axis.level_of" is missing'],
    ),
    "level-of-the-invert": (
        levelled(AXIS.replace("level_of: axis", "level_of: invert")),
        ['project.yaml:5:27: key "opening.axis.level_of" holds "invert"'],
    ),
    "no-file": (
        levelled(AXIS, lambda project: (project / "terrain.csv").unlink()),
        [
            'project.yaml:9:3: key "ground.terrain" names "terrain.csv", which cannot be '
            "read: there is no such file"
        ],
    ),
}


@pytest.mark.parametrize(("damage", "lines"), REFUSED.values(), ids=REFUSED)
def test_levels_that_do_not_carry_the_alignment_are_refused(tmp_path: Path, damage, lines):
    assert told(tmp_path, damage) == lines


def test_several_lines_that_are_wrong_are_told_at_once(tmp_path: Path):
    lines = told(
        tmp_path,
        levelled(AXIS, *WATERED),
        table("terrain.csv", "chainage_m,level_m", "0,160"),
        table("axis.csv", "chainage_m,level_m", "0,x", "150,100"),
        table("water.csv", "chainage_m,level", "0,1", "150,1"),
    )
    assert [text.split(":")[0] for text in lines] == [
        "axis.csv",
        "terrain.csv",
        "water.csv",
        "water.csv",
    ]


def test_only_the_ends_of_a_line_may_be_missed_by_rounding(tmp_path: Path):
    """Levels at the middles of the first and last section, but for a tenth of a millimetre."""
    ends = table("terrain.csv", "chainage_m,level_m", "4.5001,160", "144.9999,170")
    read(tmp_path / "near", levelled(AXIS, ends))
    far = table("terrain.csv", "chainage_m,level_m", "4.502,160", "145,170")
    assert len(told(tmp_path / "far", levelled(AXIS, far))) == 1
