"""A hardening element told afterwards by the movement of the wall, by hand."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import WEAK, curve
from unit.support.test_advance import ageing, follow, full, spring
from unit.support.test_general_equilibrium import ELASTIC, RADIUS

from tunnelcalc.pipeline.element_loads import given_at_limit_mpa
from tunnelcalc.support.element_reactions import ElementState, Spring
from tunnelcalc.support.followed import Followed
from tunnelcalc.support.general_equilibrium import general_equilibrium
from tunnelcalc.support.mobilisation import first_failure, full_mobilisation

MOVED = (-0.1, 0.0, 1.0, 2.0)
PRESSURE = (0.0, 0.0, 1.0, 3.0)


def column(*values):
    return np.array(values, float).reshape(-1, 1)


def followed(capacity_then=(9, 9, 9, 9), capacity=9.0, stiffness=4.0, pressure=PRESSURE):
    return Followed.of_history(
        column(*MOVED), column(*pressure), column(*capacity_then), full(stiffness), full(capacity)
    )


@pytest.mark.parametrize(
    ("moved", "pressure", "slope"), [(0, 0, 1), (0.5, 0.5, 1), (1.5, 2, 2), (2, 3, 4), (3, 7, 4)]
)
def test_states_are_joined_by_straight_lines_and_go_on_hard(moved, pressure, slope):
    found = followed().pressure_and_slope(full(moved))
    assert found[0][0] == pytest.approx(pressure, abs=1e-15)
    assert found[1][0] == slope


def test_hard_it_reaches_its_capacity_beyond_the_rest():
    """6 MPa more at 4 MPa/m."""
    assert followed().reaches_capacity_m[0] == 3.5
    assert followed(stiffness=0).reaches_capacity_m[0] == np.inf


def test_young_it_reaches_the_capacity_of_that_time_between_two_states():
    """Pressure less capacity is -1 at 1 m and +1 at 2 m; in the end there would be enough."""
    young = followed(capacity_then=(2, 2, 2, 2))
    assert young.reaches_capacity_m[0] == 1.5
    assert young.pressure_and_slope(full(1.5))[0][0] == 2
    assert young.state(full(1.4))[0] == ElementState.ELASTIC
    assert young.state(full(1.6))[0] == ElementState.OVERLOADED


def test_an_unloaded_element_without_strength_has_not_failed_before_it_is_loaded():
    young = followed(capacity_then=(0, 0, 5, 5))
    assert young.reaches_capacity_m[0] == 3.5


def test_capacity_is_that_of_the_time_and_in_the_end_the_final_one():
    young = followed(capacity_then=(1, 1, 2, 4))
    assert [young.capacity_at_mpa(full(m))[0] for m in (0, 0.5, 1.5, 2, 2.5)] == [1, 1.5, 3, 4, 9]


def test_an_unknown_section_stays_unknown_and_spoils_no_other():
    two = Followed.of_history(
        np.array([[0, np.nan], [1, np.nan]]),
        np.array([[0, np.nan], [1, np.nan]]),
        np.full((2, 2), 5.0),
        full(2, 2),
        full(5, 2),
    )
    np.testing.assert_array_equal(two.reaches_capacity_m, [3, np.nan])
    np.testing.assert_array_equal(two.pressure_and_slope(full(2, 2))[0], [3, np.nan])
    np.testing.assert_array_equal(two.take(np.array([0])).reaches_capacity_m, [3])


@pytest.mark.parametrize("ground", [ELASTIC, WEAK])
@pytest.mark.parametrize("capacity", [0.05, 50.0])
def test_hard_at_once_it_has_the_limits_of_the_linear_spring(ground, capacity):
    """Together with a spring that begins with it, before and after the state at rest."""
    curves = curve(**ground)
    found = follow([ageing(lambda age: 0 * age + 150), spring(70, 1)], ground)
    begins = found.begins_at_m
    of_time = np.full(found.closure_m.shape, capacity)
    hard = Followed.of_history(
        found.closure_m - begins[0],
        found.element_pressure_mpa[0],
        of_time,
        full(150),
        full(capacity),
    )
    others = [Spring(full(70), full(100.0))]
    springs = [Spring(full(150), full(capacity)), *others]
    rest = general_equilibrium(curves, RADIUS, springs, begins)
    for limit in (first_failure, full_mobilisation):
        ours = limit(curves, RADIUS, [hard, *others], begins, rest)
        theirs = limit(curves, RADIUS, springs, begins, rest)
        for one, other in zip(ours, theirs, strict=True):
            np.testing.assert_allclose(one, other, rtol=1e-9)
    free = curves.at(full(0)).closure_ratio * RADIUS
    for share_of_free in (0.1, 0.5, 0.7, 1.2):
        ways = (
            given_at_limit_mpa(parts, column(capacity, 100.0), begins, share_of_free * free, 1.5)
            for parts in ([hard, *others], springs)
        )
        np.testing.assert_allclose(*ways, rtol=1e-9)
