"""The corners of what the inputs allow: right, or marked as not computed, and never a warning.

Combinations of the ends of the ranges, against the equations integrated by scipy. Warnings of
numpy are errors in the test run.
"""

from itertools import product

import numpy as np
import pytest
from reference import Spring, rock_mass, state_at_rest
from reference import pressure_at_closure as bracketed
from reference.ground_curve import GroundCurve
from reference.samples import CURVE_COLUMNS

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.rock_mass import hoek_brown
from tunnelcalc.rock_mass.deformation_modulus import hoek_diederichs_simplified_mpa
from tunnelcalc.support.equilibrium import equilibrium, pressure_at_closure

ENDS = {
    "gsi": (0.5, 100.0),
    "mi": (1.0, 40.0),
    "disturbance": (0.0, 1.0),
    "intact_strength_mpa": (0.5, 1000.0),
    "in_situ_stress_mpa": (0.05, 100.0),
    "dilation_deg": (0.0, 60.0),
}
CORNERS = {
    name: np.array(values)
    for name, values in zip(ENDS, zip(*product(*ENDS.values()), strict=True), strict=True)
}
COUNT = 2 ** len(ENDS)
NUMBERS = np.arange(COUNT)
CORNERS["poisson_ratio"] = np.where(NUMBERS % 3 == 0, 0.0, 0.4999)
RADIUS = np.where(NUMBERS % 5 < 2, 0.5, 30.0)
BEYOND = 1e200
"""A closure in radii for which a correct result may be missing: the range of a double is near."""
SLOW = 1e30
"""Beyond, the reference takes too long to bracket an equilibrium."""


@pytest.fixture(scope="module")
def ground():
    """Columns of all corners, with the modulus that the quality of the rock mass gives."""
    gsi, mi, disturbance = (CORNERS[name] for name in ("gsi", "mi", "disturbance"))
    constants = hoek_brown.hoek_brown_constants(gsi, mi, disturbance)._asdict()
    modulus = hoek_diederichs_simplified_mpa(gsi, disturbance)
    return CORNERS | constants | {"deformation_modulus_mpa": modulus}


@pytest.fixture(scope="module")
def curve(ground):
    return HoekBrownCurve.of_ground(**{name: ground[name] for name in CURVE_COLUMNS})


@pytest.fixture(scope="module")
def slow(ground):
    rows = zip(*(ground[name].tolist() for name in CURVE_COLUMNS), strict=True)
    return [GroundCurve(*row) for row in rows]


@pytest.fixture(scope="module")
def free(slow):
    """(n,) u / R without support, the slow way; NaN beyond the range of a double."""
    return np.array([one.unsupported[1] for one in slow])


def test_corners_reach_beyond_the_range_of_a_double_and_stay_elastic_elsewhere(curve, free):
    assert np.sum(~(free < BEYOND)) >= 4
    assert np.sum(curve.critical_pressure_mpa == 0) > 10
    assert np.sum(free < SLOW) > COUNT / 2


def test_strengths_and_straight_line(ground):
    sci, mb, s, a = (ground[name] for name in ("intact_strength_mpa", "mb", "s", "a"))
    whole = hoek_brown.global_strength_mpa(sci, mb, s, a)
    confinement = hoek_brown.tunnel_confinement_mpa(whole, ground["in_situ_stress_mpa"])
    line = hoek_brown.equivalent_mohr_coulomb(sci, mb, s, a, confinement)
    for section in range(COUNT):
        rock = rock_mass.Criterion(*(float(v[section]) for v in (sci, mb, s, a)))
        expected = rock_mass.tunnel_line(rock, float(ground["in_situ_stress_mpa"][section]))
        found = (line.friction_angle_deg[section], line.cohesion_mpa[section])
        np.testing.assert_allclose(
            found, (expected.friction_angle_deg, expected.cohesion), rtol=1e-10
        )


def test_unsupported_ground(curve, slow, free):
    """Achieved: 5e-11 of the closure, 7e-13 of the plastic radius."""
    found = curve.at(np.zeros(COUNT))
    known = np.isfinite(found.closure_ratio)
    np.testing.assert_array_equal(known[free < BEYOND], True)
    plastic_ratio = np.array([one.unsupported[0] for one in slow])
    np.testing.assert_allclose(found.closure_ratio[known], free[known], rtol=2e-10)
    np.testing.assert_allclose(found.plastic_ratio[known], plastic_ratio[known], rtol=5e-12)


@pytest.mark.parametrize("stiffness", [0.0, 1.0, 1e4, 1e9], ids=lambda k: f"{k:g}-MPa-per-m")
def test_support_at_rest(curve, slow, free, stiffness):
    """One element, installed at three tenths of the movement. Achieved: 1e-13 of the in-situ
    stress, 6e-12 of the closure."""
    installed = np.where(np.isfinite(free), 0.3 * free * RADIUS, 0)
    found = equilibrium(curve, RADIUS, np.full((1, COUNT), stiffness), installed[None])
    known = np.isfinite(curve.at(np.zeros(COUNT)).closure_ratio)
    np.testing.assert_array_equal(found.converged, known)
    np.testing.assert_array_equal(np.isfinite(found.closure_m), known)
    for section in np.flatnonzero(free < SLOW):
        spring = Spring(stiffness, float(installed[section]))
        state = state_at_rest(slow[section], float(RADIUS[section]), [spring])
        error = abs(found.support_pressure_mpa[section] - state.pressure)
        assert error < 1e-12 * curve.in_situ_stress_mpa[section]
        assert found.closure_m[section] == pytest.approx(state.closure, rel=1e-10)


@pytest.mark.parametrize("limit", [1e-4, 0.01, 1.0])
def test_needed_pressure(curve, slow, free, limit):
    found = pressure_at_closure(curve, RADIUS, limit * RADIUS)
    assert np.isfinite(found).all()
    for section in np.flatnonzero(free < SLOW):
        expected = bracketed(slow[section], float(RADIUS[section]), limit * float(RADIUS[section]))
        assert found[section] == pytest.approx(expected, rel=1e-8)
    held = curve.at(found).closure_ratio
    assert np.all(held <= limit * (1 + 1e-6))
