"""Closed ring of sprayed concrete by hand."""

import math

import numpy as np
import pytest
from tunnelcalc_shotcrete.formulas import (
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
    ring_volume_m3_per_m,
)

RADIUS = np.array([5.0])


def test_very_thin_ring_is_a_hoop():
    """K = E t / ((1 - nu^2) R^2) in plane strain, capacity strength t / R; here t / R = 1e-6."""
    thickness, modulus, nu = 5e-6, 30_000.0, 0.25
    hoop = modulus * thickness / ((1 - nu**2) * 25)
    found = ring_stiffness_mpa_per_m(RADIUS, thickness, modulus, nu)[0]
    assert found == pytest.approx(hoop, rel=2e-6)
    capacity = ring_capacity_mpa(RADIUS, thickness, 30.0)[0]
    assert capacity == pytest.approx(30.0 * 1e-6, rel=1e-6)


def test_ring_without_thickness_is_nothing():
    assert ring_stiffness_mpa_per_m(RADIUS, 0.0, 30_000.0, 0.25)[0] == 0.0
    assert ring_capacity_mpa(RADIUS, 0.0, 30.0)[0] == 0.0


def test_full_disc_is_a_solid_cylinder():
    """Thickness equal to the radius: u = p R (1 + nu)(1 - 2 nu) / E in plane strain; hoop stress
    at the centre of a pinhole is twice the pressure."""
    modulus, nu = 30_000.0, 0.25
    found = ring_stiffness_mpa_per_m(RADIUS, 5.0, modulus, nu)[0]
    assert found == pytest.approx(modulus / (5.0 * (1 + nu) * (1 - 2 * nu)), rel=1e-14)
    assert inner_hoop_stress_mpa(np.array([3.0]), RADIUS, 5.0)[0] == pytest.approx(6.0, rel=1e-15)


def test_ring_of_three_to_four_metres():
    """R = 4, r = 3: hoop stress 2 p 16 / (16 - 9) = 32/7 p; capacity 35/2 x 7/16 for 35 MPa."""
    radius = np.array([4.0])
    stress = inner_hoop_stress_mpa(np.array([1.0]), radius, 1.0)[0]
    assert stress == pytest.approx(32 / 7, rel=1e-15)
    assert ring_capacity_mpa(radius, 1.0, 35.0)[0] == pytest.approx(7.65625, rel=1e-15)


def test_capacity_is_where_the_hoop_stress_reaches_the_strength():
    radius = np.array([1.0, 3.0, 12.0])
    capacity = ring_capacity_mpa(radius, 0.3, 25.0)
    np.testing.assert_allclose(inner_hoop_stress_mpa(capacity, radius, 0.3), 25.0, rtol=1e-13)


def test_volume_is_that_of_the_ring():
    assert ring_volume_m3_per_m(np.array([4.0]), 1.0)[0] == pytest.approx(7 * math.pi, rel=1e-15)
