"""`flags.csv`, the column `flags` and `run.json` of one run tell the same of every flag."""

from __future__ import annotations

import json
from itertools import pairwise
from pathlib import Path

import pytest
from end_to_end.projects import rows, run, write_project

from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.run import run_project

ALIGNMENT = (0.0, 150.0)
RAISED = ("advisory", "outside", "overridden")
SETTINGS = """\
flags:
  not_assessed: outside
  thresholds:
    shallow_cover: {advisory_below: 22, origin: "invented guideline, part 2"}
  overrides:
    - {flag: spalling, from_m: 120, to_m: 140, person: A. Person, reason: invented}
    - {flag: portal, from_m: 0, to_m: 150, person: B. Person, reason: no portal in this drive}
"""


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    project = write_project(tmp_path_factory.mktemp("flags") / "project")
    file = project / "project.yaml"
    file.write_text(file.read_text(encoding="utf-8") + SETTINGS, encoding="utf-8")
    return run_project(project, load_plugins()).folder


@pytest.fixture(scope="module")
def lines(folder: Path) -> list[dict[str, str]]:
    return rows(folder / "flags.csv")


def of_flag(lines: list[dict[str, str]], name: str) -> list[tuple[str, ...]]:
    told = ("from_m", "to_m", "level", "person", "reason")
    return [tuple(line[key] for key in told) for line in lines if line["flag"] == name]


def test_every_flag_covers_the_alignment_exactly_once(lines: list[dict[str, str]]):
    names = [flag.name for flag in load_plugins().flags(())]
    assert list(dict.fromkeys(line["flag"] for line in lines)) == names
    for name in names:
        ends = [(float(v["from_m"]), float(v["to_m"])) for v in lines if v["flag"] == name]
        assert (ends[0][0], ends[-1][1]) == ALIGNMENT
        assert all(before[1] == after[0] for before, after in pairwise(ends))


def test_every_line_says_quantity_threshold_source_meaning_and_remedy(
    lines: list[dict[str, str]],
):
    for line in lines:
        wanted = ("quantity", "threshold", "threshold_source", "meaning", "remedy")
        assert all(line[key] for key in wanted)
        assert bool(line["value"]) == bool(line["chainage_m"])
        if line["level"] in ("advisory", "outside"):
            assert line["value"]
        if line["level"] == "not_assessed":
            assert not line["value"]
            assert line["reason"].startswith("no ")


def test_the_sections_name_what_the_lines_raise(folder: Path, lines: list[dict[str, str]]):
    for section in rows(folder / "sections.csv"):
        at = float(section["chainage_m"])
        raised = [
            line["flag"]
            for line in lines
            if float(line["from_m"]) < at < float(line["to_m"]) and line["level"] in RAISED
        ]
        assert section["flags"] == ";".join(raised)


def test_an_edited_threshold_says_so_and_decides(folder: Path, lines: list[dict[str, str]]):
    """R = 3 m; cover 60 m is 20 R, below 22 and not below 10; 75 m is 25 R."""
    mine = [line for line in lines if line["flag"] == "shallow_cover"]
    assert [(v["to_m"], v["level"], v["value"]) for v in mine] == [
        ("45", "advisory", "20"),
        ("150", "clear", "25"),
    ]
    for line in mine:
        assert "project setting: invented guideline, part 2" in line["threshold_source"]
    told = json.loads((folder / "run.json").read_text(encoding="utf-8"))
    (recorded,) = [flag for flag in told["flags"] if flag["name"] == "shallow_cover"]
    assert recorded["origin"] == mine[0]["threshold_source"]
    assert recorded["threshold"] == "advisory below 22; outside below 4"
    assert told["flag_settings"]["thresholds"] == [
        {
            "flag": "shallow_cover",
            "level": "advisory",
            "side": "below",
            "value": 22.0,
            "origin": "invented guideline, part 2",
        }
    ]


def test_an_override_holds_where_sections_lie_inside(lines: list[dict[str, str]]):
    assert of_flag(lines, "spalling")[-2:] == [
        ("120", "140", "overridden", "A. Person", "invented"),
        ("140", "150", "advisory", "", ""),
    ]
    assert of_flag(lines, "portal") == [
        ("0", "150", "overridden", "B. Person", "no portal in this drive")
    ]


def test_the_manifest_counts_every_section_once_a_flag_and_records_what_the_project_says(
    folder: Path,
):
    told = json.loads((folder / "run.json").read_text(encoding="utf-8"))
    for flag in told["flags"]:
        counts = [flag[level] for level in ("clear", "not_assessed", *RAISED)]
        assert sum(counts) == told["counts"]["sections"]
    settings = told["flag_settings"]
    assert settings["not_assessed"] == "outside"
    assert settings["overrides"][0] == {
        "flag": "spalling",
        "from_m": 120.0,
        "to_m": 140.0,
        "person": "A. Person",
        "reason": "invented",
    }


def test_the_screen_counts_the_raised_and_names_the_others_in_one_place(tmp_path: Path):
    project = write_project(tmp_path / "project")
    told = run(project).stdout
    table = told[told.index("Flags on validity") :]
    first = next(line for line in table.splitlines() if line.lstrip().startswith("squeezing"))
    assert first.split()[:3] == ["squeezing", "3", "the"]
    assert "portal" not in table[: table.index("not assessed for lack of an input")]
    assert "portal" in table[table.index("not assessed for lack of an input") :]
