"""Keys and values of the project file that a run refuses, with the whole message."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import PROJECT, all_of, replaced
from end_to_end.refusals import Case, assert_refused_here


def without_classes(project: Path) -> None:
    before, after = PROJECT.index("  - name"), PROJECT.index("criteria:")
    (project / "project.yaml").write_text(PROJECT[:before] + "  []\n" + PROJECT[after:])


CASES: dict[str, Case] = {
    "key-misspelt": (
        replaced("project.yaml", "radius_m: 3.0", "raduis_m: 3.0"),
        'project.yaml:4:3: key "opening.radius_m" is missing',
        "  allowed: a number at least 0.5, at most 30, in m",
        "  fix: add it",
        'project.yaml:4:3: key "opening.raduis_m" is unknown',
        "  allowed: axis, profiles, radius_m, span_m, height_m, area_m2, equivalent_radius",
        '  fix: did you mean "radius_m"?',
    ),
    "key-unknown": (
        replaced("project.yaml", "carry_m: 5\n", "carry_m: 5\ncolour: grey\n"),
        'project.yaml:45:1: key "colour" is unknown',
        "  allowed: title, chainage, opening, methods, plugins, criteria, ground, tables, "
        "support_classes, schedule, flags",
        "  fix: remove it, or correct its name",
    ),
    "key-missing": (
        replaced("project.yaml", "  carry_m: 5\n", ""),
        'project.yaml:43:3: key "schedule.carry_m" is missing',
        "  allowed: a number at least 0, at most 100000, in m",
        "  fix: add it",
    ),
    "title-empty": (
        replaced("project.yaml", "title: Invented culvert drive", "title:"),
        'project.yaml:2:1: key "title" is empty',
        "  allowed: text",
        "  fix: write a value",
    ),
    "radius-in-centimetres": (
        replaced("project.yaml", "radius_m: 3.0", "radius_m: 300"),
        'project.yaml:4:3: key "opening.radius_m" holds "300", which is out of range',
        "  allowed: a number at least 0.5, at most 30, in m",
        "  fix: correct the value, and check its unit",
    ),
    "radius-with-comma": (
        replaced("project.yaml", "radius_m: 3.0", "radius_m: 3,0"),
        'project.yaml:4:3: key "opening.radius_m" holds "3,0", which is not a number',
        "  allowed: a number at least 0.5, at most 30, in m",
        "  fix: write 3.0, with a decimal point",
    ),
    "radius-a-list": (
        replaced("project.yaml", "radius_m: 3.0", "radius_m: [3.0, 4.0]"),
        'project.yaml:4:3: key "opening.radius_m" holds a list',
        "  allowed: a number at least 0.5, at most 30, in m",
        "  fix: write a single value",
    ),
    "factor-below-1": (
        replaced("project.yaml", "factor_of_safety: 1.5", "factor_of_safety: 0.9"),
        'project.yaml:40:3: key "criteria.factor_of_safety" holds "0.9", which is out of range',
        "  allowed: a number at least 1, at most 10",
        "  fix: correct the value, and check its unit",
    ),
    "closure-limit-0": (
        replaced("project.yaml", "closure_pct: 1.0", "closure_pct: 0"),
        'project.yaml:41:3: key "criteria.closure_pct" holds "0", which is out of range',
        "  allowed: a number above 0, at most 100, in %",
        "  fix: correct the value, and check its unit",
    ),
    "method-misspelt": (
        replaced(
            "project.yaml",
            "support_classes:\n",
            "methods:\n  deformation_modulus: hoek_diedrichs_2006\nsupport_classes:\n",
        ),
        'project.yaml:10:3: key "methods.deformation_modulus" holds "hoek_diedrichs_2006"',
        "  allowed: barton_2002 or bieniawski_1978 or hoek_2002 or hoek_diederichs_2006 or "
        "hoek_diederichs_2006_simplified or serafim_pereira_1983",
        '  fix: did you mean "hoek_diederichs_2006"?',
    ),
    "plugin-misspelt": (
        replaced("project.yaml", "support_classes:\n", "plugins: [shotcret]\nsupport_classes:\n"),
        'project.yaml:9:11: key "plugins" names "shotcret", a plugin that is not there',
        "  allowed: ags_reader, class_checks, composite_lining, csv_reader, empirical, methods, "
        "report, rock_bolts, schedule_tables, shotcrete, steel_sets, validity_flags, "
        "verification_checks, xlsx_reader",
        '  fix: did you mean "shotcrete"?',
    ),
    "plugin-unknown": (
        replaced("project.yaml", "support_classes:\n", "plugins: [ice_lenses]\nsupport_classes:\n"),
        'project.yaml:9:11: key "plugins" names "ice_lenses", a plugin that is not there',
        "  allowed: ags_reader, class_checks, composite_lining, csv_reader, empirical, methods, "
        "report, rock_bolts, schedule_tables, shotcrete, steel_sets, validity_flags, "
        "verification_checks, xlsx_reader",
        "  fix: install it, name its file with --plugin-file, or remove the entry",
    ),
    "class-key-missing": (
        replaced("project.yaml", "        capacity_kn: 150\n", ""),
        'project.yaml:13:9: key "support_classes[1].elements[1].capacity_kn" is missing',
        "  allowed: a number above 0, at most 5000, in kN",
        "  fix: add it",
    ),
    "kind-misspelt": (
        replaced("project.yaml", "kind: shotcrete", "kind: shotcreet"),
        (
            'project.yaml:26:9: key "support_classes[2].elements[1].kind" names '
            '"shotcreet", a kind of support that no plugin handles'
        ),
        "  allowed: friction_bolts or grouted_rock_bolts or lattice_girders or rock_bolts or "
        "shotcrete or steel_sets",
        '  fix: did you mean "shotcrete"?',
    ),
    "kind-unknown": (
        replaced("project.yaml", "kind: shotcrete", "kind: timber"),
        (
            'project.yaml:26:9: key "support_classes[2].elements[1].kind" names "timber", '
            "a kind of support that no plugin handles"
        ),
        "  allowed: friction_bolts or grouted_rock_bolts or lattice_girders or rock_bolts or "
        "shotcrete or steel_sets",
        "  fix: install the plugin that offers it",
    ),
    "embedded-set-with-blocks": (
        replaced(
            "project.yaml",
            "contact: embedded\n",
            "contact: embedded\n        block_spacing_deg: 20\n",
        ),
        (
            'project.yaml:39:9: key "support_classes[2].elements[2].block_spacing_deg" has '
            "no use with contact: embedded"
        ),
        "  fix: remove it, or write contact: blocked",
    ),
    "blocked-set-without-blocks": (
        replaced("project.yaml", "contact: embedded", "contact: blocked"),
        'project.yaml:31:9: key "support_classes[2].elements[2].block_spacing_deg" is missing',
        "  allowed: a number at least 1, at most 120, in deg",
        "  fix: add it",
        'project.yaml:31:9: key "support_classes[2].elements[2].block_thickness_mm" is missing',
        "  allowed: a number at least 0, at most 2000, in mm",
        "  fix: add it",
        'project.yaml:31:9: key "support_classes[2].elements[2].block_width_mm" is missing',
        "  allowed: a number at least 10, at most 2000, in mm",
        "  fix: add it",
        'project.yaml:31:9: key "support_classes[2].elements[2].block_modulus_gpa" is missing',
        "  allowed: a number above 0, at most 300, in GPa",
        "  fix: add it",
    ),
    "anchorage-as-long-as-the-bolt": (
        replaced("project.yaml", "anchorage_length_m: 1.0", "anchorage_length_m: 3.5"),
        (
            'project.yaml:21:9: key "support_classes[1].elements[1].anchorage_length_m" is '
            "3.5 m, not shorter than the bolt, 3.5 m"
        ),
        "  fix: take longer bolts, or correct the anchorage length",
    ),
    "ring-thicker-than-the-radius": (
        all_of(
            replaced("project.yaml", "radius_m: 3.0", "radius_m: 1.0"),
            replaced("project.yaml", "thickness_mm: 150", "thickness_mm: 1500"),
        ),
        (
            'project.yaml:27:9: key "support_classes[2].elements[1].thickness_mm" is 1.5 '
            "m, not less than the radius, 1 m"
        ),
        "  fix: correct the thickness, which is in mm, or the radius",
    ),
    "metres-for-millimetres": (
        replaced("project.yaml", "thickness_mm: 150", "thickness_mm: 0.15"),
        (
            'project.yaml:27:9: key "support_classes[2].elements[1].thickness_mm" holds '
            '"0.15", which is out of range'
        ),
        "  allowed: a number at least 10, at most 2000, in mm",
        "  fix: correct the value, and check its unit",
    ),
    "not-installed-anywhere": (
        replaced("project.yaml", "    installed_at_m: 2.0\n", ""),
        (
            'project.yaml:12:9: key "support_classes[1].elements[1].installed_at_m" is '
            "missing here and in the class"
        ),
        "  allowed: a number at least 0, at most 10000, in m, behind the face",
        "  fix: state it for the class, or for each of its elements",
    ),
    "installed-ahead-of-the-face": (
        replaced("project.yaml", "installed_at_m: 2.0", "installed_at_m: -2.0"),
        (
            'project.yaml:11:5: key "support_classes[1].installed_at_m" holds "-2.0", '
            "which is out of range"
        ),
        "  allowed: a number at least 0, at most 10000, in m",
        "  fix: correct the value, and check its unit",
    ),
    "class-name-twice": (
        replaced("project.yaml", "name: heavy", "name: light"),
        'project.yaml:23:5: key "support_classes[2].name" holds "light", which is taken',
        "  allowed: a name that no other class has; not none_adequate or not_decided",
        "  fix: give the class another name",
    ),
    "class-named-none_adequate": (
        replaced("project.yaml", "name: heavy", "name: none_adequate"),
        'project.yaml:23:5: key "support_classes[2].name" holds "none_adequate", which is taken',
        "  allowed: a name that no other class has; not none_adequate or not_decided",
        "  fix: give the class another name",
    ),
    "no-classes": (
        without_classes,
        'project.yaml:9:1: key "support_classes" is an empty list',
        "  fix: write at least one entry",
    ),
    "no-elements": (
        replaced(
            "project.yaml", "installed_at_m: 1.0\n    elements:", "installed_at_m: 1.0\n    parts:"
        ),
        'project.yaml:23:5: key "support_classes[2].elements" is missing',
        "  allowed: a list",
        "  fix: add it",
        'project.yaml:25:5: key "support_classes[2].parts" is unknown',
        "  allowed: name, installed_at_m, advance_m_per_day, elements",
        "  fix: remove it, or correct its name",
    ),
}


@pytest.mark.parametrize("case", CASES.values(), ids=CASES.keys())
def test_a_project_file_with_a_wrong_key_or_value_is_refused(
    project: Path, case: Case, capsys: pytest.CaptureFixture[str]
):
    assert_refused_here(project, case, capsys)
