"""Support that hardens along the advance: limit cases, with elastic ground where by hand.

Elastic ground as beside: p = 200 (0.020 - u) in MPa and m. The profile of the tests is
share(x) = 1 - exp(-(x + 1) / 4), 22 per cent at the face.
"""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import WEAK, curve
from unit.support.test_general_equilibrium import ELASTIC

from tunnelcalc.support.advance import Begins, advance
from tunnelcalc.support.advance_step import Ageing, Constant
from tunnelcalc.support.element_reactions import Brittle, Plateau, Spring
from tunnelcalc.support.equilibrium import equilibrium
from tunnelcalc.support.pressure_table import pressure_table

FREE_M = 0.02


def share(distance):
    return 1 - np.exp(-(distance + 1) / 4)


def hardening(age):
    """200 MPa/m in the end, half of it after a day."""
    return 200 * age / (1 + age)


def full(value, count=1):
    return np.full(count, float(value))


def follow(elements, ground=ELASTIC, rate=3.0, begins=Begins.WALL, steps=48):
    curves = curve(**ground)
    count = curves.in_situ_stress_mpa.size
    radius = full(5, count)
    free = curves.at(full(0, count)).closure_ratio * radius
    table = pressure_table(curves, radius, share(full(0, count)) * free)
    return advance(curves, radius, table, share, elements, full(rate, count), begins, steps)


def ageing(stiffness=hardening, at=1.0, acts=None, count=1):
    acts = at if acts is None else acts
    return Ageing(stiffness, full(at, count), full(acts, count))


def spring(stiffness, at, capacity=100.0):
    return Constant(Spring(full(stiffness), full(capacity)), full(at))


@pytest.mark.parametrize("ground", [ELASTIC, WEAK])
def test_constant_stiffness_ends_in_the_usual_equilibrium(ground):
    """The path does not matter: p = K (U(p) - u_i), whatever the steps."""
    curves, radius = curve(**ground), full(5)
    free = curves.at(full(0)).closure_ratio * radius
    stiffness = np.array([[150.0], [70.0]])
    installed = np.broadcast_to(share(full(1)) * free, (2, 1))
    expected = equilibrium(curves, radius, stiffness, installed)
    for steps in (3, 48):
        elements = [ageing(lambda age: 0 * age + 150), spring(70, 1)]
        found = follow(elements, ground, steps=steps)
        assert found.converged[0]
        np.testing.assert_allclose(found.closure_m[-1], expected.closure_m, rtol=1e-12)
        np.testing.assert_allclose(found.element_pressure_mpa[:, -1], expected[3], rtol=1e-10)
        np.testing.assert_allclose(found.plastic_ratio, expected.plastic_ratio, rtol=1e-12)


def test_elements_counted_from_the_unsupported_profile_end_in_the_usual_equilibrium():
    """Installed one after the other, counted as `equilibrium` counts them."""
    curves, radius = curve(**WEAK), full(5)
    free = curves.at(full(0)).closure_ratio * radius
    installed = np.stack([share(full(at)) * free for at in (0.5, 1, 4)])
    stiffness = np.array([[150.0], [70.0], [200.0]])
    expected = equilibrium(curves, radius, stiffness, installed)
    elements = [spring(150, 0.5), ageing(lambda age: 0 * age + 70), spring(200, 4)]
    found = follow(elements, WEAK, begins=Begins.UNSUPPORTED)
    np.testing.assert_allclose(found.closure_m[-1], expected.closure_m, rtol=1e-12)
    np.testing.assert_allclose(found.element_pressure_mpa[:, -1], expected[3], rtol=1e-9)
    np.testing.assert_allclose(found.begins_at_m, installed, rtol=1e-13)


