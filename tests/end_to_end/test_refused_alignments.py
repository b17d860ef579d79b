"""Intervals, gaps and ground units that a run refuses, with the whole message."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import Damage, all_of, replaced
from end_to_end.refusals import Case, assert_refused_here


def declared_gap(gap: str) -> Damage:
    length = "  section_length_m: 10\n"
    return replaced("project.yaml", length, f"{length}  gaps: [{gap}]\n")


CASES: dict[str, Case] = {
    "end-before-start": (
        replaced("ground.csv", "45,70", "70,45"),
        'ground.csv:3:2: column "to_m" holds 45, which is not above from_m, 70',
        "  allowed: a chainage more than 1 mm above from_m",
        "  fix: write the lower chainage as from_m",
    ),
    "no-length": (
        replaced("ground.csv", "45,70", "45,45"),
        'ground.csv:3:2: column "to_m" holds 45, which is not above from_m, 45',
        "  allowed: a chainage more than 1 mm above from_m",
        "  fix: write the lower chainage as from_m",
    ),
    "overlap": (
        replaced("ground.csv", "45,70", "40,70"),
        (
            "ground.csv:3: the interval 40 to 70 m overlaps the interval 0 to 45 m of "
            "ground.csv:2 by 5 m"
        ),
        "  allowed: each metre of the alignment in one interval",
        "  fix: correct the ends, or remove one of the two",
    ),
    "interval-inside-another": (
        replaced("ground.csv", "120,150", "72,75"),
        (
            "ground.csv:5: the interval 72 to 75 m overlaps the interval 70 to 120 m of "
            "ground.csv:4 by 3 m"
        ),
        "  allowed: each metre of the alignment in one interval",
        "  fix: correct the ends, or remove one of the two",
    ),
    "repeated-interval": (
        replaced("ground.csv", "70,120,sandstone,90", "45,70,sandstone,90"),
        "ground.csv:4: the interval 45 to 70 m repeats the interval 45 to 70 m of ground.csv:3",
        "  allowed: each metre of the alignment in one interval",
        "  fix: correct the ends, or remove one of the two",
        "ground.csv:5: no ground is given from 70 to 120 m",
        "  before the interval 120 to 150 m; allowed: intervals that meet, or a declared gap",
        "  fix: add the missing interval, or declare the gap under ground: gaps",
    ),
    "undeclared-gap": (
        replaced("ground.csv", "45,70", "45,69.5"),
        "ground.csv:4: no ground is given from 69.5 to 70 m",
        "  before the interval 70 to 120 m; allowed: intervals that meet, or a declared gap",
        "  fix: add the missing interval, or declare the gap under ground: gaps",
    ),
    "declared-gap-overlaps": (
        declared_gap("{from_m: 60, to_m: 80, reason: not investigated}"),
        (
            "project.yaml:9:10: the declared gap 60 to 80 m overlaps the interval 45 to 70 "
            "m of ground.csv:3 by 10 m"
        ),
        "  allowed: each metre of the alignment in one interval",
        "  fix: correct the ends, or remove one of the two",
        (
            "ground.csv:4: the interval 70 to 120 m overlaps the declared gap 60 to 80 m "
            "of project.yaml:9:10 by 10 m"
        ),
        "  allowed: each metre of the alignment in one interval",
        "  fix: correct the ends, or remove one of the two",
    ),
    "declared-gap-after-the-end": (
        declared_gap("{from_m: 150, to_m: 180, reason: not investigated}"),
        "project.yaml:9:10: the declared gap 150 to 180 m lies after all intervals",
        "  allowed: a gap between two intervals",
        "  fix: remove it",
    ),
    "declared-gap-before-the-start": (
        declared_gap("{from_m: -20, to_m: 0, reason: portal}"),
        "project.yaml:9:10: the declared gap -20 to 0 m lies before all intervals",
        "  allowed: a gap between two intervals",
        "  fix: remove it",
    ),
    "declared-gap-too-short": (
        all_of(
            replaced("ground.csv", "45,70,", "45,60,"),
            declared_gap("{from_m: 60, to_m: 65, reason: not investigated}"),
        ),
        "ground.csv:4: no ground is given from 65 to 70 m",
        "  before the interval 70 to 120 m; allowed: intervals that meet, or a declared gap",
        "  fix: add the missing interval, or declare the gap under ground: gaps",
    ),
    "declared-gap-reversed": (
        declared_gap("{from_m: 80, to_m: 60, reason: not investigated}"),
        'project.yaml:9:23: key "ground.gaps[1].to_m" is 60, not above from_m, which is 80',
        "  fix: write the lower chainage as from_m",
    ),
    "declared-gap-without-reason": (
        all_of(replaced("ground.csv", "45,70,", "45,60,"), declared_gap("{from_m: 60, to_m: 70}")),
        'project.yaml:9:10: key "ground.gaps[1].reason" is missing',
        "  allowed: why there is no ground data",
        "  fix: add it",
        "ground.csv:4: no ground is given from 60 to 70 m",
        "  before the interval 70 to 120 m; allowed: intervals that meet, or a declared gap",
        "  fix: add the missing interval, or declare the gap under ground: gaps",
    ),
    "unit-misspelt": (
        replaced("ground.csv", "45,70,siltstone", "45,70,siltstnoe"),
        'ground.csv:3:3: column "ground_unit" holds "siltstnoe", which units.csv does not name',
        "  allowed: gouge, sandstone, siltstone",
        '  fix: did you mean "siltstone"?',
    ),
    "unit-unknown": (
        replaced("ground.csv", "45,70,siltstone", "45,70,marl"),
        'ground.csv:3:3: column "ground_unit" holds "marl", which units.csv does not name',
        "  allowed: gouge, sandstone, siltstone",
        "  fix: add the unit to the units table",
    ),
    "unit-empty": (
        replaced("ground.csv", "45,70,siltstone", "45,70,"),
        'ground.csv:3:3: column "ground_unit" is empty',
        "  allowed: gouge, sandstone, siltstone",
        "  fix: add the unit to the units table",
    ),
    "unit-twice": (
        replaced("units.csv", "gouge,22", "siltstone,22"),
        'ground.csv:5:3: column "ground_unit" holds "gouge", which units.csv does not name',
        "  allowed: sandstone, siltstone",
        "  fix: add the unit to the units table",
        'units.csv:4:1: column "ground_unit" holds "siltstone", which stands already',
        "  allowed: each ground unit once",
        "  fix: give every ground unit one row and a name of its own",
    ),
    "unit-without-name": (
        replaced("units.csv", "siltstone,25.5", ",25.5"),
        'ground.csv:3:3: column "ground_unit" holds "siltstone", which units.csv does not name',
        "  allowed: gouge, sandstone",
        "  fix: add the unit to the units table",
        'units.csv:3:1: column "ground_unit" is empty',
        "  allowed: each ground unit once",
        "  fix: give every ground unit one row and a name of its own",
    ),
}


@pytest.mark.parametrize("case", CASES.values(), ids=CASES.keys())
def test_an_alignment_that_does_not_fit_together_is_refused(
    project: Path, case: Case, capsys: pytest.CaptureFixture[str]
):
    assert_refused_here(project, case, capsys)
