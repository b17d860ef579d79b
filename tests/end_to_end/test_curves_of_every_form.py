"""`tunnelcalc curves` on classes whose elements slide, harden or change the ground."""

from __future__ import annotations

import pytest
from end_to_end.element_texts import HARDENING, SLIDING
from end_to_end.projects import replaced, rows, write_project

from tunnelcalc.curves import show_section
from tunnelcalc.plugin.registry import load_plugins

GROUTED = """\
      - kind: grouted_rock_bolts
        diameter_mm: 25
        length_m: 3.0
        spacing_around_m: 1.2
        spacing_along_m: 1.2
        friction_factor: 0.6
        bar_strength_mpa: 500
        bar_strength_is: yield
        service_factor: 1
        bond_kn_per_m: 150
        anchorage_length_m: 0.5
        pattern_rules: none
"""


@pytest.mark.parametrize(
    "elements",
    [SLIDING, HARDENING, GROUTED, SLIDING + HARDENING + GROUTED],
    ids=["sliding", "hardening", "grouted", "together"],
)
def test_the_line_of_each_element_is_written_and_ends_where_the_wall_is_at_rest(tmp_path, elements):
    project = write_project(tmp_path / "project")
    head = "  - name: heavy\n    installed_at_m: 1.0\n    elements:\n"
    new = f"  - name: other\n    installed_at_m: 1.0\n    elements:\n{elements}"
    rate = "    advance_m_per_day: 2\n" if "hardening" in elements else ""
    replaced("project.yaml", head, new + rate + head)(project)
    shown = show_section(project, load_plugins(), "15", class_name="other", out=tmp_path / "out")
    assert shown.missing == ()
    table = rows(shown.folder / "support_reaction.csv")
    carrying = {row["element"] for row in table} - {"class"}
    for label in carrying:
        line = [row for row in table if row["element"] == label]
        pressures = [float(row["element_pressure_mpa"]) for row in line]
        assert all(pressure >= 0 for pressure in pressures)
    at_rest = [row for row in table if row["element"] == "class" and row["point"]]
    assert at_rest
