"""The ground reaction curve where the answer is known by hand."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import STRONG, WEAK, curve

from tunnelcalc.ground_reaction.hoek_brown import (
    critical_number,
    dilation_coefficient,
    ground_reaction,
)


def arrays(ground):
    return {name: np.array([value]) for name, value in ground.items()}


@pytest.mark.parametrize("share", [0.0, 0.25, 0.5, 1.0])
def test_elastic_ground_moves_in_proportion_to_the_stress_taken_away(share):
    """u = (p0 - pi) R / (2 G), with 2 G = E / (1 + nu)."""
    found = curve(**STRONG).at(np.array([5.0 * share]))
    expected = 5.0 * (1 - share) * 1.3 / 1500.0
    assert found.closure_ratio[0] == pytest.approx(expected, rel=1e-15)
    assert found.plastic_ratio[0] == 1.0
    assert found.slope[0] == pytest.approx(-1.3 / 1500, rel=1e-15)


def test_elastic_ground_has_no_critical_pressure():
    assert curve(**STRONG).critical_pressure_mpa[0] == 0.0


@pytest.mark.parametrize("ground", [WEAK, STRONG], ids=["yielding", "elastic"])
def test_wall_held_by_the_in_situ_stress_does_not_move(ground):
    found = curve(**ground).at(np.array([5.0]))
    assert (found.closure_ratio[0], found.plastic_ratio[0]) == (0.0, 1.0)


def test_ground_begins_to_yield_when_twice_the_stress_meets_its_strength():
    """Unconfined strength 20 sqrt(0.01) = 2 MPa: elastic up to p0 = 1 MPa, and from there on
    not."""
    stress = np.array([0.999_999, 1.0, 1.000_001])
    critical = curve(in_situ_stress_mpa=stress, s=0.01, a=0.5).critical_pressure_mpa
    np.testing.assert_array_equal(critical[:2], [0.0, 0.0])
    assert 0 < critical[2] < 1e-5


def test_critical_pressure_of_ground_without_strength_in_confinement():
    """With s = 0 and a = 0.5: 2 (p0 - p) = sqrt(mb sci p), a quadratic; p0 3, mb 0.5, sci 32 give
    p = 1 since 2 x 2 = sqrt(16)."""
    number = critical_number(*(np.array([v]) for v in (3.0, 32.0, 0.5, 0.0, 0.5)))
    assert number[0] * 32.0 / 0.5 == pytest.approx(1.0, rel=1e-14)


@pytest.mark.parametrize(
    ("angle", "coefficient"), [(0.0, 1.0), (30.0, 3.0)], ids=["none", "30-deg"]
)
def test_dilation_coefficient(angle, coefficient):
    """sin 30 = 1/2 gives 1.5 / 0.5."""
    assert dilation_coefficient(np.array([angle]))[0] == pytest.approx(coefficient, rel=1e-15)


@pytest.mark.parametrize("dilation", [0.0, 5.0, 30.0, 60.0])
@pytest.mark.parametrize("nu", [0.0, 0.3, 0.4999])
def test_curve_has_neither_step_nor_kink_where_the_wall_begins_to_yield(dilation, nu):
    """Closure and slope just below and at the critical pressure. The slope on the plastic side
    differs by less and less as the pressure nears the critical one."""
    ground = curve(dilation_deg=dilation, poisson_ratio=nu)
    critical = ground.critical_pressure_mpa
    at_yield = ground.at(critical)
    for below, tolerance in ((1e-4, 1e-2), (1e-6, 1e-4), (1e-8, 1e-6)):
        found = ground.at(critical * (1 - below))
        assert found.plastic_ratio[0] > 1
        assert found.closure_ratio[0] == pytest.approx(at_yield.closure_ratio[0], rel=tolerance)
        assert found.slope[0] == pytest.approx(at_yield.slope[0], rel=tolerance)


def test_slope_is_the_derivative_of_the_closure():
    """Against central differences."""
    pressure = np.linspace(0.02, 3.0, 60)
    ground = curve(in_situ_stress_mpa=np.full(60, 5.0), dilation_deg=20.0)
    step = 1e-5
    up, down = ground.at(pressure + step), ground.at(pressure - step)
    difference = (up.closure_ratio - down.closure_ratio) / (2 * step)
    smooth = np.abs(pressure - ground.critical_pressure_mpa) > 2 * step
    np.testing.assert_allclose(ground.at(pressure).slope[smooth], difference[smooth], rtol=1e-5)


def test_ring_at_the_last_double_before_yielding_is_not_inside_the_wall():
    """In three thousand sections of weak ground, where rounding would put it there in some."""
    stress = np.linspace(2, 60, 3000)
    ground = curve(in_situ_stress_mpa=stress, intact_strength_mpa=5.0, mb=0.01, a=0.55)
    just_below = np.nextafter(ground.critical_pressure_mpa, 0)
    assert np.all(ground.at(just_below).plastic_ratio >= 1)


def test_sections_broadcast_with_pressures():
    """Sections down, pressures across: each entry is that of its own section and pressure."""
    pressures = np.array([0.0, 0.1, 1.0, 3.0, 4.0])
    columns = {name: np.array([[WEAK[name]], [STRONG[name]]]) for name in WEAK}
    radius = np.array([[3.0], [6.0]])
    table = ground_reaction(pressures, radius_m=radius, **columns)
    assert table.closure_m.shape == table.plastic_radius_m.shape == (2, 5)
    for row, (ground, r) in enumerate(((WEAK, 3.0), (STRONG, 6.0))):
        for column, pressure in enumerate(pressures):
            one = ground_reaction(np.array([pressure]), radius_m=np.array([r]), **arrays(ground))
            assert table.closure_m[row, column] == one.closure_m[0]
            assert table.plastic_radius_m[row, column] == one.plastic_radius_m[0]


@pytest.mark.parametrize("pressure", [-1e-9, 5.000001], ids=["suction", "above-p0"])
def test_pressure_outside_its_range_is_refused(pressure):
    with pytest.raises(ValueError, match="between 0 and in_situ_stress_mpa"):
        ground_reaction(np.array([pressure]), radius_m=np.ones(1), **arrays(WEAK))


@pytest.mark.parametrize("spoiled", WEAK)
def test_section_with_nan_stays_nan_and_spoils_no_other(spoiled):
    columns = {name: np.full(3, value) for name, value in WEAK.items()}
    sound = ground_reaction(np.zeros(3), radius_m=np.ones(3), **columns)
    columns[spoiled] = np.array([WEAK[spoiled], np.nan, WEAK[spoiled]])
    found = ground_reaction(np.zeros(3), radius_m=np.ones(3), **columns)
    np.testing.assert_array_equal(np.isnan(found.closure_m), [False, True, False])
    np.testing.assert_array_equal(found.closure_m[[0, 2]], sound.closure_m[[0, 2]])
    np.testing.assert_array_equal(found.plastic_radius_m[[0, 2]], sound.plastic_radius_m[[0, 2]])


@pytest.mark.parametrize("spoiled", ["in_situ_stress_mpa", "intact_strength_mpa", "mb", "s", "a"])
def test_plastic_radius_without_the_strength_of_the_ground_is_nan_and_not_the_radius(spoiled):
    columns = arrays(WEAK) | {spoiled: np.array([np.nan])}
    found = ground_reaction(np.zeros(1), radius_m=np.ones(1), **columns)
    assert np.isnan(found.plastic_radius_m[0])


def test_state_under_an_unknown_pressure_is_unknown():
    found = curve().at(np.array([np.nan]))
    assert np.isnan([found.plastic_ratio[0], found.closure_ratio[0], found.slope[0]]).all()
