"""Stresses before the tunnel, by hand."""

import numpy as np
import pytest

from tunnelcalc.rock_mass.in_situ_stress import (
    largest_wall_stress_mpa,
    mean_stress_mpa,
    vertical_stress_mpa,
)


def test_vertical_stress_is_the_weight_down_to_the_axis():
    """25 kN/m3 over 100 m of cover and 4 m of radius: 2600 kPa."""
    found = vertical_stress_mpa(np.array([100.0]), np.array([25.0]), np.array([4.0]))
    assert found[0] == 2.6


def test_cover_alone_would_leave_out_a_quarter_of_a_shallow_tunnels_stress():
    """20 m of cover, 5.2 m of radius: 5.2 / 20 = 26 per cent more than cover alone."""
    found = vertical_stress_mpa(np.array([20.0]), np.array([25.0]), np.array([5.2]))
    assert found[0] / (25 * 20 / 1000) == pytest.approx(1.26, rel=1e-12)


def test_mean_stress_of_a_hydrostatic_field_is_the_vertical_stress():
    stress = np.array([0.3, 7.0, 40.0])
    np.testing.assert_array_equal(mean_stress_mpa(stress, np.ones(3)), stress)


def test_mean_stress_lies_half_way_between_vertical_and_horizontal():
    np.testing.assert_allclose(mean_stress_mpa(np.full(2, 4.0), np.array([0.5, 2.0])), [3, 6])


def test_wall_stress_of_an_unequal_field_is_understated_by_the_mean_stress():
    """k0 = 0.5: 3 sv - 0.5 sv = 2.5 sv on the wall, where the mean gives 2 x 0.75 sv = 1.5 sv."""
    vertical, ratio = np.array([4.0]), np.array([0.5])
    exact = largest_wall_stress_mpa(vertical, ratio)
    assert exact[0] / (2 * mean_stress_mpa(vertical, ratio)[0]) == pytest.approx(5 / 3, rel=1e-15)


def test_section_with_nan_spoils_no_other():
    cover = np.array([10.0, np.nan, 30.0])
    found = vertical_stress_mpa(cover, np.full(3, 20.0), np.full(3, 5.0))
    np.testing.assert_array_equal(np.isnan(found), [False, True, False])
    np.testing.assert_allclose(found[[0, 2]], [0.3, 0.7], rtol=1e-15)
