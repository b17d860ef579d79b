"""Steel sections of the project's own table, run, explained and repeated. Values are invented."""

from __future__ import annotations

import hashlib
import json
from pathlib import Path

import pytest
from end_to_end.projects import Damage, all_of, completed, replaced, tables_of, tunnelcalc
from end_to_end.refusals import Case, assert_refused_here

OWN = (
    "        section_area_mm2: 4300\n"
    "        section_inertia_mm4: 14500000\n"
    "        section_depth_mm: 140\n"
)
HEADER = "designation,section_area_mm2,section_inertia_mm4,section_depth_mm,source"
KEY = "tables: {steel_sets: {profile: sections.csv}}\n"


def sections(*lines: str, word: str = "ARCH 43") -> Damage:
    def write(project: Path) -> None:
        (project / "sections.csv").write_text("\n".join([HEADER, *lines, ""]), encoding="utf-8")

    key = replaced("project.yaml", "support_classes:\n", f"{KEY}support_classes:\n")
    return all_of(key, replaced("project.yaml", OWN, f"        profile: {word}\n"), write)


SAME = sections("ARCH 43,4300,14500000,140,mill sheet 7")


def test_a_run_keeps_the_table_and_the_sheet_names_the_row(project: Path, finished: Path):
    SAME(project)
    folder = completed(project, out="runs/0002")
    assert tables_of(folder) == tables_of(finished / "runs" / "0001")
    kept = (folder / "inputs" / "sections.csv").read_bytes()
    assert kept == (project / "sections.csv").read_bytes()
    told = json.loads((folder / "run.json").read_text(encoding="utf-8"))
    hashes = {entry["path"]: entry["sha256"] for entry in told["inputs"]}
    assert hashes["sections.csv"] == hashlib.sha256(kept).hexdigest()
    sheet = tunnelcalc("explain", folder, "--at", "5", "--class", "heavy", folder=project)
    assert sheet.returncode == 0, sheet.stderr
    assert "ARCH 43: sections.csv:2, mill sheet 7" in sheet.stdout
    again = project.parent / "again"
    completed(folder / "inputs", "--out", again)
    assert tables_of(again) == tables_of(folder)


CASES: dict[str, Case] = {
    "rows": (
        sections("ARCH 43,4300,14500000,140,", "arch 43,430,14500000,14,", "HEB 160,,1e7,140,"),
        'sections.csv:3:1: column "designation" holds "arch 43", which stands already at '
        "sections.csv:2",
        "  fix: give the row a name that no other has",
        'sections.csv:3:3: column "section_inertia_mm4" is 1.45e+07 mm4, more than this area and '
        "depth can have, 21070 mm4",
        "  fix: correct the units: area in mm2, depth in mm, second moment in mm4",
        'sections.csv:4:1: column "designation" holds "HEB 160", which is a word of the program\'s '
        "own",
        "  fix: give the row a name that no other has",
        'sections.csv:4:2: column "section_area_mm2" is empty',
        "  fix: write the value",
    ),
    "misspelt": (
        replaced("project.yaml", OWN, "        profile: HE 160 B\n"),
        'project.yaml:32:9: key "support_classes[2].elements[2].profile" holds "HE 160 B"',
        "  allowed: HEA 160 or HEB 160 or HEM 160 or IPE 160 or HEA 100 or one of 75 more",
        '  fix: did you mean "HEA 160", "HEB 160" or "HEM 160"?',
    ),
    "own-section": (
        replaced("project.yaml", "mm4: 14500000", "mm4: 1450000"),
        'project.yaml:33:9: key "support_classes[2].elements[2].section_inertia_mm4" is 1.45e+06 '
        "mm4, less than a rhombus of this area and depth has, 3.51167e+06 mm4",
        "  fix: correct the units: area in mm2, depth in mm, second moment in mm4",
    ),
    "age-twice": (
        all_of(
            replaced(
                "project.yaml", "  - name: heavy\n", "  - name: heavy\n    advance_m_per_day: 4\n"
            ),
            replaced(
                "project.yaml",
                "        poisson_ratio: 0.2\n",
                "        poisson_ratio: 0.2\n        hardening: meschke_1996\n"
                "        early_strength: at_two_ages\n"
                "        early_age_1_hours: 24\n        early_strength_1_mpa: 4\n"
                "        early_age_2_hours: 24\n        early_strength_2_mpa: 5\n",
            ),
        ),
        'project.yaml:36:9: key "support_classes[2].elements[1].early_age_2_hours" is 24 h, for '
        "which a strength is required already",
        "  fix: state each age once, or lower early_strength to as many ages as there are",
    ),
}


@pytest.mark.parametrize("case", CASES.values(), ids=CASES.keys())
def test_what_does_not_fit_is_refused(
    project: Path, case: Case, capsys: pytest.CaptureFixture[str]
):
    assert_refused_here(project, case, capsys)
