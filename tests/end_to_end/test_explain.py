"""`tunnelcalc explain`: every printed line redone from its own printed numbers."""

from __future__ import annotations

import csv
import json
import math
import shutil
from collections.abc import Callable, Mapping, Sequence
from dataclasses import replace
from pathlib import Path
from typing import Any

import pytest
import yaml
from end_to_end.projects import files_of, rows
from end_to_end.sheet_evaluator import both_sides

from tunnelcalc.calculation.line import SheetLine
from tunnelcalc.cli.main import main
from tunnelcalc.explain.sheet import explain
from tunnelcalc.outputs.sheet_text import sheet_json
from tunnelcalc.plugin.registry import Registry, load_plugins
from tunnelcalc.project import DEFAULT_METHODS
from tunnelcalc.run import run_project

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


@pytest.fixture(scope="module")
def registry() -> Registry:
    return load_plugins()


def write(folder: Path, methods: Mapping[str, str], columns: Mapping[str, float]) -> Path:
    """An invented project with every kind of support and a stated drainage."""
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
        "support_classes": [
            {"name": "light", "installed_at_m": 4.0, "elements": [BOLTS, RING, SETS]},
            {"name": "heavy", "installed_at_m": 1.0, "elements": [THICK_RING, BLOCKED]},
        ],
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


@pytest.mark.parametrize("name", sorted(CASES))
def test_every_line_is_redone_from_its_own_numbers(name, registry, tmp_path):
    methods, columns = CASES[name]
    project = write(tmp_path / "project", methods, columns)
    run_project(project, registry, out=tmp_path / "run")
    shown = PLACES if name in LAWS else PLACES[1:2]
    redone = 0
    for sheet in sheets(tmp_path / "run", registry, shown):
        assert sheet["differences"] == []
        assert all(chosen in str(sheet) for chosen in methods.values())
        assert "shows no formula" not in str(sheet)
        for line in lines_of(sheet):
            assert line["meaning"], line
            if line["formula"]:
                left, right = both_sides(line["formula"], line["inputs"], line["result"])
                assert math.isclose(left, right, rel_tol=REDONE, abs_tol=1e-13), line
                redone += 1
    assert redone > 30 * len(shown)


def test_every_built_in_method_is_redone_above(registry):
    named = {name for methods, _ in CASES.values() for name in methods.values()}
    named |= set(DEFAULT_METHODS.values())
    steps = ("strength", "deformation_modulus", "ground_reaction", "closure_profile")
    assert {name for step in steps for name in registry.names(step)} == named


@pytest.fixture(scope="module")
def whole(registry, tmp_path_factory) -> Path:
    """A run that tests only look at."""
    folder = tmp_path_factory.mktemp("explained")
    project = write(folder / "project", {}, {})
    return run_project(project, registry, out=folder / "run").folder


@pytest.fixture
def run(whole: Path, tmp_path: Path) -> Path:
    """A copy that a test may do anything to."""
    return shutil.copytree(whole, tmp_path / "run")


def test_the_screen_is_80_columns_wide_and_holds_every_step(whole, capsys):
    assert main(["explain", str(whole), "--at", "30", "--class", "heavy"]) == 0
    screen = capsys.readouterr().out
    assert max(map(len, screen.splitlines())) <= 80
    titles = (
        *("Identification", "Geometry", "Ground as given", "Stress in the ground"),
        *("Strength of the rock mass", "Deformation modulus", "Hazards beside"),
        *("Ground reaction without support: ", "Class heavy, shotcrete, installed 1 m"),
        *("Class heavy: equilibrium", "Class heavy, check class:crown_dead_weight"),
        *("Class heavy: adequacy", "Ground reaction without support, larger"),
        *("Class heavy: adequacy, larger", "Validity screen", "Methods of this section"),
        *("Limits", "Signatures"),
    )
    places = [screen.index(f"\n{title}") for title in titles]
    assert places == sorted(places)
    assert "gamma = 26.5 kN/m3   unit weight of the cover [units table]" in screen
    assert "H = 420 m   height of ground over the crown [ground table]" in screen
    assert "every formula gives its result" in screen