def test_later_element_counted_from_the_supported_wall_takes_more():
    """Elastic, by hand: 300 MPa/m from x = 1 holds the wall at x = 5 where 200 (u(5) - w) =
    300 (w - u(1)); from there 500 MPa/m more act."""
    before, at_five = (FREE_M * float(share(x)) for x in (1.0, 5.0))
    wall = (200 * at_five + 300 * before) / 500
    end = (200 * FREE_M + 300 * before + 500 * wall) / 1000
    found = follow([spring(300, 1), spring(500, 5)])
    np.testing.assert_allclose(found.begins_at_m[:, 0], [before, wall], rtol=1e-10)
    assert found.closure_m[-1, 0] == pytest.approx(end, rel=1e-10)
    expected = [300 * (end - before), 500 * (end - wall)]
    np.testing.assert_allclose(found.element_pressure_mpa[:, -1, 0], expected, rtol=1e-9)
    neglected = follow([spring(300, 1), spring(500, 5)], begins=Begins.UNSUPPORTED)
    assert neglected.element_pressure_mpa[1, -1, 0] < expected[1]
    assert neglected.closure_m[-1, 0] > end


@pytest.mark.parametrize("ground", [ELASTIC, WEAK])
def test_hardened_at_once_and_infinitely_slow_advance_are_the_final_stiffness(ground):
    constant = follow([ageing(lambda age: 0 * age + 200)], ground)
    slow = follow([ageing()], ground, rate=1e-9)
    np.testing.assert_allclose(slow.closure_m[-1], constant.closure_m[-1], rtol=1e-6)
    assert slow.support_pressure_mpa[0] == pytest.approx(constant.support_pressure_mpa[0], rel=1e-5)


def test_infinitely_fast_advance_finds_the_support_at_age_zero():
    found = follow([ageing(lambda age: 20 + hardening(age))], rate=np.inf)
    expected = follow([spring(20, 1)])
    assert np.all(found.age_days == 0)
    np.testing.assert_allclose(found.closure_m[-1], expected.closure_m[-1], rtol=1e-13)


def test_elastic_ground_by_quadrature():
    """200 (u(x) - w) = p and dp = K dw give dw = 200 du / (200 + K): one integral."""
    found = follow([ageing()], steps=200)
    distance = np.concatenate([np.linspace(1, 200, 2_000_001)])
    du = FREE_M * np.exp(-(distance + 1) / 4) / 4
    stiffness = hardening((distance - 1) / 3)
    wall = np.trapezoid(200 * du / (200 + stiffness), distance)
    load = np.trapezoid(200 * du * stiffness / (200 + stiffness), distance)
    assert found.closure_m[-1, 0] - found.closure_m[0, 0] == pytest.approx(wall, rel=1e-4)
    assert found.support_pressure_mpa[0] == pytest.approx(load, rel=1e-4)


@pytest.mark.parametrize("ground", [ELASTIC, WEAK])
def test_steps_converge_in_second_order(ground):
    loads = [follow([ageing()], ground, steps=n).support_pressure_mpa[0] for n in (12, 24, 48, 768)]
    errors = np.abs(np.array(loads[:3]) / loads[3] - 1)
    assert errors[2] < 1e-3
    assert np.all(errors[1:] < 0.35 * errors[:-1])


def test_ages_and_states_along_the_way():
    found = follow([ageing(at=1, acts=3), spring(100, 0.5)])
    distance, age = found.distance_m[:, 0], found.age_days[0, :, 0]
    assert distance[0] == 0.5
    assert np.all(np.diff(distance) >= 0)
    assert {1.0, 3.0} & set(distance.tolist()) == {3.0}
    np.testing.assert_allclose(age, np.maximum(distance - 1, 0) / 3)
    assert np.isnan(found.age_days[1]).all()
    closed = found.element_pressure_mpa[0, :, 0]
    assert np.all(closed[distance <= 3] == 0)
    assert np.all(np.diff(closed[distance >= 3]) > 0)
    assert np.all(np.diff(found.closure_m[:, 0]) > 0)
    assert found.fictitious_pressure_mpa[-1, 0] == 0
    total = found.element_pressure_mpa[:, -1].sum(axis=0)
    np.testing.assert_allclose(total, found.support_pressure_mpa, rtol=1e-14)


