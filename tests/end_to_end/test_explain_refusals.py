"""`tunnelcalc explain`: wrong inputs, runs that were tampered with, and what is left alone."""

from __future__ import annotations

import csv
import json
import shutil
from collections.abc import Callable
from pathlib import Path

import pytest
from end_to_end.projects import files_of

from tunnelcalc.cli.main import main


def changed(file: str, old: str, new: str, count: int = 1) -> Callable[[Path], object]:
    def change(run: Path) -> None:
        text = (run / file).read_text("utf-8")
        assert old in text
        (run / file).write_text(text.replace(old, new, count), "utf-8")

    return change


def first_value(table: str, column: str) -> Callable[[Path], object]:
    """Change the last digit of a number in the first row of a table."""

    def change(run: Path) -> None:
        with (run / table).open(encoding="utf-8", newline="") as stream:
            cells = list(csv.reader(stream))
        place = cells[0].index(column)
        value = cells[1][place]
        cells[1][place] = value[:-1] + ("1" if value[-1] != "1" else "2")
        with (run / table).open("w", encoding="utf-8", newline="") as stream:
            csv.writer(stream, lineterminator="\n").writerows(cells)

    return change


@pytest.mark.parametrize(
    ("tamper", "told"),
    [
        pytest.param(first_value("sections.csv", "mb"), "sections.csv, mb", id="section"),
        pytest.param(
            first_value("classes.csv", "support_pressure_mpa"),
            "classes.csv, light, support_pressure_mpa",
            id="class",
        ),
        pytest.param(first_value("checks.csv", "demand"), "demand: the table says", id="check"),
        pytest.param(
            changed("inputs/units.csv", ",34,", ",35,"), "inputs/units.csv is not as", id="input"
        ),
        pytest.param(
            lambda run: (run / "classes.csv").unlink(), "classes.csv is missing", id="no-table"
        ),
    ],
)
def test_a_run_that_was_tampered_with_ends_with_5(tamper, told, run, capsys):
    tamper(run)
    assert main(["explain", str(run), "--at", "10"]) == 5
    assert told in " ".join(capsys.readouterr().out.split())


@pytest.mark.parametrize("missing", [False, True], ids=["changed", "missing"])
def test_every_output_of_a_run_is_compared_with_its_hash(missing, run, capsys):
    """Each file of the run alone; every one of them is put back as it was."""
    manifest = json.loads((run / "run.json").read_text("utf-8"))
    outputs = [entry["path"] for entry in manifest["outputs"]]
    # Without an input there is nothing to compute: that is refused, see below.
    outputs = [name for name in outputs if not (missing and name.startswith("inputs/"))]
    assert {"schedule.csv", "quantities.csv", "ground_values.csv", "flags.csv"} <= set(outputs)
    for name in outputs:
        before = (run / name).read_bytes()
        if missing:
            (run / name).unlink()
        else:
            (run / name).write_bytes(before + b"\n")
        assert main(["explain", str(run), "--at", "10"]) == 5, name
        told = f"{name} is missing" if missing else f"{name} is not as it was when the run ended"
        assert " ".join(capsys.readouterr().out.split()).count(told) == 1
        (run / name).write_bytes(before)
    assert main(["explain", str(run), "--at", "10"]) == 0


def test_another_version_is_told(run, capsys):
    manifest = json.loads((run / "run.json").read_text("utf-8"))
    manifest["program"]["version"] = "0.0.9"
    manifest["plugins"][0]["version"] = "0.0.8"
    manifest["plugins"].append({"plugin": "gone", "distribution": "gone", "version": "1"})
    (run / "run.json").write_text(json.dumps(manifest), "utf-8")
    assert main(["explain", str(run), "--at", "10"]) == 0
    screen = " ".join(capsys.readouterr().out.split())
    assert "the run was computed by tunnelcalc 0.0.9" in screen
    assert "was 0.0.8 in the run" in screen
    assert "plugin gone 1 is not there any more" in screen


@pytest.mark.parametrize(
    ("arguments", "told"),
    [
        pytest.param(["--at", "100.5"], "where there is no section", id="beyond"),
        pytest.param(["--at", "-1"], "where there is no section", id="before"),
        pytest.param(["--at", "here"], "is not a chainage", id="no-chainage"),
        pytest.param(["--at", "10", "--class", "ligth"], "fix: write light", id="class"),
        pytest.param(["--at", "10", "--out", "sheet.pdf"], "an ending that says no form", id="pdf"),
    ],
)
def test_wrong_input_ends_with_2(arguments, told, whole, capsys):
    arguments = [f"--at={arguments[1]}", *arguments[2:]]
    assert main(["explain", str(whole), *arguments]) == 2
    printed = capsys.readouterr()
    assert told in printed.err
    assert "fix: " in printed.err
    assert printed.out == ""


@pytest.mark.parametrize(
    ("spoil", "told"),
    [
        pytest.param(lambda run: (run / "run.json").unlink(), "holds no file run.json", id="none"),
        pytest.param(
            lambda run: (run / "run.json").write_text("{", "utf-8"), "is not readable", id="broken"
        ),
        pytest.param(
            lambda run: (run / "run.json").write_text("[]", "utf-8"), "not the record", id="other"
        ),
        pytest.param(shutil.rmtree, "is no folder of a run", id="no-folder"),
        pytest.param(
            lambda run: shutil.rmtree(run / "inputs"), "inputs: does not exist", id="no-inputs"
        ),
    ],
)
def test_what_is_no_complete_run_is_refused(spoil, told, run, capsys):
    spoil(run)
    assert main(["explain", str(run), "--at", "10"]) == 2
    assert told in capsys.readouterr().err


def test_a_file_that_the_run_has_lost_is_told_with_the_runs_path(run, capsys):
    (run / "inputs/units.csv").unlink()
    assert main(["explain", str(run), "--at", "10"]) == 2
    told = capsys.readouterr().err
    assert told.startswith(f"{run / 'inputs' / 'project.yaml'}:")
    assert 'names "units.csv", which cannot be read: there is no such file' in told


def test_another_file_is_never_overwritten(whole, tmp_path, capsys):
    file = tmp_path / "notes.md"
    file.write_text("mine", "utf-8")
    assert main(["explain", str(whole), "--at", "10", "--out", str(file)]) == 2
    assert file.read_text("utf-8") == "mine"
    assert "which is not overwritten" in capsys.readouterr().err


def test_looking_at_a_run_changes_nothing(run):
    before = files_of(run)
    main(["explain", str(run), "--at", "10"])
    assert files_of(run) == before
