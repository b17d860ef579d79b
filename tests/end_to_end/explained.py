"""Invented projects whose sections are explained, and the lines of their sheets redone."""

from __future__ import annotations

import csv
import json
import math
from collections.abc import Mapping, Sequence
from pathlib import Path
from typing import Any

import yaml
from end_to_end.sheet_evaluator import both_sides

from tunnelcalc.explain.sheet import explain
from tunnelcalc.outputs.sheet_text import sheet_json
from tunnelcalc.plugin.registry import Registry

REDONE = 1e-8
"""Quadrature and roots; closed forms agree to the last digits."""

GROUND = """\
from_m,to_m,ground_unit,cover_m,stress_ratio,water_head_m,rock_mass_modulus_mpa
0,20,schist,150,1,,
20,40,schist,420,0.6,,
40,60,gneiss,60,1.1,,
60,80,schist,300,1,80,
80,100,gneiss,300,1.2,,9000
"""

UNITS = {
    "schist": {"gsi": 34, "intact_strength_mpa": 30, "mi": 10, "dilation_deg": 6},
    "gneiss": {"gsi": 68, "intact_strength_mpa": 110, "mi": 23, "dilation_deg": 0},
}
SHARED = {
    "unit_weight_kn_m3": 26.5,
    "poisson_ratio": 0.25,
    "disturbance": 0.5,
    "modulus_ratio": 350,
    "block_width_m": 0.9,
}
RESIDUAL_GSI = {"residual_gsi": 22}
SOFTENING = {**RESIDUAL_GSI, "critical_shear_strain": 0.01}
LINE = {"friction_angle_deg": 28, "cohesion_mpa": 0.5}
RESIDUAL_LINE = {"residual_friction_angle_deg": 24, "residual_cohesion_mpa": 0.2}
CONSTANTS = {"mb": 1.1, "s": 0.002, "a": 0.51}
RESIDUAL_CONSTANTS = {"residual_mb": 0.6, "residual_s": 0.0, "residual_a": 0.53}

BOLTS = {
    "kind": "rock_bolts",
    "installed_at_m": 3.0,
    "diameter_mm": 25,
    "length_m": 5.0,
    "spacing_around_m": 1.5,
    "spacing_along_m": 1.2,
    "capacity_kn": 220,
    "steel_modulus_gpa": 200,
    "anchor_deformation_m_per_mn": 0.04,
    "anchorage_length_m": 1.5,
    "pattern_rules": "em_1110_1_2907",
}
RING = {
    "kind": "shotcrete",
    "thickness_mm": 200,
    "strength_mpa": 35,
    "modulus_gpa": 12,
    "poisson_ratio": 0.2,
}
THICK_RING = {**RING, "thickness_mm": 400}
SETS = {
    "kind": "steel_sets",
    "section_area_mm2": 4300,
    "section_inertia_mm4": 14500000,
    "section_depth_mm": 140,
    "yield_strength_mpa": 355,
    "steel_modulus_gpa": 200,
    "spacing_m": 1.2,
    "contact": "embedded",
}
BLOCKED = {
    **SETS,
    "contact": "blocked",
    "block_spacing_deg": 22,
    "block_thickness_mm": 90,
    "block_width_mm": 200,
    "block_modulus_gpa": 9,
}

CLASSES = (
    {"name": "light", "installed_at_m": 4.0, "elements": [BOLTS, RING, SETS]},
    {"name": "heavy", "installed_at_m": 1.0, "elements": [THICK_RING, BLOCKED]},
)
"""With most kinds of support."""

PLACES = (("10", "light"), ("30", "heavy"), ("50", "light"), ("70", "light"), ("90", "heavy"))
"""Chainages and classes shown: deep weak ground, unequal stress, shallow ground, water, a measured
modulus."""

Case = tuple[Mapping[str, str], Mapping[str, float]]

