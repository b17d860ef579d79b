"""Every method that can be named runs on the demonstration project, and its sheet holds."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
import yaml

from tunnelcalc.explain.sheet import explain
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import DEFAULT_METHODS
from tunnelcalc.run import run_project

DEMO = Path(__file__).parents[2] / "projects" / "demo"
REGISTRY = load_plugins()
GOOD_UNITS = ("massive granite", "blocky granite", "banded gneiss", "amphibolite dyke")
POOR_UNITS = ("mica schist", "phyllite", "sheared phyllite", "fault breccia")
BY_UNIT = {
    # Each of the two relations holds for one half of the ratings.
    "serafim_pereira_1983": dict.fromkeys(GOOD_UNITS, "bieniawski_1978"),
    "bieniawski_1978": dict.fromkeys(POOR_UNITS, "serafim_pereira_1983"),
}
FITTING = {"mohr_coulomb": "mohr_coulomb_perfectly_plastic"}
"""A strength that the default law cannot use, and a law that can."""
PLASTIC_AT = "2615"
EVERY = [(step, name) for step in DEFAULT_METHODS for name in REGISTRY.names(step)]


@pytest.fixture
def demo(tmp_path):
    folder = tmp_path / "demo"
    shutil.copytree(DEMO, folder, ignore=shutil.ignore_patterns("runs", "curves"))
    return folder


@pytest.mark.parametrize(("step", "name"), EVERY)
def test_a_method_that_is_named_runs_and_is_explained(demo, step, name):
    project = yaml.safe_load((demo / "project.yaml").read_text(encoding="utf-8"))
    methods = project["methods"]
    by_unit = BY_UNIT.get(name)
    methods[step] = {"default": name, "by_unit": by_unit} if by_unit else name
    if name in FITTING:
        methods["ground_reaction"] = FITTING[name]
    if name.startswith("mohr_coulomb") and step == "ground_reaction":
        methods["strength"] = "mohr_coulomb"
    (demo / "project.yaml").write_text(yaml.safe_dump(project), encoding="utf-8")
    finished = run_project(demo, REGISTRY, out=demo / "run")
    assert name in finished.result.methods[step]
    sheet = explain(finished.folder, PLASTIC_AT, None, REGISTRY)
    assert sheet.differences == ()
    (methods,) = [block for block in sheet.blocks if block.title.startswith("Methods")]
    here = finished.result.project.methods[step].of_unit("mica schist")
    assert f"{step}: {here}, {REGISTRY.method(step, here).source}" in methods.notes
