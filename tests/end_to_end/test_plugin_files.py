"""A plugin file is loaded only where the command names it, and a run tells what it consisted of."""

from __future__ import annotations

import hashlib
import json
from pathlib import Path

import pytest
from end_to_end.foreign import HEAD, check_plugin, install
from end_to_end.projects import tunnelcalc

from tunnelcalc.cli.main import main

EVALUATE = """
return api.Evaluation(np.full(sections.count, 1.0), np.full(sections.count, 4.0))
"""


def hostile(marker: Path) -> str:
    """Leaves a trace wherever it is loaded."""
    return f"open({str(marker)!r}, 'w').close()\n" + HEAD


def named(project: Path, plugin: str) -> None:
    file = project / "project.yaml"
    file.write_text(f"plugins: [{plugin}]\n" + file.read_text("utf-8"), "utf-8")


@pytest.mark.parametrize("command", ["run", "validate", "stages"])
def test_a_file_that_a_project_asks_for_is_not_loaded(command, project, tmp_path):
    marker = tmp_path / "loaded"
    for name in ("evil", "sitecustomize", "yaml", "numpy"):
        (project / f"{name}.py").write_text(hostile(marker))
    named(project, "evil")
    ended = tunnelcalc(command, ".", folder=project)
    assert ended.returncode == 2
    assert 'names "evil", a plugin that is not there' in ended.stdout + ended.stderr
    assert not marker.exists()


def test_nor_is_a_distribution_inside_the_folder_of_the_project(project, tmp_path):
    marker = tmp_path / "loaded"
    install(project, "evil", hostile(marker))
    ended = tunnelcalc("validate", ".", folder=project)
    assert ended.returncode == 0, ended.stderr
    assert "evil" not in ended.stdout
    assert not marker.exists()


def test_nor_is_a_neighbour_of_a_file_that_is_named(project, tmp_path, capsys):
    marker = tmp_path / "loaded"
    (project / "evil.py").write_text(hostile(marker))
    (project / "mine.py").write_text("import evil\n")
    assert main(["validate", str(project), "--plugin-file", str(project / "mine.py")]) == 2
    assert "cannot be loaded: ModuleNotFoundError" in capsys.readouterr().out
    assert not marker.exists()


def test_a_named_file_takes_part_and_is_recorded_with_its_hash(project):
    file = project / "mine.py"
    file.write_text(check_plugin("mine", EVALUATE))
    named(project, "mine")
    ended = tunnelcalc("run", ".", "--plugin-file", "mine.py", "--out", "out", folder=project)
    assert ended.returncode == 0, ended.stderr
    assert ",mine," in (project / "out/checks.csv").read_text("utf-8")
    told = json.loads((project / "out/run.json").read_text("utf-8"))["plugins"]
    (of_file,) = [plugin for plugin in told if plugin["plugin"] == "mine"]
    digest = hashlib.sha256(file.read_bytes()).hexdigest()
    assert of_file == {
        "plugin": "mine",
        "distribution": "",
        "version": "",
        "plugin_file": "mine.py",
        "files": [{"path": "mine.py", "sha256": digest}],
    }
    assert not (project / "__pycache__").exists()


def test_every_installed_plugin_is_recorded_with_the_hash_of_each_of_its_files(project):
    told = json.loads(next((project / "runs").glob("*/run.json")).read_text("utf-8"))["plugins"]
    assert all(plugin["plugin_file"] == "" and plugin["files"] for plugin in told)
    (steel,) = [plugin for plugin in told if plugin["plugin"] == "steel_sets"]
    plugins = Path(__file__).parents[2] / "plugins"
    for file in steel["files"]:
        content = (plugins / file["path"]).read_bytes()
        assert file["sha256"] == hashlib.sha256(content).hexdigest()
    paths = [file["path"] for file in steel["files"]]
    assert {"tunnelcalc_steel_sets/__init__.py", "tunnelcalc_steel_sets/kind.py"} <= set(paths)
    assert paths == sorted(paths)


def test_a_sheet_tells_that_a_plugin_is_not_what_it_was(project, capsys):
    file = project / "mine.py"
    file.write_text(check_plugin("mine", EVALUATE))
    named(project, "mine")
    option = ["--plugin-file", str(file)]
    out = str(project / "out")
    assert main(["run", str(project), "--out", out, *option]) == 0
    assert main(["explain", out, "--at", "10", *option]) == 0
    assert "other files" not in " ".join(capsys.readouterr().out.split())
    file.write_text(check_plugin("mine", EVALUATE) + "\n# changed\n")
    assert main(["explain", out, "--at", "10", *option]) == 0
    screen = " ".join(capsys.readouterr().out.split())
    assert "plugin mine consists of other files than in the run" in screen


@pytest.mark.parametrize(
    ("name", "text", "told"),
    [
        pytest.param("mine.py", "raise SystemExit(0)", "SystemExit: 0", id="ends"),
        pytest.param("mine.py", "def broken(:", "SyntaxError", id="no-python"),
        pytest.param("mine.py", "x = '\0'", "cannot be loaded", id="null"),
        pytest.param("mine.txt", "", "is no plugin file", id="other-ending"),
        pytest.param("my plugin.py", "", "is no plugin file", id="no-name"),
        pytest.param("shotcrete.py", "", "would be a plugin named shotcrete", id="taken"),
        pytest.param(
            "mine.py",
            HEAD + "@api.hookimpl\ndef tunnelcalc_register_suport_kinds(register): ...\n",
            "cannot be used: PluginValidationError",
            id="no-such-hook",
        ),
    ],
)
def test_a_named_file_that_cannot_be_used_is_refused(name, text, told, project, capsys):
    file = project / name
    file.write_text(text)
    assert main(["validate", str(project), "--plugin-file", str(file)]) == 2
    printed = capsys.readouterr()
    assert told in printed.out + printed.err
    assert "fix: " in printed.out + printed.err


def test_a_file_that_is_not_there_is_refused(project, capsys):
    assert main(["plugins", "--plugin-file", str(project / "gone.py")]) == 2
    assert "cannot be read: No such file" in capsys.readouterr().err


def test_two_files_may_be_named_but_not_of_one_stem(project, tmp_path, capsys):
    one, other, same = project / "one.py", project / "other.py", tmp_path / "one.py"
    for file in (one, other, same):
        file.write_text(HEAD)
    both = ["--plugin-file", str(one), "--plugin-file"]
    assert main(["validate", str(project), *both, str(other)]) == 0
    assert main(["validate", str(project), *both, str(same)]) == 2
    assert "would be a plugin named one, as is one (file" in capsys.readouterr().out
