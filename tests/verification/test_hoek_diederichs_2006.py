"""Hoek & Diederichs (2006), Int. J. Rock Mech. Min. Sci. 43, 203-215.

Both equations of the modulus, from memory. The tables are independent calculations from them, not
published values; the two first tests can be followed by hand.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass.deformation_modulus import (
    hoek_diederichs_simplified_mpa,
    hoek_diederichs_with_intact_modulus_mpa,
)

QUALITY = np.array([25.0, 40.0, 50.0, 60.0, 75.0, 90.0])

SIMPLIFIED = [
    pytest.param(0.0, [1050, 3986, 9341, 20365, 50000, 79635], id="D-0"),
    pytest.param(0.5, [255, 986, 2401, 5689, 18224, 41743], id="D-0.5"),
    pytest.param(1.0, [55, 213, 525, 1284, 4670, 14359], id="D-1"),
]
SHARE_OF_INTACT = [
    pytest.param(0.0, [0.05986, 0.15965, 0.30719, 0.52000, 0.81635, 0.95862], id="D-0"),
    pytest.param(0.5, [0.03542, 0.07689, 0.14694, 0.27189, 0.51811, 0.68412], id="D-0.5"),
    pytest.param(1.0, [0.02525, 0.03993, 0.06670, 0.12182, 0.27000, 0.41818], id="D-1"),
]


def test_simplified_form_gives_half_of_100_gpa_at_gsi_75():
    """exp(0) = 1, so that 100000 / (1 + 1) = 50000 exactly."""
    found = hoek_diederichs_simplified_mpa(np.array([75.0]), np.zeros(1))
    assert found[0] == 50_000


def test_form_with_intact_modulus_gives_52_per_cent_at_gsi_60():
    """exp(0) = 1, so that 0.02 + 1 / (1 + 1) = 0.52 exactly."""
    found = hoek_diederichs_with_intact_modulus_mpa(
        np.array([60.0]), np.zeros(1), np.array([10_000.0])
    )
    assert found[0] == 5_200


@pytest.mark.parametrize(("disturbance", "expected"), SIMPLIFIED)
def test_simplified_form_over_quality_and_disturbance(disturbance, expected):
    found = hoek_diederichs_simplified_mpa(QUALITY, np.full(6, disturbance))
    np.testing.assert_array_equal(np.round(found), expected)


@pytest.mark.parametrize(("disturbance", "expected"), SHARE_OF_INTACT)
def test_form_with_intact_modulus_over_quality_and_disturbance(disturbance, expected):
    found = hoek_diederichs_with_intact_modulus_mpa(QUALITY, np.full(6, disturbance), np.ones(6))
    np.testing.assert_array_equal(np.round(found, 5), expected)


def test_simplified_form_exceeds_the_modulus_of_weak_intact_rock():
    """sci 10 MPa and modulus ratio 250 make Ei = 2500 MPa; GSI 50 alone gives 9341 MPa."""
    simplified = hoek_diederichs_simplified_mpa(np.array([50.0]), np.zeros(1))
    detailed = hoek_diederichs_with_intact_modulus_mpa(
        np.array([50.0]), np.zeros(1), np.array([2500.0])
    )
    assert round(float(simplified[0])) == 9341
    assert round(float(detailed[0])) == 768
