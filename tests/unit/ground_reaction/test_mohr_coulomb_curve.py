"""Mohr-Coulomb ground where the answer is known by hand, and at the ends of its range."""

from fractions import Fraction

import numpy as np
import pytest

from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.rock_mass.hoek_brown import MohrCoulomb

GROUND = {
    "in_situ_stress_mpa": 5.0,
    "cohesion_mpa": 0.3,
    "friction_angle_deg": 30.0,
    "deformation_modulus_mpa": 1500.0,
    "poisson_ratio": 0.3,
    "dilation_deg": 5.0,
}
PRESSURES = np.array([0.0, 1e-6, 0.1, 1.0, 2.5, 5.0])


def curve(residual=None, count=PRESSURES.size, **changed):
    columns = {name: np.full(count, value) for name, value in (GROUND | changed).items()}
    if residual is not None:
        residual = MohrCoulomb(*(np.broadcast_to(np.asarray(v, float), count) for v in residual))
    return MohrCoulombCurve.of_ground(**columns, residual=residual)


def test_critical_pressure_and_plastic_radius_by_hand():
    """phi 30: k = 3, and c = sqrt(3) / 6 gives q = 1. p0 5: pcr = 9/4, Rp/R = sqrt(2 x 9/4 + 1)."""
    given = curve(cohesion_mpa=np.sqrt(3) / 6)
    assert given.critical_pressure_mpa[0] == pytest.approx(2.25, rel=1e-15)
    assert given.at(PRESSURES).plastic_ratio[0] == pytest.approx(np.sqrt(5.5), rel=1e-15)


def test_closure_by_hand_with_dilation():
    """K = 3 for 30 degrees, k = 3, q = 1, so that J = H_i (X^6 - 1) / 6 with X^2 = 11 / 2, H_i = 1;
    nu = 1/4, 2 G = 1000: exact fractions."""
    x2 = Fraction(11, 2)
    integral = (x2**3 - 1) / 6
    driving = Fraction(3, 2) * (5 - Fraction(9, 4)) * x2**2
    expected = (driving - Fraction(1, 2) * 5 - 2 * Fraction(3, 4) * integral) / 1000
    given = curve(
        cohesion_mpa=np.sqrt(3) / 6,
        dilation_deg=30.0,
        poisson_ratio=0.25,
        deformation_modulus_mpa=1250.0,
    )
    assert given.at(PRESSURES).closure_ratio[0] == pytest.approx(float(expected), rel=1e-13)


def test_strong_ground_is_elastic():
    """c 5, phi 30: q = 17 MPa, more than twice the in-situ stress."""
    given = curve(cohesion_mpa=5.0)
    found = given.at(PRESSURES)
    np.testing.assert_array_equal(given.critical_pressure_mpa, 0)
    np.testing.assert_array_equal(found.plastic_ratio, 1)
    np.testing.assert_allclose(found.closure_ratio, (5 - PRESSURES) * 1.3 / 1500, rtol=1e-15)
    np.testing.assert_allclose(found.slope, -1.3 / 1500, rtol=1e-15)


@pytest.mark.parametrize("dilation", [0.0, 5.0, 30.0])
@pytest.mark.parametrize("residual", [None, (20.0, 0.1), (25.0, 0.0)])
@pytest.mark.parametrize("friction", [25.0, 50.0])
def test_slope_is_the_derivative_of_the_closure(dilation, residual, friction):
    """Against central differences."""
    pressure = np.linspace(0.05, 1.2, 40)
    given = curve(
        residual, 40, dilation_deg=dilation, friction_angle_deg=friction, in_situ_stress_mpa=10.0
    )
    assert given.critical_pressure_mpa[0] > 1.21
    step = 1e-5 * pressure
    up, down = given.at(pressure + step), given.at(pressure - step)
    difference = (up.closure_ratio - down.closure_ratio) / (2 * step)
    np.testing.assert_allclose(given.at(pressure).slope, difference, rtol=1e-7)


@pytest.mark.parametrize("dilation", [0.0, 20.0])
def test_slight_friction_joins_none_without_loss_of_digits(dilation):
    """The curve is smooth in phi: what it changes by is about phi times a number of order 10."""
    frictionless = curve(friction_angle_deg=0.0, cohesion_mpa=1.0, dilation_deg=dilation)
    expected = frictionless.at(PRESSURES)
    before = np.inf
    for friction in (1e-2, 1e-4, 1e-6, 1e-9, 1e-12, 1e-15, 1e-18, 1e-25, 1e-300, 5e-324):
        given = curve(friction_angle_deg=friction, cohesion_mpa=1.0, dilation_deg=dilation)
        found = given.at(PRESSURES)
        for values, limit in zip(found, expected, strict=True):
            np.testing.assert_allclose(values, limit, rtol=max(10 * friction, 4e-15), atol=1e-18)
        distance = np.max(np.abs(found.closure_ratio[:-1] / expected.closure_ratio[:-1] - 1))
        assert distance <= max(before, 4e-15)
        before = distance


