"""A lining whose rings act from different distances, one of them hardening, run as a user would.

Ground, classes and numbers are invented.
"""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import GROUND, PROJECT, UNITS, completed, rows, tunnelcalc

SETS = """\
      - kind: steel_sets
        installed_at_m: {at}
        profile: HEB 160
        yield_strength_mpa: 355
        steel_modulus_gpa: 210
        spacing_m: 1.0
        contact: embedded
"""
SHOTCRETE = """\
      - kind: shotcrete
        thickness_mm: 200
        strength_mpa: 30
        modulus_gpa: 15
        poisson_ratio: 0.2
"""
CLASSES = f"""\
support_classes:
  - name: together
    installed_at_m: 1.0
    elements:
{SHOTCRETE}{SETS.format(at=1)}
  - name: apart
    installed_at_m: 1.0
    elements:
{SHOTCRETE}{SETS.format(at=6)}
  - name: young
    installed_at_m: 1.0
    advance_m_per_day: 4
    elements:
{SHOTCRETE}        hardening: chang_stille_1993
{SETS.format(at=6)}"""
CHOSEN = """\
criteria:
  composite_lining: yes
  lining_interface: no_slip
  lining_tensile_strength_mpa: 2
"""


@pytest.fixture(scope="module")
def project(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("apart") / "project"
    folder.mkdir()
    before, rest = PROJECT.split("support_classes:\n")
    criteria = rest[rest.index("criteria:") :].replace("criteria:\n", CHOSEN, 1)
    units = UNITS.replace("gouge,22,,", "gouge,22,1,")
    for name, content in (
        ("project.yaml", before + CLASSES + criteria),
        ("ground.csv", GROUND),
        ("units.csv", units),
    ):
        (folder / name).write_text(content, encoding="utf-8", newline="")
    completed(folder)
    return folder


def test_the_lining_of_every_class_is_evaluated(project):
    found = rows(project / "runs" / "0001" / "checks.csv")
    for name in ("together", "apart", "young"):
        mine = [
            row
            for row in found
            if (row["support_class"], row["check"]) == (name, "composite_lining")
        ]
        assert mine
        assert {row["outcome"] for row in mine} <= {"pass", "fail"}


@pytest.mark.parametrize("name", ["together", "apart", "young"])
def test_the_sheet_of_the_lining_recomputes_what_the_run_wrote(project, name, tmp_path):
    done = tunnelcalc(
        "explain", "runs/0001", "--at", "57", "--class", name,
        "--out", str(tmp_path / "sheet.md"), folder=project,
    )  # fmt: skip
    assert done.returncode == 0, done.stdout + done.stderr


def test_the_curves_tell_each_ring_and_its_limit(project, tmp_path):
    done = tunnelcalc(
        "curves",
        ".",
        "--at",
        "57",
        "--class",
        "young",
        "--out",
        str(tmp_path / "curves"),
        folder=project,
    )
    assert done.returncode == 0, done.stdout + done.stderr
    found = rows(tmp_path / "curves" / "thrust_moment.csv")
    named = {"shotcrete", "shotcrete while young", "steel_sets"}
    assert {row["element"] for row in found} == named
    assert {(row["element"], row["point"]) for row in found} == {
        (name, point) for name in named for point in ("equilibrium", "capacity")
    }
    strongest = {
        name: max(
            float(row["lining_thrust_mn_per_m"])
            for row in found
            if (row["element"], row["point"]) == (name, "capacity")
        )
        for name in named
    }
    assert strongest["shotcrete"] == pytest.approx(30 * 0.2)
    assert strongest["shotcrete while young"] < strongest["shotcrete"]
    assert (tmp_path / "curves" / "thrust_moment.png").is_file()
