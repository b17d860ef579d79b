"""Ground and elements that yield, slide or break at rest, where the answer is known by hand.

The ground is elastic, 200 MPa a metre of wall: p = 200 (0.020 - u), 20 mm without support.
"""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import ELASTIC, curve
from unit.support.other_ground import Kinked, VerticalAtZero

from tunnelcalc.support.element_reactions import (
    Brittle,
    ElementState,
    FunctionReaction,
    Plateau,
    SlidingJoint,
    Spring,
)
from tunnelcalc.support.general_equilibrium import general_equilibrium
from tunnelcalc.support.mobilisation import NO_ELEMENT, first_failure, full_mobilisation

RADIUS = np.array([5.0])
(ELASTIC_STATE, YIELDING, SLIPPING, USED_UP, OVERLOADED, FAILED) = list(ElementState)[2:]


def one(*values):
    return [np.array([float(value)]) for value in values]


def rest(reactions, installed, ground=ELASTIC):
    rows = np.array(installed, float).reshape(-1, 1)
    return general_equilibrium(curve(**ground), RADIUS, reactions, rows)


def limits(reactions, installed):
    rows = np.array(installed, float).reshape(-1, 1)
    found = general_equilibrium(curve(**ELASTIC), RADIUS, reactions, rows)
    arguments = (curve(**ELASTIC), RADIUS, reactions, rows, found)
    return first_failure(*arguments), full_mobilisation(*arguments)


def check(found, closure, pressures, states):
    assert found.converged[0]
    assert found.closure_m[0] == pytest.approx(closure, rel=1e-11)
    np.testing.assert_allclose(found.element_pressure_mpa[:, 0], pressures, rtol=1e-10)
    assert found.support_pressure_mpa[0] == pytest.approx(sum(pressures), rel=1e-11)
    assert found.element_state[:, 0].tolist() == states


def test_no_elements_leave_the_unsupported_state():
    found = rest([], [])
    check(found, 0.02, [], [])
    first, full = limits([], [])
    for limit in (first, full):
        assert (limit.closure_m[0], limit.element[0]) == (np.inf, NO_ELEMENT)
        assert not limit.reached[0]


def test_spring_below_and_beyond_its_capacity():
    """300 MPa/m from 10 mm: 14 mm and 1.2 MPa, whatever its capacity."""
    check(rest([Spring(*one(300, 1.5))], [0.01]), 0.014, [1.2], [ELASTIC_STATE])
    check(rest([Spring(*one(300, 1.0))], [0.01]), 0.014, [1.2], [OVERLOADED])


def test_plateau_lets_the_wall_move_on():
    """0.6 MPa: the wall moves to 20 - 0.6 / 200 = 17 mm."""
    check(rest([Plateau(*one(300, 0.6))], [0.01]), 0.017, [0.6], [YIELDING])


def test_yielding_neighbour_loads_the_spring():
    """Spring 300 from 10 mm beside a plateau of 0.6 from 10 mm: 200 (20 - u) = 300 (u - 10) + 600
    in mm and kPa gives u = 12.8 mm, the spring 0.84 MPa."""
    pair = [Spring(*one(300, 1)), Plateau(*one(1000, 0.6))]
    check(rest(pair, [0.01, 0.01]), 0.0128, [0.84, 0.6], [ELASTIC_STATE, YIELDING])


def test_brittle_neighbour_sheds_its_load():
    """Whole, 300 and 500 from 10 mm stop the wall at 12 mm with 0.6 and 1.0 MPa; broken at 0.9
    (11.8 mm), the spring alone stops it at 14 mm with 1.2 MPa."""
    for capacity, closure, pressures, state in (
        (1.0 + 1e-9, 0.012, [0.6, 1.0], ELASTIC_STATE),
        (0.9, 0.014, [1.2, 0.0], FAILED),
    ):
        pair = [Spring(*one(300, 2)), Brittle(*one(500, capacity))]
        check(rest(pair, [0.01, 0.01]), closure, pressures, [ELASTIC_STATE, state])


def test_breaks_follow_one_another():
    """Three brittle springs of 300 from 10 mm, at rest at 11.82 mm with 0.545 MPa each. The first
    breaks at 0.5; two would hold at 12.5 mm with 0.75 each, but the second breaks at 0.7; the last
    holds at 14 mm with 1.2."""
    three = [Brittle(*one(300, capacity)) for capacity in (0.7, 0.5, 1.3)]
    check(rest(three, [0.01] * 3), 0.014, [0, 0, 1.2], [FAILED, FAILED, ELASTIC_STATE])
    three[2] = Brittle(*one(300, 1.1))
    check(rest(three, [0.01] * 3), 0.02, [0, 0, 0], [FAILED] * 3)


def test_elements_that_break_together_both_break():
    pair = [Brittle(*one(300, 0.3)), Brittle(*one(600, 0.6))]
    check(rest(pair, [0.01, 0.01]), 0.02, [0, 0], [FAILED, FAILED])


