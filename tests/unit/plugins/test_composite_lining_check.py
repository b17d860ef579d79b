"""The check of the composite lining: by hand, with water, of rings apart and young, and where it is
not made."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np
import pytest
from tunnelcalc_composite_lining.check import CompositeLining
from tunnelcalc_composite_lining.composite_section import shares
from tunnelcalc_composite_lining.einstein_schwartz import scaled_to_thrust
from tunnelcalc_composite_lining.utilisation import utilisation_at, worst_utilisation

from tunnelcalc import api, testing
from tunnelcalc.support.ring_section import RingSection

FULL = {"lining_interface": "full_slip", "lining_tensile_strength_mpa": 2.0}
BONDED = {**FULL, "lining_interface": "no_slip"}
SHOTCRETE = RingSection(0.2, 0.2**3 / 12, 0.2, 20_000.0, 0.2, 25.0)
STEEL = RingSection(0.005, 1.5e-5, 0.16, 200_000.0, 0.0, 235.0, 235.0)
BLOCKED = RingSection(acts_alone="blocked")
AXIAL = 20_000 * 0.2 / 0.96, 1000.0
"""Axial stiffness of shotcrete and steel. [MN/m]"""
SHARES = tuple(own / sum(AXIAL) for own in AXIAL)
RADIUS = testing.sections_of_ground()["radius_m"]


def element(label: str, section: RingSection | None) -> api.Element:
    return api.Element(label, label, 1.0, {}, section)


CONCRETE = (element("shotcrete", SHOTCRETE),)
BOTH = (*CONCRETE, element("steel_sets", STEEL))


def under(
    pressures: Sequence[float],
    ratio: float = 1.0,
    waters: Sequence[float] = (),
    apart_m: float = 1.0,
    **more: float,
) -> api.Sections:
    """Sections with a pressure on each element, the water on it included; each element acts from
    so much further than the one before."""
    sections = testing.sections_at_rest(sum(pressures), 1.0, 1.0)
    vertical = sections["effective_vertical_stress_mpa"]
    columns = {"effective_horizontal_stress_mpa": ratio * vertical}
    waters = waters or [0.0 for _ in pressures]
    for position, (pressure, water) in enumerate(zip(pressures, waters, strict=True)):
        own = {"element_pressure_mpa": pressure, "element_water_mpa": water}
        own["element_acts_from_m"] = position * apart_m
        for name, value in own.items():
            columns[api.of_element(name, position)] = np.full(sections.count, value)
    columns |= {name: np.full(sections.count, value) for name, value in more.items()}
    return sections.with_columns(columns)


def together(pressure: float, ratio: float = 1.0, **more: float) -> api.Sections:
    """Shotcrete and steel as rings that act from the same distance share a pressure."""
    return under([share * pressure for share in SHARES], ratio, **more)


def used(found: api.Evaluation) -> api.Array:
    return found.demand / found.capacity


@pytest.mark.parametrize("options", [FULL, BONDED], ids=["full-slip", "no-slip"])
def test_under_equal_stress_there_is_thrust_alone(options):
    """p R / t, with the radius of the wall."""
    found = CompositeLining(options).evaluate(under([0.5]), CONCRETE)
    np.testing.assert_allclose(found.demand, 0.5 * RADIUS / 0.2, rtol=1e-12)
    np.testing.assert_allclose(found.capacity, 25.0)


def test_under_equal_stress_each_ring_has_its_own_pressure():
    """Shotcrete 0.3 R / 0.2 against 25, steel 0.2 R / 0.005 against 235 MPa."""
    found = CompositeLining(FULL).evaluate(under([0.3, 0.2]), BOTH)
    np.testing.assert_allclose(used(found), 0.2 * RADIUS / 0.005 / 235.0, rtol=1e-12)
    found = CompositeLining(FULL).evaluate(under([0.5, 0.01]), BOTH)
    np.testing.assert_allclose(used(found), 0.5 * RADIUS / 0.2 / 25.0, rtol=1e-12)


@pytest.mark.parametrize("options", [FULL, BONDED], ids=["full-slip", "no-slip"])
@pytest.mark.parametrize("ratio", [0.4, 1.0, 1.7])
def test_rings_that_share_by_stiffness_are_the_composite_section(options, ratio):
    """Thrust and moment of the whole, divided by axial and bending stiffness."""
    sections = together(0.5, ratio)
    check = CompositeLining(options)
    lining = check.lining(sections, BOTH)
    whole = scaled_to_thrust(lining.whole, 0.5 * RADIUS)
    composite = worst_utilisation(whole, lining.parts, 1.0)
    np.testing.assert_allclose(
        used(check.evaluate(sections, BOTH)), composite.utilisation, rtol=1e-12
    )
    split = shares(lining.parts)
    for state, thrust, moment in zip(lining.states, split.thrust, split.moment, strict=True):
        wanted = np.array([thrust, thrust, moment]) * np.array(whole[:3])
        np.testing.assert_allclose(np.array(state.forces[:3]), wanted, rtol=1e-12, atol=1e-15)


@pytest.mark.parametrize("options", [FULL, BONDED], ids=["full-slip", "no-slip"])
def test_rings_that_act_from_the_same_distance_are_the_composite_whatever_each_carries(options):
    """Springs at the wall carry 0.42 and 0.08 MPa, a composite together 0.5; so with water."""
    check = CompositeLining(options)
    loads = [0.42, 0.08], 0.6, [0.1, 0.04]
    found = check.evaluate(under(*loads, apart_m=0.0), BOTH)
    lining = check.lining(under(*loads, apart_m=0.0), BOTH)
    whole = scaled_to_thrust(lining.whole, 0.36 * RADIUS)
    whole = whole._replace(mean_thrust_mn_per_m=whole.mean_thrust_mn_per_m + 0.14 * RADIUS)
    composite = worst_utilisation(whole, lining.parts, 1.0)
    np.testing.assert_allclose(used(found), composite.utilisation, rtol=1e-12)
    apart = check.evaluate(under(*loads, apart_m=1.0), BOTH)
    assert not np.any(np.isclose(used(apart), used(found), rtol=1e-3))


def test_a_hardening_ring_keeps_what_it_carries_beside_one_from_the_same_distance():
    """Steel took more while the shotcrete was young."""
    sections = under([0.3, 0.2], apart_m=0.0)
    ageing = {
        "worst_pressure_mpa_1": 0.3,
        "worst_capacity_mpa_1": 1.2,
        "element_capacity_mpa_1": 1.2,
    }
    sections = sections.with_columns({name: np.full(4, value) for name, value in ageing.items()})
    states = CompositeLining(FULL).lining(sections, BOTH).states
    np.testing.assert_allclose(states[-1].forces.mean_thrust_mn_per_m, 0.2 * RADIUS, rtol=1e-12)


def test_unequal_stress_uses_the_lining_more():
    even, odd = (CompositeLining(FULL).evaluate(together(0.5, k), BOTH) for k in (1.0, 0.5))
    assert np.all(used(odd) > used(even))


def test_each_ring_has_its_own_thrust_and_the_moment_that_belongs_to_it():
    """The first ring, with twice its share of 0.5 MPa, has twice the moment of that composite; the
    second, with half of it, the moment of the composite under all that the two carry."""
    check = CompositeLining(FULL)
    alike = check.lining(together(0.5, 0.5), BOTH)
    pressures = [2 * SHARES[0] * 0.5, SHARES[1] * 0.25]
    apart = check.lining(under(pressures, 0.5), BOTH)
    for number, thrust, moment in ((0, 2.0, 2.0), (1, 0.5, sum(pressures) / 0.5)):
        one, other = (np.array(x.states[number].forces[:3]) for x in (alike, apart))
        np.testing.assert_allclose(other[0], thrust * one[0], rtol=1e-12)
        np.testing.assert_allclose(other[2], moment * one[2], rtol=1e-12)


def test_a_later_ring_that_is_told_no_thrust_is_bent_all_the_same():
    """Steel: share of the moment times half its depth over its second moment of area."""
    check = CompositeLining(FULL)
    sections = under([0.5, 0.0], 0.5)
    lining = check.lining(sections, BOTH)
    steel = lining.states[1].forces
    np.testing.assert_array_equal(steel.mean_thrust_mn_per_m, 0.0)
    share = 200_000 * 1.5e-5 / (200_000 * 1.5e-5 + 20_000 * 0.2**3 / 12 / 0.96)
    whole = scaled_to_thrust(lining.whole, 0.5 * RADIUS).moment_swing_mnm_per_m
    np.testing.assert_allclose(steel.moment_swing_mnm_per_m, share * whole, rtol=1e-12)


def test_load_from_before_swings_as_in_a_soft_lining():
    """Bonded: (1 - k) / (1 + k) (3 - 4 nu) (1/C + 3/F) / (1/C + 1/F) on what was not shared."""
    check = CompositeLining(BONDED)
    lining = check.lining(under([SHARES[0] * 0.5, SHARES[1] * 0.25], 0.5), BOTH)
    c, f = lining.stiffness
    soft = (1 - 0.5) / (1 + 0.5) * (3 - 4 * 0.25) * (c + 3 * f) / (c + f)
    hard = lining.whole.thrust_swing_mn_per_m / lining.whole.mean_thrust_mn_per_m
    assert np.all(soft > hard)
    thrust = SHARES[0] * 0.5 * RADIUS
    found = lining.states[0].forces.thrust_swing_mn_per_m
    np.testing.assert_allclose(found, thrust * (soft + hard) / 2, rtol=1e-12)
    second = lining.states[1].forces
    np.testing.assert_allclose(
        second.thrust_swing_mn_per_m, second.mean_thrust_mn_per_m * hard, rtol=1e-12
    )


def test_a_ring_that_carries_nothing_leaves_the_other_alone_to_be_used():
    found = CompositeLining(FULL).evaluate(under([0.5, 0.0]), BOTH)
    np.testing.assert_allclose(used(found), 0.5 * RADIUS / 0.2 / 25.0, rtol=1e-12)
    assert not np.any(found.left_out)


def test_water_adds_thrust_and_no_moment():
    """Of 0.5 MPa on the ring, 0.2 are water: the ground's 0.3 alone presses unequally."""
    check = CompositeLining(BONDED)
    wet, dry = (
        check.lining(sections, CONCRETE).states[0].forces
        for sections in (under([0.5], 0.5, [0.2]), under([0.3], 0.5))
    )
    np.testing.assert_allclose(wet.mean_thrust_mn_per_m, 0.5 * RADIUS, rtol=1e-12)
    np.testing.assert_allclose(wet.moment_swing_mnm_per_m, dry.moment_swing_mnm_per_m, rtol=1e-12)


