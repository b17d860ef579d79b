"""The program without one of its own plugins: the rest works, and the gap is named."""

from __future__ import annotations

from importlib.metadata import entry_points
from pathlib import Path

import pytest

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import Registry, load_plugins
from tunnelcalc.run import run_project

OWN = sorted(point.name for point in entry_points(group="tunnelcalc"))


def without(name: str) -> Registry:
    return load_plugins(points=[p for p in entry_points(group="tunnelcalc") if p.name != name])


def problems_without(name: str, project: Path) -> list[str]:
    with pytest.raises(InputError) as caught:
        read_project(project, without(name))
    return [str(problem) for problem in caught.value.problems]


@pytest.mark.parametrize("name", OWN)
def test_the_other_plugins_load(name: str):
    registry = without(name)
    assert registry.failures == []
    assert sorted(source.plugin for source in registry.sources) == [o for o in OWN if o != name]


def test_a_project_that_names_a_removed_kind_is_told_which(project: Path):
    assert problems_without("steel_sets", project) == [
        'project.yaml:31:9: key "support_classes[2].elements[2].kind" names "steel_sets", a kind '
        "of support that no plugin handles\n"
        "  allowed: friction_bolts or grouted_rock_bolts or rock_bolts or shotcrete\n"
        "  fix: install the plugin that offers it"
    ]


def test_a_project_without_the_removed_kind_runs_as_before(project: Path, tmp_path: Path):
    text = (project / "project.yaml").read_text()
    start, end = text.index("      - kind: steel_sets"), text.index("criteria:")
    (project / "project.yaml").write_text(text[:start] + text[end:])
    whole = run_project(project, load_plugins(), out=tmp_path / "whole").folder
    less = run_project(project, without("steel_sets"), out=tmp_path / "less").folder
    for table in whole.glob("*.csv"):
        assert (less / table.name).read_bytes() == table.read_bytes()


def test_a_table_that_no_plugin_reads_is_told(project: Path):
    assert problems_without("csv_reader", project) == [
        f'project.yaml:{line}:3: key "ground.{key}" names "{file}", which no plugin can read\n'
        "  allowed: a file ending in .ags or .xlsm or .xlsx\n"
        "  fix: save the table so"
        for line, key, file in ((6, "table", "ground.csv"), (7, "units", "units.csv"))
    ]


def test_methods_that_nobody_offers_are_told(project: Path):
    told = problems_without("methods", project)
    assert len(told) == 4
    assert told[0] == (
        'project.yaml: the strength method "hoek_brown_2002" is offered by no plugin\n'
        "  allowed: none is installed\n"
        "  fix: install the plugin that offers it, or name another method"
    )


def test_without_flags_the_numbers_are_the_same(project: Path, tmp_path: Path):
    whole = run_project(project, load_plugins(), out=tmp_path / "whole").folder
    less = run_project(project, without("validity_flags"), out=tmp_path / "less").folder
    for name in ("classes.csv", "checks.csv", "quantities.csv"):
        assert (less / name).read_bytes() == (whole / name).read_bytes()
    assert (less / "sections.csv").read_text().splitlines()[-1].endswith("none_adequate,")


def test_without_the_schedule_tables_the_others_are_the_same(project: Path, tmp_path: Path):
    less = run_project(project, without("schedule_tables"), out=tmp_path / "less").folder
    assert {path.name for path in less.glob("*.csv")} == {
        "sections.csv",
        "flags.csv",
        "classes.csv",
        "checks.csv",
        "ground_values.csv",
    }
