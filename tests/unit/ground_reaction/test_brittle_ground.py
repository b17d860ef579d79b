"""Hoek-Brown ground that loses strength where it yields, where the answer is known by hand."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import STRONG, WEAK

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants

PRESSURES = np.array([0.0, 1e-6, 0.1, 1.0, 2.5, 5.0])
LOST = HoekBrownConstants(0.4, 0.0, 0.52)


def curve(residual, ground=WEAK, count=PRESSURES.size):
    columns = {name: np.full(count, value) for name, value in ground.items()}
    if residual is not None:
        residual = HoekBrownConstants(*(np.broadcast_to(v, count) for v in residual))
    return HoekBrownCurve.of_ground(**columns, residual=residual)


def test_residual_equal_to_the_peak_is_perfectly_plastic_to_the_last_bit():
    same = HoekBrownConstants(WEAK["mb"], WEAK["s"], WEAK["a"])
    for found, expected in zip(curve(same).at(PRESSURES), curve(None).at(PRESSURES), strict=True):
        np.testing.assert_array_equal(found, expected)


def test_residual_hardly_below_the_peak_is_hardly_different():
    """The two ways to the integral over the ring: 12 points of depth, and 24 of strength."""
    near = HoekBrownConstants(WEAK["mb"] * (1 - 1e-13), WEAK["s"], WEAK["a"])
    found = curve(near).at(PRESSURES)
    expected = curve(None).at(PRESSURES)
    np.testing.assert_allclose(found.closure_ratio, expected.closure_ratio, rtol=1e-10)
    np.testing.assert_allclose(found.plastic_ratio, expected.plastic_ratio, rtol=1e-11)


def test_critical_pressure_is_that_of_the_peak():
    np.testing.assert_array_equal(
        curve(LOST).critical_pressure_mpa, curve(None).critical_pressure_mpa
    )


def test_plastic_radius_by_hand():
    """Residual s = 0, a = 0.5, no pressure: ln(Rp / R) = 2 sqrt(mb pcr / sci) / mb."""
    found = curve(HoekBrownConstants(0.4, 0.0, 0.5), WEAK | {"a": 0.5})
    expected = np.exp(2 * np.sqrt(0.4 * found.critical_pressure_mpa / 20) / 0.4)
    assert found.at(PRESSURES).plastic_ratio[0] == pytest.approx(expected[0], rel=1e-14)


@pytest.mark.parametrize("a", [0.5, 0.52, 0.65])
def test_wall_without_any_strength_is_finite_and_gives_way_infinitely_fast(a):
    found = curve(HoekBrownConstants(0.4, 0.0, a)).at(np.zeros(PRESSURES.size))
    assert np.all(np.isfinite(found.closure_ratio) & np.isfinite(found.plastic_ratio))
    np.testing.assert_array_equal(found.slope, -np.inf)


def test_perfectly_plastic_ground_without_unconfined_strength_does_as_well():
    found = curve(None, WEAK | {"s": 0.0}).at(np.zeros(PRESSURES.size))
    assert np.all(np.isfinite(found.closure_ratio))
    np.testing.assert_array_equal(found.slope, -np.inf)


def test_closure_comes_to_that_of_the_strengthless_wall_as_the_pressure_vanishes():
    given = curve(LOST)
    free = given.at(np.zeros(PRESSURES.size))
    slight = given.at(np.array([1e-6, 1e-12, 1e-20, 1e-40, 1e-100, 1e-300]))
    distance = 1 - slight.closure_ratio / free.closure_ratio
    assert np.all(np.diff(distance) <= 0)
    assert distance[0] > 1e-6
    assert distance[-1] == pytest.approx(0, abs=1e-14)
    assert np.isfinite(slight.slope).all()
    assert np.all(np.diff(slight.slope) < 0)


def test_elastic_wall_does_not_care_about_its_residual_strength():
    found = curve(HoekBrownConstants(1.0, 0.0, 0.5), STRONG).at(PRESSURES)
    expected = curve(None, STRONG).at(PRESSURES)
    for one, other in zip(found, expected, strict=True):
        np.testing.assert_array_equal(one, other)


@pytest.mark.parametrize("dilation", [0.0, 10.0, 30.0])
def test_slope_is_the_derivative_of_the_closure(dilation):
    """Against central differences."""
    pressure = np.linspace(0.02, 2.0, 50)
    given = curve(LOST, WEAK | {"dilation_deg": dilation}, 50)
    assert pressure[-1] < given.critical_pressure_mpa[0]
    step = 1e-5 * pressure
    up, down = given.at(pressure + step), given.at(pressure - step)
    difference = (up.closure_ratio - down.closure_ratio) / (2 * step)
    np.testing.assert_allclose(given.at(pressure).slope, difference, rtol=1e-7)


@pytest.mark.parametrize(
    "residual",
    [
        pytest.param((0.91, 0.0015, 0.52), id="mb-above"),
        pytest.param((0.9, 0.0016, 0.52), id="s-above"),
        pytest.param((0.9, 0.0015, 0.51), id="a-below-is-stronger-under-little-stress"),
        pytest.param((1.2, 0.0, 0.52), id="weaker-at-the-wall-but-stronger-at-the-edge"),
        pytest.param((0.1, 0.0020, 0.52), id="weaker-at-the-edge-but-stronger-at-the-wall"),
    ],
)
def test_residual_strength_above_the_peak_is_no_result(residual):
    given = curve(HoekBrownConstants(*residual))
    assert np.isnan(given.critical_pressure_mpa).all()
    for values in given.at(PRESSURES):
        assert np.isnan(values).all()


def test_residual_strength_above_the_peak_only_between_wall_and_edge_is_no_result():
    """Over x = sr / sci: peak (x + 0.04)^0.9, residual (0.62 x)^0.6. The residual is weaker at the
    wall, x = 0, and at the edge, which p0 puts at x = 0.5; at 0.1 it is 0.188 against 0.170."""
    edge = 0.5
    ground = WEAK | {"mb": 1.0, "s": 0.04, "a": 0.9, "intact_strength_mpa": 10.0}
    ground["in_situ_stress_mpa"] = 10 * edge + 10 * (edge + 0.04) ** 0.9 / 2
    residual = HoekBrownConstants(0.62, 0.0, 0.6)
    assert curve(None, ground).critical_pressure_mpa[0] == pytest.approx(10 * edge, rel=1e-12)
    x = np.array([0.0, 0.1, edge])
    np.testing.assert_array_equal((0.62 * x) ** 0.6 > (x + 0.04) ** 0.9, [False, True, False])
    assert np.isnan(curve(residual, ground).critical_pressure_mpa).all()


@pytest.mark.parametrize("spoiled", ["mb", "s", "a"])
def test_section_without_residual_constants_is_nan_and_spoils_no_other(spoiled):
    sound = curve(LOST).at(PRESSURES)
    columns = {name: np.full(6, value) for name, value in LOST._asdict().items()}
    columns[spoiled][2] = np.nan
    found = curve(HoekBrownConstants(**columns)).at(PRESSURES)
    for values, expected in zip(found, sound, strict=True):
        np.testing.assert_array_equal(np.isnan(values), np.arange(6) == 2)
        rest = np.arange(6) != 2
        np.testing.assert_array_equal(values[rest], expected[rest])


def test_brittle_and_perfectly_plastic_sections_side_by_side():
    """Sections that keep their strength are given their peak as residual."""
    columns = {name: np.full(6, float(WEAK[name])) for name in LOST._fields}
    for name, value in LOST._asdict().items():
        columns[name][1::2] = value
    found = curve(HoekBrownConstants(**columns)).at(PRESSURES)
    plastic, brittle = curve(None).at(PRESSURES), curve(LOST).at(PRESSURES)
    for values, kept, lost in zip(found, plastic, brittle, strict=True):
        np.testing.assert_array_equal(values[::2], kept[::2])
        np.testing.assert_array_equal(values[1::2], lost[1::2])
