"""Fully grouted bolts as a change of the ground, by hand."""

import math

import numpy as np
import pytest
from scipy.integrate import quad
from tunnelcalc_rock_bolts.grouted import (
    bolt_density,
    grouted_ring,
    improved_hoek_brown,
    improved_mohr_coulomb,
    neutral_radius_m,
)

ONE = np.ones(1)


def test_density_by_hand():
    """d 25 mm, lambda 0.6, R 5 m, 1 m by 1.5 m: pi 0.025 x 0.6 x 5 / 1.5 = 0.1571."""
    found = bolt_density(
        5 * ONE, diameter_mm=25.0, friction_factor=0.6, spacing_around_m=1.0, spacing_along_m=1.5
    )
    assert found[0] == pytest.approx(math.pi * 0.05, rel=1e-14)


def test_friction_of_thirty_degrees_and_density_of_a_tenth():
    """tan^2(60) = 3, times 1.1 = 3.3; asin(2.3 / 4.3) = 32.34 degrees (independent
    calculation)."""
    found = improved_mohr_coulomb(30 * ONE, 0.2 * ONE, 0.1 * ONE)
    assert found.friction_angle_deg[0] == pytest.approx(math.degrees(math.asin(2.3 / 4.3)))
    assert found.friction_angle_deg[0] == pytest.approx(32.34, abs=0.005)
    assert found.cohesion_mpa[0] == pytest.approx(0.2 * math.sqrt(1.1), rel=1e-14)


@pytest.mark.parametrize("confinement", [0.0, 0.5, 3.0])
def test_strength_of_mohr_coulomb_ground_grows_by_one_plus_beta(confinement):
    def strength(friction_deg, cohesion):
        sine = math.sin(math.radians(friction_deg))
        slope = (1 + sine) / (1 - sine)
        return slope * confinement + 2 * cohesion * math.sqrt(slope)

    found = improved_mohr_coulomb(25 * ONE, 0.4 * ONE, 0.15 * ONE)
    improved = strength(found.friction_angle_deg[0], found.cohesion_mpa[0])
    assert improved == pytest.approx(1.15 * strength(25.0, 0.4), rel=1e-13)


@pytest.mark.parametrize("confinement", [0.0, 0.5, 3.0])
def test_stress_difference_of_hoek_brown_ground_grows_by_the_power_a(confinement):
    sci, mb, s, a = 20.0, 0.7, 4e-4, 0.52
    found = improved_hoek_brown(mb * ONE, s * ONE, 0.15 * ONE)
    before = sci * (mb * confinement / sci + s) ** a
    after = sci * (found.mb[0] * confinement / sci + found.s[0]) ** a
    assert after / before == pytest.approx(1.15**a, rel=1e-13)


def test_no_bolts_change_nothing():
    found = improved_mohr_coulomb(30 * ONE, 0.2 * ONE, 0 * ONE)
    assert found.friction_angle_deg[0] == pytest.approx(30.0, rel=1e-14)
    assert found.cohesion_mpa[0] == 0.2
    constants = improved_hoek_brown(0.7 * ONE, 4e-4 * ONE, 0 * ONE)
    assert (constants.mb[0], constants.s[0]) == (0.7, 4e-4)


def test_neutral_point_of_three_metres_in_a_radius_of_five():
    """3 / ln 1.6 = 6.383 m (independent calculation)."""
    assert neutral_radius_m(5 * ONE, 3.0)[0] == pytest.approx(6.383, abs=5e-4)


def test_neutral_point_of_a_short_bolt_is_its_middle():
    assert neutral_radius_m(5 * ONE, 1e-6)[0] == pytest.approx(5 + 5e-7, rel=1e-12)


def test_shear_on_both_sides_of_the_neutral_point_is_in_balance():
    """Ground displacement falls with 1 / r; shear follows its difference to the bolt's own, which
    is that at the neutral point, and sums to nothing over the bolt."""
    neutral = neutral_radius_m(5 * ONE, 3.0)[0]
    held, _ = quad(lambda r: 1 / r - 1 / neutral, 5, neutral, epsabs=1e-14)
    anchored, _ = quad(lambda r: 1 / neutral - 1 / r, neutral, 8, epsabs=1e-14)
    assert held > 0
    assert held == pytest.approx(anchored, rel=1e-12)


def test_the_ring_reaches_to_the_neutral_point_with_the_strength_that_is_known():
    sections = {"radius_m": np.array([5.0, np.nan]), "mb": 0.7 * np.ones(2), "s": 4e-4 * np.ones(2)}
    ring = grouted_ring(sections, 0.1 * np.ones(2), 3.0, np.ones(2))
    assert ring.form == "ground_ring"
    np.testing.assert_allclose(ring.thickness_m, [3 / math.log(1.6) - 5, np.nan], rtol=1e-13)
    np.testing.assert_allclose(ring.changed["mb"], 0.77, rtol=1e-14)
    np.testing.assert_allclose(ring.changed["s"], 4.4e-4, rtol=1e-14)
    assert set(ring.changed) == {"mb", "s"}
    line = {"friction_angle_deg": np.array([30.0]), "cohesion_mpa": np.array([0.2])}
    ring = grouted_ring({"radius_m": 5 * ONE, **line}, 0.1 * ONE, 3.0, ONE)
    assert ring.changed["friction_angle_deg"][0] == pytest.approx(32.34, abs=0.005)
    assert set(ring.changed) == {"friction_angle_deg", "cohesion_mpa"}
