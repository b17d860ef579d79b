"""A plugin of somebody else that goes wrong: what it costs, and what is said about it."""

from __future__ import annotations

import json
import os
from pathlib import Path

import pytest
from end_to_end.foreign import HEAD, check_plugin, found_in, install, writer_plugin
from end_to_end.projects import replaced, rows, run, tables_of, tunnelcalc

NAMED = replaced("project.yaml", "support_classes:", "plugins: [stranger]\nsupport_classes:")

HIGH_COVER_FAILS = """\
if np.any(sections["cover_m"] > 80):
    raise ValueError("the table ends at 80 m")
return api.Evaluation(np.ones(sections.count), np.full(sections.count, 100.0))
"""


def ran(project: Path, environment: dict[str, str], code: int) -> tuple[Path, str]:
    ended = run(project, "--out", "out", environment=environment)
    assert (ended.returncode, ended.stderr) == (code, "")
    return project / "out", ended.stdout


def test_a_check_that_raises_costs_its_sections_and_is_told(project: Path, tmp_path: Path):
    environment = install(tmp_path, "stranger", check_plugin("stranger", HIGH_COVER_FAILS))
    NAMED(project)
    folder, screen = ran(project, environment, 3)
    reason = "ValueError: the table ends at 80 m"
    checks = {
        (row["chainage_m"], row["outcome"], row["reason"], row["demand"])
        for row in rows(folder / "checks.csv")
        if row["check"] == "stranger"
    }
    high = {row["chainage_m"] for row in rows(folder / "sections.csv") if float(row["from_m"]) > 69}
    assert {check for check in checks if check[1] == "not_evaluated"} == {
        (at, "not_evaluated", reason, "") for at in high
    }
    assert {check[1] for check in checks if check[0] not in high} == {"pass"}
    heavy = [row for row in rows(folder / "classes.csv") if row["support_class"] == "heavy"]
    assert {row["adequate"] for row in heavy if row["chainage_m"] in high} == {"no"}
    assert {row["adequate"] for row in heavy if row["chainage_m"] not in high} == {"yes"}
    told = json.loads((folder / "run.json").read_text())
    assert told["not_evaluated"] == [
        {
            "what": "heavy shotcrete:stranger",
            "reason": reason,
            "sections": 8,
            "first_chainage_m": 75.0,
        }
    ]
    assert told["counts"]["not_evaluated"] == 8
    assert f"not evaluated: heavy shotcrete:stranger: {reason} (8 sections, first at" in " ".join(
        screen.split()
    )


def test_a_check_that_raises_costs_the_same_in_every_chunk(project: Path, tmp_path: Path):
    environment = install(tmp_path, "stranger", check_plugin("stranger", HIGH_COVER_FAILS))
    NAMED(project)
    folder, _ = ran(project, environment, 3)
    ended = run(project, "--out", "small", "--chunk", "3", environment=environment)
    assert ended.returncode == 3
    assert tables_of(project / "small") == tables_of(folder)


def test_an_installed_plugin_that_the_project_does_not_name_changes_nothing(
    project: Path, tmp_path: Path
):
    environment = install(tmp_path, "stranger", check_plugin("stranger", HIGH_COVER_FAILS))
    folder, _ = ran(project, environment, 0)
    assert tables_of(folder) == tables_of(project / "runs" / "0001")


@pytest.mark.parametrize(
    ("source", "cause"),
    [
        pytest.param("import sys; sys.exit('stop')", "SystemExit: stop", id="exits"),
        pytest.param(
            HEAD + "@api.hookimpl\ndef tunnelcalc_register_suport_checks(register): ...",
            "tunnelcalc_register_suport_checks",
            id="misspells-a-hook",
        ),
    ],
)
def test_a_plugin_that_cannot_be_loaded_is_told_and_stops_only_who_names_it(
    project: Path, tmp_path: Path, source: str, cause: str
):
    environment = install(tmp_path, "stranger", source)
    folder, screen = ran(project, environment, 0)
    told = "note: plugin stranger (stranger 1.0) could not be used: "
    assert told in screen
    assert cause in " ".join(screen.split())
    warnings = json.loads((folder / "run.json").read_text())["warnings"]
    assert any(cause in warning for warning in warnings)
    assert tables_of(folder) == tables_of(project / "runs" / "0001")

    listed = tunnelcalc("plugins", folder=project, environment=environment)
    assert listed.returncode == 0
    assert "failed: plugin stranger (stranger 1.0) could not be used: " in listed.stdout

    NAMED(project)
    ended = run(project, environment=environment)
    assert ended.returncode == 2
    head, _, fix, _ = ended.stderr.splitlines()
    assert head == 'project.yaml:9:11: key "plugins" names "stranger", a plugin that is not there'
    assert fix.startswith("  fix: plugin stranger (stranger 1.0) could not be used: ")
    assert cause in fix


