"""Vlachopoulos & Diederichs (2009), Rock Mech. Rock Eng. 42, 131-146: closure along the drive.

The equations are from memory; the table is an independent calculation from them, not published.
"""

import math

import numpy as np
import pytest

from tunnelcalc.ground_reaction.closure_profile import vlachopoulos_diederichs_2009

DISTANCE_IN_RADII = np.array([-1.0, 0.0, 0.5, 1.0, 2.0, 4.0])
BY_PLASTIC_RADIUS = [
    pytest.param(1.0, [0.1055, 0.2869, 0.6632, 0.8409, 0.9645, 0.9982], id="elastic"),
    pytest.param(2.0, [0.0908, 0.2469, 0.4824, 0.6443, 0.8320, 0.9625], id="Rp-2R"),
    pytest.param(4.0, [0.0673, 0.1829, 0.3226, 0.4384, 0.6140, 0.8177], id="Rp-4R"),
    pytest.param(8.0, [0.0369, 0.1004, 0.1809, 0.2542, 0.3817, 0.5751], id="Rp-8R"),
]


@pytest.mark.parametrize("radius", [1.0, 5.2])
@pytest.mark.parametrize(("plastic_ratio", "expected"), BY_PLASTIC_RADIUS)
def test_share_of_the_final_closure(plastic_ratio, expected, radius):
    found = vlachopoulos_diederichs_2009(
        DISTANCE_IN_RADII * radius, np.full(6, radius), np.full(6, plastic_ratio * radius)
    )
    np.testing.assert_array_equal(np.round(found, 4), expected)


@pytest.mark.parametrize("plastic_ratio", [1e2, 1e8, 1e14, 1e16, 1e25, 1e100])
def test_a_small_share_beside_a_deep_plastic_zone_keeps_its_digits(plastic_ratio):
    """Far behind 1 / plastic_ratio the share is z = 1.5 X / R* plus u0: both exact to doubles."""
    found = vlachopoulos_diederichs_2009(
        np.array([1.0]), np.array([5.0]), np.array([5.0 * plastic_ratio])
    )
    z = 1.5 * 0.2 / plastic_ratio
    at_face = math.exp(-0.15 * plastic_ratio) / 3
    series = z - z**2 / 2 + z**3 / 6 - z**4 / 24  # 1 - exp(-z) for small z
    np.testing.assert_allclose(found, at_face * math.exp(-z) + series, rtol=1e-12)
    assert found[0] > 0
