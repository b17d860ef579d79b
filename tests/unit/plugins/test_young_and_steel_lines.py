"""Lines of the calculation sheet that hang on an age, a law, joints or bars."""

import numpy as np
import pytest
from tunnelcalc_shotcrete.checks import EarlyStrength, HoopStress, YoungHoopStress
from tunnelcalc_shotcrete.kind import Shotcrete
from tunnelcalc_shotcrete.laws import LAW_NAMES
from tunnelcalc_steel_sets.checks import Travel
from tunnelcalc_steel_sets.girders import LatticeGirders
from tunnelcalc_steel_sets.kind import SteelSets, spring_of

from tunnelcalc.api import Element, one_section

RING = {"thickness_mm": 200.0, "strength_mpa": 30.0, "modulus_gpa": 20.0, "poisson_ratio": 0.2}
STEEL = {"yield_strength_mpa": 250.0, "steel_modulus_gpa": 200.0, "spacing_m": 1.2}
SLIDING = {
    "joints": "sliding",
    "joint_count": 3.0,
    "slip_load_kn": 300.0,
    "joint_travel_mm": 150.0,
}
BLOCKED = {
    "contact": "blocked",
    "block_spacing_deg": 20.0,
    "block_thickness_mm": 50.0,
    "block_width_mm": 200.0,
    "block_modulus_gpa": 10.0,
}


def ring(**more):
    return Element("shotcrete", "shotcrete", 1.0, {**RING, "cement_class": "N", **more})


def sets(**more):
    values = {**STEEL, "profile": "HEB 160", "contact": "embedded", **more}
    return Element("steel_sets", "steel_sets", 1.0, values)


def girders(bars):
    values = {
        **STEEL,
        "bars": bars,
        "lower_bar_diameter_mm": 25.0,
        "upper_bar_diameter_mm": 32.0,
        "bar_layer_distance_mm": 150.0,
    }
    return Element("lattice_girders", "lattice_girders", 1.0, values)


def result(lines, symbol):
    return [line for line in lines if line.symbol == symbol][-1].result


def sound(lines):
    return all(line.source for line in lines) and not [x for x in lines if x.disagrees()]


@pytest.mark.parametrize("theory", ["thick", "thin"])
@pytest.mark.parametrize("age", [0.0, 0.2, 0.99, 1.001, 5.0, 40.0])
@pytest.mark.parametrize("law", LAW_NAMES)
def test_young_stress_at_any_age(law, age, theory):
    element = ring(hardening=law, ring_theory=theory)
    values = {
        "radius_m": 4.0,
        "worst_pressure_mpa": 0.2,
        "worst_age_days": age,
        "early_pressure_mpa": 0.0,
        "worst_distance_m": 3.0,
    }
    lines = YoungHoopStress().lines(values, element)
    found = YoungHoopStress().evaluate(one_section(values), element)
    assert (result(lines, "demand"), result(lines, "capacity")) == (
        found.demand[0],
        found.capacity[0],
    )
    assert sound(lines)


def test_a_ring_that_carries_nothing_has_lines_too():
    values = {
        "radius_m": 4.0,
        "worst_pressure_mpa": 0.0,
        "worst_age_days": np.nan,
        "early_pressure_mpa": 0.0,
        "worst_distance_m": np.nan,
    }
    lines = YoungHoopStress().lines(values, ring(hardening="meschke_1996"))
    assert (result(lines, "demand"), result(lines, "capacity")) == (0.0, 30.0)


@pytest.mark.parametrize("theory", ["thick", "thin"])
@pytest.mark.parametrize("law", ["none", *LAW_NAMES])
def test_the_ring_at_28_days(law, theory):
    element, values = ring(hardening=law, ring_theory=theory), {"radius_m": 4.0}
    lines = Shotcrete().lines(values, element)
    reaction = Shotcrete().reaction(one_section(values), ring(ring_theory=theory))
    assert result(lines, "K") == reaction.stiffness_mpa_per_m[0]
    assert result(lines, "pmax") == reaction.capacity_mpa[0]
    assert sound(lines)
    said = [line.meaning for line in lines if line.symbol in ("K", "pmax")]
    assert all(text.endswith("at 28 days") == (law != "none") for text in said)
    at_rest = HoopStress().lines({**values, "element_pressure_mpa": 0.3}, element)
    assert sound(at_rest)


@pytest.mark.parametrize("law", LAW_NAMES)
def test_early_strength(law):
    early = {
        "early_strength": "at_one_age",
        "early_age_1_hours": 96.0,
        "early_strength_1_mpa": 12.0,
    }
    element = ring(hardening=law, **early)
    lines = EarlyStrength().lines({}, element)
    found = EarlyStrength().evaluate(one_section({"radius_m": 4.0}), element)
    assert result(lines, "demand") == 12.0
    assert result(lines, "capacity") == found.capacity[0]
    assert sound(lines)


@pytest.mark.parametrize("contact", [{}, BLOCKED], ids=["embedded", "blocked"])
@pytest.mark.parametrize("moved", [0.0, 0.5, 40.0, 200.0])
def test_sliding_sets(contact, moved):
    element, values = sets(**SLIDING, **contact), {"radius_m": 4.0, "element_moved_mm": moved}
    lines = SteelSets().lines(values, element)
    section = one_section(values)
    stiffness, capacity = spring_of(section, element)
    assert (result(lines, "K"), result(lines, "pmax")) == (stiffness[0], capacity[0])
    # 300 kN over 1.2 m x 4 m; 3 x 150 mm over 2 pi
    assert result(lines, "p_slip") == pytest.approx(0.0625, rel=1e-14)
    assert result(lines, "u_slip") == pytest.approx(0.0716197, rel=1e-6)
    assert sound(lines)
    travel = Travel().lines(values, element)
    assert result(travel, "demand") == Travel().evaluate(section, element).demand[0]
    assert sound(travel)


@pytest.mark.parametrize("bars", ["three", "four"])
def test_girders(bars):
    element, values = girders(bars), {"radius_m": 4.0}
    lines = LatticeGirders().lines(values, element)
    spring = LatticeGirders().reaction(one_section(values), element)
    assert result(lines, "K") == spring.stiffness_mpa_per_m[0]
    assert result(lines, "pmax") == spring.capacity_mpa[0]
    assert sound(lines)