def test_no_angle_uses_the_lining_more_than_the_one_that_is_reported():
    sections = under([0.5, 0.1], 0.4)
    check = CompositeLining(BONDED)
    found = check.evaluate(sections, BOTH)
    everywhere = [
        utilisation_at(state.forces, [state.part], 1.0, np.full(4, angle))
        for state in check.lining(sections, BOTH).states
        for angle in np.linspace(0, 90, 181)
    ]
    np.testing.assert_allclose(np.max(everywhere, axis=0), used(found), rtol=1e-12)


def test_shotcrete_without_tensile_strength_fails_where_it_is_in_tension():
    brittle = CompositeLining({**BONDED, "lining_tensile_strength_mpa": 0.0})
    sections = under([0.02], 0.1, deformation_modulus_mpa=100.0)
    found = brittle.evaluate(sections, CONCRETE)
    tensile = found.capacity == 0
    assert np.any(tensile)
    assert np.all(found.demand[tensile] > 0)
    assert np.all(np.isfinite(found.demand))


def young(pressure: float, worst: float, share: float, ratio: float = 1.0) -> api.Sections:
    """A ring that hardens, used most under a pressure when it had a share of its strength."""
    return under(
        [pressure],
        ratio,
        worst_pressure_mpa_1=worst,
        worst_capacity_mpa_1=share * 1.2,
        element_capacity_mpa_1=1.2,
    )


