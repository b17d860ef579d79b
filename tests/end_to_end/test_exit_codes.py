"""How a run ends, and which of two endings goes before the other."""

from __future__ import annotations

import json
from pathlib import Path

from end_to_end.foreign import check_plugin, install
from end_to_end.projects import replaced, run, tunnelcalc

FAILS_EVERYWHERE = check_plugin("broken", 'raise ValueError("no table for this ring")')


def exit_code_told(project: Path, out: str) -> int:
    return json.loads((project / out / "run.json").read_text())["exit_code"]


def test_a_complete_run_ends_with_0_although_a_section_has_no_adequate_class(project: Path):
    ended = run(project, "--out", "out")
    assert ended.returncode == exit_code_told(project, "out") == 0
    assert ended.stderr == ""
    assert "attention: 3 of 16 sections have no adequate class\n" in ended.stdout


def test_strict_ends_with_4_where_a_section_has_no_adequate_class(project: Path):
    ended = run(project, "--strict", "--out", "out")
    assert ended.returncode == exit_code_told(project, "out") == 4
    assert (project / "out" / "schedule.csv").is_file()


def test_strict_ends_with_0_where_every_section_has_an_adequate_class(project: Path):
    replaced("ground.csv", "gouge,200,", "siltstone,75,0.4")(project)
    ended = run(project, "--strict", "--out", "out")
    assert ended.returncode == exit_code_told(project, "out") == 0
    assert "attention" not in ended.stdout


def test_something_not_evaluated_ends_with_3_before_4(project: Path, tmp_path: Path):
    environment = install(tmp_path / "site", "broken", FAILS_EVERYWHERE)
    replaced("project.yaml", "support_classes:", "plugins: [broken]\nsupport_classes:")(project)
    ended = run(project, "--strict", "--out", "out", environment=environment)
    assert ended.returncode == exit_code_told(project, "out") == 3


def test_wrong_input_ends_with_2_before_3(project: Path, tmp_path: Path):
    environment = install(tmp_path / "site", "broken", FAILS_EVERYWHERE)
    replaced("project.yaml", "support_classes:", "plugins: [broken]\nsupport_classes:")(project)
    replaced("project.yaml", "carry_m: 5", "carry_m: -5")(project)
    ended = run(project, "--strict", "--out", "out", environment=environment)
    assert ended.returncode == 2
    assert not (project / "out").exists()


def test_help_tells_the_exit_codes(tmp_path: Path):
    ended = tunnelcalc("--help", folder=tmp_path)
    told = " ".join(ended.stdout.split())
    assert ended.returncode == 0
    for code in (
        "0 complete;",
        "1 defect or machine failure;",
        "2 wrong input;",
        "3 complete, but something could not be evaluated;",
        "4 with --strict, a section has no adequate class;",
        "6 the folder was filled by another run;",
        "130 interrupted.",
    ):
        assert code in told
    assert "no substitute for, licensed engineering judgement" in told
