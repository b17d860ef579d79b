"""Parts of tables that end-to-end runs do not single out."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import numpy as np
from end_to_end.projects import replaced, write_project

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
