"""Water pressure and effective stresses where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass.in_situ_stress import mean_stress_mpa
from tunnelcalc.rock_mass.water import effective_stresses_mpa, water_pressure_mpa


def test_hundred_metres_of_water_press_with_0_981_mpa():
    np.testing.assert_allclose(water_pressure_mpa(np.array([0.0, 100, 1])), [0, 0.981, 0.00981])


def test_a_head_below_the_axis_is_no_pressure():
    found = water_pressure_mpa(np.array([-1, np.nan, 10]))
    np.testing.assert_array_equal(np.isnan(found), [True, True, False])


def test_water_is_taken_off_the_vertical_stress_before_the_ratio_is_applied():
    found = effective_stresses_mpa(np.array([5.0]), np.array([0.5]), np.array([1.0]))
    assert (found.vertical_mpa[0], found.horizontal_mpa[0]) == (4.0, 2.0)


def test_without_water_the_stresses_are_the_total_ones_to_the_last_bit():
    vertical, ratio = np.array([5.3, 0.1, 17.7]), np.array([0.33, 1.7, 1])
    found = effective_stresses_mpa(vertical, ratio, np.zeros(3))
    np.testing.assert_array_equal(found.vertical_mpa, vertical)
    np.testing.assert_array_equal(found.horizontal_mpa, ratio * vertical)
    np.testing.assert_allclose(
        mean_stress_mpa(vertical, ratio), (found.vertical_mpa + found.horizontal_mpa) / 2
    )


@pytest.mark.parametrize("pressure", [5, 5.001, -0.001, np.nan])
def test_water_that_leaves_no_stress_or_is_none_gives_nothing(pressure):
    found = effective_stresses_mpa(np.full(3, 5.0), np.ones(3), np.array([1, pressure, 1]))
    for stress in found:
        np.testing.assert_array_equal(stress, [4, np.nan, 4])


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        effective_stresses_mpa(np.ones(2), np.ones(2), np.ones(3))
