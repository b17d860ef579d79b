"""Finite strain: limits, slope, digits, unknown values."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import STRONG, WEAK, curve

from tunnelcalc.errors import ShapeError
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.finite_strain import FiniteStrainCurve


class Given:
    """A curve whose closures and slopes under any pressure are given."""

    def __init__(self, closure_ratio, slope=-1.0):
        self.closure_ratio = np.atleast_1d(np.asarray(closure_ratio, float))
        self.slope = np.broadcast_to(np.asarray(slope, float), self.closure_ratio.shape)
        self.in_situ_stress_mpa = np.ones(self.closure_ratio.shape)
        self.critical_pressure_mpa = np.full(self.closure_ratio.shape, 0.5)

    def at(self, support_pressure_mpa):
        return CurvePoint(np.full(self.slope.shape, 7.0), self.closure_ratio, self.slope)


def corrected(closure_ratio, dilation_deg=0.0, slope=-1.0):
    inner = Given(closure_ratio, slope)
    count = inner.closure_ratio.size
    curves = FiniteStrainCurve.of_curve(inner, np.full(count, float(dilation_deg)))
    return curves.at(np.zeros(count))


@pytest.mark.parametrize(
    ("small", "dilation_deg", "finite"),
    [
        pytest.param(1.5, 0.0, 0.5, id="1-over-root-of-4"),
        pytest.param(4.0, 0.0, 2 / 3, id="1-over-root-of-9"),
        pytest.param(3.75, 30.0, 0.5, id="1-over-fourth-root-of-16"),
        pytest.param(0.0, 20.0, 0.0, id="nothing"),
    ],
)
def test_closures_known_by_hand(small, dilation_deg, finite):
    """K + 1 is 2 without dilation and 4 at 30 degrees."""
    found = corrected(small, dilation_deg).closure_ratio[0]
    assert found == pytest.approx(finite, rel=1e-14)


@pytest.mark.parametrize("dilation_deg", [0.0, 30.0])
@pytest.mark.parametrize("small", [1e-300, 1e-20, 1e-12, 1e-7])
def test_tiny_closure_keeps_its_digits(small, dilation_deg):
    """Series: u (1 - (K + 2) u / 2)."""
    k = {0.0: 1, 30.0: 3}[dilation_deg]
    found = corrected(small, dilation_deg)
    series = small * (1 - (k + 2) / 2 * small)
    assert found.closure_ratio[0] == pytest.approx(series, rel=1e-13, abs=0)
    assert found.slope[0] == pytest.approx(-(1 - (k + 2) * small), rel=1e-13)


@pytest.mark.parametrize("dilation_deg", [0.0, 30.0, 60.0])
@pytest.mark.parametrize("small", [1.0, 1e6, 1e17, 1e40, 1e200, 1e260])
def test_opening_never_closes_wholly(small, dilation_deg):
    """And a slope as large as the closure itself neither under- nor overflows."""
    found = corrected(small, dilation_deg, slope=-3 * small)
    assert 0 < found.closure_ratio[0] < 1
    assert np.isfinite(found.slope[0])
    assert found.slope[0] < 0


def test_closure_that_left_the_range_of_a_double_stays_nan():
    found = corrected([0.1, np.nan, 0.2], slope=[-1, np.nan, -2])
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), [False, True, False])
    np.testing.assert_array_equal(np.isnan(found.slope), [False, True, False])
    sound = corrected([0.1, 0.2], slope=[-1, -2])
    np.testing.assert_array_equal(found.closure_ratio[[0, 2]], sound.closure_ratio)
    np.testing.assert_array_equal(found.slope[[0, 2]], sound.slope)


def test_unbounded_slope_at_a_wall_without_strength_stays_unbounded():
    found = corrected([0.1, 1e250], 45.0, slope=-np.inf)
    np.testing.assert_array_equal(found.slope, [-np.inf, -np.inf])
    assert np.all(found.closure_ratio < 1)


def test_pressure_far_above_the_in_situ_stress_gives_nan_without_a_warning():
    """Not in the range of `at`: the wall would have moved outwards by more than the law allows."""
    found = corrected([-0.4, -0.5, -3.0])
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), [False, True, True])
    np.testing.assert_array_equal(np.isnan(found.slope), [False, True, True])


def weak_curves(count=60):
    """Weak ground whose closure without support is a large part of the radius."""
    return curve(
        in_situ_stress_mpa=np.full(count, 5.0),
        intact_strength_mpa=3.0,
        deformation_modulus_mpa=150.0,
        dilation_deg=20.0,
    )


def test_slope_is_the_derivative_of_the_closure():
    """Against central differences, where the correction is large."""
    pressure = np.linspace(0.05, 4.9, 60)
    inner = weak_curves()
    ground = FiniteStrainCurve.of_curve(inner, np.full(60, 20.0))
    step = 1e-5
    up, down = ground.at(pressure + step), ground.at(pressure - step)
    difference = (up.closure_ratio - down.closure_ratio) / (2 * step)
    smooth = np.abs(pressure - ground.critical_pressure_mpa) > 2 * step
    assert inner.at(pressure).closure_ratio[0] > 0.5
    np.testing.assert_allclose(ground.at(pressure).slope[smooth], difference[smooth], rtol=1e-5)


def test_stresses_and_plastic_ratio_are_those_of_the_inner_curve():
    inner = weak_curves(3)
    ground = FiniteStrainCurve.of_curve(inner, np.full(3, 20.0))
    np.testing.assert_array_equal(ground.in_situ_stress_mpa, inner.in_situ_stress_mpa)
    np.testing.assert_array_equal(ground.critical_pressure_mpa, inner.critical_pressure_mpa)
    found = ground.at(np.zeros(3)).plastic_ratio
    np.testing.assert_array_equal(found, inner.at(np.zeros(3)).plastic_ratio)
    assert found[0] > 1


def test_taken_sections_have_their_own_dilation():
    dilation = np.array([0.0, 10.0, 30.0])
    ground = {name: np.full(3, value) for name, value in WEAK.items()} | {"dilation_deg": dilation}
    every = FiniteStrainCurve.of_curve(curve(**ground), dilation)
    order = np.array([2, 0, 2, 1])
    found, expected = every.take(order).at(np.zeros(4)), every.at(np.zeros(3))
    assert np.unique(expected.closure_ratio).size == 3
    for own, whole in zip(found, expected, strict=True):
        np.testing.assert_array_equal(own, whole[order])


def test_elastic_ground_is_hardly_corrected():
    inner = curve(**STRONG)
    found = FiniteStrainCurve.of_curve(inner, np.array([5.0])).at(np.zeros(1))
    small = inner.at(np.zeros(1)).closure_ratio[0]
    assert small * (1 - 2 * small) < found.closure_ratio[0] < small


def test_dilation_of_another_number_of_sections_is_refused():
    with pytest.raises(ShapeError, match="dilation_deg"):
        FiniteStrainCurve.of_curve(weak_curves(3), np.zeros(2))
