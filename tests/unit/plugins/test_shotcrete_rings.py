"""Thick and thin rings whose stiffness and strength differ by section."""

import numpy as np
import pytest
from tunnelcalc_shotcrete.formulas import ring_capacity_mpa, ring_stiffness_mpa_per_m
from tunnelcalc_shotcrete.rings import (
    thick_ring_capacity_mpa,
    thick_ring_stiffness_mpa_per_m,
    thin_ring_capacity_mpa,
    thin_ring_hoop_stress_mpa,
    thin_ring_stiffness_mpa_per_m,
)

RADIUS = np.array([4.0, 4.0, 4.0])


def test_each_section_has_its_own_modulus_and_strength():
    modulus = np.array([0.0, 10_000.0, 30_000.0])
    found = thick_ring_stiffness_mpa_per_m(RADIUS, 0.3, modulus, 0.2)
    wanted = [ring_stiffness_mpa_per_m(RADIUS[:1], 0.3, m, 0.2)[0] for m in modulus]
    np.testing.assert_allclose(found, wanted, rtol=1e-14)
    strength = np.array([0.0, 10.0, 30.0])
    found = thick_ring_capacity_mpa(RADIUS, 0.3, strength)
    wanted = [ring_capacity_mpa(RADIUS[:1], 0.3, s)[0] for s in strength]
    np.testing.assert_allclose(found, wanted, rtol=1e-14)


def test_capacities_differ_by_one_less_half_the_slenderness():
    """t = 0.4, R = 4: inner face yields at 0.95 of the pressure of the whole thickness."""
    strength = np.full(3, 30.0)
    thin = thin_ring_capacity_mpa(RADIUS, 0.4, strength)
    np.testing.assert_allclose(thin, 3.0, rtol=1e-15)
    np.testing.assert_allclose(thick_ring_capacity_mpa(RADIUS, 0.4, strength), 2.85, rtol=1e-14)
    np.testing.assert_allclose(thin_ring_hoop_stress_mpa(thin, RADIUS, 0.4), 30.0, rtol=1e-15)


@pytest.mark.parametrize("poisson", [0.0, 0.2, 0.45])
def test_stiffness_of_the_thin_ring_tends_to_that_of_lame(poisson):
    """The difference falls with t / R: nu / (1 - nu) t / R to first order."""
    for slenderness in (1e-3, 1e-4):
        modulus = np.full(3, 30_000.0)
        thin = thin_ring_stiffness_mpa_per_m(RADIUS, 4 * slenderness, modulus, poisson)
        thick = thick_ring_stiffness_mpa_per_m(RADIUS, 4 * slenderness, modulus, poisson)
        first = poisson / (1 - poisson) * slenderness
        np.testing.assert_allclose(thick / thin - 1, first, atol=3 * slenderness**2)
