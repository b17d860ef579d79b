"""Vlachopoulos & Diederichs (2009), Rock Mech. Rock Eng. 42, 131-146: closure along the drive.

The equations are from memory; the table is an independent calculation from them, not published.
"""

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