LAWS: Mapping[str, Case] = {
    "hoek_brown_perfectly_plastic": ({}, {}),
    "hoek_brown_brittle": ({}, RESIDUAL_GSI),
    "hoek_brown_softening": ({}, SOFTENING),
    "hoek_brown_disturbed_ring": ({}, {"disturbed_thickness_m": 1.8}),
    "mohr_coulomb_perfectly_plastic": ({"strength": "mohr_coulomb"}, LINE),
    "mohr_coulomb_brittle": ({"strength": "mohr_coulomb"}, {**LINE, **RESIDUAL_LINE}),
    "elastic": ({}, {}),
}
CASES: dict[str, Case] = {
    law: ({"ground_reaction": law, **methods}, columns) for law, (methods, columns) in LAWS.items()
}
CASES |= {
    f"{law}_finite_strain": (
        {**CASES[law][0], "ground_reaction": f"{law}_finite_strain"},
        CASES[law][1],
    )
    for law in LAWS
    if law != "elastic"
}
CASES |= {
    "hoek_brown_constants": (
        {"strength": "hoek_brown_constants", "ground_reaction": "hoek_brown_brittle"},
        {**CONSTANTS, **RESIDUAL_CONSTANTS},
    ),
    "hoek_diederichs_2006_simplified": (
        {"deformation_modulus": "hoek_diederichs_2006_simplified"},
        {},
    ),
    "hoek_2002": ({"deformation_modulus": "hoek_2002"}, {}),
    "serafim_pereira_1983": ({"deformation_modulus": "serafim_pereira_1983"}, {"rmr89": 41}),
    "bieniawski_1978": ({"deformation_modulus": "bieniawski_1978"}, {"rmr89": 58}),
    "barton_2002": ({"deformation_modulus": "barton_2002"}, {"q": 1.2}),
    "panet_1995": ({"closure_profile": "panet_1995"}, {}),
    "panet_guenot_1982": ({"closure_profile": "panet_guenot_1982"}, {}),
    "unlu_gercek_2003": ({"closure_profile": "unlu_gercek_2003"}, {}),
    "hoek_profile_2002": ({"closure_profile": "hoek_2002"}, {}),
}


def write(
    folder: Path,
    methods: Mapping[str, str],
    columns: Mapping[str, float],
    classes: Sequence[Mapping[str, Any]] = CLASSES,
) -> Path:
    """An invented project with a stated drainage."""
    folder.mkdir()
    project = {
        "title": "Invented test drive",
        "opening": {"radius_m": 4.1},
        "ground": {
            "table": "ground.csv",
            "units": "units.csv",
            "section_length_m": 20,
            "drainage": "watertight",
        },
        "methods": dict(methods),
        "support_classes": [dict(one) for one in classes],
        "criteria": {"factor_of_safety": 1.5, "closure_pct": 1.5, "crown_dead_weight": "yes"},
        "schedule": {"minimum_zone_m": 0, "carry_m": 0},
    }
    (folder / "project.yaml").write_text(yaml.safe_dump(project, sort_keys=False), "utf-8")
    (folder / "ground.csv").write_text(GROUND, "utf-8")
    units = [{"ground_unit": name, **values, **SHARED, **columns} for name, values in UNITS.items()]
    with (folder / "units.csv").open("w", encoding="utf-8", newline="") as stream:
        writer = csv.DictWriter(stream, list(units[0]))
        writer.writeheader()
        writer.writerows(units)
    return folder


def sheets(run: Path, registry: Registry, shown: Sequence[tuple[str, str]]) -> list[dict[str, Any]]:
    """Sheets of sections and classes, as a program reads them."""
    return [
        json.loads(sheet_json(explain(run, at, class_name, registry))) for at, class_name in shown
    ]


def lines_of(sheet: Mapping[str, Any]) -> list[dict[str, Any]]:
    return [line for block in sheet["blocks"] for line in block["lines"]]


def redo(sheet: Mapping[str, Any]) -> int:
    """Redo every line of a sheet from its own numbers; how many have a formula."""
    redone = 0
    for line in lines_of(sheet):
        assert line["meaning"], line
        if line["formula"]:
            left, right = both_sides(line["formula"], line["inputs"], line["result"])
            assert math.isclose(left, right, rel_tol=REDONE, abs_tol=1e-13), line
            redone += 1
    return redone
