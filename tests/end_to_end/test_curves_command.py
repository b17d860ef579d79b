"""`tunnelcalc curves`: every file and column, and what is said where something is wrong."""

from __future__ import annotations

import csv
import math
import subprocess
import sys
from importlib.metadata import entry_points
from itertools import pairwise
from pathlib import Path

import pytest
from contract.source import ROOT
from end_to_end.foreign import HEAD, install
from end_to_end.projects import files_of, replaced, rows, tunnelcalc, write_project

from tunnelcalc.cli import curves_command
from tunnelcalc.curves import show_section
from tunnelcalc.outputs.curve_tables import (
    CLOSURE_PROFILE_HEADER,
    GROUND_REACTION_HEADER,
    STRENGTH_ENVELOPE_HEADER,
    SUPPORT_REACTION_HEADER,
)
from tunnelcalc.plugin.registry import Registry, load_plugins

TABLES = {
    "ground_reaction.csv": GROUND_REACTION_HEADER,
    "closure_profile.csv": CLOSURE_PROFILE_HEADER,
    "support_reaction.csv": SUPPORT_REACTION_HEADER,
    "strength_envelope.csv": STRENGTH_ENVELOPE_HEADER,
}
FIGURES = {
    f"{name}.{ending}"
    for name in ("ground_reaction", "closure_profile", "strength_envelope", "shear_strength")
    for ending in ("svg", "png")
}

FIGURE = """
class Figure:
    name = "stranger"

    def draw(self, curves, folder):
        {draw}


@api.hookimpl
def tunnelcalc_register_section_figures(register):
    register(Figure())
"""
NAMED = replaced("project.yaml", "support_classes:", "plugins: [stranger]\nsupport_classes:")


@pytest.fixture
def project(tmp_path: Path) -> Path:
    return write_project(tmp_path / "project")


def without_figures(**_: object) -> Registry:
    """The installed plugins but the one that draws: tables alone take no time."""
    return load_plugins(
        [point for point in entry_points(group="tunnelcalc") if point.name != "report"]
    )


def tables(project: Path, at: str, class_name: str | None = None, out: str = "out") -> Path:
    """The tables of a section, in a new folder of the project."""
    shown = show_section(project, without_figures(), at, class_name=class_name, out=project / out)
    assert shown.exit_code == 0
    return shown.folder


def numbers(table: Path, column: str) -> list[float]:
    return [float(row[column]) for row in rows(table) if row[column]]


def test_a_section_has_every_table_with_its_columns_and_every_figure(project: Path):
    before = files_of(project)
    ended = tunnelcalc("curves", ".", "--at", "57.5", folder=project)
    assert (ended.returncode, ended.stderr) == (0, "")
    folder = project / "curves" / "57.50"
    assert {path.name for path in folder.iterdir()} == {*TABLES, *FIGURES}
    for name, header in TABLES.items():
        with (folder / name).open(newline="") as stream:
            first, *others = csv.reader(stream)
        assert tuple(first) == header
        assert all(len(row) == len(header) for row in others)
    assert {name: content for name, content in files_of(project).items() if name in before} == (
        before
    )
    assert "class heavy; required: heavy" in ended.stdout
    assert str(folder.resolve()) in ended.stdout


