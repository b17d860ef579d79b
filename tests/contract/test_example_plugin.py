"""The example plugin keeps to the contract, and works where it is built and installed."""

from __future__ import annotations

import csv
import json
import shutil
import site
import subprocess
import sys
import venv
from pathlib import Path

import pytest

from tunnelcalc import testing

EXAMPLE = Path(__file__).parents[1] / "example_plugin"
OFFERS = testing.offers_of_file(EXAMPLE / "tunnelcalc_liner_plates.py")


class TestItsKind(testing.KindConformance):
    offers = OFFERS


class TestItsChecks(testing.CheckConformance):
    offers = OFFERS


def ended(*command: str | Path, folder: Path) -> subprocess.CompletedProcess[str]:
    """A command that must succeed."""
    done = subprocess.run(
        [str(part) for part in command], cwd=folder, capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stdout + done.stderr
    return done


@pytest.fixture(scope="module")
def fresh(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, Path]:
    """The interpreter of a fresh environment, and a copy of the example.

    The environment has the libraries of this one, so that nothing is fetched, and the built
    plugin besides.
    """
    folder = tmp_path_factory.mktemp("stranger")
    example = shutil.copytree(
        EXAMPLE, folder / "liner-plates", ignore=shutil.ignore_patterns("__pycache__", "runs")
    )
    venv.create(folder / "environment", with_pip=False, symlinks=True)
    python = folder / "environment" / "bin" / "python"
    (packages,) = (folder / "environment" / "lib").glob("python*/site-packages")
    added = "".join(f"site.addsitedir({path!r}); " for path in site.getsitepackages())
    (packages / "libraries.pth").write_text(f"import site; {added}\n")
    options = ("--quiet", "--no-index", "--no-deps", "--no-build-isolation", "--no-cache-dir")
    ended(sys.executable, "-m", "pip", "--python", python, "install", *options, ".", folder=example)
    return python, example


@pytest.mark.long
def test_it_is_listed_in_a_fresh_environment_and_only_there(fresh):
    python, example = fresh
    listed = ended(python, "-m", "tunnelcalc", "plugins", folder=example.parent).stdout
    assert "liner_plates  from liner_plates (tunnelcalc-liner-plates 0.1.0)" in listed
    here = ended(sys.executable, "-m", "tunnelcalc", "plugins", folder=example.parent).stdout
    assert "liner_plates" not in here


@pytest.mark.long
def test_its_own_tests_pass_there(fresh):
    python, example = fresh
    shown = ended(python, "-m", "pytest", "-p", "no:cacheprovider", folder=example).stdout
    assert " passed" in shown
    assert "skipped" not in shown


@pytest.mark.long
def test_its_project_runs_there_and_the_run_tells_of_it(fresh):
    python, example = fresh
    ended(python, "-m", "tunnelcalc", "run", "project", "--out", "out", folder=example)
    with (example / "out" / "checks.csv").open(encoding="utf-8") as stream:
        checks = list(csv.DictReader(stream))
    assert {row["check"] for row in checks} == {"seam_thrust", "gap_closes", "crown_dead_weight"}
    assert all(row["outcome"] in ("pass", "fail") for row in checks)
    told = json.loads((example / "out" / "run.json").read_text("utf-8"))["plugins"]
    (plugin,) = [one for one in told if one["plugin"] == "liner_plates"]
    assert plugin["distribution"] == "tunnelcalc-liner-plates"
    assert [file["path"] for file in plugin["files"]] == ["tunnelcalc_liner_plates.py"]
