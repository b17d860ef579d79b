"""Projects and sections made in memory, or written as a folder. All ground is invented."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from pathlib import Path

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.chainage import Notation
from tunnelcalc.project import (
    DEFAULT_METHODS,
    Criteria,
    Element,
    MethodChoice,
    Project,
    ScheduleRules,
    SupportClass,
)
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import GROUND, Sort

BOLTS = {
    "diameter_mm": 25.0,
    "length_m": 4.0,
    "spacing_around_m": 1.5,
    "spacing_along_m": 2.0,
    "capacity_kn": 200.0,
    "steel_modulus_gpa": 200.0,
    "anchor_deformation_m_per_mn": 0.04,
    "anchorage_length_m": 1.5,
    "pattern_rules": "em_1110_1_2907",
}
SHOTCRETE = {
    "thickness_mm": 100.0,
    "strength_mpa": 30.0,
    "modulus_gpa": 30.0,
    "poisson_ratio": 0.25,
}
STEEL_SETS = {
    "section_area_mm2": 4300.0,
    "section_inertia_mm4": 14500000.0,
    "section_depth_mm": 140.0,
    "yield_strength_mpa": 235.0,
    "steel_modulus_gpa": 200.0,
    "spacing_m": 1.5,
    "contact": "embedded",
}


def element(
    kind: str, values: Mapping[str, float | str], label: str = "", installed_at_m: float = 2.0
) -> Element:
    return Element(kind, label or kind, installed_at_m, dict(values))


def project(
    classes: Mapping[str, Sequence[Element]],
    ground: Sections,
    plugins: Sequence[str] = (),
    *,
    methods: Mapping[str, MethodChoice] | None = None,
    drainage: str = "",
    chosen_checks: Mapping[str, bool] | None = None,
    advance_m_per_day: float = math.nan,
) -> Project:
    """A project with these classes, lightest first, and rules and criteria as in a small job."""
    defaults = {step: MethodChoice((name,)) for step, name in DEFAULT_METHODS.items()}
    return Project(
        title="Invented test tunnel",
        methods={**defaults, **(methods or {})},
        support_classes=tuple(
            SupportClass(n, tuple(e), advance_m_per_day) for n, e in classes.items()
        ),
        criteria=Criteria(1.5, 1.0, chosen_checks or {}),
        schedule=ScheduleRules(minimum_zone_m=20.0, carry_m=10.0),
        plugins=tuple(plugins),
        gaps=(),
        ground=ground,
        ground_columns=("ground_unit",),
        origins=(),
        tests=(),
        notation=Notation(),
        drainage=drainage,
        warnings=(),
        files=(),
    )


def three_classes() -> dict[str, list[Element]]:
    """Bolts; a thin ring; a thick ring with sets."""
    return {
        "light": [element("rock_bolts", BOLTS)],
        "middle": [element("shotcrete", SHOTCRETE, installed_at_m=1.0)],
        "heavy": [
            element("shotcrete", {**SHOTCRETE, "thickness_mm": 250.0}, installed_at_m=1.0),
            element("steel_sets", STEEL_SETS, installed_at_m=1.0),
        ],
    }


def along(lengths_m: Sequence[float]) -> dict[str, Array]:
    """Chainages of sections of these lengths that meet, from 0 on."""
    to_m = np.cumsum(lengths_m)
    from_m = to_m - np.asarray(lengths_m)
    return {"chainage_m": (from_m + to_m) / 2, "from_m": from_m, "to_m": to_m}


def with_absent(columns: Mapping[str, Array], count: int) -> dict[str, Array]:
    """Columns of the ground that no table gives hold nothing, as in a project that was read."""
    absent = {
        quantity.name: np.full(count, "", dtype=object)
        if quantity.sort is Sort.CHOICE
        else np.full(count, np.nan)
        for quantity in GROUND.values()
    }
    return absent | dict(columns)


def random_ground(count: int, seed: int) -> Sections:
    """Ground from strong to weak, with optional values left out; the last section is so weak
    that no closure can be computed."""
    draw = np.random.default_rng(seed)
    absent = np.full(count, np.nan)
    half = draw.random(count) < 0.5
    columns = along([10.0] * count) | {
        "ground_unit": np.array(["invented"] * count, dtype=object),
        "cover_m": draw.uniform(20, 800, count),
        "unit_weight_kn_m3": draw.uniform(20, 28, count),
        "vertical_stress_mpa": np.where(half, draw.uniform(0.5, 10, count), np.nan),
        "stress_ratio": draw.uniform(0.5, 1.5, count),
        "stress_ratio_assumed": np.zeros(count, dtype=bool),
        "intact_strength_mpa": draw.uniform(2, 120, count),
        "mi": draw.uniform(4, 25, count),
        "gsi": draw.uniform(15, 90, count),
        "disturbance": draw.choice([0.0, 0.5], count),
        "poisson_ratio": draw.uniform(0.1, 0.35, count),
        "dilation_deg": draw.uniform(0, 12, count),
        "dilation_assumed": np.zeros(count, dtype=bool),
        "intact_modulus_mpa": absent,
        "modulus_ratio": np.where(draw.random(count) < 0.7, 350.0, np.nan),
        "rock_mass_modulus_mpa": np.where(draw.random(count) < 0.1, 4000.0, np.nan),
        "water_head_m": absent,
        "block_width_m": np.where(half, draw.uniform(0.1, 2, count), np.nan),
        "radius_m": np.full(count, 5.2),
        "span_m": np.full(count, 10.4),
        "height_m": np.full(count, 10.4),
        "profile": np.array([""] * count, dtype=object),
        "equivalent_radius": np.zeros(count, dtype=bool),
        "estimates_differ": np.zeros(count, dtype=bool),
        "tested_confinement_mpa": np.full(count, np.inf),
    }
    columns = with_absent(columns, count)
    columns["gsi"][-1], columns["intact_strength_mpa"][-1] = 1.0, 1e-5
    columns["vertical_stress_mpa"][-1] = 100.0
    return Sections(columns)


GROUND_CSV = (
    "from_m,to_m,cover_m,unit_weight_kn_m3,intact_strength_mpa,mi,gsi,disturbance,poisson_ratio\n"
    "0,30,100,25,50,12,55,0,0.25\n"
)

PROJECT_YAML = """\
title: Invented test tunnel
opening: {{radius_m: 2.5}}
ground: {{table: ground.csv}}
{plugins}support_classes:
  - name: only
    installed_at_m: 1.0
    elements:
      - kind: {kind}
{parameters}criteria: {{factor_of_safety: 1.5, closure_pct: 1.0}}
schedule: {{minimum_zone_m: 0, carry_m: 0}}
"""


def write_project(
    folder: Path,
    kind: str,
    parameters: Mapping[str, object] | None = None,
    plugins: Sequence[str] = (),
    ground: str = GROUND_CSV,
) -> Path:
    """A project folder with one class of one element."""
    lines = "".join(f"        {name}: {value}\n" for name, value in (parameters or {}).items())
    named = f"plugins: [{', '.join(plugins)}]\n" if plugins else ""
    text = PROJECT_YAML.format(kind=kind, parameters=lines, plugins=named)
    (folder / "project.yaml").write_text(text, encoding="utf-8")
    (folder / "ground.csv").write_text(ground, encoding="utf-8")
    return folder
