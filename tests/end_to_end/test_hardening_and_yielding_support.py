"""Complete examples of shotcrete that hardens and of steel that slides, run as a user would.

Ground, classes and numbers are invented.
"""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import GROUND, PROJECT, UNITS, completed, rows, run, tunnelcalc

from tunnelcalc.cli.main import main

CLASSES = """\
support_classes:
  - name: young
    installed_at_m: 1.0
    advance_m_per_day: 4
    elements:
      - kind: shotcrete
        thickness_mm: 200
        strength_mpa: 30
        modulus_gpa: 15
        poisson_ratio: 0.2
        hardening: chang_stille_1993
        early_strength: at_two_ages     # as the specification cites EN 14487-1; invented
        early_age_1_hours: 6
        early_strength_1_mpa: 2
        early_age_2_hours: 24
        early_strength_2_mpa: 8
        reinforcement: fibre
  - name: late_invert
    installed_at_m: 1.0
    advance_m_per_day: 2.5
    elements:
      - kind: shotcrete
        thickness_mm: 250
        strength_mpa: 30
        modulus_gpa: 15
        poisson_ratio: 0.2
        ring_theory: thin
        hardening: en_1992_1_1
        cement_class: R
        closed_ring: from_distance
        closed_at_m: 9                  # after the 3 days from which the code gives strengths
        reinforcement: mesh
      - kind: lattice_girders
        bars: three
        lower_bar_diameter_mm: 20
        upper_bar_diameter_mm: 30
        bar_layer_distance_mm: 130
        yield_strength_mpa: 500
        steel_modulus_gpa: 200
        spacing_m: 1.0
        beyond_yield: yields
  - name: sliding
    installed_at_m: 1.0
    elements:
      - kind: steel_sets
        profile: HEB 160
        yield_strength_mpa: 355
        steel_modulus_gpa: 210
        spacing_m: 1.0
        contact: embedded
        joints: sliding
        joint_count: 3
        slip_load_kn: 300
        joint_travel_mm: 200
  - name: blocked
    installed_at_m: 1.0
    elements:
      - kind: steel_sets
        profile: HEB 240
        yield_strength_mpa: 355
        steel_modulus_gpa: 210
        spacing_m: 0.8
        contact: blocked
        block_spacing_deg: 15
        block_thickness_mm: 75
        block_width_mm: 200
        block_modulus_gpa: 10
"""

GROUTED = """\
  - name: grouted
    installed_at_m: 0.5
    elements:
      - kind: grouted_rock_bolts
        diameter_mm: 25
        length_m: 3.5
        spacing_around_m: 1.2
        spacing_along_m: 1.2
        friction_factor: 0.6
        bar_strength_mpa: 500
        bar_strength_is: yield
        service_factor: 1
        bond_kn_per_m: 150
        anchorage_length_m: 1.0
        pattern_rules: none
"""


def text() -> str:
    """The example's classes in the project of the other tests, which has rigid ones."""
    before, rest = PROJECT.split("support_classes:\n")
    return before + CLASSES + rest[rest.index("criteria:") :]


def write(folder: Path, project: str) -> Path:
    folder.mkdir()
    for name, content in (("project.yaml", project), ("ground.csv", GROUND), ("units.csv", UNITS)):
        (folder / name).write_text(content, encoding="utf-8", newline="")
    return folder


@pytest.fixture(scope="module")
def ran(tmp_path_factory: pytest.TempPathFactory) -> Path:
    project = write(tmp_path_factory.mktemp("ages") / "project", text())
    completed(project)
    return project / "runs" / "0001"


def checks(ran: Path, **wanted: str) -> list[dict[str, str]]:
    return [
        row
        for row in rows(ran / "checks.csv")
        if all(row[name] == value for name, value in wanted.items())
    ]


def test_every_element_is_checked_by_its_own_checks(ran):
    found = {(row["support_class"], row["element"], row["check"]) for row in checks(ran)}
    assert {pair for pair in found if pair[1] != "class"} == {
        ("young", "shotcrete", "hoop_stress"),
        ("young", "shotcrete", "young_hoop_stress"),
        ("young", "shotcrete", "early_strength"),
        ("late_invert", "shotcrete", "hoop_stress"),
        ("late_invert", "shotcrete", "young_hoop_stress"),
        ("late_invert", "lattice_girders", "yield"),
        ("sliding", "steel_sets", "yield"),
        ("sliding", "steel_sets", "travel"),
        ("blocked", "steel_sets", "yield"),
    }


def test_every_check_is_evaluated_with_an_outcome(ran):
    assert {row["outcome"] for row in checks(ran)} <= {"pass", "fail"}


def test_young_shotcrete_has_no_more_strength_than_at_28_days(ran):
    young = checks(ran, support_class="young", check="young_hoop_stress")
    assert young
    assert all(0 < float(row["capacity"]) <= 30 for row in young)
    rest = checks(ran, support_class="young", check="hoop_stress")
    for at_age, at_rest in zip(young, rest, strict=True):
        # Along the advance the load is never more than at rest, the factor never higher.
        assert float(at_age["demand"]) <= float(at_rest["demand"]) * (1 + 1e-6)
        if at_age["factor_of_safety"]:
            assert float(at_age["factor_of_safety"]) <= float(at_rest["factor_of_safety"]) * 1.001


