"""A calculation sheet of ground that is estimated: each relation redone from its own numbers."""

from __future__ import annotations

import json
import math
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
from end_to_end.projects import PROJECT, rows
from end_to_end.sheet_evaluator import both_sides

from tunnelcalc.calculation.symbols import SYMBOLS
from tunnelcalc.explain.sheet import explain
from tunnelcalc.inputs import estimates
from tunnelcalc.inputs.estimates import ESTIMATED, ESTIMATORS
from tunnelcalc.outputs.sheet_text import sheet_json, sheet_markdown
from tunnelcalc.plugin.registry import Registry, load_plugins
from tunnelcalc.run import run_project

KEYS = """\
  tests: tests.csv
  terrain: terrain.csv
  water_table: water.csv
  layers: layers.csv
  estimates: {residual_gsi: [cai_2007]}
"""
AXIS = "opening:\n  axis: {table: axis.csv, level_of: axis}\n"
TABLES = {
    "ground.csv": """\
from_m,to_m,ground_unit
0,10,rated
10,20,dry
20,30,quality
30,40,blocks
""",
    "units.csv": """\
ground_unit,unit_weight_kn_m3,stress_ratio,mi,disturbance,poisson_ratio,dilation_deg,modulus_ratio,\
block_width_m,jcond89,rqd_pct,rmr89_dry,q_prime,block_volume_cm3,joint_condition,point_load_mpa,\
point_load_factor
rated,25,1,10,0,0.25,0,300,0.8,14,52,,,,,3.1,21
dry,25,1,10,0,0.25,0,300,0.8,,,47,,,,3.1,21
quality,25,1,10,0,0.25,0,300,0.8,,,,1.7,,,3.1,21
blocks,25,1,,0,0.25,0,300,0.8,,,,,9000,0.8,,
""",
    "tests.csv": """\
ground_unit,minor_stress_mpa,major_stress_mpa,specimen,date
blocks,0,61.2,B-1,2031-04-10
blocks,0,54.9,B-2,2031-04-11
blocks,2,79.5,B-3,2031-04-12
blocks,4,92.1,B-4,2031-04-13
blocks,8,118.0,B-5,2031-04-14
""",
    "axis.csv": "chainage_m,level_m\n0,100\n40,101\n",
    "terrain.csv": "chainage_m,level_m\n0,240\n40,260\n",
    "water.csv": "chainage_m,level_m\n0,120\n40,125\n",
    "layers.csv": "chainage_m,ground_unit,base_level_m\n0,rated,180\n40,rated,190\n",
}
"""Invented."""

BY_HAND = {
    "5": ("GSI", 1.5 * 14 + 52 / 2),
    "15": ("GSI", 47 - 5),
    "25": ("GSI", 9 * math.log(1.7) + 44),
    "35": (
        "GSI",
        (26.5 + 8.79 * math.log(0.8) + 0.9 * math.log(9000))
        / (1 + 0.0151 * math.log(0.8) - 0.0253 * math.log(9000)),
    ),
}
"""Chainage: index by the relation of its interval, published forms."""


@pytest.fixture(scope="module")
def registry() -> Registry:
    return load_plugins()


@pytest.fixture(scope="module")
def run(registry: Registry, tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("estimated")
    project = folder / "project"
    project.mkdir()
    text = PROJECT.replace("  units: units.csv\n", "  units: units.csv\n" + KEYS)
    text = text.replace("opening:\n", AXIS) + "methods: {ground_reaction: hoek_brown_brittle}\n"
    (project / "project.yaml").write_text(text, "utf-8")
    for name, table in TABLES.items():
        (project / name).write_text(table, "utf-8")
    return run_project(project, registry, out=folder / "run").folder


def lines_at(run: Path, at: str, registry: Registry) -> dict[str, dict[str, Any]]:
    """The lines of the ground as given, by symbol, of a sheet without any difference."""
    sheet = json.loads(sheet_json(explain(run, at, None, registry)))
    assert sheet["differences"] == []
    (block,) = (block for block in sheet["blocks"] if block["title"] == "Ground as given")
    return {line["symbol"]: line for line in block["lines"]}


@pytest.mark.parametrize("at", sorted(BY_HAND))
def test_an_estimate_is_a_line_that_can_be_redone(at, run, registry):
    lines = lines_at(run, at, registry)
    symbol, by_hand = BY_HAND[at]
    assert lines[symbol]["result"] == pytest.approx(by_hand, rel=1e-12)
    redone = 0
    for line in lines.values():
        if line["formula"]:
            left, right = both_sides(line["formula"], line["inputs"], line["result"])
            assert math.isclose(left, right, rel_tol=1e-12), line
            assert all(lines[name]["result"] == value for name, value in line["inputs"].items())
            redone += 1
    assert redone == (2 if at == "35" else 3)


def test_every_relation_is_met(run, registry):
    sources = {
        line["source"]
        for at in BY_HAND
        for line in lines_at(run, at, registry).values()
        if line["formula"]
    }
    assert sources == {f"estimated: {estimator.told}" for estimator in ESTIMATORS}


def test_every_value_is_that_of_the_table(run, registry):
    by_symbol = {SYMBOLS[name]: name for name in ESTIMATED}
    for at in BY_HAND:
        (row,) = (row for row in rows(run / "sections.csv") if row["chainage_m"] == at)
        for symbol, line in lines_at(run, at, registry).items():
            if symbol in by_symbol:
                assert line["result"] == pytest.approx(float(row[by_symbol[symbol]]), rel=1e-9)


def test_tests_and_levels_name_their_files(run, registry):
    lines = lines_at(run, "35", registry)
    for symbol in ("sci", "mi"):
        assert lines[symbol]["source"].endswith("Hoek & Brown (1980), laboratory.csv")
        assert not lines[symbol]["formula"]
    assert (run / "laboratory.csv").is_file()
    for symbol, tables in (
        ("H", "axis.csv, terrain.csv"),
        ("hw", "axis.csv, water.csv"),
        ("sv", "axis.csv, terrain.csv, layers.csv"),
    ):
        assert lines[symbol]["source"].endswith(f": {tables}")
    told = {
        row["quantity"]: row["method"]
        for row in rows(run / "ground_values.csv")
        if row["origin"] == "levels"
    }
    assert told == {
        "cover_m": "axis.csv, terrain.csv",
        "water_head_m": "axis.csv, water.csv",
        "vertical_stress_mpa": "axis.csv, terrain.csv, layers.csv",
    }


def test_the_formula_stands_in_the_text(run, registry):
    text = sheet_markdown(explain(run, "15", None, registry))
    assert "RMR_dry - 5" in text
    assert "GSI*exp(-0.0134*GSI)" in text


@pytest.mark.parametrize("number", range(len(ESTIMATORS)), ids=[e.name for e in ESTIMATORS])
def test_a_formula_that_gives_another_number_is_told(number, run, registry, monkeypatch):
    """In the run one relation is computed; the sheet writes another."""
    wrong = list(ESTIMATORS)
    wrong[number] = replace(wrong[number], formula=f"1.000001*({wrong[number].formula})")
    monkeypatch.setattr(estimates, "ESTIMATORS", tuple(wrong))
    found = [
        difference for at in BY_HAND for difference in explain(run, at, None, registry).differences
    ]
    symbol = SYMBOLS[wrong[number].quantity]
    assert any(f"Ground as given: {symbol} is not what its formula" in told for told in found)
