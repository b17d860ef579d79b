"""Steel sets with sliding joints by hand."""

import math

import numpy as np
import pytest
from tunnelcalc_steel_sets.sliding import (
    sliding_pressure_and_slope,
    slip_closure_m,
    slip_pressure_mpa,
)


def reaction(closures):
    """K = 20 MPa/m, slip at 0.1 MPa: slides from 5 mm on, over 40 mm of closure."""
    closure = np.array(closures)
    return sliding_pressure_and_slope(
        closure,
        stiffness_mpa_per_m=np.full(closure.size, 20.0),
        slip_pressure_mpa=np.full(closure.size, 0.1),
        slip_closure_m=0.04,
    )


def test_slip_pressure_is_thrust_over_spacing_and_radius():
    """300 kN in sets every 1.5 m, R = 4: 0.3 / 6 = 0.05 MPa."""
    assert slip_pressure_mpa(np.array([4.0]), 300.0, 1.5)[0] == pytest.approx(0.05, rel=1e-15)


def test_closure_is_the_travel_of_the_joints_over_two_pi():
    """Three joints of 200 mm: 600 / (2 pi) = 95.5 mm of closure."""
    assert slip_closure_m(200.0, 3) == pytest.approx(0.6 / (2 * math.pi), rel=1e-15)


def test_elastic_then_sliding_then_elastic():
    found = reaction([-0.01, 0.0, 0.0025, 0.02, 0.044, 0.055])
    np.testing.assert_allclose(found.pressure_mpa, [0, 0, 0.05, 0.1, 0.1, 0.3], atol=1e-15)
    np.testing.assert_array_equal(found.slope_mpa_per_m, [0.0, 20.0, 20.0, 0.0, 0.0, 20.0])


def test_pressure_has_no_jump_at_its_corners():
    for corner in (0.0, 0.005, 0.045):
        found = reaction([corner - 1e-9, corner + 1e-9]).pressure_mpa
        assert abs(found[1] - found[0]) <= 20.0 * 2.0001e-9


def test_joints_without_travel_change_nothing():
    closure = np.linspace(0, 0.02, 9)
    found = sliding_pressure_and_slope(
        closure,
        stiffness_mpa_per_m=np.full(9, 20.0),
        slip_pressure_mpa=np.full(9, 0.1),
        slip_closure_m=0.0,
    )
    np.testing.assert_array_equal(found.pressure_mpa, 20.0 * closure)
    np.testing.assert_array_equal(found.slope_mpa_per_m, 20.0)


def test_a_section_without_closure_stays_nan():
    found = reaction([np.nan, 0.02])
    np.testing.assert_array_equal(np.isnan(found.pressure_mpa), [True, False])
    np.testing.assert_array_equal(np.isnan(found.slope_mpa_per_m), [True, False])