def test_the_scheduled_class_is_shown_unless_another_is_named(whole, capsys):
    for row in rows(whole / "sections.csv"):
        scheduled = row["scheduled_class"]
        main(["explain", str(whole), "--at", row["chainage_m"]])
        shown = "heavy" if scheduled == "none_adequate" else scheduled
        assert f"class shown: {shown};" in capsys.readouterr().out
    main(["explain", str(whole), "--at", "10", "--class", "light"])
    assert "class shown: light;" in capsys.readouterr().out


@pytest.mark.parametrize(("at", "class_name"), PLACES)
def test_what_the_tables_say_of_a_section_stands_in_its_sheet(at, class_name, whole, capsys):
    main(["explain", str(whole), "--at", at, "--class", class_name])
    screen = set(capsys.readouterr().out.split())
    told = ("in_situ_stress_mpa", "mb", "cohesion_mpa", "deformation_modulus_mpa", "closure_mm")
    told += ("installation_closure_mm", "support_pressure_mpa", "supported_closure_mm")
    told += ("supported_closure_pct", "supported_plastic_radius_m", "factor_of_safety")
    told += ("demand", "capacity")
    missing = [
        (table, column, row[column])
        for table in ("sections", "classes", "checks")
        for row in rows(whole / f"{table}.csv")
        if row["chainage_m"] == at and row.get("support_class", class_name) == class_name
        for column in told
        if row.get(column) and row[column] not in screen
    ]
    assert missing == []


@pytest.mark.parametrize("ending", ["md", "csv", "json"])
def test_a_sheet_is_written_in_the_form_of_its_ending(ending, whole, tmp_path, capsys):
    file = tmp_path / f"sheet.{ending}"
    for _ in range(2):  # an earlier sheet is replaced
        assert main(["explain", str(whole), "--at", "10", "--out", str(file)]) == 0
    text = file.read_text("utf-8")
    assert "2*(p0 - pcr) = sci*(mb*pcr/sci + s)^a" in text
    assert "written: " in capsys.readouterr().out
    if ending == "csv":
        for row in csv.DictReader(text.splitlines()):
            if row["formula"]:
                inputs = dict(pair.split("=") for pair in filter(None, row["inputs"].split("; ")))
                numbers = {name: float(value) for name, value in inputs.items()}
                left, right = both_sides(row["formula"], numbers, float(row["result"]))
                assert math.isclose(left, right, rel_tol=REDONE, abs_tol=1e-13), row


def changed(file: str, old: str, new: str, count: int = 1) -> Callable[[Path], object]:
    def change(run: Path) -> None:
        text = (run / file).read_text("utf-8")
        assert old in text
        (run / file).write_text(text.replace(old, new, count), "utf-8")

    return change


def first_value(table: str, column: str) -> Callable[[Path], object]:
    """Change the last digit of a number in the first row of a table."""

    def change(run: Path) -> None:
        with (run / table).open(encoding="utf-8", newline="") as stream:
            cells = list(csv.reader(stream))
        place = cells[0].index(column)
        value = cells[1][place]
        cells[1][place] = value[:-1] + ("1" if value[-1] != "1" else "2")
        with (run / table).open("w", encoding="utf-8", newline="") as stream:
            csv.writer(stream, lineterminator="\n").writerows(cells)

    return change


@pytest.mark.parametrize(
    ("tamper", "told"),
    [
        pytest.param(first_value("sections.csv", "mb"), "sections.csv, mb", id="section"),
        pytest.param(
            first_value("classes.csv", "support_pressure_mpa"),
            "classes.csv, light, support_pressure_mpa",
            id="class",
        ),
        pytest.param(first_value("checks.csv", "demand"), "demand: the table says", id="check"),
        pytest.param(
            changed("inputs/units.csv", ",34,", ",35,"), "inputs/units.csv is not as", id="input"
        ),
        pytest.param(
            lambda run: (run / "classes.csv").unlink(), "classes.csv is missing", id="no-table"
        ),
    ],
)
def test_a_run_that_was_tampered_with_ends_with_5(tamper, told, run, capsys):
    tamper(run)
    assert main(["explain", str(run), "--at", "10"]) == 5
    assert told in " ".join(capsys.readouterr().out.split())


