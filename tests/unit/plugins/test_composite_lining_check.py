"""The check of the composite lining: by hand, with water, and where it is not made."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from tunnelcalc_composite_lining.check import CompositeLining
from tunnelcalc_composite_lining.lining import lining_at_rest, parts_of
from tunnelcalc_composite_lining.utilisation import utilisation_at

from tunnelcalc import api, testing
from tunnelcalc.support.ring_section import RingSection

FULL = {"lining_interface": "full_slip", "lining_tensile_strength_mpa": 2.0}
BONDED = {**FULL, "lining_interface": "no_slip"}
SHOTCRETE = RingSection(0.2, 0.2**3 / 12, 0.2, 20_000.0, 0.2, 25.0)
STEEL = RingSection(0.005, 1.5e-5, 0.16, 200_000.0, 0.0, 235.0, 235.0)
BLOCKED = RingSection(acts_alone="blocked")


def element(label: str, section: RingSection | None) -> api.Element:
    return api.Element(label, label, 1.0, {}, section)


CONCRETE = (element("shotcrete", SHOTCRETE),)
BOTH = (*CONCRETE, element("steel_sets", STEEL))


def at_rest(pressure: float, ratio: float = 1.0, **more: float) -> api.Sections:
    sections = testing.sections_at_rest(pressure, 1.0, 1.0)
    vertical = sections["effective_vertical_stress_mpa"]
    columns = {name: np.full(sections.count, value) for name, value in more.items()}
    return sections.with_columns({"effective_horizontal_stress_mpa": ratio * vertical, **columns})


@pytest.mark.parametrize("options", [FULL, BONDED], ids=["full-slip", "no-slip"])
def test_under_equal_stress_there_is_thrust_alone(options):
    """p R / t, with the radius of the wall."""
    sections = at_rest(0.5)
    found = CompositeLining(options).evaluate(sections, CONCRETE)
    np.testing.assert_allclose(found.demand, 0.5 * sections["radius_m"] / 0.2, rtol=1e-12)
    np.testing.assert_allclose(found.capacity, 25.0)


def test_under_equal_stress_thrust_goes_by_axial_stiffness():
    """Stiffness of shotcrete 20000 x 0.2 / 0.96 = 4166.67, of steel 1000 MN/m."""
    sections = at_rest(0.5)
    thrust = 0.5 * sections["radius_m"]
    strain = thrust / (20_000 * 0.2 / 0.96 + 1000.0)
    shotcrete, steel = strain * 20_000 / 0.96 / 25.0, strain * 200_000 / 235.0
    found = CompositeLining(FULL).evaluate(sections, BOTH)
    np.testing.assert_allclose(
        found.demand / found.capacity, np.maximum(shotcrete, steel), rtol=1e-12
    )


def test_unequal_stress_uses_the_lining_more():
    even, odd = (CompositeLining(FULL).evaluate(at_rest(0.5, k), BOTH) for k in (1.0, 0.5))
    assert np.all(odd.demand / odd.capacity > even.demand / even.capacity)


def test_water_adds_thrust_and_no_moment():
    """Of 0.5 MPa on the rings, 0.2 are water: the ground's 0.3 alone presses unequally."""
    parts = parts_of(BOTH, 2.0, 4)
    with_water = lining_at_rest(at_rest(0.5, 0.5, lining_water_mpa=0.2), parts, "no_slip")
    dry = lining_at_rest(at_rest(0.3, 0.5), parts, "no_slip")
    radius = testing.sections_of_ground()["radius_m"]
    wet = with_water.at_rest
    np.testing.assert_allclose(wet.mean_thrust_mn_per_m, 0.5 * radius, rtol=1e-12)
    np.testing.assert_array_equal(wet.moment_swing_mnm_per_m, dry.at_rest.moment_swing_mnm_per_m)


def test_no_angle_uses_the_lining_more_than_the_one_that_is_reported():
    sections = at_rest(0.5, 0.4)
    check = CompositeLining(BONDED)
    found = check.evaluate(sections, BOTH)
    lining = check.lining(sections, BOTH)
    everywhere = [
        utilisation_at(lining.at_rest, lining.parts, 1.0, np.full(4, angle))
        for angle in np.linspace(0, 90, 181)
    ]
    used = found.demand / found.capacity
    np.testing.assert_allclose(np.max(everywhere, axis=0), used, rtol=1e-12)


def test_shotcrete_without_tensile_strength_fails_where_it_is_in_tension():
    brittle = CompositeLining({**BONDED, "lining_tensile_strength_mpa": 0.0})
    sections = at_rest(0.02, 0.1, deformation_modulus_mpa=100.0)
    found = brittle.evaluate(sections, CONCRETE)
    tensile = found.capacity == 0
    assert np.any(tensile)
    assert np.all(found.demand[tensile] > 0)
    assert np.all(np.isfinite(found.demand))


def test_a_class_without_ring_has_no_lining():
    assert not CompositeLining(FULL).concerns_class((element("rock_bolts", None),))
    assert CompositeLining(FULL).concerns_class(CONCRETE)


def test_a_ring_that_acts_alone_is_left_out_with_its_reason():
    found = CompositeLining(FULL).evaluate(at_rest(0.5), (*CONCRETE, element("sets", BLOCKED)))
    assert np.all(found.left_out)
    assert found.left_out_reason == "sets: blocked"


def test_a_section_without_modulus_is_left_out_alone():
    modulus = np.array([3000.0, np.nan, 3000.0, 3000.0])
    sections = at_rest(0.5, 0.5)
    whole = CompositeLining(FULL).evaluate(sections, BOTH)
    part = CompositeLining(FULL).evaluate(
        sections.with_columns({"deformation_modulus_mpa": modulus}), BOTH
    )
    assert part.left_out.tolist() == [False, True, False, False]
    sound = ~part.left_out
    assert part.demand[sound].tobytes() == whole.demand[sound].tobytes()


@pytest.mark.parametrize(
    ("installed_m", "closed_at_m", "apart"),
    [(1.0, None, False), (8.0, None, True), (1.0, 8.0, True)],
    ids=["together", "installed-later", "closed-later"],
)
def test_rings_that_act_from_different_distances_are_no_composite(installed_m, closed_at_m, apart):
    first = replace(element("shotcrete", SHOTCRETE), installed_at_m=1.0)
    values = {} if closed_at_m is None else {"closed_at_m": closed_at_m}
    second = replace(element("steel_sets", STEEL), installed_at_m=installed_m, values=values)
    found = CompositeLining(FULL).evaluate(at_rest(0.3, 0.5), (first, second))
    if apart:
        assert np.all(found.left_out)
        assert "different distances" in found.left_out_reason
        assert "steel_sets from 8 m" in found.left_out_reason
    else:
        assert not np.any(found.left_out)
