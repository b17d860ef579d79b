"""Ground that never yields: u / R = (p0 - pi) / (2 G)."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import STRONG
from unit.ground_reaction.sound_ground import curve as hoek_brown

from tunnelcalc.ground_reaction.elastic import ElasticCurve

STRESS = np.array([5.0, 5.0, 5.0, np.nan, 5.0, 5.0])
MODULUS = np.array([1500.0, 1500.0, 1500.0, 1500.0, np.nan, 1500.0])
PRESSURE = np.array([0.0, 1.0, 5.0, 1.0, 1.0, np.nan])


@pytest.fixture
def curve():
    return ElasticCurve.of_ground(
        in_situ_stress_mpa=STRESS, deformation_modulus_mpa=MODULUS, poisson_ratio=np.full(6, 0.3)
    )


def test_closure_by_hand(curve):
    """2 G = 1500 / 1.3."""
    found = curve.at(PRESSURE)
    np.testing.assert_allclose(
        found.closure_ratio[:3], np.array([5.0, 4.0, 0.0]) * 1.3 / 1500, rtol=1e-15
    )
    np.testing.assert_allclose(found.slope[:3], -1.3 / 1500, rtol=1e-15)
    np.testing.assert_array_equal(found.plastic_ratio[:3], 1)


def test_it_never_yields(curve):
    np.testing.assert_array_equal(curve.critical_pressure_mpa[:3], 0)


def test_section_with_nan_stays_nan(curve):
    for values in curve.at(PRESSURE):
        np.testing.assert_array_equal(np.isnan(values), [False] * 3 + [True] * 3)
    np.testing.assert_array_equal(np.isnan(curve.critical_pressure_mpa), [0, 0, 0, 1, 1, 0])


def test_curves_of_some_sections(curve):
    rows = np.array([2, 0])
    for some, every in zip(curve.take(rows).at(PRESSURE[rows]), curve.at(PRESSURE), strict=True):
        np.testing.assert_array_equal(some, every[rows])


def test_it_is_what_strong_ground_of_another_law_does(curve):
    found = curve.take(np.arange(3)).at(PRESSURE[:3])
    expected = hoek_brown(**STRONG).at(PRESSURE[:3])
    for values, others in zip(found, expected, strict=True):
        np.testing.assert_array_equal(values, np.broadcast_to(others, 3))
