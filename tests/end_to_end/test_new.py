"""A new user's first minutes: `tunnelcalc new`, then validate, then run."""

from __future__ import annotations

import json
import re
from pathlib import Path

import pytest
import yaml
from end_to_end.projects import files_of, rows, tunnelcalc
from jsonschema import Draft202012Validator

from tunnelcalc.cli.main import main

FILES = {"ground.csv", "units.csv", "project.yaml", "project.schema.json"}
ALLOWED = "  allowed: a folder that is absent or empty\n"
FIX = "  fix: name another folder: nothing is overwritten\n"


@pytest.fixture(scope="module")
def starter(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A starter project as it is written. Tests only look at it."""
    folder = tmp_path_factory.mktemp("new") / "deep" / "starter"
    assert main(["new", str(folder)]) == 0
    return folder


def refused(capsys: pytest.CaptureFixture[str], folder: Path, what: str) -> None:
    before = files_of(folder.parent) if folder.parent.is_dir() else {}
    assert main(["new", str(folder)]) == 2
    told = capsys.readouterr()
    assert told.out == ""
    assert told.err == f"{folder}: {what}\n{ALLOWED}{FIX}1 problem found\n"
    assert (files_of(folder.parent) if folder.parent.is_dir() else {}) == before


def test_a_starter_project_validates_and_runs_as_it_is(tmp_path: Path):
    made = tunnelcalc("new", "first drive", folder=tmp_path)
    assert (made.returncode, made.stderr) == (0, "")
    assert made.stdout.endswith("  tunnelcalc run 'first drive'\n")
    assert set(files_of(tmp_path)) == {"first drive", *(f"first drive/{name}" for name in FILES)}
    checked = tunnelcalc("validate", "first drive", folder=tmp_path)
    assert (checked.returncode, checked.stderr) == (0, "")
    assert checked.stdout == (
        "note: water heads are given, but ground: drainage is not: stresses and strength are "
        "total\nno problems found: 22 sections, 2 support classes\n"
    )
    ran = tunnelcalc("run", "first drive", "--strict", folder=tmp_path)
    assert (ran.returncode, ran.stderr) == (0, "")
    schedule = rows(tmp_path / "first drive" / "runs" / "0001" / "schedule.csv")
    assert {zone["support_class"] for zone in schedule} == {"light", "heavy"}


def test_a_starter_project_says_that_its_values_are_invented(starter: Path):
    text = (starter / "project.yaml").read_text(encoding="utf-8")
    assert "EVERY VALUE HERE AND IN THE TWO TABLES IS INVENTED" in text
    assert "invented" in yaml.safe_load(text)["title"].lower()
    for table in ("ground.csv", "units.csv"):
        assert all(row["ground_unit"].startswith("invented ") for row in rows(starter / table))


def test_a_starter_project_points_to_the_schema_beside_it_and_meets_it(starter: Path):
    text = (starter / "project.yaml").read_text(encoding="utf-8")
    named = re.match(r"# yaml-language-server: \$schema=(\S+)\n", text)
    schema = json.loads((starter / named[1]).read_text(encoding="utf-8"))
    assert list(Draft202012Validator(schema).iter_errors(yaml.safe_load(text))) == []


def test_the_examples_in_its_comments_meet_the_schema_too(starter: Path):
    text = (starter / "project.yaml").read_text(encoding="utf-8")
    assert text.count("\n#:") >= 15
    opened = text.replace("\n#:", "\n").replace("  radius_m: 3.0 ", "  # radius_m ")
    project = yaml.safe_load(opened)
    assert {"span_m", "methods", "chainage"} <= {*project, *project["opening"]}
    schema = json.loads((starter / "project.schema.json").read_text(encoding="utf-8"))
    assert list(Draft202012Validator(schema).iter_errors(project)) == []


def test_an_empty_folder_is_filled_and_stays_the_same_folder(tmp_path: Path):
    # A shell that stands in it must not find itself in a folder that is gone.
    before = tmp_path.stat().st_ino
    assert tunnelcalc("new", ".", folder=tmp_path).returncode == 0
    assert tmp_path.stat().st_ino == before
    assert set(files_of(tmp_path)) == FILES


def test_a_folder_that_is_not_empty_is_refused(tmp_path: Path, capsys):
    (tmp_path / "full").mkdir()
    (tmp_path / "full" / "notes.txt").write_text("mine")
    refused(capsys, tmp_path / "full", "is not empty")


def test_a_second_starter_project_in_the_same_folder_is_refused(tmp_path: Path, capsys):
    assert main(["new", str(tmp_path / "a")]) == 0
    capsys.readouterr()
    refused(capsys, tmp_path / "a", "is not empty")


def test_a_file_in_place_of_the_folder_is_refused(tmp_path: Path, capsys):
    (tmp_path / "file").write_text("mine")
    refused(capsys, tmp_path / "file", "is not a folder")
    refused(capsys, tmp_path / "file" / "below", "lies in a file, not in a folder")


def test_a_link_to_nothing_is_refused(tmp_path: Path, capsys):
    (tmp_path / "link").symlink_to(tmp_path / "missing")
    refused(capsys, tmp_path / "link", "is not a folder")


@pytest.mark.parametrize("stands", [False, True], ids=["absent", "empty"])
@pytest.mark.parametrize("failing", ["fsync", "rename"])
def test_a_full_disk_leaves_nothing_half_written(tmp_path: Path, monkeypatch, stands, failing):
    folder = tmp_path / "starter"
    if stands:
        folder.mkdir()
    before = files_of(tmp_path)
    calls = []
    rename = Path.rename

    def full(*arguments: object) -> object:
        calls.append(arguments)
        # Of several files the third fails, so that some are there already.
        if len(calls) < 3 and failing == "rename" and stands:
            return rename(*arguments)
        raise OSError(28, "No space left on device")

    monkeypatch.setattr(*((Path, "rename") if failing == "rename" else ("os.fsync",)), full)
    assert main(["new", str(folder)]) == 1
    assert calls
    assert files_of(tmp_path) == before
