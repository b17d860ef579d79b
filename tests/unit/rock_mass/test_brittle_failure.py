"""Spalling of massive rock where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass.brittle_failure import burst_ratio, spalling_depth_m


def test_depth_is_exactly_0_up_to_0_408_of_the_intact_strength():
    share = np.array([0, 0.2, 0.4, 0.408, 0.409])
    found = spalling_depth_m(share * 100, np.full(5, 100.0), np.full(5, 5.0))
    np.testing.assert_array_equal(found[:4], 0)
    assert found[4] == pytest.approx(5 * 1.25 * 0.001, rel=1e-9)


def test_depth_where_the_wall_bears_the_intact_strength():
    """0.49 + 1.25 - 1 = 0.74 of the radius."""
    found = spalling_depth_m(np.array([80.0]), np.array([80.0]), np.array([4.0]))
    assert found[0] == pytest.approx(2.96, rel=1e-15)


def test_a_tensile_wall_does_not_spall():
    assert spalling_depth_m(np.array([-5.0]), np.array([80.0]), np.array([4.0]))[0] == 0


def test_depth_without_an_intact_strength_is_unknown():
    found = spalling_depth_m(np.full(4, 50.0), np.array([0, -80, np.nan, 50]), np.ones(4))
    np.testing.assert_array_equal(np.isnan(found), [True, True, True, False])


def test_an_unknown_stress_is_not_a_sound_wall():
    assert np.isnan(spalling_depth_m(np.array([np.nan]), np.ones(1), np.ones(1))[0])


def test_burst_ratio_is_strength_over_stress():
    found = burst_ratio(np.full(4, 120.0), np.array([24, 0, -3, np.nan]))
    np.testing.assert_array_equal(found, [5, np.nan, np.nan, np.nan])


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        spalling_depth_m(np.ones(2), np.ones(3), np.ones(2))
    with pytest.raises(ShapeError, match="same length"):
        burst_ratio(np.ones(2), np.ones(3))
