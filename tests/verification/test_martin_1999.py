"""Martin, Kaiser & McCreath (1999), Can. Geotech. J. 36, 136-151: depth of brittle failure.

The relation is from memory; the depths over the radius are independent calculations from it.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass.brittle_failure import SPALLING_SCATTER, spalling_depth_m
from tunnelcalc.rock_mass.in_situ_stress import largest_wall_stress_mpa


def test_depth_over_radius():
    share = np.array([0.5, 0.6, 0.8, 1.0])
    found = spalling_depth_m(share, np.ones(4), np.ones(4))
    np.testing.assert_array_equal(np.round(found, 3), [0.115, 0.24, 0.49, 0.74])


def test_failure_begins_near_two_fifths_of_the_intact_strength():
    """Published: spalling begins when smax / sci is above about 0.4, whatever the scatter."""
    assert SPALLING_SCATTER == 0.1
    shares = np.linspace(0.3, 0.5, 2001)
    depths = spalling_depth_m(shares, np.ones(2001), np.ones(2001))
    assert round(float(shares[depths > 0][0]), 1) == 0.4


def test_depth_from_in_situ_stresses():
    """sv 20, sh 40, sci 120: smax = 3 x 40 - 20 = 100, depth (1.25 x 100/120 - 0.51) x 3."""
    wall = largest_wall_stress_mpa(np.array([20.0]), np.array([2.0]))
    found = spalling_depth_m(wall, np.array([120.0]), np.array([3.0]))
    assert found[0] == pytest.approx((1.25 * 100 / 120 - 0.51) * 3, rel=1e-14)