def test_the_tables_agree_with_those_of_a_run(project: Path):
    folder = tables(project, "57.5")
    assert tunnelcalc("run", ".", "--out", "run", folder=project).returncode == 0
    (section,) = (row for row in rows(project / "run/sections.csv") if row["chainage_m"] == "57.5")
    ground = {row["point"]: row for row in rows(folder / "ground_reaction.csv") if row["point"]}
    assert list(ground) == ["unsupported", "equilibrium", "critical", "in_situ"]
    assert ground["unsupported"]["supported_closure_mm"] == section["closure_mm"]
    assert ground["unsupported"]["supported_plastic_radius_m"] == section["plastic_radius_m"]
    assert ground["critical"]["support_pressure_mpa"] == section["critical_pressure_mpa"]
    assert ground["in_situ"]["support_pressure_mpa"] == section["in_situ_stress_mpa"]
    (of_class,) = (
        row
        for row in rows(project / "run/classes.csv")
        if row["chainage_m"] == section["chainage_m"] and row["support_class"] == "heavy"
    )
    for name in ("support_pressure_mpa", "supported_closure_mm", "supported_plastic_radius_m"):
        assert float(ground["equilibrium"][name]) == pytest.approx(float(of_class[name]), rel=1e-9)
    installed = [row for row in rows(folder / "closure_profile.csv") if row["element"]]
    assert [row["element"] for row in installed] == ["shotcrete;steel_sets"]
    assert installed[0]["profile_closure_mm"] == of_class["installation_closure_mm"]


def test_each_curve_rises_or_falls_as_it_must(project: Path):
    folder = tables(project, "57.5", "light")
    pressures = numbers(folder / "ground_reaction.csv", "support_pressure_mpa")
    closures = numbers(folder / "ground_reaction.csv", "supported_closure_mm")
    assert all(low < high for low, high in pairwise(pressures))
    assert all(high < low for low, high in pairwise(closures))
    shares = numbers(folder / "closure_profile.csv", "closure_share")
    assert all(low < high for low, high in pairwise(shares))
    assert 0 < shares[0] < shares[-1] < 1
    minor = numbers(folder / "strength_envelope.csv", "minor_stress_mpa")
    shear = numbers(folder / "strength_envelope.csv", "shear_stress_mpa")
    assert minor[0] < 0 < minor[-1]
    assert shear[0] == 0
    assert all(low < high for low, high in pairwise(shear))


def test_the_support_has_its_elements_their_sum_and_the_state_at_rest(project: Path):
    table = rows(tables(project, "57.5") / "support_reaction.csv")
    assert list(dict.fromkeys(row["element"] for row in table)) == [
        "shotcrete",
        "steel_sets",
        "class",
    ]
    for name in ("shotcrete", "steel_sets"):
        own = {row["point"]: row for row in table if row["element"] == name}
        assert set(own) == {"installed", "equilibrium", "capacity", "beyond_capacity"}
        pressure = {point: float(row["element_pressure_mpa"]) for point, row in own.items()}
        assert pressure["installed"] == 0
        assert pressure["beyond_capacity"] == pytest.approx(1.2 * pressure["capacity"])
    rest = [float(row["element_pressure_mpa"]) for row in table if row["point"] == "equilibrium"]
    assert rest[2] == pytest.approx(rest[0] + rest[1], rel=1e-9)


def test_a_second_stress_case_stands_beside_the_first(project: Path):
    replaced("units.csv", "siltstone,25.5,0.9", "siltstone,25.5,1.6")(project)
    folder = tables(project, "57.5")
    for name in ("ground_reaction.csv", "closure_profile.csv", "support_reaction.csv"):
        cases = [row["stress_case"] for row in rows(folder / name)]
        assert list(dict.fromkeys(cases)) == ["mean", "larger"]


def test_the_same_section_gives_the_same_bytes(project: Path):
    for name in ("one", "two"):
        ended = tunnelcalc("curves", ".", "--at", "20", "--out", name, folder=project)
        assert ended.returncode == 0
    assert files_of(project / "one") == files_of(project / "two")


# plastic; deeply squeezing, without an adequate class
@pytest.mark.parametrize("at", ["2499", "3073.5"])
def test_sections_of_the_demonstration_are_shown(tmp_path: Path, at: str):
    shown = show_section(ROOT / "projects/demo", load_plugins(), at, out=tmp_path / "out")
    assert (shown.exit_code, shown.missing) == (0, ())
    assert {path.name for path in shown.folder.iterdir()} == {*TABLES, *FIGURES} == {*shown.files}