def test_sets_that_slide_stay_at_the_slip_pressure_until_their_travel_is_used_up(ran):
    """300 kN over 1 m x 3 m is 0.1 MPa."""
    loads = checks(ran, support_class="sliding", check="yield")
    travel = checks(ran, support_class="sliding", check="travel")
    slid = 0
    for load, rule in zip(loads, travel, strict=True):
        pressure, used = float(load["demand"]), float(rule["demand"])
        if 0 < used <= 200:
            slid += 1
            assert pressure == pytest.approx(0.1, rel=1e-6)
        if used == 0:
            assert pressure <= 0.1 * (1 + 1e-9)
        if used > 200:
            assert pressure >= 0.1 * (1 - 1e-9)
        assert (rule["outcome"] == "pass") == (used <= 200)
    assert slid


@pytest.mark.parametrize("chainage", [5, 55, 135])
@pytest.mark.parametrize("name", ["young", "late_invert", "sliding", "blocked"])
def test_the_calculation_sheet_agrees_with_the_run(ran, name, chainage):
    ended = tunnelcalc("explain", ran, "--at", str(chainage), "--class", name, folder=ran)
    assert ended.returncode == 0, ended.stdout[-3000:] + ended.stderr


def damaged(tmp_path: Path, old: str, new: str) -> str:
    assert text().count(old) == 1
    ended = run(write(tmp_path / "project", text().replace(old, new)))
    assert ended.returncode == 2
    return ended.stderr


@pytest.mark.parametrize(
    ("old", "new", "told"),
    [
        pytest.param(
            "        cement_class: R\n",
            "",
            '"support_classes[2].elements[1].cement_class"',
            id="cement",
        ),
        pytest.param(
            "early_age_1_hours: 6",
            "early_age_1_hours: 1",
            "trusted from 6 h on",
            id="age-too-young",
        ),
        pytest.param(
            "        hardening: chang_stille_1993\n",
            "",
            "has no use with hardening: none",
            id="early-strength-without-a-law",
        ),
        pytest.param("closed_at_m: 9", "closed_at_m: 0.5", "before the installation", id="closed"),
        pytest.param(
            "slip_load_kn: 300", "slip_load_kn: 3000", "before the joints slide", id="slip"
        ),
        pytest.param("joint_count: 3", "joint_count: 2.5", "out of range", id="half-a-joint"),
        pytest.param("profile: HEB 240", "profile: HEB 245", "HEB 240", id="designation"),
        pytest.param(
            "profile: HEB 240",
            "profile: HEB 240\n        section_area_mm2: 5000",
            "has no use with profile: HEB 240",
            id="designation-and-area",
        ),
        pytest.param(
            "    advance_m_per_day: 4\n", "", "advance_m_per_day", id="no-rate-of-advance"
        ),
    ],
)
def test_what_does_not_fit_together_is_refused(tmp_path, old, new, told):
    assert told in damaged(tmp_path, old, new)


@pytest.mark.parametrize("rate", ["2", "40"])
def test_a_ring_loaded_before_its_law_is_trusted_never_passes(tmp_path, rate):
    """EN 1992-1-1:2004, 3.1.2(5): strengths up to 3 days are based on tests."""
    at_once = (
        text()
        .replace("closed_ring: from_distance", "closed_ring: at_installation")
        .replace("        closed_at_m: 9    ", "        #")
        .replace("advance_m_per_day: 2.5", f"advance_m_per_day: {rate}")
    )
    project = write(tmp_path / "project", at_once)
    assert run(project).returncode == 3
    found = checks(project / "runs" / "0001", support_class="late_invert")
    found = [row for row in found if row["check"] == "young_hoop_stress"]
    early = [row for row in found if row["outcome"] == "not_evaluated"]
    assert early
    assert all("carries load before 3 days" in row["reason"] for row in early)
    # What rests before the ring is loaded at all has nothing to compare.
    assert all(row in early or float(row["demand"]) == 0 for row in found)
    classes = rows(project / "runs" / "0001" / "classes.csv")
    wrong = {row["chainage_m"] for row in early}
    of_class = [r for r in classes if r["support_class"] == "late_invert"]
    assert {r["adequate"] for r in of_class if r["chainage_m"] in wrong} == {"no"}


LIMITS = (
    "first_failure_pressure_mpa",
    "first_failure_closure_mm",
    "full_mobilisation_pressure_mpa",
    "full_mobilisation_closure_mm",
    "missing_pressure_mpa",
)


@pytest.mark.parametrize("name", ["young", "late_invert", "grouted"])
def test_limits_are_told_in_the_table_and_in_the_sheet(name, tmp_path, capsys):
    project = write(tmp_path / "project", text().replace("criteria:", GROUTED + "criteria:"))
    completed(project)
    folder = project / "runs" / "0001"
    told = [row for row in rows(folder / "classes.csv") if row["support_class"] == name]
    assert told
    for row in told:
        assert row["missing_pressure_mpa"]
        if name != "grouted":
            assert all(row[column] for column in LIMITS)
        first, full = (float(row[column] or "inf") for column in (LIMITS[1], LIMITS[3]))
        assert first <= full * (1 + 1e-9)
    weak = max(told, key=lambda row: float(row["missing_pressure_mpa"]))
    assert float(weak["missing_pressure_mpa"]) > 0
    assert weak["first_failure_closure_mm"]
    main(["explain", str(folder), "--at", weak["chainage_m"], "--class", name])
    screen = set(capsys.readouterr().out.split())
    assert {weak[column] for column in LIMITS} <= screen
