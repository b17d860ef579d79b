"""Weight of the plastic zone where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass.dead_weight import plastic_zone_weight_mpa


def test_four_metres_of_25_kn_m3_weigh_a_tenth_of_a_megapascal():
    assert plastic_zone_weight_mpa(np.array([25.0]), np.array([9.0]), np.array([5.0]))[0] == 0.1


def test_elastic_ground_has_no_loose_weight():
    assert plastic_zone_weight_mpa(np.array([25.0]), np.array([5.2]), np.array([5.2]))[0] == 0


def test_a_plastic_radius_below_that_of_the_tunnel_or_unknown_gives_nothing():
    found = plastic_zone_weight_mpa(np.full(3, 25.0), np.array([4.99, np.nan, 9]), np.full(3, 5.0))
    np.testing.assert_array_equal(found, [np.nan, np.nan, 0.1])


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        plastic_zone_weight_mpa(np.ones(2), np.ones(3), np.ones(2))
