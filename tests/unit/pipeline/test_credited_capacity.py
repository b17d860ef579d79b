"""What counts where capacities are added up: never bond that is lost in the plastic zone, never
load that a sliding joint does not give, nothing of bolts that change the ground."""

from __future__ import annotations

import math

import pytest
from unit.pipeline.grounds import evaluated, sections_of
from unit.pipeline.projects import SHOTCRETE, STEEL_SETS, element, project
from unit.pipeline.test_resting_state import GROUTED

from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.plugin.registry import load_plugins

RING_MPA = 30 / 2 * (1 - (3.9 / 4) ** 2)
FRICTION = {
    "diameter_mm": 39,
    "length_m": 4.0,
    "spacing_around_m": 0.8,
    "spacing_along_m": 0.8,
    "plate_capacity_kn": 80,
    "bar_capacity_kn": 120,
    "service_factor": 1,
    "bond_kn_per_m": 20,
    "deformation_m_per_mn": 0.05,
    "pattern_rules": "none",
}
SLIDING = STEEL_SETS | {
    "joints": "sliding",
    "joint_count": 4,
    "slip_load_kn": 60.0,
    "joint_travel_mm": 400.0,
}


def dead_weight(sections, elements):
    """Capacity of the crown check, and the sections."""
    classes = {"only": elements}
    made = project(classes, sections, chosen_checks={"crown_dead_weight": True})
    lines = check_lines(plan_classes(made, load_plugins()))
    (at,) = [i for i, line in enumerate(lines) if line.check == "crown_dead_weight"]
    found = evaluated(sections, classes, chosen_checks={"crown_dead_weight": True})
    return found["check_capacity"][0, at], found


def parameters(kind, values):
    """Values of the parameters that the kind has, with the choices' defaults."""
    known = load_plugins().support_kind(kind).parameters
    return {p.name: values.get(p.name, p.default) for p in known if p.name in values or p.default}


def test_friction_bolts_count_with_the_bond_that_is_left_beyond_the_plastic_zone():
    weak = sections_of(gsi=32.0)
    bolts = element("friction_bolts", parameters("friction_bolts", FRICTION), installed_at_m=3.0)
    capacity, found = dead_weight(weak, [bolts])
    plastic = found["class_plastic_radius_m"][0, 0]
    assert 4.2 < plastic < 7.5
    bond_kn = 20 * (4.0 - (plastic - 4.0))
    assert capacity == pytest.approx(bond_kn / 1000 / 0.8**2, rel=1e-9)


def test_bolts_that_change_the_ground_count_for_nothing_at_the_wall():
    weak = sections_of(gsi=25.0)
    elements = [element("grouted_rock_bolts", GROUTED), element("shotcrete", SHOTCRETE)]
    capacity, _ = dead_weight(weak, elements)
    assert capacity == pytest.approx(RING_MPA, rel=1e-12)


def test_a_sliding_set_counts_with_what_it_gives_within_the_closure_limit():
    weak = sections_of(gsi=25.0)
    capacity, _ = dead_weight(weak, [element("steel_sets", SLIDING)])
    # Slip load over spacing and radius, as of a thin ring.
    assert capacity == pytest.approx(0.060 / (1.5 * 4.0), rel=0.02)


def test_a_limit_that_is_never_reached_is_not_told_and_never_infinite():
    weak = sections_of(2, gsi=[25.0, 90.0])
    springs = evaluated(weak, {"ring": [element("shotcrete", SHOTCRETE)]})
    assert not any(math.isinf(v) for v in springs["class_first_failure_closure_mm"][:, 0])


def test_a_sliding_set_counts_with_its_slip_load_however_wide_the_closure_limit():
    weak = sections_of(gsi=25.0)
    capacity, found = dead_weight(weak, [element("steel_sets", SLIDING)])
    assert found["class_closure_pct"][0, 0] > 0
    assert capacity == pytest.approx(0.060 / (1.5 * 4.0), rel=0.02)


def test_water_is_borne_by_rings_that_do_not_slide():
    wet = sections_of(gsi=60.0, water_head_m=20.0)
    alone = {"sets": [element("steel_sets", SLIDING)]}
    found = evaluated(wet, alone, drainage="watertight")
    made = project(alone, wet, drainage="watertight")
    lines = check_lines(plan_classes(made, load_plugins()))
    (at,) = [i for i, line in enumerate(lines) if line.check == "water_on_lining"]
    assert found["check_capacity"][0, at] == 0
    assert not found["class_adequate"][0, 0]
    both = {"both": [element("steel_sets", SLIDING), element("shotcrete", SHOTCRETE)]}
    with_water = evaluated(wet, both, drainage="watertight")
    lines = check_lines(plan_classes(project(both, wet, drainage="watertight"), load_plugins()))
    (hoop,) = [i for i, line in enumerate(lines) if line.check == "hoop_stress"]
    # All of 0.1962 MPa of water, and what the ground brings, on the shotcrete ring.
    least = 0.1962 / RING_MPA * 30
    assert with_water["check_demand"][0, hoop] >= least * (1 - 1e-9)