def test_a_ring_that_hardens_is_used_most_while_young():
    """0.3 R / 0.2 against 0.2 x 25 MPa is more than 0.5 R / 0.2 against 25."""
    found = CompositeLining(FULL).evaluate(young(0.5, 0.3, 0.2), CONCRETE)
    np.testing.assert_allclose(found.demand, 0.3 * RADIUS / 0.2, rtol=1e-12)
    np.testing.assert_allclose(found.capacity, 0.2 * 25.0, rtol=1e-12)


def test_a_ring_that_hardened_before_it_was_loaded_is_used_most_at_rest():
    found = CompositeLining(FULL).evaluate(young(0.5, 0.3, 0.9), CONCRETE)
    np.testing.assert_allclose(found.capacity, 25.0)


def test_young_shotcrete_cracks_with_the_tensile_strength_of_its_age():
    """The face that is in tension has 0.1 of the 2 MPa."""
    sections = young(0.05, 0.02, 0.1, ratio=0.1)
    sections = sections.with_columns({"deformation_modulus_mpa": np.full(4, 100.0)})
    found = CompositeLining(BONDED).evaluate(sections, CONCRETE)
    tensile = np.isclose(found.capacity, 0.2, rtol=1e-12)
    assert np.any(tensile)


def test_a_young_ring_has_its_moment_to_its_thrust_as_at_rest():
    states = CompositeLining(FULL).lining(young(0.5, 0.25, 0.5, ratio=0.5), CONCRETE).states
    assert [state.part.name for state in states] == ["shotcrete", "shotcrete while young"]
    rest, early = (state.forces for state in states)
    np.testing.assert_allclose(
        early.moment_swing_mnm_per_m, 0.5 * rest.moment_swing_mnm_per_m, rtol=1e-12
    )


