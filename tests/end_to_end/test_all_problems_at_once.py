"""One pass over a project tells all that is wrong with it."""

from __future__ import annotations

from pathlib import Path

from end_to_end.projects import all_of, replaced, tunnelcalc
from end_to_end.refusals import assert_refused, message

DAMAGE = all_of(
    replaced("project.yaml", "radius_m: 3.0", "radius_m: 300"),
    replaced("project.yaml", "kind: shotcrete", "kind: shotcreet"),
    replaced("project.yaml", "closure_pct: 1.0", "closure_pct: 1,0"),
    replaced("project.yaml", "carry_m: 5", "carry_m: 5\ncarried_m: 5"),
    replaced("ground.csv", "45,70,siltstone,75", "40,70,siltstnoe,-75"),
    replaced("ground.csv", "200,", "200 m,"),
    replaced("units.csv", "sandstone,25,1,55,17,62", "sandstone,25,1,55,17,162"),
    replaced("units.csv", "dilation_deg", "dilatation_deg"),
)

ALL = [
    'project.yaml:4:3: key "opening.radius_m" holds "300", which is out of range',
    "  allowed: a number at least 0.5, at most 30, in m",
    "  fix: correct the value, and check its unit",
    (
        'project.yaml:26:9: key "support_classes[2].elements[1].kind" names "shotcreet", '
        "a kind of support that no plugin handles"
    ),
    "  allowed: friction_bolts or grouted_rock_bolts or lattice_girders or rock_bolts or "
    "shotcrete or steel_sets",
    '  fix: did you mean "shotcrete"?',
    'project.yaml:41:3: key "criteria.closure_pct" holds "1,0", which is not a number',
    "  allowed: a number above 0, at most 100, in %",
    "  fix: write 1.0, with a decimal point",
    'project.yaml:45:1: key "carried_m" is unknown',
    "  allowed: title, chainage, opening, methods, plugins, criteria, ground, tables, "
    "support_classes, schedule, flags",
    "  fix: remove it, or correct its name",
    (
        "ground.csv:3: the interval 40 to 70 m overlaps the interval 0 to 45 m of "
        "ground.csv:2 by 5 m"
    ),
    "  allowed: each metre of the alignment in one interval",
    "  fix: correct the ends, or remove one of the two",
    'ground.csv:3:3: column "ground_unit" holds "siltstnoe", which units.csv does not name',
    "  allowed: gouge, sandstone, siltstone",
    '  fix: did you mean "siltstone"?',
    'ground.csv:3:4: column "cover_m" holds "-75", which is out of range',
    "  interval 40 to 70 m; allowed: a number at least 0, at most 10000, in m",
    "  fix: correct the value, and check its unit",
    'ground.csv:5:4: column "cover_m" holds "200 m", which is not a number',
    "  interval 120 to 150 m; allowed: a number at least 0, at most 10000, in m",
    "  fix: write a plain number with a decimal point, without unit or thousands separator",
    'units.csv:1:9: column "dilatation_deg" is unknown',
    '  fix: did you mean "dilation_deg"?',
    'units.csv:2:6: column "gsi" holds "162", which is out of range',
    '  ground unit "sandstone"; allowed: a number above 0, at most 100',
    "  fix: correct the value, and check its unit",
]


def test_problems_of_all_files_are_told_together_by_file_and_line(project: Path):
    assert_refused(project, (DAMAGE, *ALL))


def test_validate_lists_the_same_problems_on_standard_output(project: Path):
    DAMAGE(project)
    ended = tunnelcalc("validate", project, folder=project)
    assert (ended.returncode, ended.stdout, ended.stderr) == (2, message(ALL), "")
    assert ended.stdout.endswith("\n10 problems found\n")


def test_stages_lists_the_same_problems(project: Path):
    DAMAGE(project)
    ended = tunnelcalc("stages", project, folder=project)
    assert (ended.returncode, ended.stdout, ended.stderr) == (2, "", message(ALL))


def test_a_wrong_file_is_told_before_the_tables_that_it_names(project: Path):
    """Also where the table's problem is found first."""
    replaced("ground.csv", "siltstone,75", "siltstone,x")(project)
    replaced("project.yaml", "carry_m: 5", "carry_m: x")(project)
    told = tunnelcalc("validate", project, folder=project).stdout
    assert told.index("project.yaml:44:3") < told.index("ground.csv:3:4")
