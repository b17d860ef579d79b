"""`tunnelcalc tune`: what would make a class adequate, confirmed by runs with that value.

Ground and classes are invented: sandstone that bolts hold, siltstone that the thin ring nearly
holds, gouge that no ring within the bounds holds.
"""

from __future__ import annotations

import hashlib
import json
from pathlib import Path

import pytest
from end_to_end.projects import completed, files_of, rows, tunnelcalc
from tunnelcalc_shotcrete.kind import Shotcrete

from tunnelcalc.limits_statement import LIMITS
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.tune.tuning import tune

PROJECT = """\
title: Invented adit
opening: {radius_m: 3}
ground: {table: ground.csv}
support_classes:
  - name: bolts
    installed_at_m: 2
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
        pattern_rules: none
  - name: ring
    installed_at_m: 2
    elements:
      - kind: shotcrete
        thickness_mm: 60
        strength_mpa: 25
        modulus_gpa: 10
        poisson_ratio: 0.2
criteria: {factor_of_safety: 1.5, closure_pct: 1.0}
schedule: {minimum_zone_m: 0, carry_m: 0}
"""
GROUND = """\
from_m,to_m,ground_unit,cover_m,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,mi,gsi,disturbance,poisson_ratio,dilation_deg,modulus_ratio
0,10,sandstone,60,25,1,55,17,62,0,0.25,0,275
10,20,siltstone,150,25,1,20,7,35,0,0.28,0,350
20,30,gouge,200,22,1,3,8,12,0,0.3,0,200
"""
SILTSTONE, GOUGE = "15", "25"
"""Chainages of the middles of the sections that no class satisfies."""
THICKNESS = "shotcrete.thickness_mm=40:400"
DISTANCE = "installed_at_m=0.5:12"


def write(folder: Path, text: str = PROJECT, ground: str = GROUND) -> Path:
    folder.mkdir(parents=True)
    (folder / "project.yaml").write_text(text, encoding="utf-8")
    (folder / "ground.csv").write_text(ground, encoding="utf-8")
    return folder


