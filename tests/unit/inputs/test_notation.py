"""Chainages and their notation that are refused, told as the user wrote them."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import Damage, all_of, replaced
from unit.inputs.arriving import project_key, table
from unit.inputs.reading import read

from tunnelcalc.errors import InputError

FALLING = all_of(
    project_key(
        'chainage: {notation: km+m, prefix: "K ", direction: descending, start: "5+000",\n'
        '  equations: [{back: "4+950", ahead: "4+900"}]}\n'
    ),
    table(
        "ground.csv",
        "from_m,to_m,ground_unit,cover_m",
        "K 5+000.00,K 4+955.00,sandstone,60",
        "K 4+955.00,K 4+880.00,siltstone,75",
        "K 4+880.00,K 4+850.00,sandstone,90",
        "K 4+850.00,K 4+800.00,gouge,200",
    ),
)
"""The drive falls from K 5+000; at K 4+950, axis metre 50, it goes on as K 4+900."""


def refusal(folder: Path, damage: Damage) -> list[str]:
    with pytest.raises(InputError) as caught:
        read(folder, FALLING, damage)
    return str(caught.value).splitlines()


def test_the_undamaged_project_is_read(tmp_path: Path):
    project = read(tmp_path, FALLING)
    assert (project.ground["from_m"][0], project.ground["to_m"][-1]) == (0, 150)


NOTATION_REFUSED = {
    "on-no-stretch": (
        ("K 4+955.00,K 4+880", "K 4+920.00,K 4+880"),
        [
            'ground.csv:3:1: column "from_m" holds "K 4+920.00", which lies on no stretch of the '
            "alignment",
            "  interval K 4+920.00 to K 4+880.00 m; allowed: 12345.6 or 12+345.60",
            "  fix: write a chainage of this alignment",
        ],
    ),
    "no-chainage": (
        ("K 4+955.00,K 4+880", "K 4+95.00,K 4+880"),
        [
            'ground.csv:3:1: column "from_m" holds "K 4+95.00", which is not a chainage',
            "  interval K 4+95.00 to K 4+880.00 m; allowed: 12345.6 or 12+345.60",
            "  fix: write a chainage of this alignment",
        ],
    ),
    "reversed": (
        ("K 4+850.00,K 4+800.00", "K 4+800.00,K 4+850.00"),
        [
            'ground.csv:5:2: column "to_m" holds K 4+850.00, which is not beyond from_m, '
            "K 4+800.00",
            "  allowed: a chainage more than 1 mm beyond from_m",
            "  fix: write the higher chainage as from_m",
        ],
    ),
}
EQUATION_REFUSED = {
    "ambiguous": (
        ('ahead: "4+900"', 'ahead: "4+970"'),
        'holds "K 4+955.00", which occurs twice: write K 4+955.00@1 or K 4+955.00@2',
    ),
    "out-of-order": (
        (
            '{back: "4+950", ahead: "4+900"}',
            '{back: "4+950", ahead: "4+900"}, {back: 4930, ahead: 1}',
        ),
        'key "chainage.equations[2].back" is 4930, not beyond 4900, where its stretch begins',
    ),
    "before-the-start": (
        ('back: "4+950"', 'back: "5+950"'),
        'key "chainage.equations[1].back" is 5950, not beyond 5000, where its stretch begins',
    ),
    "falling-without-start": (
        (' start: "5+000",', ""),
        'key "chainage.start" is missing',
    ),
    "prefix-that-counts": (
        ('prefix: "K "', 'prefix: "4"'),
        'key "chainage.prefix" holds "4", which may be taken for a part of the number',
    ),
    "unknown-notation": (
        ("notation: km+m", "notation: km"),
        'key "chainage.notation" holds "km"',
    ),
    "unknown-direction": (
        ("direction: descending", "direction: down"),
        'key "chainage.direction" holds "down"',
    ),
}


@pytest.mark.parametrize(("slip", "lines"), NOTATION_REFUSED.values(), ids=NOTATION_REFUSED)
def test_a_chainage_that_is_wrong_is_told_as_it_is_written(tmp_path: Path, slip, lines):
    assert refusal(tmp_path, replaced("ground.csv", *slip))[:3] == lines


@pytest.mark.parametrize(("slip", "message"), EQUATION_REFUSED.values(), ids=EQUATION_REFUSED)
def test_a_notation_that_is_wrong_is_refused(tmp_path: Path, slip, message):
    told = refusal(tmp_path, replaced("project.yaml", *slip))
    assert any(line.endswith(message) for line in told), told


def test_a_gap_without_an_end_is_refused(tmp_path: Path):
    gap = replaced(
        "project.yaml",
        "  units: units.csv\n",
        "  units: units.csv\n  gaps: [{from_m: 4+800, to_m: 1e400, reason: none}]\n",
    )
    assert refusal(tmp_path, gap)[0].endswith('holds "1e400", which is beyond 10000 km')
