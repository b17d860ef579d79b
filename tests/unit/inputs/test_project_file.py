"""The project file: values that are taken as they are meant, and support classes."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import content, replaced
from unit.inputs.reading import read, told

from tunnelcalc.text import quoted

SETS = "      - kind: steel_sets"
RING = """\
      - kind: shotcrete
        installed_at_m: 9
        thickness_mm: 100
        strength_mpa: 25
        modulus_gpa: 10
        poisson_ratio: 0.2
"""


def test_an_element_states_its_own_distance_or_takes_that_of_the_class(tmp_path: Path):
    project = read(tmp_path, replaced("project.yaml", SETS, RING + SETS))
    elements = project.support_classes[1].elements
    assert [(element.label, element.installed_at_m) for element in elements] == [
        ("shotcrete", 1.0),
        ("shotcrete_2", 9.0),
        ("steel_sets", 1.0),
    ]


def test_a_class_needs_no_distance_where_each_element_has_one(tmp_path: Path):
    project = read(
        tmp_path,
        replaced("project.yaml", "    installed_at_m: 2.0\n", ""),
        replaced(
            "project.yaml", "kind: rock_bolts\n", "kind: rock_bolts\n        installed_at_m: 0\n"
        ),
    )
    assert project.support_classes[0].elements[0].installed_at_m == 0


def test_methods_that_are_not_named_are_the_default_ones(tmp_path: Path):
    methods = read(tmp_path).methods
    assert {step: choice.names for step, choice in methods.items()} == {
        "strength": ("hoek_brown_2002",),
        "deformation_modulus": ("hoek_diederichs_2006",),
        "ground_reaction": ("hoek_brown_perfectly_plastic",),
        "closure_profile": ("vlachopoulos_diederichs_2009",),
    }
    assert not any(choice.by_unit for choice in methods.values())


@pytest.mark.parametrize("title", ["no", "2024", "1:20", "'a # b'", ">\n  folded\n  title", "Füße"])
def test_any_text_may_be_a_title(tmp_path: Path, title: str):
    project = read(tmp_path, replaced("project.yaml", "Invented culvert drive", title))
    assert project.title == " ".join(title.strip(">'").split())


@pytest.mark.parametrize(
    "title", ['"two\\nlines"', '"\\e[31mred"', "|\n  two\n  lines", '"\\ud800"']
)
def test_a_title_is_one_printable_line(tmp_path: Path, title: str):
    assert told(tmp_path, replaced("project.yaml", "Invented culvert drive", title)) == [
        'project.yaml:2:1: key "title" holds control characters or line breaks'
    ]


def test_numbers_may_be_written_in_any_plain_way(tmp_path: Path):
    project = read(tmp_path, replaced("project.yaml", "radius_m: 3.0", "radius_m: '+30e-1'"))
    assert set(project.ground["radius_m"].tolist()) == {3.0}


@pytest.mark.parametrize("value", [".nan", ".inf", "0x3", "1_0", "3:20", "3 m", "yes"])
def test_what_yaml_alone_takes_for_a_number_is_none(tmp_path: Path, value: str):
    assert told(tmp_path, replaced("project.yaml", "radius_m: 3.0", f"radius_m: {value}")) == [
        f'project.yaml:4:3: key "opening.radius_m" holds "{value}", which is not a number'
    ]


@pytest.mark.parametrize(
    ("old", "new", "problem"),
    [
        pytest.param(
            "opening:\n  radius_m: 3.0",
            "opening: 3.0",
            'project.yaml:3:1: key "opening" holds "3.0"',
            id="value-for-keys",
        ),
        pytest.param(
            "opening:\n  radius_m: 3.0",
            "opening:",
            'project.yaml:3:1: key "opening" holds nothing',
            id="nothing-for-keys",
        ),
        pytest.param(
            "title: Invented culvert drive",
            "title: {a: 1}",
            'project.yaml:2:1: key "title" holds keys with values',
            id="keys-for-a-value",
        ),
        pytest.param(
            "support_classes:\n",
            "support_classes:\n  - light\n",
            'project.yaml:10:5: entry "support_classes[1]" holds "light"',
            id="value-for-an-entry",
        ),
        pytest.param(
            "support_classes:\n",
            "methods:\n  strength: hoek_brown_2018\nsupport_classes:\n",
            'project.yaml:10:3: key "methods.strength" holds "hoek_brown_2018"',
            id="method",
        ),
        pytest.param(
            "support_classes:\n",
            "plugins: [[a]]\nsupport_classes:\n",
            'project.yaml:9:11: entry "plugins[1]" holds a list',
            id="list-for-a-plugin",
        ),
        pytest.param(
            "kind: shotcrete",
            "form: shotcrete",
            'project.yaml:26:9: key "support_classes[2].elements[1].kind" is missing',
            id="no-kind",
        ),
        pytest.param(
            "contact: embedded",
            "contact: embeded",
            'project.yaml:38:9: key "support_classes[2].elements[2].contact" holds "embeded"',
            id="choice",
        ),
        pytest.param(
            "section_inertia_mm4: 14500000",
            "section_inertia_mm4: 145000000",
            'project.yaml:33:9: key "support_classes[2].elements[2].section_inertia_mm4" is '
            "1.45e+08 mm4, more than this area and depth can have, 2.107e+07 mm4",
            id="units-of-a-profile",
        ),
        pytest.param(
            "name: heavy",
            "name: not_decided",
            'project.yaml:23:5: key "support_classes[2].name" holds "not_decided", which is taken',
            id="reserved-name",
        ),
    ],
)
def test_a_value_of_the_wrong_sort_is_told(tmp_path: Path, old: str, new: str, problem: str):
    assert told(tmp_path, replaced("project.yaml", old, new)) == [problem]


def test_a_wrong_distance_of_a_class_is_told_once(tmp_path: Path):
    assert told(
        tmp_path, replaced("project.yaml", "installed_at_m: 2.0", "installed_at_m: ahead")
    ) == [
        'project.yaml:11:5: key "support_classes[1].installed_at_m" holds "ahead", which is not a '
        "number"
    ]


@pytest.mark.parametrize(
    "path", ["./ground.csv", "a/../ground.csv", ".//ground.csv", "'ground.csv '"]
)
def test_a_table_may_be_named_by_any_path_inside_the_project(tmp_path: Path, path: str):
    project = read(tmp_path, replaced("project.yaml", "table: ground.csv", f"table: {path}"))
    assert [file.path for file in project.files] == ["ground.csv", "project.yaml", "units.csv"]


@pytest.mark.parametrize("path", ["..", "../../x.csv", "a/../../x.csv", "/etc/x.csv"])
def test_no_path_leads_out_of_the_project(tmp_path: Path, path: str):
    (first,) = told(tmp_path, replaced("project.yaml", "table: ground.csv", f"table: {path}"))
    assert first.startswith(f'project.yaml:6:3: key "ground.table" names "{path}", which')


def test_an_absolute_path_is_refused_even_inside_the_project(tmp_path: Path):
    """A copy of the project could not be run from elsewhere."""
    path = tmp_path / "project" / "ground.csv"
    assert told(tmp_path, replaced("project.yaml", "table: ground.csv", f"table: {path}")) == [
        f'project.yaml:6:3: key "ground.table" names {quoted(str(path))}, an absolute path'
    ]


def test_a_file_that_is_one_long_line_is_told_in_a_short_one(tmp_path: Path):
    (first,) = told(tmp_path, content("units.csv", b"ground_unit," + b"x" * 100_000))[:1]
    assert len(first) < 150