@pytest.mark.parametrize("missing", [False, True], ids=["changed", "missing"])
def test_every_output_of_a_run_is_compared_with_its_hash(missing, run, capsys):
    """Each file of the run alone; every one of them is put back as it was."""
    manifest = json.loads((run / "run.json").read_text("utf-8"))
    outputs = [entry["path"] for entry in manifest["outputs"]]
    # Without an input there is nothing to compute: that is refused, see below.
    outputs = [name for name in outputs if not (missing and name.startswith("inputs/"))]
    assert {"schedule.csv", "quantities.csv", "ground_values.csv", "flags.csv"} <= set(outputs)
    for name in outputs:
        before = (run / name).read_bytes()
        if missing:
            (run / name).unlink()
        else:
            (run / name).write_bytes(before + b"\n")
        assert main(["explain", str(run), "--at", "10"]) == 5, name
        told = f"{name} is missing" if missing else f"{name} is not as it was when the run ended"
        assert " ".join(capsys.readouterr().out.split()).count(told) == 1
        (run / name).write_bytes(before)
    assert main(["explain", str(run), "--at", "10"]) == 0


def test_another_version_is_told(run, capsys):
    manifest = json.loads((run / "run.json").read_text("utf-8"))
    manifest["program"]["version"] = "0.0.9"
    manifest["plugins"][0]["version"] = "0.0.8"
    manifest["plugins"].append({"plugin": "gone", "distribution": "gone", "version": "1"})
    (run / "run.json").write_text(json.dumps(manifest), "utf-8")
    assert main(["explain", str(run), "--at", "10"]) == 0
    screen = " ".join(capsys.readouterr().out.split())
    assert "the run was computed by tunnelcalc 0.0.9" in screen
    assert "was 0.0.8 in the run" in screen
    assert "plugin gone 1 is not there any more" in screen


@pytest.mark.parametrize(
    ("arguments", "told"),
    [
        pytest.param(["--at", "100.5"], "where there is no section", id="beyond"),
        pytest.param(["--at", "-1"], "where there is no section", id="before"),
        pytest.param(["--at", "here"], "is not a chainage", id="no-chainage"),
        pytest.param(["--at", "10", "--class", "ligth"], "fix: write light", id="class"),
        pytest.param(["--at", "10", "--out", "sheet.pdf"], "an ending that says no form", id="pdf"),
    ],
)
def test_wrong_input_ends_with_2(arguments, told, whole, capsys):
    arguments = [f"--at={arguments[1]}", *arguments[2:]]
    assert main(["explain", str(whole), *arguments]) == 2
    printed = capsys.readouterr()
    assert told in printed.err
    assert "fix: " in printed.err
    assert printed.out == ""


@pytest.mark.parametrize(
    ("spoil", "told"),
    [
        pytest.param(lambda run: (run / "run.json").unlink(), "holds no file run.json", id="none"),
        pytest.param(
            lambda run: (run / "run.json").write_text("{", "utf-8"), "is not readable", id="broken"
        ),
        pytest.param(
            lambda run: (run / "run.json").write_text("[]", "utf-8"), "not the record", id="other"
        ),
        pytest.param(shutil.rmtree, "is no folder of a run", id="no-folder"),
        pytest.param(
            lambda run: shutil.rmtree(run / "inputs"), "inputs: does not exist", id="no-inputs"
        ),
    ],
)
def test_what_is_no_complete_run_is_refused(spoil, told, run, capsys):
    spoil(run)
    assert main(["explain", str(run), "--at", "10"]) == 2
    assert told in capsys.readouterr().err


def test_a_file_that_the_run_has_lost_is_told_with_the_runs_path(run, capsys):
    (run / "inputs/units.csv").unlink()
    assert main(["explain", str(run), "--at", "10"]) == 2
    told = capsys.readouterr().err
    assert told.startswith(f"{run / 'inputs' / 'project.yaml'}:")
    assert 'names "units.csv", which cannot be read: there is no such file' in told


def test_another_file_is_never_overwritten(whole, tmp_path, capsys):
    file = tmp_path / "notes.md"
    file.write_text("mine", "utf-8")
    assert main(["explain", str(whole), "--at", "10", "--out", str(file)]) == 2
    assert file.read_text("utf-8") == "mine"
    assert "which is not overwritten" in capsys.readouterr().err


