"""A small valid invented project, ways to damage it, and the command line that runs it."""

from __future__ import annotations

import csv
import io
import os
import subprocess
import sys
import traceback
from collections.abc import Callable, Iterator, Mapping
from contextlib import chdir, redirect_stderr, redirect_stdout
from pathlib import Path

from tunnelcalc.cli.main import main

PROJECT = """\
# Invented for tests: no real place, firm or project.
title: Invented culvert drive
opening:
  radius_m: 3.0
ground:
  table: ground.csv
  units: units.csv
  section_length_m: 10
support_classes:
  - name: light
    installed_at_m: 2.0
    elements:
      - kind: rock_bolts
        diameter_mm: 25
        length_m: 3.5
        spacing_around_m: 1.5
        spacing_along_m: 1.5
        capacity_kn: 150
        steel_modulus_gpa: 200
        anchor_deformation_m_per_mn: 0.05
        anchorage_length_m: 1.0
        pattern_rules: em_1110_1_2907
  - name: heavy
    installed_at_m: 1.0
    elements:
      - kind: shotcrete
        thickness_mm: 150
        strength_mpa: 25
        modulus_gpa: 10
        poisson_ratio: 0.2
      - kind: steel_sets
        section_area_mm2: 4300
        section_inertia_mm4: 14500000
        section_depth_mm: 140
        yield_strength_mpa: 235
        steel_modulus_gpa: 200
        spacing_m: 1.5
        contact: embedded
criteria:
  factor_of_safety: 1.5
  closure_pct: 1.0
schedule:
  minimum_zone_m: 20
  carry_m: 5
"""

GROUND = """\
from_m,to_m,ground_unit,cover_m,block_width_m
0,45,sandstone,60,1.1
45,70,siltstone,75,0.4
70,120,sandstone,90,1.1
120,150,gouge,200,
"""

UNITS = """\
ground_unit,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,mi,gsi,disturbance,poisson_ratio,dilation_deg,modulus_ratio
sandstone,25,1,55,17,62,0,0.25,0,275
siltstone,25.5,0.9,20,7,35,0,0.28,2,350
gouge,22,,3,8,12,0,0.3,,200
"""

Damage = Callable[[Path], object]


def write_project(folder: Path) -> Path:
    """The undamaged project, in a new folder."""
    folder.mkdir(parents=True)
    for name, text in (("project.yaml", PROJECT), ("ground.csv", GROUND), ("units.csv", UNITS)):
        (folder / name).write_text(text, encoding="utf-8", newline="")
    return folder


def replaced(file: str, old: str, new: str) -> Damage:
    """Replace the one place where `old` stands."""

    def damage(project: Path) -> None:
        text = (project / file).read_text(encoding="utf-8")
        assert text.count(old) == 1, f"{old!r} stands {text.count(old)} times in {file}"
        (project / file).write_text(text.replace(old, new), encoding="utf-8", newline="")

    return damage


def content(file: str, data: bytes) -> Damage:
    """Replace a whole file."""
    return lambda project: (project / file).write_bytes(data)


def all_of(*damages: Damage) -> Damage:
    """Several damages, one after the other."""
    return lambda project: [damage(project) for damage in damages]


def tunnelcalc(
    *arguments: str | Path, folder: Path, environment: Mapping[str, str] | None = None
) -> subprocess.CompletedProcess[str]:
    """The command line, started in `folder`: here, or in a process if it needs an environment.

    Here it saves the second that a process takes to start. `test_processes.py` proves for each
    command that a process ends the same.
    """
    if environment:
        return process(*arguments, folder=folder, environment=environment)
    given = [str(argument) for argument in arguments]
    out, error = (io.TextIOWrapper(io.BytesIO(), encoding="utf-8", newline="") for _ in range(2))
    with chdir(folder), redirect_stdout(out), redirect_stderr(error):
        code = _ended(given)
    texts = []
    for stream in (out, error):
        stream.flush()
        texts.append(stream.buffer.getvalue().decode("utf-8"))  # type: ignore[attr-defined]
    return subprocess.CompletedProcess(given, code, *texts)


def _ended(arguments: list[str]) -> int:
    """The exit code that a process has for what comes out of the command line's function."""
    try:
        return main(arguments)
    except SystemExit as ended:
        return int(ended.code or 0)
    except Exception:
        traceback.print_exc()
        return 1


def process(
    *arguments: str | Path, folder: Path, environment: Mapping[str, str] | None = None
) -> subprocess.CompletedProcess[str]:
    """The command line, in a process of its own that starts in `folder`."""
    return subprocess.run(
        [sys.executable, "-m", "tunnelcalc", *map(str, arguments)],
        cwd=folder,
        env={**os.environ, **(environment or {})},
        capture_output=True,
        encoding="utf-8",
        timeout=120,
        check=False,
    )


def run(
    project: Path, *options: str | Path, environment: Mapping[str, str] | None = None
) -> subprocess.CompletedProcess[str]:
    """`tunnelcalc run` of a project, started in its folder."""
    folder = project if project.is_dir() else project.parent
    return tunnelcalc("run", project, *options, folder=folder, environment=environment)


def completed(project: Path, *options: str | Path, out: str = "runs/0001", code: int = 0) -> Path:
    """Run a project that must end with `code`, and give the folder of the run."""
    ended = run(project, *options)
    assert ended.returncode == code, ended.stderr
    return (project if project.is_dir() else project.parent) / out


def files_of(folder: Path) -> dict[str, bytes]:
    """Every file below a folder; folders have no content, links are not followed."""
    return dict(_files(folder))


def _files(folder: Path) -> Iterator[tuple[str, bytes]]:
    for path in sorted(folder.rglob("*")):
        name = path.relative_to(folder).as_posix()
        yield name, path.read_bytes() if path.is_file() and not path.is_symlink() else b""


def tables_of(run_folder: Path) -> dict[str, bytes]:
    """The tables of a run, by name."""
    return {path.name: path.read_bytes() for path in sorted(run_folder.glob("*.csv"))}


def rows(table: Path) -> list[dict[str, str]]:
    """The rows of a table."""
    with table.open(encoding="utf-8", newline="") as stream:
        return list(csv.DictReader(stream))