def test_first_state_at_rest_is_the_one_that_counts():
    """A brittle spring that holds stays, although without it there would be rest as well."""
    pair = [Brittle(*one(500, 1.0001)), Spring(*one(300, 9))]
    assert rest(pair, [0.01, 0.01]).element_state[0, 0] == ELASTIC_STATE


def test_break_waits_for_an_element_installed_later():
    """Brittle 300 from 10 mm with 0.9 breaks at 13 mm. 500 from 12 mm holds the wall just there
    (0.9 and 0.5 MPa, see the linear case); from 13.5 mm it comes too late: then it holds alone at
    200 (20 - u) = 500 (u - 13.5), u = 15.357 mm."""
    brittle, late = Brittle(*one(300, 0.9 + 1e-9)), Spring(*one(500, 9))
    check(rest([brittle, late], [0.010, 0.012]), 0.013, [0.9, 0.5], [ELASTIC_STATE] * 2)
    closure = (0.2 * 20 + 0.5 * 13.5) / 0.7 / 1000
    expected = [0, 500 * (closure - 0.0135)]
    check(rest([brittle, late], [0.010, 0.0135]), closure, expected, [FAILED, ELASTIC_STATE])


@pytest.mark.parametrize(
    ("travel", "closure", "pressure", "state"),
    [(0.02, 0.0175, 0.5, SLIPPING), (0.004, 0.0164, 0.72, USED_UP)],
)
def test_sliding_joint(travel, closure, pressure, state):
    """300 MPa/m from 10 mm, slips at 0.5 MPa: the ground rests at 17.5 mm while it slides. With 4
    mm of travel it is stiff again: 200 (20 - u) = 300 (u - 14), u = 16.4 mm, 0.72 MPa."""
    joint = SlidingJoint(*one(300, 0.5, travel, 2))
    check(rest([joint], [0.01]), closure, [pressure], [state])


def test_ring_acts_only_from_the_closure_at_which_it_is_closed():
    """A plateau of 0.2 from 10 mm alone rests at 19 mm; a ring closed at 15 mm takes part."""
    pair = [Plateau(*one(1000, 0.2)), Spring(*one(300, 9))]
    found = rest(pair, [0.010, 0.015])
    closure = (200 * 0.020 + 300 * 0.015 - 0.2) / 500
    check(found, closure, [0.2, 300 * (closure - 0.015)], [YIELDING, ELASTIC_STATE])
    unloaded = rest(pair, [0.010, 0.0195])
    assert unloaded.element_state[1, 0] == ElementState.NOT_ACTING
    assert unloaded.closure_m[0] == pytest.approx(0.019)


def test_function_agrees_with_the_ready_element():
    plateau = Plateau(*one(300, 0.6))
    function = FunctionReaction.of_function(plateau.pressure_and_slope, *one(0.6, 5))
    one_, other = rest([plateau], [0.01]), rest([function], [0.01])
    assert one_.closure_m[0] == other.closure_m[0]
    assert other.element_state[0, 0] == YIELDING


@pytest.mark.parametrize("stiffness", [1e6, 1e9, 1e12])
def test_rigid_yielding_support(stiffness):
    """Held at 15 mm the ground needs 1 MPa: less than 2 MPa, so that nothing yields."""
    found = rest([Plateau(*one(stiffness, 2))], [0.015])
    assert found.support_pressure_mpa[0] == pytest.approx(1, rel=1e3 / stiffness + 1e-12)
    assert found.element_state[0, 0] == ELASTIC_STATE
    yielded = rest([Plateau(*one(stiffness, 0.8))], [0.015])
    assert yielded.support_pressure_mpa[0] == 0.8


@pytest.mark.parametrize("kind", [Spring, Plateau, Brittle])
def test_unknown_values_spoil_their_own_section_only(kind):
    ground = curve(**(ELASTIC | {"in_situ_stress_mpa": np.array([4.0, np.nan, 4, 4, 4])}))
    stiffness = np.array([300.0, 300, np.nan, 300, 300])
    capacity = np.array([0.6, 0.6, 0.6, np.nan, 0.6])
    installed = np.array([[0.01, 0.01, 0.01, 0.01, np.nan]])
    radius = np.full(5, 5.0)
    reactions = [kind(stiffness, capacity)]
    found = general_equilibrium(ground, radius, reactions, installed)
    alone = rest([kind(*one(300, 0.6))], [0.01])
    for name in ("support_pressure_mpa", "closure_m", "plastic_ratio"):
        assert getattr(found, name)[0] == getattr(alone, name)[0]
        assert np.isnan(getattr(found, name)[[1, 2, 4]]).all()
    for limit in (first_failure, full_mobilisation):
        values = limit(ground, radius, reactions, installed, found)
        assert values.closure_m[0] == pytest.approx(0.012)
        assert np.isnan(values.closure_m[2:]).all()
        assert not values.reached[1:].any()


def test_capacity_that_is_not_known_leaves_no_state_of_a_brittle_element():
    found = rest([Brittle(*one(300, np.nan))], [0.01])
    assert not found.converged[0]
    assert found.element_state[0, 0] == ElementState.UNKNOWN