@pytest.mark.parametrize("friction", [1e-9, 1e-6, 1e-3, 0.1])
def test_plastic_radius_in_slight_friction_keeps_its_digits(friction):
    """ln(1 + x) / (k - 1) by its series in exact fractions, from the k - 1 and q in use."""
    given = curve(friction_angle_deg=friction, cohesion_mpa=1.0)
    slope, strength = (
        Fraction(float(v[0])) for v in (given.friction_slope, given.unconfined_strength_mpa)
    )
    delta = Fraction(float(given.critical_pressure_mpa[0])) / strength
    series = sum((-slope * delta) ** n * delta / (n + 1) for n in range(8))
    found = np.log(given.at(PRESSURES).plastic_ratio[0])
    assert found == pytest.approx(float(series), rel=1e-14)


@pytest.mark.parametrize("friction", [0.0, 30.0])
@pytest.mark.parametrize("residual", [True, False], ids=["residual", "peak"])
def test_wall_without_strength_has_no_finite_ring_and_no_closure(friction, residual):
    """No cohesion, no pressure. With friction, any pressure makes a ring that comes to rest."""
    line = {"friction_angle_deg": friction, "cohesion_mpa": 0.0}
    given = curve((friction, 0.0)) if residual else curve(**line)
    found = given.at(PRESSURES)
    without = PRESSURES == 0 if friction else given.critical_pressure_mpa > PRESSURES
    assert without.any()
    np.testing.assert_array_equal(np.isposinf(found.plastic_ratio), without)
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), without)
    np.testing.assert_array_equal(np.isnan(found.slope), without)
    assert np.isfinite(found.plastic_ratio[~without]).all()


def test_closure_beyond_the_range_of_a_double_is_nan():
    """phi 0, q 0.02, pcr 5: exp(2 x 500) is beyond what is computed, the radius exp(500) not."""
    found = curve(friction_angle_deg=0.0, cohesion_mpa=0.005).at(np.zeros(PRESSURES.size))
    assert np.isnan(found.closure_ratio).all()
    assert np.isfinite(found.plastic_ratio).all()


def test_pressure_at_the_very_end_of_a_double_does_not_warn():
    found = curve((30.0, 0.0)).at(np.array([5e-324, 1e-310, 1e-300, 1e-200, 1e-100, 1e-10]))
    np.testing.assert_array_equal(np.isnan(found.plastic_ratio[:2]), True)
    edge = curve((30.0, 0.0)).critical_pressure_mpa[0]
    expected = np.sqrt(edge) / np.array([1e-150, 1e-100, 1e-50, 1e-5])
    np.testing.assert_allclose(found.plastic_ratio[2:], expected, rtol=1e-12)
    assert np.isfinite(found.closure_ratio[4:]).all()


def test_residual_equal_to_the_peak_is_perfectly_plastic_to_the_last_bit():
    found = curve((30.0, 0.3)).at(PRESSURES)
    for values, expected in zip(found, curve().at(PRESSURES), strict=True):
        np.testing.assert_array_equal(values, expected)


@pytest.mark.parametrize(
    "residual",
    [
        pytest.param((30.0, 0.31), id="cohesion-above"),
        pytest.param((31.0, 0.3), id="friction-above"),
        pytest.param((40.0, 0.0), id="weaker-at-the-wall-but-stronger-at-the-edge"),
        pytest.param((5.0, 0.6), id="weaker-at-the-edge-but-stronger-at-the-wall"),
    ],
)
def test_residual_strength_above_the_peak_is_no_result(residual):
    given = curve(residual)
    assert np.isnan(given.critical_pressure_mpa).all()
    for values in given.at(PRESSURES):
        assert np.isnan(values).all()


@pytest.mark.parametrize("spoiled", GROUND)
def test_section_with_nan_stays_nan_and_spoils_no_other(spoiled):
    columns = {name: np.full(3, value) for name, value in GROUND.items()}
    sound = MohrCoulombCurve.of_ground(**columns).at(np.zeros(3))
    columns[spoiled] = np.array([GROUND[spoiled], np.nan, GROUND[spoiled]])
    found = MohrCoulombCurve.of_ground(**columns).at(np.zeros(3))
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), [False, True, False])
    for values, expected in zip(found, sound, strict=True):
        np.testing.assert_array_equal(values[[0, 2]], expected[[0, 2]])


@pytest.mark.parametrize("spoiled", ["in_situ_stress_mpa", "cohesion_mpa", "friction_angle_deg"])
def test_plastic_radius_without_the_strength_of_the_ground_is_nan_and_not_the_radius(spoiled):
    assert np.isnan(curve(**{spoiled: np.nan}).at(PRESSURES).plastic_ratio).all()


@pytest.mark.parametrize("spoiled", [0, 1], ids=["friction", "cohesion"])
def test_residual_strength_that_is_not_known_is_no_result(spoiled):
    residual = [20.0, 0.0]
    residual[spoiled] = np.nan
    for values in curve(residual).at(PRESSURES):
        assert np.isnan(values).all()


def test_state_under_an_unknown_pressure_is_unknown():
    for values in curve().at(np.full(PRESSURES.size, np.nan)):
        assert np.isnan(values).all()
