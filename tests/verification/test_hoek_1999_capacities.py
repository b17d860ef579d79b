"""Capacities against the fits of Hoek, Support for very weak rock (1999) [from memory].

pmax = A D^-B with D the diameter in m, sets a metre apart. The fits of shotcrete lie about a
tenth above the ring that the program computes, those of steel far above yield of ordinary steel:
they show that orders and trends are right, and are no criterion.
"""

import numpy as np
import pytest
from tunnelcalc_shotcrete.ring import Ring

FITS = [
    pytest.param(1.0, 35.0, 57.8, 0.92, id="1-m"),
    pytest.param(0.3, 35.0, 19.1, 0.92, id="300-mm"),
    pytest.param(0.15, 35.0, 10.6, 0.97, id="150-mm"),
    pytest.param(0.1, 35.0, 7.3, 0.98, id="100-mm"),
    pytest.param(0.05, 35.0, 3.8, 0.99, id="50-mm"),
    pytest.param(0.05, 11.0, 1.1, 0.97, id="50-mm-at-3-days"),
    pytest.param(0.05, 6.0, 0.6, 1.0, id="50-mm-at-half-a-day"),
]


@pytest.mark.parametrize(("thickness", "strength", "a", "b"), FITS)
def test_shotcrete_lies_a_little_below_the_fit(thickness, strength, a, b):
    diameter = np.array([6.0, 10.0, 14.0])
    fit = a * diameter**-b
    ring = Ring(thickness, 20_000.0, 0.2, strength, thin=False)
    _, capacity = ring.spring(diameter / 2)
    ratio = fit / capacity
    assert np.all((ratio > 1.0) & (ratio < 1.16)), ratio


def test_300_mm_at_10_m():
    """2.30 MPa by the fit, 2.04 by the ring: an independent calculation."""
    _, capacity = Ring(0.3, 20_000.0, 0.2, 35.0, thin=False).spring(np.array([5.0]))
    assert pytest.approx(2.296, abs=5e-4) == 19.1 * 10**-0.92
    assert capacity[0] == pytest.approx(2.04, abs=5e-3)
