"""Lines of elements that slide, harden or change the ground, as `curves` shows them."""

from __future__ import annotations

import math

import numpy as np
import pytest
from end_to_end.element_texts import HARDENING, SLIDING
from end_to_end.projects import replaced, write_project
from unit.plugin.strangers import own_points

from tunnelcalc.curves import curves_at
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.section_curves import CAPACITY, CaseCurves

REGISTRY = load_plugins(own_points())
GROUTED = """\
      - kind: grouted_rock_bolts
        diameter_mm: 25
        length_m: 3.0
        spacing_around_m: 0.8
        spacing_along_m: 0.8
        friction_factor: 0.6
        bar_strength_mpa: 500
        bar_strength_is: yield
        service_factor: 1
        bond_kn_per_m: 150
        anchorage_length_m: 0.5
        pattern_rules: none
"""
HEAD = "  - name: heavy\n    installed_at_m: 1.0\n    elements:\n"


def case_of(tmp_path, elements: str) -> CaseCurves:
    """The class on the siltstone."""
    project = write_project(tmp_path / "project")
    rate = "    advance_m_per_day: 2\n" if "hardening" in elements else ""
    new = f"  - name: other\n    installed_at_m: 1.0\n{rate}    elements:\n{elements}"
    replaced("project.yaml", HEAD, new + HEAD)(project)
    return curves_at(read_project(project, REGISTRY), REGISTRY, "57", "other").governing


def test_sliding_sets_are_marked_where_they_slide_lock_and_reach_capacity(tmp_path):
    """By statics of a thin ring of 34.01 cm2 a metre, R = 3 m, 4 joints of 100 mm
    (independent calculation)."""
    (sets,) = case_of(tmp_path, SLIDING).support.elements
    at = {name: point for point, name in sets.marks.items()}
    moved = {name: sets.closure_mm[at[name]] - sets.installation_closure_mm for name in at}

    slips = 0.2 / 3.0
    assert sets.pressure_mpa[at["joints_slide"]] == pytest.approx(slips, rel=1e-9)
    assert sets.pressure_mpa[at["joints_lock"]] == pytest.approx(slips, rel=1e-9)
    assert moved["joints_lock"] - moved["joints_slide"] == pytest.approx(400 / (2 * math.pi))
    assert sets.pressure_mpa[at[CAPACITY]] == pytest.approx(235 * 3.401e-3 / 3.0, rel=1e-3)
    stiffness = 200e3 * 3.401e-3 / 3.0**2  # of a thin ring, E A / (S R^2) [MPa/m]
    per_mm = sets.pressure_mpa[at["joints_slide"]] / moved["joints_slide"]
    assert 1000 * per_mm == pytest.approx(stiffness, rel=1e-3)
    rise = sets.pressure_mpa[at[CAPACITY]] - slips
    assert moved[CAPACITY] - moved["joints_lock"] == pytest.approx(rise / per_mm, rel=1e-9)
    assert sets.capacity_closure_mm == sets.closure_mm[at[CAPACITY]]


def test_the_line_of_all_elements_meets_the_ground_at_rest(tmp_path):
    stiff = SLIDING.replace("sliding", "rigid").partition("        joint_count")[0]
    support = case_of(tmp_path, HARDENING + stiff).support
    at = np.searchsorted(support.closure_mm, support.rest_closure_mm)
    carried = np.interp(support.rest_closure_mm, support.closure_mm, support.pressure_mpa)
    assert support.closure_mm[at] == support.rest_closure_mm
    assert carried == pytest.approx(support.rest_pressure_mpa, rel=1e-6)


def test_grouted_bolts_show_the_ground_with_and_without_their_ring(tmp_path):
    case = case_of(tmp_path, GROUTED)
    plain = case_of(tmp_path / "plain", SLIDING)
    assert plain.before is None
    assert plain.alone is plain.ground
    assert case.alone is case.before
    assert case.before.free_closure_mm == pytest.approx(plain.ground.free_closure_mm, rel=1e-12)
    assert case.ground.free_closure_mm < case.before.free_closure_mm
    rest = case.support
    at = np.interp(rest.rest_pressure_mpa, case.ground.support_pressure_mpa, case.ground.closure_mm)
    assert at == pytest.approx(rest.rest_closure_mm, rel=1e-9)
