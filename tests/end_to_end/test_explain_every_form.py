"""`tunnelcalc explain` of support that hardens along the advance or changes the ground in a ring.

Ground, classes and numbers are invented.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from pathlib import Path
from typing import Any

import numpy as np
import pytest
from end_to_end.explained import BOLTS, CASES, REDONE, RING, SETS, redo, sheets, write
from end_to_end.projects import rows
from end_to_end.sheet_evaluator import both_sides

from tunnelcalc.api import GroundRing, SheetLine
from tunnelcalc.explain.sheet import explain
from tunnelcalc.outputs.sheet_text import sheet_text
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.run import run_project

CHANG = {**RING, "hardening": "chang_stille_1993"}
MESCHKE = {**RING, "hardening": "meschke_1996"}
THIN = {**RING, "hardening": "en_1992_1_1", "cement_class": "R", "ring_theory": "thin"}
LATE = {**THIN, "closed_ring": "from_distance", "closed_at_m": 8.0}
YIELDING = {**SETS, "beyond_yield": "yields", "installed_at_m": 3.0}
GROUTED = {
    "kind": "grouted_rock_bolts",
    "diameter_mm": 25,
    "length_m": 4.0,
    "spacing_around_m": 1.2,
    "spacing_along_m": 1.2,
    "friction_factor": 0.6,
    "bar_strength_mpa": 500,
    "bar_strength_is": "yield",
    "service_factor": 1,
    "bond_kn_per_m": 150,
    "anchorage_length_m": 0.5,
    "pattern_rules": "none",
}
DENSE = {**GROUTED, "length_m": 6.0, "spacing_around_m": 0.6, "spacing_along_m": 0.6}

HARDENING = (
    {"name": "young", "elements": [CHANG, YIELDING]},
    {"name": "late", "elements": [SETS, LATE]},
    {"name": "two", "elements": [MESCHKE, {**CHANG, "installed_at_m": 3.0}, BOLTS]},
)
RINGED = (
    {"name": "grouted", "elements": [GROUTED]},
    {"name": "dense", "elements": [DENSE, RING]},
    {"name": "together", "elements": [GROUTED, MESCHKE]},
)
RINGED_CASES = (
    "hoek_brown_perfectly_plastic_finite_strain",
    "mohr_coulomb_perfectly_plastic",
    "elastic",
)
Sheet = Mapping[str, Any]


def run_of(
    folder: Path, case: str, classes: tuple[Mapping[str, Any], ...], registry: Registry
) -> Path:
    whole = [{"installed_at_m": 1.0, "advance_m_per_day": 4, **one} for one in classes]
    aged = [one for one in whole if any("hardening" in each for each in one["elements"])]
    for one in whole:
        if one not in aged:
            del one["advance_m_per_day"]
    project = write(folder / "project", *CASES[case], whole)
    return run_project(project, registry, out=folder / "run").folder


@pytest.fixture(scope="module")
def hardening(registry: Registry, tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("hardening")
    return run_of(folder, "hoek_brown_perfectly_plastic", HARDENING, registry)


def blocks(sheet: Sheet, part: str) -> list[Sheet]:
    return [block for block in sheet["blocks"] if part in block["title"]]


def of_symbol(lines: list[dict[str, Any]]) -> dict[str, dict[str, Any]]:
    return {line["symbol"]: line for line in lines}


@pytest.mark.parametrize("name", ["young", "late", "two"])
@pytest.mark.parametrize("at", ["30", "70"], ids=["unequal", "watertight"])
def test_every_step_of_the_advance_is_redone_from_its_own_numbers(at, name, hardening, registry):
    (sheet,) = sheets(hardening, registry, [(at, name)])
    assert sheet["differences"] == []
    assert "shows no formula" not in str(sheet)
    steps = blocks(sheet, "along the advance of the face")
    count = sum(
        "hardening" in element
        for one in HARDENING
        for element in one["elements"]
        if one["name"] == name
    )
    assert len([block for block in steps if "larger" not in block["title"]]) == count
    assert redo(sheet) > 300 * count


def test_the_steps_add_up_to_the_pressure_that_the_run_wrote(hardening, registry):
    """By the printed numbers alone: chains of closures and pressures, sum, greatest use, stress."""
    (sheet,) = sheets(hardening, registry, [("70", "young")])
    (block,) = blocks(sheet, "along the advance of the face")
    found = of_symbol(block["lines"])
    last = max(int(symbol[3:]) for symbol in found if symbol.startswith("dp_"))
    total, use = 0.0, 0.0
    for k in range(1, last + 1):
        moved = found[f"w_{k}"]["result"] - found[f"w_{k - 1}"]["result"]
        total += found[f"Km_{k}"]["result"] * moved / 1000
        assert math.isclose(total, found[f"p_{k}"]["result"], rel_tol=1e-9, abs_tol=1e-15)
        water = found["w_p"]["result"] if total > 0 else 0
        use = max(use, (total + water) / found[f"pmax_{k}"]["result"])
    assert last > 60
    assert math.isclose(use, found["use"]["result"], rel_tol=1e-9)
    (rest,) = blocks(sheet, "Class young: equilibrium")
    at_rest = of_symbol(rest["lines"])
    assert math.isclose(total, at_rest["p_1"]["result"], rel_tol=1e-9)
    (check,) = blocks(sheet, "shotcrete:young_hoop_stress")
    young = of_symbol(check["lines"])
    factor = young["capacity"]["result"] / young["demand"]["result"]
    (row,) = [
        row
        for row in rows(hardening / "checks.csv")
        if (row["chainage_m"], row["support_class"]) == ("70", "young")
        and row["check"] == "young_hoop_stress"
    ]
    assert math.isclose(factor, float(row["factor_of_safety"]), rel_tol=1e-8)
    # A thick ring's hoop stress at first yield is its capacity: both measures of use are one.
    assert math.isclose(1 / factor, use, rel_tol=1e-9)


def test_the_screen_shows_the_first_steps_the_worst_and_the_last(hardening, registry):
    sheet = explain(hardening, "70", "young", registry)
    (block,) = [block for block in sheet.blocks if "along the advance" in block.title]
    shown = [line.symbol for line in block.lines if line.symbol[:3] == "dp_" and line.on_screen]
    every = [line.symbol for line in block.lines if line.symbol[:3] == "dp_"]
    assert shown[:2] == every[:2]
    assert shown[-1] == every[-1]
    assert 3 <= len(shown) <= 4
    screen = sheet_text(sheet)
    assert f"{every[2]} = " in screen  # among the numbers of the sum
    assert f"w_{every[2][3:]} = " not in screen


@pytest.mark.parametrize("case", RINGED_CASES)
def test_ground_with_a_ring_of_bolts_is_redone_from_its_own_numbers(case, registry, tmp_path):
    run = run_of(tmp_path, case, RINGED, registry)
    shown = [("10", "grouted"), ("30", "dense"), ("10", "together")]
    for sheet in sheets(run, registry, shown):
        assert sheet["differences"] == []
        assert "shows no formula" not in str(sheet)
        assert blocks(sheet, "with the ring from the beginning")
        assert redo(sheet) > 60


LAYERED = {
    "radius_m": 4.1,
    "deformation_modulus_mpa": 1200.0,
    "poisson_ratio": 0.25,
    "intact_strength_mpa": 30.0,
    "mb": 0.6,
    "s": 0.0005,
    "a": 0.51,
    "friction_angle_deg": 24.0,
    "cohesion_mpa": 0.3,
}
STRONGER = {
    "hoek_brown_perfectly_plastic": ({"mb": 0.8, "s": 0.0007}, {"mb": 4.0, "s": 0.05}),
    "mohr_coulomb_perfectly_plastic": (
        {"friction_angle_deg": 27.0, "cohesion_mpa": 0.34},
        {"friction_angle_deg": 40.0, "cohesion_mpa": 2.0},
    ),
}


def state_of(lines: Mapping[str, SheetLine]) -> str:
    """What has yielded, by what the lines show."""
    mass = "yielded" if "M_u" in lines or lines["X_u"].result > 1 else "elastic"
    if "y_c" in lines:
        return f"{'whole' if 'all of' in lines['y_c'].meaning else 'part'}, mass {mass}"
    return f"elastic, mass {mass}"


@pytest.mark.parametrize("law", STRONGER)
def test_every_state_of_ground_with_a_stronger_ring_is_redone(law, registry):
    """The ring elastic, yielded in part or as a whole, beside a mass that has yielded or not."""
    method = registry.method("ground_reaction", law)
    met = set()
    for stress in (2.0, 6.0, 12.0):
        for dilation in (0.0, 8.0):
            values = {**LAYERED, "in_situ_stress_mpa": stress, "dilation_deg": dilation}
            for changed in STRONGER[law]:
                for thickness in (0.8, 3.0):
                    columns = {name: np.array([value]) for name, value in changed.items()}
                    ring = GroundRing(np.array([thickness]), columns, np.array([0.1]))
                    for part in (0.0, 0.08, 0.3, 0.6, 0.95):
                        lines = method.lines_with_ring(values, ring, part * stress)
                        for line in lines:
                            assert not line.disagrees(), line
                            if line.formula:
                                put_in = (line.formula, line.inputs, line.result)
                                left, right = both_sides(*put_in)
                                assert math.isclose(left, right, rel_tol=REDONE, abs_tol=1e-12), (
                                    line
                                )
                        met.add(state_of({line.symbol: line for line in lines}))
    assert met >= {
        "elastic, mass elastic",
        "elastic, mass yielded",
        "part, mass yielded",
        "whole, mass yielded",
    }