def test_limits_of_two_yielding_elements():
    """Capacities 0.6 at 12 mm and 0.9 at 15 mm. First: 12 mm with 0.6 + 0.3 x (12 - 11)... the
    second, 225 MPa/m from 11 mm, has 0.225 there. Full: 15 mm with 1.5. The ground needs 1.6 and
    1.0 MPa there, and rests between them: 200 (20 - u) = 600 + 225 (u - 11) gives 13.82 mm."""
    first, full = limits([Plateau(*one(300, 0.6)), Plateau(*one(225, 0.9))], [0.010, 0.011])
    assert first.closure_m[0] == pytest.approx(0.012)
    assert first.support_pressure_mpa[0] == pytest.approx(0.825)
    assert first.ground_pressure_mpa[0] == pytest.approx(1.6)
    assert (first.element[0], first.reached[0]) == (0, True)
    assert full.closure_m[0] == pytest.approx(0.015)
    assert full.support_pressure_mpa[0] == pytest.approx(1.5)
    assert full.ground_pressure_mpa[0] == pytest.approx(1.0)
    assert (full.element[0], full.reached[0]) == (1, False)


def test_springs_are_fully_mobilised_with_the_first_failure():
    """Nothing is declared beyond the capacity of a spring: the system ends there."""
    first, full = limits([Spring(*one(300, 0.6)), Spring(*one(225, 0.9))], [0.010, 0.011])
    for name in first._fields:
        assert getattr(first, name) == getattr(full, name), name


def test_yielding_beside_a_spring_is_mobilised_to_the_capacity_of_the_spring():
    first, full = limits([Plateau(*one(300, 0.3)), Spring(*one(300, 0.9))], [0.01, 0.01])
    assert first.closure_m[0] == pytest.approx(0.011)
    assert full.closure_m[0] == pytest.approx(0.013)
    assert full.support_pressure_mpa[0] == pytest.approx(1.2)


@pytest.mark.parametrize(
    ("capacity", "closure", "pressure", "element"),
    [(0.9, 0.0118, 0.9 + 0.54, 0), (0.2, 0.013, 0.9, 1)],
)
def test_most_that_a_breaking_system_gives(capacity, closure, pressure, element):
    """Brittle 500 beside a plateau 300 of 0.9 MPa (13 mm). Breaking late, the greatest pressure
    comes just before the break; breaking early, with the plateau alone."""
    _, full = limits([Brittle(*one(500, capacity)), Plateau(*one(300, 0.9))], [0.01, 0.01])
    assert full.closure_m[0] == pytest.approx(closure)
    assert full.support_pressure_mpa[0] == pytest.approx(pressure)
    assert full.element[0] == element


def test_failure_beyond_the_free_closure_is_not_reached():
    first, _ = limits([Spring(*one(300, 9))], [0.01])
    assert first.closure_m[0] == pytest.approx(0.04)
    assert (first.ground_pressure_mpa[0], first.reached[0]) == (0, False)


def test_ground_that_gives_way_vertically_at_zero_pressure():
    """u = 20 mm (1 - sqrt(p / 4)); with q = sqrt(p) and K = 300 from 5 mm, in MPa and m:
    q^2 = 300 (0.015 - 0.01 q), q = (-3 + sqrt(9 + 18)) / 2. A plateau of 1e-6 MPa, and of 1: u = 10
    mm. All are found although the slope at zero pressure, where the solver begins, is infinite."""
    ground = VerticalAtZero(np.full(4, 4.0), np.full(4, 0.004))
    capacity = np.array([9.0, 1e-6, 1.0, 9.0])
    found = general_equilibrium(
        ground,
        np.full(4, 5.0),
        [Plateau(np.full(4, 300.0), capacity)],
        np.array([[0.005, 0.005, 0.005, 0.021]]),
    )
    assert found.converged.all()
    root = (-3 + np.sqrt(27)) / 2
    expected = [root**2, 1e-6, 1.0, 0]
    np.testing.assert_allclose(found.support_pressure_mpa, expected, rtol=1e-10)
    np.testing.assert_allclose(found.closure_m, 0.02 * (1 - np.sqrt(expected) / 2), rtol=1e-12)


@pytest.mark.parametrize("stiffness", [1.0, 30, 50, 80, 100, 150, 200, 1e3, 1e6])
def test_ground_that_is_not_convex(stiffness):
    """Against the crossing of straight lines: R = 5 m, from 10 mm; two of them cross at a kink."""
    found = general_equilibrium(
        Kinked(np.array([4.0])), RADIUS, [Spring(*one(stiffness, 9))], np.array([[0.01]])
    )
    lines = [(0.050, 0.020, 0, 1), (0.0325, 0.0025, 1, 3), (0.1, 0.025, 3, 4)]
    crossings = []
    for closure, fall, low, high in lines:  # u = closure - fall p, p = K (u - 0.01)
        pressure = stiffness * (closure - 0.01) / (1 + stiffness * fall)
        crossings += [pressure] if low <= pressure <= high else []
    assert np.ptp(crossings) < 1e-14
    assert found.support_pressure_mpa[0] == pytest.approx(crossings[0], rel=1e-11)
