"""Everything that is wrong with a workbook is told in one pass, by sheet and cell."""

from __future__ import annotations

import csv
import io
from pathlib import Path

import openpyxl
from end_to_end.projects import replaced, run, write_project


def test_structure_and_values_of_a_workbook_are_told_together(tmp_path: Path) -> None:
    project = write_project(tmp_path / "project")
    text = (project / "ground.csv").read_text(encoding="utf-8")
    workbook = openpyxl.Workbook()
    sheet = workbook.active
    for row in csv.reader(io.StringIO(text)):
        sheet.append([float(c) if c.replace(".", "", 1).isdigit() else c for c in row])
    sheet["D2"], sheet["E4"] = -5, "=1+1"
    sheet.merge_cells("C3:C4")
    workbook.save(project / "ground.xlsx")
    replaced("project.yaml", "ground.csv", "ground.xlsx")(project)
    ended = run(project)
    assert ended.returncode == 2
    heads = [line for line in ended.stderr.splitlines() if line.startswith("ground.xlsx")]
    assert heads == [
        'ground.xlsx:Sheet!D2: column "cover_m" holds "-5", which is out of range',
        "ground.xlsx:Sheet!C3: is merged with others, C3:C4",
        "ground.xlsx:Sheet!E4: holds a formula whose result is not stored",
    ]
