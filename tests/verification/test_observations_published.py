"""Estimators of the geological strength index against what their sources and a hand give.

Relations with the dry rating and Q': Hoek, Kaiser & Bawden (1995). JCond89: Hoek, Carter &
Diederichs (2013), ARMA 13-672, from memory. Block volume: Cai & Kaiser (2006), Geotech. Geol. Eng.
24, 1089-1102, from memory. Residual index: Cai et al. (2007), Int. J. Rock Mech. Min. Sci. 44,
247-265, from memory. The tables of the last two are independent calculations from the equations,
not published values.
"""

import math

import numpy as np
import pytest
from scipy.optimize import minimize_scalar

from tunnelcalc.rock_mass.observations import (
    RESIDUAL_GSI_RANGE,
    gsi_from_block_volume,
    gsi_from_jcond89_and_rqd,
    gsi_from_q_prime,
    gsi_from_rmr89_dry,
    residual_gsi,
)

VOLUMES_CM3 = np.array([1e3, 1e4, 1e5, 1e6])
BLOCKS = [
    pytest.param(1.0, [39.65, 45.36, 52.01, 59.86], id="Jc-1"),
    pytest.param(3.0, [50.34, 56.72, 64.14, 72.84], id="Jc-3"),
    pytest.param(0.3, [27.43, 32.33, 38.06, 44.84], id="Jc-0.3"),
]
RESIDUAL = [(25, 17.88), (30, 20.07), (40, 23.40), (50, 25.59), (60, 26.85)]

# Barton (2002), Int. J. Rock Mech. Min. Sci. 39, 185-216, table 6: RQD, Jn, Jr, Ja of its first and
# second row; without water and stress Q' is the Q printed there.
PUBLISHED_Q = [
    pytest.param(100, 2, 2, 1, 100, id="first-row"),
    pytest.param(90, 9, 1, 1, 10, id="second-row"),
]


def test_rating_25_and_core_quality_80_by_hand():
    """1.5 x 25 + 80 / 2 = 77.5."""
    assert gsi_from_jcond89_and_rqd(np.array([25.0]), np.array([80.0]))[0] == 77.5


def test_dry_rating_23_is_the_published_index_18():
    """The source gives both ends of its range: RMR89' >= 23 and GSI >= 18."""
    found = gsi_from_rmr89_dry(np.array([23.0, 22.9]))
    np.testing.assert_array_equal(found, [18.0, np.nan])


@pytest.mark.parametrize(("rqd", "jn", "jr", "ja", "q"), PUBLISHED_Q)
def test_index_from_a_published_quality(rqd, jn, jr, ja, q):
    """9 ln 10 = 20.723: 44 + 2 x 20.723 and 44 + 20.723."""
    assert rqd / jn * jr / ja == q
    found = gsi_from_q_prime(np.array([float(q)]))[0]
    assert round(float(found), 3) == {100: 85.447, 10: 64.723}[q]


@pytest.mark.parametrize(("joint_condition", "expected"), BLOCKS)
def test_index_over_block_volume_and_joint_condition(joint_condition, expected):
    found = gsi_from_block_volume(VOLUMES_CM3, np.full(4, joint_condition))
    np.testing.assert_array_equal(np.round(found, 2), expected)


def test_a_volume_given_in_cubic_metres_would_be_another_index():
    """One cubic metre, Jc = 1: 59.86 from 1e6 cm3; 1 in place of it gives 26.5."""
    found = gsi_from_block_volume(np.array([1e6, 1.0]), np.ones(2))
    np.testing.assert_array_equal(np.round(found, 2), [59.86, 26.5])


@pytest.mark.parametrize(("peak", "expected"), RESIDUAL)
def test_residual_index_over_the_peak_index(peak, expected):
    assert round(float(residual_gsi(np.array([float(peak)]))[0]), 2) == expected


def test_the_residual_curve_has_its_peak_where_its_range_ends():
    """Beyond it the equation itself gives 27.45 at 75 and less and less after it."""
    top = minimize_scalar(lambda g: -g * math.exp(-0.0134 * g), bounds=(1, 100), method="bounded")
    assert round(top.x, 1) == RESIDUAL_GSI_RANGE.maximum
    assert round(75 * math.exp(-0.0134 * 75), 2) == 27.45
    assert np.isnan(residual_gsi(np.array([75.0]))[0])
