"""The worked example of DEVELOPERS.md is run exactly as it is printed."""

import csv
import os
import re
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
MODULE = "tunnelcalc_precast_ring.py"


def printed_block(language: str, containing: str) -> str:
    text = (ROOT / "DEVELOPERS.md").read_text(encoding="utf-8")
    blocks = re.findall(rf"```{language}\n(.*?)```", text, flags=re.DOTALL)
    (block,) = [block for block in blocks if containing in block]
    return block


@pytest.fixture
def site(tmp_path: Path) -> Path:
    """A folder on the path with the printed module, known by its printed entry point."""
    folder = tmp_path / "site"
    metadata = folder / "tunnelcalc_precast_ring-0.1.0.dist-info"
    metadata.mkdir(parents=True)
    (folder / MODULE).write_text(printed_block("python", "class PrecastRing"), encoding="utf-8")
    package = tomllib.loads(printed_block("toml", "precast"))["project"]
    (name, module), *_ = package["entry-points"]["tunnelcalc"].items()
    (metadata / "entry_points.txt").write_text(f"[tunnelcalc]\n{name} = {module}\n")
    (metadata / "METADATA").write_text(
        f"Metadata-Version: 2.1\nName: {package['name']}\nVersion: {package['version']}\n"
    )
    return folder


@pytest.fixture
def project(tmp_path: Path) -> Path:
    folder = tmp_path / "project"
    folder.mkdir()
    source = ROOT / "projects" / "small"
    (folder / "ground.csv").write_bytes((source / "ground.csv").read_bytes())
    head, tail = (source / "project.yaml").read_text(encoding="utf-8").split("criteria:")
    element = printed_block("yaml", "precast_ring")
    ring = f"  - name: ring\n    installed_at_m: 1.0\n    elements:\n{element}\n"
    (folder / "project.yaml").write_text(f"{head}{ring}criteria:{tail}", encoding="utf-8")
    return folder


def tunnelcalc(site: Path, *arguments: str) -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "tunnelcalc", *arguments],
        env=os.environ | {"PYTHONPATH": str(site)},
        capture_output=True,
        text=True,
        check=False,
    )


def test_the_printed_plugin_is_listed_with_its_parameters(site):
    listed = tunnelcalc(site, "plugins")
    assert listed.returncode == 0, listed.stderr
    assert "precast_ring  from precast_ring (tunnelcalc-precast-ring 0.1.0)" in listed.stdout
    assert "segment_thickness_mm: thickness; a number at least 100" in listed.stdout


def test_the_printed_plugin_checks_its_kind_on_every_section(site, project, tmp_path):
    ran = tunnelcalc(site, "run", str(project), "--out", str(tmp_path / "out"))
    assert ran.returncode == 0, ran.stderr
    with (tmp_path / "out" / "checks.csv").open(encoding="utf-8") as stream:
        rows = [row for row in csv.DictReader(stream) if row["check"] == "segment_thrust"]
    assert len(rows) == 12  # 120 m in sections of 10 m
    assert {row["outcome"] for row in rows} == {"pass"}
    # Thin ring by hand: stress = p R / t, with p of the only element of the class.
    with (tmp_path / "out" / "classes.csv").open(encoding="utf-8") as stream:
        first = next(row for row in csv.DictReader(stream) if row["support_class"] == "ring")
    stress = float(first["support_pressure_mpa"]) * 2.5 / 0.3
    assert float(rows[0]["demand"]) == pytest.approx(stress, rel=1e-8)


def test_without_the_plugin_a_project_that_names_its_kind_is_told(project):
    ran = subprocess.run(
        [sys.executable, "-m", "tunnelcalc", "validate", str(project)],
        capture_output=True,
        text=True,
        check=False,
    )
    assert ran.returncode == 2
    assert 'names "precast_ring", a kind of support that no plugin handles' in ran.stdout
