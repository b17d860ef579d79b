"""Kirsch, Z. VDI 42 (1898) 797-807; Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970),
art. 35: a plate with a round hole under a one-way stress S carries 3 S and -S on the hole's edge.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass.in_situ_stress import largest_wall_stress_mpa

CASES = [
    pytest.param(1e-300, 3.0, id="one-way-3S"),
    pytest.param(1.0, 2.0, id="equal-2S"),
    pytest.param(0.5, 2.5, id="half-as-much-sideways"),
    pytest.param(2.0, 5.0, id="twice-as-much-sideways"),
    pytest.param(3.0, 8.0, id="three-times-sideways-3x3-1"),
]


@pytest.mark.parametrize(("stress_ratio", "factor"), CASES)
def test_largest_hoop_stress_on_the_wall(stress_ratio, factor):
    """Of a vertical S and a horizontal k S, each side adds 3 times its own, less the other's."""
    found = largest_wall_stress_mpa(np.array([2.5]), np.array([stress_ratio]))
    np.testing.assert_allclose(found, [2.5 * factor], rtol=1e-14)
