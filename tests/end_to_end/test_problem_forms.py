"""Problems for people and for programs: capped on the screen, whole in a file, one document."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
from end_to_end.projects import files_of, replaced, tunnelcalc

from tunnelcalc.cli.main import main

MANY = 120
SHOWN = 50
RECORD_KEYS = ["file", "line", "column", "sheet", "cell", "name", "message"]
RECORD_KEYS += ["value", "allowed", "context", "fix"]


@pytest.fixture
def crowded(project: Path) -> Path:
    """The project with many problems in its ground table."""
    lines = [f"{10 * i},{10 * i + 10},sandstone,x,1.1" for i in range(MANY)]
    head = "from_m,to_m,ground_unit,cover_m,block_width_m"
    (project / "ground.csv").write_text("\n".join([head, *lines, ""]))
    return project


@pytest.fixture
def temporary(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    folder = tmp_path / "temporary"
    folder.mkdir()
    monkeypatch.setattr("tempfile.tempdir", str(folder))
    return folder


def streams(command: str, capsys: pytest.CaptureFixture[str]) -> tuple[str, str]:
    """Where a command tells problems, and the other stream."""
    told = capsys.readouterr()
    return (told.out, told.err) if command == "validate" else (told.err, told.out)


@pytest.mark.parametrize("command", ["validate", "run", "stages"])
def test_many_problems_are_capped_with_all_in_a_temporary_file(
    crowded: Path, temporary: Path, capsys, command: str
):
    before = files_of(crowded)
    assert main([command, str(crowded)]) == 2
    told, other = streams(command, capsys)
    assert other == ""
    (file,) = temporary.iterdir()
    *shown, last = told.splitlines()
    assert last == f"{MANY} problems found, {SHOWN} shown; all in {file}"
    assert sum(line.startswith("ground.csv:") for line in shown) == SHOWN
    kept = file.read_text(encoding="utf-8").splitlines()
    assert kept[1 : len(shown) + 1] == shown
    places = [line.split(":")[1] for line in kept if line.startswith("ground.csv:")]
    assert places == [str(line) for line in range(2, MANY + 2)]
    assert kept[-1] == f"{MANY} problems found"
    assert files_of(crowded) == before


@pytest.mark.parametrize("command", ["validate", "run"])
def test_the_named_file_holds_all_and_is_renewed(
    crowded: Path, temporary: Path, tmp_path: Path, capsys, command: str
):
    named = tmp_path / "problems.txt"
    arguments = [command, str(crowded), "--problems", str(named)]
    assert main(arguments) == 2
    told, _ = streams(command, capsys)
    assert told.endswith(f"\n{MANY} problems found, {SHOWN} shown; all in {named}\n")
    assert len(re.findall(r"^ground\.csv:", named.read_text(), flags=re.M)) == MANY
    replaced("project.yaml", "carry_m: 5", "carry_m: x")(crowded)
    (crowded / "ground.csv").write_text("from_m,to_m\n")
    assert main(arguments) == 2
    assert "carry_m" in named.read_text()
    assert len(named.read_text()) < 3000
    assert list(temporary.iterdir()) == []


@pytest.mark.parametrize("command", ["validate", "run"])
def test_the_named_file_says_that_nothing_is_wrong(
    project: Path, tmp_path: Path, capsys, command: str
):
    named = tmp_path / "problems.txt"
    named.write_text("# Problems found by tunnelcalc\nold\n")
    assert main([command, str(project), "--problems", str(named)]) == 0
    assert named.read_text() == "# Problems found by tunnelcalc\nno problems found\n"


def test_a_file_of_the_user_is_not_taken_for_a_list_of_problems(project: Path, capsys):
    before = files_of(project)
    table = project / "ground.csv"
    assert main(["run", str(project), "--problems", str(table)]) == 2
    told = capsys.readouterr().err
    assert told.startswith(f"{table}: --problems holds something else, which is not overwritten\n")
    assert files_of(project) == before


@pytest.mark.parametrize("command", ["validate", "run"])
def test_as_json_every_problem_stands_in_one_document(crowded: Path, command: str):
    replaced("project.yaml", "closure_pct: 1.0", "closure_pct: 1,0")(crowded)
    ended = tunnelcalc(command, ".", "--format", "json", folder=crowded)
    assert (ended.returncode, ended.stderr) == (2, "")
    read = json.loads(ended.stdout)
    assert (read["command"], read["exit_code"], read["count"]) == (command, 2, MANY + 1)
    assert len(read["problems"]) == MANY + 1
    assert all(list(problem) == RECORD_KEYS for problem in read["problems"])
    first, second, *_ = read["problems"]
    assert first == {
        "file": "project.yaml",
        "line": 41,
        "column": 3,
        "sheet": None,
        "cell": None,
        "name": 'key "criteria.closure_pct"',
        "message": 'holds "1,0", which is not a number',
        "value": "1,0",
        "allowed": "a number above 0, at most 100, in %",
        "context": None,
        "fix": "write 1.0, with a decimal point",
    }
    assert (second["file"], second["line"], second["value"]) == ("ground.csv", 2, "x")
    assert second["context"] == "interval 0 to 10 m"


def test_a_sound_project_as_json(project: Path):
    ended = tunnelcalc("validate", ".", "--format", "json", folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    read = json.loads(ended.stdout)
    assert (read["exit_code"], read["count"], read["problems"]) == (0, 0, [])
    assert read["sections"] == 16
    assert read["support_classes"] == ["light", "heavy"]
    assert read["notes"] == ["no water_head_m is given: stresses and strength are total"]


def test_a_run_as_json_names_its_folder_and_its_exit_code(project: Path):
    ended = tunnelcalc("run", ".", "--strict", "--format", "json", folder=project)
    assert (ended.returncode, ended.stderr) == (4, "")
    read = json.loads(ended.stdout)
    assert (read["exit_code"], read["problems"]) == (4, [])
    assert (project / read["folder"] / "run.json").is_file()
    assert (read["sections"], read["sections_without_adequate_class"]) == (16, 3)
    assert read["not_evaluated"] == []


def test_the_named_file_holds_the_document_as_well(crowded: Path, tmp_path: Path, capsys):
    named = tmp_path / "problems.json"
    for _ in range(2):
        code = main(["validate", str(crowded), "--format", "json", "--problems", str(named)])
        assert code == 2
        assert capsys.readouterr().out == named.read_text()
    assert len(json.loads(named.read_text())["problems"]) == MANY


def test_a_full_disk_does_not_cost_the_list(crowded: Path, tmp_path: Path, capsys, monkeypatch):
    def full(handle: int) -> None:
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    named = tmp_path / "problems.txt"
    assert main(["run", str(crowded), "--problems", str(named)]) == 1
    told = capsys.readouterr().err
    assert len(re.findall(r"^ground\.csv:", told, flags=re.M)) == SHOWN
    assert "No space left on device" in told
    assert not named.exists()
