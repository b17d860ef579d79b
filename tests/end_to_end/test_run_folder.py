"""The folder that a run leaves: what is in it, how it is numbered, that it can be repeated."""

from __future__ import annotations

import hashlib
import json
from pathlib import Path

from end_to_end.projects import completed, files_of, run, tables_of

TABLES = {
    "sections.csv",
    "flags.csv",
    "classes.csv",
    "checks.csv",
    "schedule.csv",
    "quantities.csv",
    "ground_values.csv",
}
INPUTS = {"project.yaml", "ground.csv", "units.csv"}


def manifest(run_folder: Path) -> dict:
    return json.loads((run_folder / "run.json").read_text(encoding="utf-8"))


def test_a_run_holds_its_tables_its_inputs_and_its_manifest(finished: Path):
    assert set(files_of(finished / "runs" / "0001")) == {
        *TABLES,
        "run.json",
        "inputs",
        *(f"inputs/{name}" for name in INPUTS),
    }
    assert [path.name for path in (finished / "runs").iterdir()] == ["0001"]


def test_the_manifest_names_every_input_and_output_with_its_hash(finished: Path):
    folder = finished / "runs" / "0001"
    told = manifest(folder)
    assert {entry["path"] for entry in told["inputs"]} == INPUTS
    for entry in told["inputs"]:
        assert entry["sha256"] == hashlib.sha256(files_of(finished)[entry["path"]]).hexdigest()
    written = {entry["path"]: entry["sha256"] for entry in told["outputs"]}
    assert set(written) == {*TABLES, *(f"inputs/{name}" for name in INPUTS)}
    for path, digest in written.items():
        assert digest == hashlib.sha256((folder / path).read_bytes()).hexdigest()


def test_the_manifest_is_written_last(finished: Path):
    folder = finished / "runs" / "0001"
    times = {path: path.stat().st_mtime_ns for path in folder.rglob("*") if path.is_file()}
    last = times.pop(folder / "run.json")
    assert last >= max(times.values())


def test_the_manifest_says_with_what_and_how_the_run_was_made(finished: Path):
    told = manifest(finished / "runs" / "0001")
    assert told["program"]["name"] == "tunnelcalc"
    assert {plugin["plugin"] for plugin in told["plugins"]} >= {"rock_bolts", "shotcrete"}
    assert all(plugin["version"] for plugin in told["plugins"])
    assert told["title"] == "Invented culvert drive"
    assert set(told["methods"]) == {
        "strength",
        "deformation_modulus",
        "ground_reaction",
        "closure_profile",
    }
    assert told["options"] == {"strict": False, "chunk_sections": 2048}
    assert told["criteria"] == {
        "factor_of_safety": 1.5,
        "closure_pct": 1.0,
        "chosen_checks": {},
        "options": {},
    }
    assert told["schedule"] == {"minimum_zone_m": 20.0, "carry_m": 5.0}
    assert told["counts"]["sections"] == 16
    assert told["counts"]["sections_without_adequate_class"] == 3
    assert told["gaps"] == []
    assert told["not_evaluated"] == []
    assert any("licensed engineers" in limit for limit in told["limits"])
    flags = {flag["name"]: flag for flag in told["flags"]}
    assert flags["stress_ratio_assumed"]["advisory"] == 3
    assert flags["dilation_assumed"]["advisory"] == 3
    assert all(flag["threshold"] and flag["origin"] for flag in flags.values())


def test_the_copied_inputs_repeat_the_run_to_the_byte(finished: Path, tmp_path: Path):
    first = finished / "runs" / "0001"
    again = completed(first / "inputs", "--out", tmp_path / "again", out=str(tmp_path / "again"))
    assert tables_of(again) == tables_of(first)
    assert files_of(again / "inputs") == files_of(first / "inputs")


def test_inputs_in_folders_and_behind_links_are_copied_so_that_the_run_repeats(
    project: Path, tmp_path: Path
):
    (project / "tables").mkdir()
    (project / "archive").mkdir()
    (project / "units.csv").rename(project / "archive" / "units of 2019.csv")
    (project / "tables" / "units.csv").symlink_to("../archive/units of 2019.csv")
    text = (project / "project.yaml").read_text()
    (project / "project.yaml").write_text(text.replace("units.csv", "./tables/units.csv"))
    first = completed(project, out="runs/0002")
    assert {entry["path"] for entry in manifest(first)["inputs"]} == {
        "project.yaml",
        "ground.csv",
        "tables/units.csv",
    }
    again = completed(first / "inputs", "--out", tmp_path / "again", out=str(tmp_path / "again"))
    assert tables_of(again) == tables_of(first) == tables_of(project / "runs" / "0001")


def test_times_stand_in_the_manifest_alone(project: Path):
    second = completed(project, out="runs/0002")
    first = project / "runs" / "0001"
    assert tables_of(second) == tables_of(first)
    one, other = manifest(first), manifest(second)
    for told in (one, other):
        assert told.pop("started") <= told.pop("finished")
    assert one == other


def test_runs_are_numbered_on_and_never_touched_again(project: Path):
    first = files_of(project / "runs" / "0001")
    completed(project, out="runs/0002")
    (project / "runs" / "0041").mkdir()
    (project / "runs" / "notes").mkdir()
    (project / "runs" / "٩٩").mkdir()
    completed(project, out="runs/0042")
    assert sorted(path.name for path in (project / "runs").iterdir()) == [
        "0001",
        "0002",
        "0041",
        "0042",
        "notes",
        "٩٩",
    ]
    assert files_of(project / "runs" / "0001") == first
    assert list((project / "runs" / "0041").iterdir()) == []


def test_results_go_where_the_user_says(project: Path):
    (project / "empty").mkdir()
    (project / "link").symlink_to("linked")
    (project / "linked").mkdir()
    (project / "dangling").symlink_to("absent")
    for out in ("new/deep/place", "empty", "link", "dangling"):
        ended = run(project, "--out", out)
        assert ended.returncode == 0, ended.stderr
        assert tables_of(project / out) == tables_of(project / "runs" / "0001")
    assert f"written: {project / 'absent'}\n" in ended.stdout
    assert (project / "link").is_symlink()
    assert [path.name for path in (project / "runs").iterdir()] == ["0001"]
    assert not list(project.rglob("*.part"))


def test_a_project_can_be_named_by_its_file(project: Path):
    completed(project / "project.yaml", out="runs/0002")
    assert tables_of(project / "runs" / "0002") == tables_of(project / "runs" / "0001")
