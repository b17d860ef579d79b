"""The straight strength line where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import mohr_coulomb


def of(function, *values):
    """The result of one section."""
    found = function(*(np.array([float(value)]) for value in values))
    assert found.shape == (1,)
    return float(found[0])


def test_slope_is_1_without_friction_and_3_at_30_degrees():
    assert of(mohr_coulomb.slope, 0) == 1.0
    assert of(mohr_coulomb.slope, 30) == pytest.approx(3.0, rel=1e-15)


@pytest.mark.parametrize("angle", [1, 17.5, 45, 60, 80, 89])
def test_slope_is_the_squared_tangent_of_45_degrees_and_half_the_angle(angle):
    expected = np.tan(np.radians(45 + angle / 2)) ** 2
    assert of(mohr_coulomb.slope, angle) == pytest.approx(expected, rel=1e-11)


def test_unconfined_strength_is_twice_the_cohesion_without_friction():
    assert of(mohr_coulomb.unconfined_strength_mpa, 1.5, 0) == 3.0


def test_unconfined_strength_at_30_degrees_is_2_root_3_times_the_cohesion():
    found = of(mohr_coulomb.unconfined_strength_mpa, 0.5, 30)
    assert found == pytest.approx(np.sqrt(3), rel=1e-15)


def test_without_cohesion_there_is_no_unconfined_strength():
    assert of(mohr_coulomb.unconfined_strength_mpa, 0, 35) == 0.0


def test_strength_difference_is_the_unconfined_strength_and_twice_the_stress_at_30_degrees():
    found = of(mohr_coulomb.strength_difference_mpa, 2, 0.5, 30)
    assert found == pytest.approx(np.sqrt(3) + 4, rel=1e-15)


def test_strength_difference_without_friction_does_not_depend_on_the_stress():
    assert of(mohr_coulomb.strength_difference_mpa, 1e6, 0.5, 0) == 1.0
    assert of(mohr_coulomb.strength_difference_mpa, -1e6, 0.5, 0) == 1.0


def test_shear_strength_at_45_degrees_is_cohesion_and_normal_stress():
    assert of(mohr_coulomb.shear_strength_mpa, 2, 0.5, 45) == pytest.approx(2.5, rel=1e-15)


def test_no_shear_strength_beyond_the_tip():
    assert of(mohr_coulomb.shear_strength_mpa, -1, 1, 44.9) > 0
    assert np.isnan(of(mohr_coulomb.shear_strength_mpa, -1, 1, 45.1))
    assert np.isnan(of(mohr_coulomb.shear_strength_mpa, -0.001, 0, 30))
    assert of(mohr_coulomb.shear_strength_mpa, -5, 1, 0) == 1.0


THREE = [
    (mohr_coulomb.shear_strength_mpa, (1, 0.5, 30)),
    (mohr_coulomb.strength_difference_mpa, (1, 0.5, 30)),
    (mohr_coulomb.unconfined_strength_mpa, (0.5, 30)),
    (mohr_coulomb.slope, (30,)),
]


@pytest.mark.parametrize("angle", [-0.001, 90, 180, np.inf, np.nan])
@pytest.mark.parametrize(("function", "values"), THREE)
def test_an_angle_that_is_no_friction_angle_gives_nothing(function, values, angle):
    assert np.isfinite(of(function, *values))
    assert np.isnan(of(function, *values[:-1], angle))


def test_an_angle_whose_sine_rounds_to_1_gives_nothing():
    assert np.isnan(of(mohr_coulomb.slope, 90 - 1e-9))
    assert np.isfinite(of(mohr_coulomb.slope, 90 - 1e-5))


@pytest.mark.parametrize("cohesion", [-0.001, np.inf, np.nan])
def test_a_cohesion_that_is_none_gives_nothing(cohesion):
    for function, values in THREE[:3]:
        assert np.isnan(of(function, *values[:-2], cohesion, 30))


def test_columns_of_different_length_are_refused():
    two, three = np.ones(2), np.ones(3)
    with pytest.raises(ShapeError, match="same length"):
        mohr_coulomb.unconfined_strength_mpa(two, three)
    for function in (mohr_coulomb.shear_strength_mpa, mohr_coulomb.strength_difference_mpa):
        for position in range(3):
            columns = [two, two, two]
            columns[position] = three
            with pytest.raises(ShapeError, match="same length"):
                function(*columns)
