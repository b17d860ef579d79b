"""`tunnelcalc explain`: every printed line redone from its own printed numbers."""

from __future__ import annotations

import csv
import math

import pytest
from end_to_end.explained import CASES, LAWS, PLACES, REDONE, redo, sheets, write
from end_to_end.projects import rows
from end_to_end.sheet_evaluator import both_sides

from tunnelcalc.cli.main import main
from tunnelcalc.project import DEFAULT_METHODS
from tunnelcalc.run import run_project


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
        redone += redo(sheet)
    assert redone > 30 * len(shown)


def test_every_built_in_method_is_redone_above(registry):
    named = {name for methods, _ in CASES.values() for name in methods.values()}
    named |= set(DEFAULT_METHODS.values())
    steps = ("strength", "deformation_modulus", "ground_reaction", "closure_profile")
    assert {name for step in steps for name in registry.names(step)} == named


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
    told += ("demand", "capacity", "first_failure_pressure_mpa", "first_failure_closure_mm")
    told += ("full_mobilisation_pressure_mpa", "full_mobilisation_closure_mm")
    told += ("missing_pressure_mpa",)
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