def test_a_name_that_two_plugins_claim_is_used_by_neither(project: Path, tmp_path: Path):
    source = "class Twin(Shotcrete):\n    pass\n\n\n@api.hookimpl\n"
    source += "def tunnelcalc_register_support_kinds(register):\n    register(Twin())\n"
    source = HEAD + "from tunnelcalc_shotcrete import Shotcrete\n" + source
    environment = install(tmp_path, "stranger", source)
    ended = run(project, environment=environment)
    assert ended.returncode == 2
    assert (
        'project.yaml:26:9: key "support_classes[2].elements[1].kind" names "shotcrete", which '
        "the plugins shotcrete and stranger both offer\n"
    ) in ended.stderr
    assert "  fix: uninstall one of them\n" in ended.stderr


def test_a_kind_that_fails_on_its_values_is_a_problem_of_the_project(project: Path, tmp_path: Path):
    source = (
        "from tunnelcalc_shotcrete import Shotcrete\n"
        "class Timber(Shotcrete):\n"
        "    name = 'timber'\n"
        "    def misfits(self, element, smallest_radius_m):\n"
        "        raise KeyError('grade')\n"
        "@api.hookimpl\n"
        "def tunnelcalc_register_support_kinds(register):\n    register(Timber())\n"
    )
    environment = install(tmp_path, "stranger", HEAD + source)
    replaced("project.yaml", "kind: shotcrete", "kind: timber")(project)
    ended = run(project, environment=environment)
    assert ended.returncode == 2
    assert ended.stderr == (
        'project.yaml:26:9: key "support_classes[2].elements[1].kind" names "timber", whose plugin '
        "failed with KeyError: 'grade'\n"
        "  fix: report the fault to the maker of the plugin\n1 problem found\n"
    )


def test_a_reader_that_fails_is_a_problem_of_its_table(project: Path, tmp_path: Path):
    source = (
        "class Reader:\n"
        "    name = 'sheets'\n"
        "    suffixes = ('.sheet',)\n"
        "    def read(self, name, content):\n"
        "        raise RuntimeError('not a sheet')\n"
        "@api.hookimpl\n"
        "def tunnelcalc_register_ground_readers(register):\n    register(Reader())\n"
    )
    environment = install(tmp_path, "stranger", HEAD + source)
    (project / "ground.csv").rename(project / "ground.sheet")
    replaced("project.yaml", "ground.csv", "ground.sheet")(project)
    ended = run(project, environment=environment)
    assert ended.returncode == 2
    assert ended.stderr.startswith(
        "ground.sheet: could not be read: the reader sheets failed with RuntimeError: not a sheet\n"
    )


def test_a_report_that_fails_is_told_and_the_tables_stand(project: Path, tmp_path: Path):
    source = writer_plugin("drawing", "raise ZeroDivisionError('scale')")
    environment = install(tmp_path, "stranger", source)
    NAMED(project)
    folder, screen = ran(project, environment, 3)
    assert tables_of(folder) == tables_of(project / "runs" / "0001")
    told = json.loads((folder / "run.json").read_text())["not_evaluated"]
    assert [(entry["what"], entry["reason"], entry["sections"]) for entry in told] == [
        ("report drawing", "ZeroDivisionError: scale", 16)
    ]
    assert "not evaluated: report drawing: ZeroDivisionError: scale" in screen


def test_what_a_report_writes_is_hashed_too(project: Path, tmp_path: Path):
    write = "(folder / 'plots').mkdir()\n(folder / 'plots' / 'run.json').write_text('{}')\n"
    source = writer_plugin("drawing", write + "return ('plots/run.json',)")
    environment = install(tmp_path, "stranger", source)
    NAMED(project)
    folder, _ = ran(project, environment, 0)
    outputs = json.loads((folder / "run.json").read_text())["outputs"]
    assert "plots/run.json" in {entry["path"] for entry in outputs}


def test_the_same_plugin_installed_twice_is_told(project: Path, tmp_path: Path):
    install(tmp_path / "one", "stranger", check_plugin("stranger", HIGH_COVER_FAILS))
    other = tmp_path / "two" / "other-2.0.dist-info"
    other.mkdir(parents=True)
    (other / "METADATA").write_text("Metadata-Version: 2.1\nName: other\nVersion: 2.0\n")
    (other / "entry_points.txt").write_text("[tunnelcalc]\nstranger = json\n")
    both = os.pathsep.join(str(tmp_path / name) for name in ("one", "two"))
    _, screen = ran(project, found_in(both), 0)
    told = " ".join(screen.split())
    for claimant in ("stranger (other 2.0)", "stranger (stranger 1.0)"):
        assert f"note: plugin {claimant} could not be used: its name is claimed by" in told
