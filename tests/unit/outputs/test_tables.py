"""Parts of tables that end-to-end runs do not single out."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import numpy as np
from end_to_end.projects import replaced, write_project
from unit.inputs.reading import read
from unit.inputs.test_method_choices import LINE, MODULUS, of_gouge, units

from tunnelcalc.outputs import tables
from tunnelcalc.outputs.tables import flag_texts
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.run import run_project


def test_flags_are_sorted_by_name_whatever_their_order():
    raised = np.array([[True, True, False], [False, False, False], [True, False, True]])
    assert flag_texts(raised, ["wet", "deep", "cold"]) == ["deep;wet", "", "cold;wet"]


def test_names_with_commas_and_quotes_stand_in_their_cells(tmp_path: Path):
    project = write_project(tmp_path / "project")
    replaced("project.yaml", "name: light", "name: 'bolts, \"light\"'")(project)
    folder = run_project(project, load_plugins()).folder
    for table in folder.glob("*.csv"):
        rows = list(csv.reader(io.StringIO(table.read_text(encoding="utf-8"), newline="")))
        assert {len(row) for row in rows} == {len(rows[0])}
        if table.name in ("flags.csv", "ground_values.csv"):
            continue  # they know no classes
        assert any('bolts, "light"' in row for row in rows)


def test_many_sections_are_written_in_parts_without_a_seam(tmp_path: Path, monkeypatch):
    project = write_project(tmp_path / "project")
    whole = run_project(project, load_plugins()).folder
    monkeypatch.setattr(tables, "ROWS_AT_ONCE", 3)
    parts = run_project(project, load_plugins()).folder
    assert (parts / "sections.csv").read_bytes() == (whole / "sections.csv").read_bytes()


def test_what_is_entered_and_computed_stands_once(tmp_path: Path):
    """Constants that a table gives and the strength passes on."""
    straight = of_gouge(strength="mohr_coulomb", ground_reaction="mohr_coulomb_brittle")
    residual = {
        "residual_friction_angle_deg": ("", "", "20"),
        "residual_cohesion_mpa": ("", "", "0.01"),
    }
    read(tmp_path, straight, units(**LINE, **MODULUS, **residual))
    folder = run_project(tmp_path / "project", load_plugins()).folder
    header, *rows = csv.reader(io.StringIO((folder / "sections.csv").read_text("utf-8")))
    assert len(set(header)) == len(header)
    assert {"cohesion_mpa", "residual_cohesion_mpa"} <= set(header)
    assert "residual_mb" not in header
    of_gouge_rows = [row for row in rows if "gouge" in row]
    at = header.index("residual_cohesion_mpa")
    assert {row[at] for row in of_gouge_rows} == {"0.01"}
    assert {row[at] for row in rows if "gouge" not in row} == {""}