def test_looking_at_a_run_changes_nothing(run):
    before = files_of(run)
    main(["explain", str(run), "--at", "10"])
    assert files_of(run) == before


class Bare:
    """A thing of a plugin without its lines, or with lines of a test."""

    def __init__(self, thing: Any, lines: Any = None) -> None:
        self._thing = thing
        if lines is not None:
            self.lines = lines

    def __getattr__(self, name: str) -> Any:
        if name == "lines":
            raise AttributeError(name)
        return getattr(self._thing, name)


def with_lines(registry: Registry, lines: Any, *keys: tuple[str, str]) -> Registry:
    """The registry with other lines for some things, or none."""
    offers = dict(registry.offers)
    for key in keys:
        offers[key] = replace(offers[key], thing=Bare(offers[key].thing, lines))
    return replace(registry, offers=offers)


EVERYTHING = (
    ("strength", "hoek_brown_2002"),
    ("deformation_modulus", "hoek_diederichs_2006"),
    ("ground_reaction", "hoek_brown_perfectly_plastic"),
    ("closure_profile", "vlachopoulos_diederichs_2009"),
    ("support_kind", "shotcrete"),
    ("support_check", "hoop_stress"),
    ("class_check", "crown_dead_weight"),
)


def failing(*_: Any) -> Any:
    raise ZeroDivisionError("invented")


NONE = "which shows no formula"
WITHOUT = [pytest.param(key, None, NONE, id=key[0]) for key in EVERYTHING]
WITHOUT += [
    pytest.param(
        EVERYTHING[4], failing, "whose lines failed: ZeroDivisionError: invented", id="raising"
    ),
    pytest.param(
        EVERYTHING[2], lambda *_: ["text"], "whose lines are no lines of a sheet", id="nonsense"
    ),
]


@pytest.fixture(scope="module")
def movements(whole, registry) -> set[float]:
    """Every closure that the sheet of a class shows."""
    sheet = explain(whole, "30", "heavy", registry)
    return {line.result for block in sheet.blocks for line in block.lines if line.unit == "mm"}


@pytest.mark.parametrize(("key", "lines", "told"), WITHOUT)
def test_what_shows_no_formula_is_printed_by_its_result(
    key, lines, told, whole, registry, movements
):
    sheet = explain(whole, "30", "heavy", with_lines(registry, lines, key))
    assert sheet.differences == ()
    notes = [note for block in sheet.blocks for note in block.notes if told in note]
    plugin = registry.offers[key].source.plugin
    assert notes
    assert all(note.startswith(f"given by plugin {plugin}, ") for note in notes)
    assert movements <= {line.result for block in sheet.blocks for line in block.lines}


@pytest.mark.parametrize(
    ("key", "symbol"),
    [
        pytest.param(("support_kind", "shotcrete"), "K", id="stiffness"),
        pytest.param(("support_kind", "shotcrete"), "pmax", id="capacity"),
        pytest.param(("support_check", "hoop_stress"), "demand", id="demand"),
        pytest.param(("class_check", "crown_dead_weight"), "capacity", id="capacity-of-class"),
        pytest.param(("ground_reaction", "hoek_brown_perfectly_plastic"), "u_R", id="closure"),
        pytest.param(("ground_reaction", "hoek_brown_perfectly_plastic"), "pcr", id="critical"),
        pytest.param(("closure_profile", "vlachopoulos_diederichs_2009"), "share", id="share"),
        pytest.param(("deformation_modulus", "hoek_diederichs_2006"), "E_est", id="modulus"),
        pytest.param(("strength", "hoek_brown_2002"), "mb", id="strength"),
    ],
)
@pytest.mark.parametrize("with_formula", [True, False])
def test_lines_that_say_another_number_than_the_run_are_told(
    key, symbol, with_formula, whole, registry
):
    thing = registry.offers[key].thing

    def lines(*arguments: Any) -> list[SheetLine]:
        return [
            replace(
                line,
                result=line.result * (1 + 1e-6),
                formula=line.formula if with_formula else "",
            )
            if line.symbol == symbol
            else line
            for line in thing.lines(*arguments)
        ]

    sheet = explain(whole, "30", "heavy", with_lines(registry, lines, key))
    assert any(symbol in difference for difference in sheet.differences)
