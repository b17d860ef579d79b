"""Reactions of single elements, by hand: 100 MPa/m everywhere, so that 10 mm are 1 MPa."""

import numpy as np
import pytest

from tunnelcalc.support.element_reactions import (
    Brittle,
    ElementState,
    FunctionReaction,
    Plateau,
    SlidingJoint,
    Spring,
)

MOVED = np.array([0.0, 0.005, 0.010, 0.015, 0.030, 0.045, np.nan])
STIFF = np.full(MOVED.size, 100.0)
ONE = np.ones(MOVED.size)
UNKNOWN, NOT_ACTING, ELASTIC, YIELDING, SLIPPING, USED_UP, OVERLOADED, FAILED = ElementState


def joint(capacity):
    """Slides at 1 MPa from 10 mm to 30 mm, then stiff again: 2.5 MPa at 45 mm."""
    return SlidingJoint(STIFF, ONE, 0.02 * ONE, capacity * ONE)


def test_spring_goes_on_beyond_its_capacity_and_is_then_overloaded():
    spring = Spring(STIFF, ONE)
    pressure, slope = spring.pressure_and_slope(MOVED)
    np.testing.assert_allclose(pressure, [0, 0.5, 1, 1.5, 3, 4.5, np.nan])
    assert np.all(slope == 100)
    assert spring.state(MOVED).tolist() == [
        *(NOT_ACTING, ELASTIC, ELASTIC, OVERLOADED, OVERLOADED, OVERLOADED, UNKNOWN)
    ]
    np.testing.assert_allclose(spring.reaches_capacity_m, 0.01)
    np.testing.assert_allclose(spring.holds_until_m, 0.01)


def test_plateau_keeps_its_capacity():
    plateau = Plateau(STIFF, ONE)
    pressure, slope = plateau.pressure_and_slope(MOVED)
    np.testing.assert_allclose(pressure, [0, 0.5, 1, 1, 1, 1, np.nan])
    np.testing.assert_array_equal(slope[:-1], [100, 100, 0, 0, 0, 0])
    assert plateau.state(MOVED).tolist() == [
        *(NOT_ACTING, ELASTIC, ELASTIC, YIELDING, YIELDING, YIELDING, UNKNOWN)
    ]
    assert np.all(plateau.holds_until_m == np.inf)


def test_brittle_element_fails_beyond_its_capacity():
    brittle = Brittle(STIFF, ONE)
    assert brittle.breaks
    assert brittle.state(MOVED).tolist() == [
        *(NOT_ACTING, ELASTIC, ELASTIC, FAILED, FAILED, FAILED, UNKNOWN)
    ]
    np.testing.assert_allclose(brittle.reaches_capacity_m, 0.01)


def test_joint_slides_and_is_stiff_again():
    pressure, slope = joint(2.0).pressure_and_slope(MOVED)
    np.testing.assert_allclose(pressure, [0, 0.5, 1, 1, 1, 2.5, np.nan], rtol=1e-15)
    np.testing.assert_array_equal(slope[[1, 3, 5]], [100, 0, 100])
    assert joint(2.0).state(MOVED + 1e-12).tolist() == [
        *(ELASTIC, ELASTIC, SLIPPING, SLIPPING, USED_UP, OVERLOADED, UNKNOWN)
    ]


@pytest.mark.parametrize(
    ("capacity", "reached", "holds"), [(0.5, 0.005, 0.005), (1, 0.01, 0.03), (2, 0.04, 0.04)]
)
def test_joint_reaches_its_capacity_before_in_or_after_the_slip(capacity, reached, holds):
    np.testing.assert_allclose(joint(capacity).reaches_capacity_m, reached)
    np.testing.assert_allclose(joint(capacity).holds_until_m, holds)


@pytest.mark.parametrize("kind", [Spring, Plateau, Brittle])
def test_element_without_stiffness_never_reaches_its_capacity(kind):
    element = kind(np.array([0.0, np.nan, 1.0]), np.array([1.0, 1.0, np.nan]))
    np.testing.assert_array_equal(element.reaches_capacity_m, [np.inf, np.nan, np.nan])


def hardening(moved):
    """p = 30 sqrt(m): 1 MPa at 1/900 m."""
    return 30 * np.sqrt(moved), 15 / np.sqrt(np.maximum(moved, 1e-12))


def test_function_is_searched_for_its_capacity():
    found = FunctionReaction.of_function(hardening, ONE, 5 * ONE)
    np.testing.assert_allclose(found.reaches_capacity_m, 1 / 900, rtol=1e-14)
    np.testing.assert_allclose(found.holds_until_m, 1 / 900, rtol=1e-14)
    assert found.state(MOVED)[1] == OVERLOADED


def test_function_that_never_gives_its_capacity():
    found = FunctionReaction.of_function(hardening, 100 * ONE, 5 * ONE)
    assert np.all(found.reaches_capacity_m == np.inf)


def test_function_with_a_plateau_yields():
    found = FunctionReaction.of_function(Plateau(STIFF, ONE).pressure_and_slope, ONE, 5 * ONE)
    np.testing.assert_allclose(found.reaches_capacity_m, 0.01, rtol=1e-14)
    assert np.all(found.holds_until_m == np.inf)
    assert found.state(MOVED)[4] == YIELDING


def test_function_of_some_sections_is_called_with_all():
    """A stranger's function may hold arrays of all sections."""
    stiffness = np.arange(1.0, 8.0)
    found = FunctionReaction.of_function(lambda m: (stiffness * m, stiffness), ONE, 5 * ONE)
    some = found.take(np.array([6, 2])).take(np.array([1, 0, 0]))
    pressure, slope = some.pressure_and_slope(np.array([0.1, 0.2, 0.2]))
    np.testing.assert_allclose(pressure, [0.3, 1.4, 1.4])
    np.testing.assert_array_equal(slope, [3, 7, 7])