def test_chainages_are_understood_as_the_project_writes_them(project: Path):
    with (project / "project.yaml").open("a") as stream:
        stream.write('chainage:\n  notation: km+m\n  prefix: "Ch "\n  start: Ch 12+000\n')
    text = (project / "ground.csv").read_text()
    for metres in (150, 120, 70, 45, 0):
        text = text.replace(f"\n{metres},", f"\n12+{metres:03d},")
        text = text.replace(f",{metres},s", f",12+{metres:03d},s")
        text = text.replace(f",{metres},g", f",12+{metres:03d},g")
    (project / "ground.csv").write_text(text)
    shown = show_section(project, without_figures(), "Ch 12+057.5")
    assert shown.folder == (project / "curves" / "Ch_12+057.50").resolve()
    assert shown.curves.chainage == "Ch 12+057.50"


@pytest.mark.parametrize(
    ("arguments", "told"),
    [
        (
            ("--at", "150.5"),
            'command line: --at holds "150.5", where there is no section\n'
            "  allowed: a chainage from 0.00 to 150.00\n"
            "  fix: name a place with ground data\n1 problem found\n",
        ),
        (
            ("--at", "here"),
            'command line: --at holds "here", which is not a chainage\n'
            "  allowed: a chainage of this project, 12345.6 or 12+345.60\n"
            "  fix: write the chainage as the project's notation has it\n1 problem found\n",
        ),
        (
            ("--at", "20", "--class", "hevy"),
            'command line: --class names "hevy", which is no support class of the project\n'
            "  allowed: light, heavy\n  fix: write heavy\n1 problem found\n",
        ),
    ],
)
def test_a_wrong_option_is_told_as_every_problem_is(project: Path, arguments, told: str):
    before = files_of(project)
    ended = tunnelcalc("curves", ".", *arguments, folder=project)
    assert (ended.returncode, ended.stdout, ended.stderr) == (2, "", told)
    assert files_of(project) == before


def test_a_gap_without_ground_data_is_told_with_its_reason(project: Path):
    text = (project / "ground.csv").read_text()
    (project / "ground.csv").write_text(text.replace("45,70,siltstone", "50,70,siltstone"))
    replaced(
        "project.yaml",
        "  section_length_m: 10\n",
        "  section_length_m: 10\n  gaps:\n    - {from_m: 45, to_m: 50, reason: no access}\n",
    )(project)
    ended = tunnelcalc("curves", ".", "--at", "47", folder=project)
    assert ended.returncode == 2
    assert "lies in a gap without ground data: no access" in ended.stderr


def test_nothing_is_overwritten(project: Path):
    tables(project, "20")
    before = files_of(project)
    ended = tunnelcalc("curves", ".", "--at", "20", "--out", "out", folder=project)
    assert ended.returncode == 2
    assert "--out is not empty" in ended.stderr
    assert files_of(project) == before


def test_a_second_time_the_folder_itself_is_named(project: Path):
    assert show_section(project, without_figures(), "20").exit_code == 0
    before = files_of(project)
    ended = tunnelcalc("curves", ".", "--at", "20", folder=project)
    (folder,) = (project / "curves").iterdir()
    assert (ended.returncode, ended.stderr) == (
        2,
        f"{folder.resolve()}: the folder to write is not empty\n"
        "  allowed: a folder that is absent or empty\n"
        "  fix: remove it, or name another folder with --out\n1 problem found\n",
    )
    assert files_of(project) == before