def tuned(project: Path, *arguments: str) -> str:
    """What is printed by a call that must succeed."""
    ended = tunnelcalc("tune", project, *arguments, folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    return ended.stdout


@pytest.fixture(scope="module")
def advised(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A project with the advice on its ring. Tests only look at it."""
    project = write(tmp_path_factory.mktemp("tuned") / "project")
    tuned(project, "--vary", THICKNESS, "--vary", DISTANCE)
    return project


def advice(project: Path, chainage: str, parameter: str) -> dict[str, str]:
    (row,) = [
        row
        for row in rows(project / "tuned" / "0001" / "advice.csv")
        if (row["chainage_m"], row["parameter"]) == (chainage, parameter)
    ]
    return row


def adequate_in_a_run(folder: Path, old: str, new: str) -> str:
    """What a run says of the ring on the siltstone, with one line of the class changed."""
    before, ring = PROJECT.split("  - name: ring\n")
    assert ring.count(old) == 1
    project = write(folder, before + "  - name: ring\n" + ring.replace(old, new))
    (row,) = [
        row
        for row in rows(completed(project) / "classes.csv")
        if (row["chainage_m"], row["support_class"]) == (SILTSTONE, "ring")
    ]
    return row["adequate"]


def test_only_sections_that_no_class_satisfies_are_told(advised):
    found = [
        (row["chainage_m"], row["parameter"])
        for row in rows(advised / "tuned" / "0001" / "advice.csv")
    ]
    assert found == [
        (SILTSTONE, "thickness_mm"),
        (GOUGE, "thickness_mm"),
        (SILTSTONE, "installed_at_m"),
        (GOUGE, "installed_at_m"),
    ]


def test_the_advice_says_what_was_varied_and_what_holds_now(advised):
    told = advice(advised, SILTSTONE, "thickness_mm")
    assert {name: told[name] for name in list(told)[1:11]} == {
        "ground_unit": "siltstone",
        "support_class": "ring",
        "element": "shotcrete",
        "parameter": "thickness_mm",
        "unit": "mm",
        "value_now": "60",
        "lowest_tried": "40",
        "highest_tried": "400",
        "words_tried": "",
        "held": "",
    }
    told = advice(advised, SILTSTONE, "installed_at_m")
    assert (told["element"], told["unit"], told["value_now"]) == ("", "m", "2")


def test_a_thicker_ring_helps_from_the_edge_on(advised, tmp_path):
    """The edge by runs of their own, a ten-thousandth of a millimetre to either side."""
    told = advice(advised, SILTSTONE, "thickness_mm")
    assert told["verdict"] == "adequate within the range"
    edge = float(told["adequate_from"])
    assert 60 < edge < 400
    assert told["adequate_to"] == "400"
    old = "thickness_mm: 60"
    for value, expected in ((edge, "yes"), (edge - 1e-4, "no"), (400, "yes")):
        new = f"thickness_mm: {value}"
        assert adequate_in_a_run(tmp_path / str(value), old, new) == expected


def test_a_distance_that_helps_has_two_edges(advised, tmp_path):
    """Nearer the ring is overloaded, farther the wall has come too far."""
    told = advice(advised, SILTSTONE, "installed_at_m")
    low, high = float(told["adequate_from"]), float(told["adequate_to"])
    assert 0.5 < low < high < 2
    old = "installed_at_m: 2"
    tried = ((low - 1e-5, "no"), (low, "yes"), (high, "yes"), (high + 1e-5, "no"))
    for value, expected in tried:
        new = f"installed_at_m: {value}"
        assert adequate_in_a_run(tmp_path / str(value), old, new) == expected


@pytest.mark.parametrize("parameter", ["thickness_mm", "installed_at_m"])
def test_where_nothing_helps_none_in_range_is_told(advised, parameter):
    told = advice(advised, GOUGE, parameter)
    assert (told["adequate_from"], told["adequate_to"]) == ("", "")
    assert told["verdict"] == "none in range"
    tried = [
        row["adequate"]
        for row in rows(advised / "tuned" / "0001" / "trade_off.csv")
        if (row["chainage_m"], row["parameter"]) == (GOUGE, parameter)
    ]
    assert set(tried) == {"no"}


def test_the_trade_off_agrees_with_the_advice(advised):
    trade_off = rows(advised / "tuned" / "0001" / "trade_off.csv")
    tried = [
        row
        for row in trade_off
        if (row["chainage_m"], row["parameter"]) == (SILTSTONE, "thickness_mm")
    ]
    values = [float(row["parameter_value"]) for row in tried]
    assert (values[0], values[-1]) == (40, 400)
    assert values == sorted(values)
    edge = float(advice(advised, SILTSTONE, "thickness_mm")["adequate_from"])
    assert [row["adequate"] for row in tried] == ["yes" if v >= edge else "no" for v in values]
    missing = [float(row["missing_pressure_mpa"]) for row in tried]
    assert missing == sorted(missing, reverse=True)
    assert missing[0] > 0
    assert missing[-1] == 0


def test_the_screen_shows_both_and_where_the_tables_are(tmp_path):
    project = write(tmp_path / "project")
    printed = tuned(project, "--vary", THICKNESS)
    siltstone, gouge = (line for line in printed.splitlines() if "shotcrete.thickness" in line)
    edge = float(advice(project, SILTSTONE, "thickness_mm")["adequate_from"])
    words = siltstone.split()
    assert words[:3] == ["15.0", "siltstone", "shotcrete.thickness_mm"]
    assert edge <= float(words[3]) == pytest.approx(edge, rel=1e-3)
    new = f"thickness_mm: {words[3]}"
    assert adequate_in_a_run(tmp_path / "printed", "thickness_mm: 60", new) == "yes"
    assert words[4:] == ["400", "mm"]
    assert gouge.split()[:2] == ["25.0", "gouge"]
    assert "none in" in gouge
    assert printed.splitlines()[-1] == f"written: {project / 'tuned' / '0001'}"


def test_another_class_and_another_folder_may_be_named(tmp_path):
    project = write(tmp_path / "project")
    out = tmp_path / "advice"
    vary = "rock_bolts.capacity_kn=150:400"
    tuned(project, "--vary", vary, "--class", "bolts", "--out", str(out))
    assert {row["support_class"] for row in rows(out / "advice.csv")} == {"bolts"}
    assert sorted(path.name for path in out.iterdir()) == [
        "advice.csv",
        "trade_off.csv",
        "trade_off_rock_bolts_capacity_kn.png",
        "trade_off_rock_bolts_capacity_kn.svg",
        "tune.json",
    ]
    assert not (project / "tuned").exists()


def test_where_every_section_has_a_class_there_is_nothing_to_tune(tmp_path):
    head, sandstone, *_ = GROUND.splitlines()
    project = write(tmp_path / "project", ground=f"{head}\n{sandstone}\n")
    printed = tuned(project, "--vary", THICKNESS)
    assert "every section has an adequate class: there is nothing to tune" in printed
    assert rows(project / "tuned" / "0001" / "advice.csv") == []
    assert rows(project / "tuned" / "0001" / "trade_off.csv") == []


RANGE = ("ELEMENT.PARAMETER=LOW:HIGH", "write two numbers, the lower first")
PARAMETERS = ", ".join(
    ["installed_at_m", *(parameter.name for parameter in Shotcrete().parameters)]
)
OF_CLASS = "installed_at_m, advance_m_per_day"
THICK = "a number at least 10, at most 2000, in mm"
WITHIN = "keep the bounds within the allowed range"
REFUSED = {
    "no-range": (
        "shotcrete.thickness_mm",
        "value",
        "ELEMENT.PARAMETER=LOW:HIGH, or WORD,WORD",
        "write = and the values after the name",
    ),
    "one-number": ("shotcrete.thickness_mm=40", "range", *RANGE),
    "three-numbers": ("shotcrete.thickness_mm=40:60:80", "range", *RANGE),
    "no-number": ("shotcrete.thickness_mm=thin:thick", "range", *RANGE),
    "nan": ("shotcrete.thickness_mm=40:nan", "range", *RANGE),
    "turned-round": ("shotcrete.thickness_mm=400:40", "range", *RANGE),
    "no-width": ("shotcrete.thickness_mm=40:40", "range", *RANGE),
    "too-thin": ("shotcrete.thickness_mm=1:400", "range", THICK, WITHIN),
    "infinite": ("shotcrete.thickness_mm=40:1e999", "range", THICK, WITHIN),
    "before-the-face": (
        "installed_at_m=-1:2",
        "range",
        "a number at least 0, at most 10000, in m",
        WITHIN,
    ),
    "element-misspelt": ("shotcret.thickness_mm=40:400", "element", "shotcrete", "shotcrete"),
    "element-of-another-class": (
        "rock_bolts.length_m=2:4",
        "element",
        "shotcrete",
        "name one of them",
    ),
    "no-element": (".thickness_mm=40:400", "element", "shotcrete", "name one of them"),
    "parameter-misspelt": (
        "shotcrete.thicknes_mm=40:400",
        "parameter",
        PARAMETERS,
        "thickness_mm",
    ),
    "no-word": (
        "shotcrete.reinforcement=1:2",
        "word",
        "not_declared or none or mesh or fibre",
        "name one of them",
    ),
    "parameter-of-no-element": ("thickness_mm=40:400", "parameter", OF_CLASS, "name one of them"),
    "no-name": ("=1:2", "parameter", OF_CLASS, "name one of them"),
}


@pytest.mark.parametrize("name", REFUSED)
def test_a_variation_that_cannot_be_used_is_refused_as_a_problem(advised, name):
    vary, what, allowed, fix = REFUSED[name]
    if fix in ("shotcrete", "thickness_mm"):
        fix = f'did you mean "{fix}"?'
    before = files_of(advised)
    ended = tunnelcalc("tune", advised, "--vary", vary, "--out", "other", folder=advised)
    assert (ended.returncode, ended.stdout) == (2, "")
    assert ended.stderr == (
        f'command line: --vary holds "{vary}", which has no {what} that can be used\n'
        f"  allowed: {allowed}\n"
        f"  fix: {fix}\n"
        "1 problem found\n"
    )
    assert files_of(advised) == before


def test_without_anything_to_vary_the_usage_is_told(advised):
    ended = tunnelcalc("tune", advised, folder=advised)
    assert ended.returncode == 2
    assert ended.stderr.startswith("usage: tunnelcalc tune")
    assert "--vary" in ended.stderr.splitlines()[-1]


def test_a_second_tune_has_a_folder_of_its_own_and_the_same_advice(tmp_path):
    project, registry = write(tmp_path / "project"), load_plugins()
    first, second = (tune(project, registry, ["shotcrete.strength_mpa=20:40"]) for _ in range(2))
    assert [one.folder for one in (first, second)] == [
        project / "tuned" / "0001",
        project / "tuned" / "0002",
    ]
    assert sorted(path.name for path in (project / "tuned").iterdir()) == ["0001", "0002"]
    names = sorted(path.name for path in first.folder.iterdir())
    assert names == sorted(path.name for path in second.folder.iterdir())
    for name in names:
        if name != "tune.json":  # which holds the time
            assert (first.folder / name).read_bytes() == (second.folder / name).read_bytes()


def test_a_named_folder_that_holds_something_is_not_overwritten(advised):
    before = files_of(advised)
    ended = tunnelcalc("tune", advised, "--vary", THICKNESS, "--out", "tuned", folder=advised)
    assert (ended.returncode, ended.stdout) == (2, "")
    assert ended.stderr.endswith("1 problem found\n")
    assert files_of(advised) == before


def test_the_record_says_what_was_asked_of_what(advised):
    record = json.loads((advised / "tuned" / "0001" / "tune.json").read_text())
    assert record["options"] == {"class": "ring", "vary": [THICKNESS, DISTANCE], "set": []}
    assert record["sections_without_adequate_class"] == 2
    assert record["not_evaluated"] == []
    hashes = {
        part: {one["path"]: one["sha256"] for one in record[part]} for part in ("inputs", "outputs")
    }
    for part, folder in (("inputs", advised), ("outputs", advised / "tuned" / "0001")):
        for name, told in hashes[part].items():
            assert told == hashlib.sha256((folder / name).read_bytes()).hexdigest()
    assert sorted(hashes["inputs"]) == ["ground.csv", "project.yaml"]
    assert len(hashes["outputs"]) == 6
    assert record["limits"] == list(LIMITS)
    assert record["criteria"]["factor_of_safety"] == 1.5