@pytest.mark.parametrize("days", [0.004, 0.25, 3.0])
def test_the_state_at_the_age_from_which_a_capacity_is_trusted_is_computed(days):
    """It stands among the others, and the end is the same but for the steps."""
    plain = follow([ageing()], WEAK)
    found = follow([Ageing(hardening, full(1), full(1), days)], WEAK)
    assert np.any(np.isclose(found.age_days[0, :, 0], days, rtol=1e-12))
    assert len(found.distance_m) == len(plain.distance_m) + 1
    np.testing.assert_allclose(found.support_pressure_mpa, plain.support_pressure_mpa, rtol=1e-3)


def test_ring_closed_later_carries_less():
    loads = [
        follow([ageing(at=1, acts=acts)]).support_pressure_mpa[0] for acts in (1.0, 2.0, 5.0, 20.0)
    ]
    assert np.all(np.diff(loads) < 0)


def test_yielding_element_beside_the_ring():
    """The plateau keeps its 0.3 MPa, and the ring takes the rest."""
    plateau = Constant(Plateau(full(300), full(0.3)), full(1))
    found = follow([ageing(), plateau])
    assert found.element_pressure_mpa[1].max() == 0.3
    stiff = follow([ageing(), spring(300, 1)])
    assert found.element_pressure_mpa[0, -1, 0] > stiff.element_pressure_mpa[0, -1, 0]


def test_unknown_values_spoil_their_own_section_only():
    stress = np.array([4.0, np.nan, 4.0, 4.0])
    starts = np.array([1.0, 1.0, np.nan, 1.0])
    factor = np.array([1.0, 1.0, 1.0, np.nan])
    elements = [
        Ageing(lambda age: factor * hardening(age), starts, starts),
        Constant(Spring(full(50, 4), full(1, 4)), full(1, 4)),
    ]
    found = follow(elements, ELASTIC | {"in_situ_stress_mpa": stress})
    alone = follow([ageing(), spring(50, 1, 1)])
    np.testing.assert_array_equal(found.converged, [True, False, False, False])
    np.testing.assert_array_equal(found.closure_m[:, 0], alone.closure_m[:, 0])
    np.testing.assert_array_equal(
        found.element_pressure_mpa[..., 0], alone.element_pressure_mpa[..., 0]
    )
    assert np.isnan(found.closure_m[:, 1:]).all()
    assert np.isnan(found.support_pressure_mpa[1:]).all()


def test_ages_of_the_unsupported_profile_would_understate_the_load():
    """Elastic, by quadrature: p(w) = integral of K(t(w)) dw over the unsupported closures, and its
    crossing with the ground, 200 (0.020 - w). Independent calculation."""
    distance = np.linspace(1, 100, 200_001)
    closure = FREE_M * share(distance)
    stiffness = hardening((distance - 1) / 3)
    steps = 0.5 * (stiffness[1:] + stiffness[:-1]) * np.diff(closure)
    load = np.concatenate([[0], np.cumsum(steps)])
    simpler = np.interp(0, load - 200 * (FREE_M - closure), load)
    found = follow([ageing()]).support_pressure_mpa[0]
    assert simpler == pytest.approx(0.893 * found, rel=2e-3)


def test_table_that_begins_too_late_is_refused():
    curves, radius = curve(**WEAK), full(5)
    free = curves.at(full(0)).closure_ratio * radius
    late = pressure_table(curves, radius, share(full(4)) * free)
    arguments = (curves, radius, late, share, [ageing()], full(3), Begins.WALL, 8)
    with pytest.raises(ValueError, match="after the first installation"):
        advance(*arguments)


@pytest.mark.parametrize("rate", [0.0, -1.0])
def test_advance_rate_must_be_above_zero(rate):
    with pytest.raises(ValueError, match="above 0"):
        follow([ageing()], rate=rate)


@pytest.mark.parametrize(
    ("elements", "word"),
    [
        ([], "at least one"),
        ([spring(1, -0.1)], "ahead of the face"),
        ([ageing(at=2, acts=1)], "before installed_at_m"),
        ([Constant(Brittle(full(1), full(1)), full(1))], "breaks"),
    ],
)
def test_what_cannot_be_followed_is_refused(elements, word):
    with pytest.raises(ValueError, match=word):
        follow(elements)
