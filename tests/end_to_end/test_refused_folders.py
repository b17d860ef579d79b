"""Folders and options that a run refuses, and what it leaves of them: everything."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import files_of, run, tunnelcalc


def test_a_project_that_does_not_exist_is_refused(tmp_path: Path):
    ended = tunnelcalc("run", "nowhere", folder=tmp_path)
    assert ended.returncode == 2
    assert ended.stderr == (
        "nowhere: does not exist\n  fix: name a folder that holds project.yaml\n1 problem found\n"
    )
    assert list(tmp_path.iterdir()) == []


def test_a_folder_without_project_file_is_refused(project: Path):
    (project / "project.yaml").unlink()
    before = files_of(project)
    ended = run(project)
    assert ended.returncode == 2
    assert ended.stderr == (
        f"{project}: holds no file project.yaml\n"
        "  fix: name a folder that holds project.yaml\n1 problem found\n"
    )
    assert files_of(project) == before


@pytest.mark.parametrize(
    "command", [("validate",), ("run",), ("curves", "--at", "20"), ("stages",)]
)
def test_for_the_folder_of_a_run_its_inputs_are_named(project: Path, command: tuple[str, ...]):
    finished = project / "finished"
    finished.mkdir()
    (finished / "run.json").write_text("{}")
    ended = tunnelcalc(command[0], "finished", *command[1:], folder=project)
    assert (ended.returncode, ended.stdout + ended.stderr) == (
        2,
        "finished: holds no file project.yaml: it is the folder of a run\n"
        "  fix: name finished/inputs, the project as that run kept it; for a command that "
        "writes, with --out outside of it\n1 problem found\n",
    )


def test_a_file_in_place_of_the_project_is_refused(project: Path):
    ended = run(project / "ground.csv")
    assert ended.returncode == 2
    assert ended.stderr.startswith(f"{project / 'ground.csv'}: is not a folder\n  fix: name a")


def occupied(project: Path) -> Path:
    (project / "results").mkdir()
    (project / "results" / "notes.txt").write_text("kept")
    return project / "results"


def a_file(project: Path) -> Path:
    return project / "ground.csv"


def below_a_file(project: Path) -> Path:
    return project / "ground.csv" / "results"


@pytest.mark.parametrize(
    ("make", "what"),
    [
        pytest.param(occupied, "is not empty", id="folder-not-empty"),
        pytest.param(a_file, "is not a folder", id="file"),
        pytest.param(below_a_file, "is not a folder", id="below-a-file"),
    ],
)
def test_a_place_for_results_that_is_taken_is_refused_and_untouched(project: Path, make, what):
    place = make(project)
    before = files_of(project)
    ended = run(project, "--out", place)
    assert ended.returncode == 2
    assert ended.stderr == (
        f"{place}: --out {what}\n  allowed: a folder that is absent or empty\n"
        "  fix: name another folder: a run never overwrites anything\n1 problem found\n"
    )
    assert ended.stdout == ""
    assert files_of(project) == before


def test_a_wrong_project_leaves_a_named_place_absent(project: Path):
    (project / "ground.csv").write_text("")
    assert run(project, "--out", project / "new" / "results").returncode == 2
    assert not (project / "new").exists()


@pytest.mark.parametrize("number", ["0", "-1", "1.5", "many", "٣"])
def test_a_chunk_that_is_no_whole_number_is_refused(project: Path, number: str):
    before = files_of(project)
    ended = run(project, f"--chunk={number}")
    assert ended.returncode == 2
    assert ended.stderr.endswith(
        f"error: argument --chunk: '{number}' is no whole number above 0\n"
    )
    assert files_of(project) == before