def test_where_the_young_state_is_not_known_the_class_does_not_pass():
    found = CompositeLining(FULL).evaluate(young(0.5, np.nan, 0.5), CONCRETE)
    assert np.all(found.left_out)
    found = CompositeLining(FULL).evaluate(young(0.5, 0.3, np.nan), CONCRETE)
    assert np.all(found.left_out)


def test_forces_of_each_ring_and_state_are_told():
    one = young(0.5, 0.25, 0.5).take(np.array([1]))
    one = one.with_columns(
        {
            api.of_element("element_pressure_mpa", 1): np.array([0.1]),
            api.of_element("element_water_mpa", 1): np.zeros(1),
            api.of_element("element_acts_from_m", 1): np.zeros(1),
        }
    )
    found = CompositeLining(FULL).thrust_and_moment(one, BOTH)
    assert [ring.ring for ring in found] == ["shotcrete", "shotcrete while young", "steel_sets"]
    assert [ring.limit_thrust_mn_per_m[-1] for ring in found] == pytest.approx([5.0, 2.5, 1.175])
    for ring, pressure in zip(found, (0.5, 0.25, 0.1), strict=True):
        np.testing.assert_allclose(ring.thrust_mn_per_m, pressure * RADIUS[1], rtol=1e-12)


LATER = under([0.4, 0.15], 0.5, [0.05, 0.02])
ALIKE = under([0.4, 0.15], 0.5, [0.05, 0.02], apart_m=0.0)
EARLY = young(0.5, 0.4, 0.3, ratio=1.6)


@pytest.mark.parametrize("options", [FULL, BONDED], ids=["full-slip", "no-slip"])
@pytest.mark.parametrize(
    ("sections", "members", "face"),
    [
        (LATER, BOTH, "steel_sets, compression"),
        (ALIKE, BOTH, "steel_sets, compression"),
        (EARLY, CONCRETE, "shotcrete while young, compression"),
        (
            young(0.05, 0.02, 0.1, ratio=0.1).with_columns(
                {"deformation_modulus_mpa": np.full(4, 100.0)}
            ),
            CONCRETE,
            "shotcrete while young, tension",
        ),
    ],
    ids=["later", "alike", "young", "young-in-tension"],
)
def test_every_line_of_the_sheet_gives_what_was_computed(options, sections, members, face):
    one = sections.take(np.array([1]))
    values = {name: one[name][0] for name in one}
    check = CompositeLining(options)
    lines = check.lines(values, members)
    found = check.evaluate(one, members)
    results = {line.symbol: line for line in lines}
    assert results["demand"].meaning == f"stress of {face}"
    assert results["demand"].result == found.demand[0]
    assert results["capacity"].result == found.capacity[0]
    assert [line.symbol for line in lines if line.disagrees()] == []


def test_a_class_without_ring_has_no_lining():
    assert not CompositeLining(FULL).concerns_class((element("rock_bolts", None),))
    assert CompositeLining(FULL).concerns_class(CONCRETE)


def test_a_ring_that_acts_alone_is_left_out_with_its_reason():
    members = (*CONCRETE, element("sets", BLOCKED))
    found = CompositeLining(FULL).evaluate(under([0.5, 0.1]), members)
    assert np.all(found.left_out)
    assert found.left_out_reason == "sets: blocked"
    assert CompositeLining(FULL).thrust_and_moment(under([0.5, 0.1]), members) == ()


def test_a_section_without_modulus_is_left_out_alone():
    modulus = np.array([3000.0, np.nan, 3000.0, 3000.0])
    sections = together(0.5, 0.5)
    whole = CompositeLining(FULL).evaluate(sections, BOTH)
    part = CompositeLining(FULL).evaluate(
        sections.with_columns({"deformation_modulus_mpa": modulus}), BOTH
    )
    assert part.left_out.tolist() == [False, True, False, False]
    sound = ~part.left_out
    assert part.demand[sound].tobytes() == whole.demand[sound].tobytes()