def test_ground_without_strength_has_figures_that_say_so(project: Path):
    replaced("units.csv", "gouge,22,,3,8,12,0,0.3,,200", "gouge,22,1,3,8,12,0,0.3,0,200,0,0")(
        project
    )
    replaced("units.csv", "modulus_ratio\n", "modulus_ratio,cohesion_mpa,friction_angle_deg\n")(
        project
    )
    for name in ("275", "350"):
        text = (project / "units.csv").read_text()
        (project / "units.csv").write_text(text.replace(f"{name}\n", f"{name},,\n"))
    with (project / "project.yaml").open("a") as stream:
        stream.write(
            "methods:\n  strength: {by_unit: {gouge: mohr_coulomb}}\n"
            "  ground_reaction: {by_unit: {gouge: mohr_coulomb_perfectly_plastic}}\n"
        )
    shown = show_section(project, load_plugins(), "135")
    assert [what for what, _ in shown.missing] == ["ground reaction"]
    assert {name for name in shown.files if not name.endswith("csv")} == FIGURES
    said = {
        "ground_reaction": "No closure of the wall can be computed",
        "closure_profile": "The closure without support cannot be computed",
        "shear_strength": "The ground has no shear strength",
        "strength_envelope": "the ground has no shear strength",
    }
    for name, sentence in said.items():
        text = (shown.folder / f"{name}.svg").read_text(encoding="utf-8")
        assert sentence in " ".join(text.split()), name
        assert "unknown" not in text


def test_without_a_closure_the_rest_is_written_and_the_reason_told(project: Path):
    replaced("ground.csv", "gouge,200", "gouge,9000")(project)
    replaced("units.csv", "gouge,22,,3,8,12,0", "gouge,22,,0.2,4,5,1")(project)
    ended = tunnelcalc("curves", ".", "--at", "135", "--out", "out", folder=project)
    assert (ended.returncode, ended.stderr) == (3, "")
    assert "not evaluated: ground reaction: no closure that can be computed" in ended.stdout
    names = {path.name for path in (project / "out").iterdir()}
    assert {"ground_reaction.csv", "ground_reaction.svg", "strength_envelope.csv"} <= names
    assert "closure_profile.csv" not in names
    assert all(
        math.isfinite(value)
        for value in numbers(project / "out/ground_reaction.csv", "supported_closure_mm")
    )


def test_without_a_plugin_that_draws_the_tables_are_written_and_a_note_told(
    project: Path, monkeypatch: pytest.MonkeyPatch, capsys: pytest.CaptureFixture[str]
):
    monkeypatch.setattr(curves_command, "load_plugins", without_figures)
    assert curves_command.curves(project, "20", None, project / "out") == 0
    assert "note: no plugin draws figures: tables alone were written" in capsys.readouterr().out
    assert {path.name for path in (project / "out").iterdir()} == set(TABLES)


def test_a_strangers_figure_is_drawn_where_the_project_names_it(project: Path, tmp_path: Path):
    draw = '(folder / "mine.txt").write_text(curves.ground_unit); return ["mine.txt"]'
    environment = install(tmp_path, "stranger", HEAD + FIGURE.format(draw=draw))
    options = ("curves", ".", "--at", "20", "--out")
    assert tunnelcalc(*options, "a", folder=project, environment=environment).returncode == 0
    assert not (project / "a" / "mine.txt").exists()
    NAMED(project)
    ended = tunnelcalc(*options, "b", folder=project, environment=environment)
    assert (ended.returncode, ended.stderr) == (0, "")
    assert (project / "b" / "mine.txt").read_text() == "sandstone"
    assert "mine.txt" in ended.stdout


def test_a_figure_that_fails_costs_itself_alone(project: Path, tmp_path: Path):
    environment = install(tmp_path, "stranger", HEAD + FIGURE.format(draw='raise KeyError("pen")'))
    NAMED(project)
    ended = tunnelcalc(
        "curves", ".", "--at", "20", "--out", "out", folder=project, environment=environment
    )
    assert (ended.returncode, ended.stderr) == (3, "")
    assert "not evaluated: figure stranger: KeyError: 'pen'" in ended.stdout
    assert {path.name for path in (project / "out").iterdir()} == {*TABLES, *FIGURES}


def test_commands_that_draw_nothing_load_no_drawing_library(project: Path):
    code = (
        "import sys; from tunnelcalc.cli.main import main; main(['validate', '.']); "
        "sys.exit('matplotlib' in sys.modules)"
    )
    ended = subprocess.run(
        [sys.executable, "-c", code], cwd=project, capture_output=True, check=False
    )
    assert ended.returncode == 0
