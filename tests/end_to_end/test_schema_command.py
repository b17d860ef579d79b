"""`tunnelcalc schema`, printed and written."""

from __future__ import annotations

import json
from pathlib import Path

import yaml
from end_to_end.foreign import install
from end_to_end.projects import PROJECT, tunnelcalc
from jsonschema import Draft202012Validator

TUBES = """\
from tunnelcalc import api


class Tubes:
    name = "tubes"
    meaning = "invented tubes"
    parameters = (api.Parameter("wall_mm", "wall", "mm", api.Limits(1, 50)),)


@api.hookimpl
def tunnelcalc_register_support_kinds(register):
    register(Tubes())
"""


def printed(folder: Path, **options: object) -> dict:
    ended = tunnelcalc("schema", folder=folder, **options)
    assert (ended.returncode, ended.stderr) == (0, "")
    return json.loads(ended.stdout)


def test_the_printed_schema_is_one_and_takes_a_project(tmp_path: Path):
    schema = printed(tmp_path)
    assert schema["$schema"] == "https://json-schema.org/draft/2020-12/schema"
    Draft202012Validator.check_schema(schema)
    assert list(Draft202012Validator(schema).iter_errors(yaml.safe_load(PROJECT))) == []
    assert list(tmp_path.iterdir()) == []


def test_the_written_schema_is_the_printed_one_and_is_renewed(tmp_path: Path):
    ended = tunnelcalc("schema", "--out", "s.json", folder=tmp_path)
    assert (ended.returncode, ended.stdout, ended.stderr) == (0, "written: s.json\n", "")
    first = (tmp_path / "s.json").read_bytes()
    assert json.loads(first) == printed(tmp_path)
    (tmp_path / "s.json").write_bytes(first[:1000])
    assert tunnelcalc("schema", "--out", "s.json", folder=tmp_path).returncode == 0
    assert (tmp_path / "s.json").read_bytes() == first


def test_a_file_that_holds_something_else_is_not_overwritten(tmp_path: Path):
    (tmp_path / "project.yaml").write_text(PROJECT)
    ended = tunnelcalc("schema", "--out", "project.yaml", folder=tmp_path)
    assert (ended.returncode, ended.stdout) == (2, "")
    assert ended.stderr == (
        "project.yaml: --out holds something else, which is not overwritten\n"
        "  allowed: a file that is absent, empty, or written by this option before\n"
        "  fix: name another file\n"
        "1 problem found\n"
    )
    assert (tmp_path / "project.yaml").read_text() == PROJECT


def test_the_schema_has_the_kinds_of_installed_plugins(tmp_path: Path):
    environment = install(tmp_path / "site", "tubes", TUBES)
    project = yaml.safe_load(PROJECT)
    project["support_classes"][0]["elements"] = [{"kind": "tubes", "wall_mm": 60}]
    with_plugin = Draft202012Validator(printed(tmp_path, environment=environment))
    told = [error.message for error in with_plugin.iter_errors(project)]
    assert told == ["60 is greater than the maximum of 50"]
    without = Draft202012Validator(printed(tmp_path))
    told = [error.message for error in without.iter_errors(project)]
    kinds = "friction_bolts grouted_rock_bolts lattice_girders rock_bolts shotcrete steel_sets"
    assert told == [f"'tubes' is not one of {kinds.split()}"]
