"""The ground's pressure by closure, from the table, against the curve itself."""

import numpy as np
import pytest
from reference.samples import curve_columns, random_ground
from unit.ground_reaction.sound_ground import STRONG, curve
from unit.support.other_ground import Kinked, VerticalAtZero

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.support.pressure_table import interpolated, locate, pressure_table

RADIUS = np.array([5.0])


def worst(ground, radius, face_share, laid=200):
    """Greatest error (n,) of the pressure, of the in-situ stress, between the ends of the table."""
    count = radius.size
    free = ground.at(np.zeros(count)).closure_ratio * radius
    table = pressure_table(ground, radius, face_share * free)
    errors = []
    for part in np.linspace(0, 1, laid):
        pressure = table.pressure_mpa[0] * part**2
        closure = ground.at(pressure).closure_ratio * radius
        found = table.pressure_and_slope(closure, np.arange(count))[0]
        errors.append(np.abs(found - pressure) / ground.in_situ_stress_mpa)
    return np.max(errors, axis=0)


def test_elastic_ground_is_exact():
    assert worst(curve(**STRONG), RADIUS, 0.3)[0] < 1e-14


def test_weak_ground():
    """Achieved: 6e-8."""
    assert worst(curve(), RADIUS, 0.1)[0] < 2e-7


def test_random_ground_within_small_strain():
    """Achieved: 6e-6 at the most, where the ring is deeper than 100 radii; median 4e-9."""
    columns = random_ground(400, seed=5)
    ground = HoekBrownCurve.of_ground(**curve_columns(columns))
    free = ground.at(np.zeros(400))
    share = np.exp(-0.15 * free.plastic_ratio) / 3
    chosen = np.flatnonzero(free.closure_ratio < 1)
    found = worst(ground.take(chosen), columns["radius_m"][chosen], share[chosen], 40)
    assert found.max() < 2e-5
    assert np.median(found) < 2e-8


def test_law_that_is_vertical_at_zero_pressure():
    assert worst(VerticalAtZero(np.array([4.0]), np.array([0.004])), RADIUS, 0.2)[0] < 1e-6


def test_law_with_kinks_is_followed_but_for_the_cell_of_a_kink():
    """One kink is where the ground yields, and has a node; the other, at 1 MPa, has not."""
    assert worst(Kinked(np.array([4.0])), RADIUS, 0.3)[0] < 5e-3


def test_slope_is_the_derivative_and_never_positive():
    ground = curve()
    free = ground.at(np.zeros(1)).closure_ratio * RADIUS
    table = pressure_table(ground, RADIUS, 0.1 * free)
    for closure in np.linspace(0.11, 0.99, 45) * free:
        step = 1e-7 * free
        values = [
            table.pressure_and_slope(closure + k * step, np.zeros(1, int)) for k in (-1, 0, 1)
        ]
        slope = (values[2][0] - values[0][0]) / (2 * step)
        assert slope < 0
        np.testing.assert_allclose(values[1][1], slope, rtol=1e-4)


def test_unknown_ground_spoils_no_other():
    ground = curve(in_situ_stress_mpa=np.array([5.0, np.nan]))
    table = pressure_table(ground, np.full(2, 5.0), np.full(2, 0.002))
    alone = pressure_table(curve(), RADIUS, np.full(1, 0.002))
    assert np.isnan(table.pressure_mpa[:, 1]).all()
    np.testing.assert_array_equal(table.closure_m[:, 0], alone.closure_m[:, 0])


@pytest.mark.parametrize(
    ("at", "cell", "value"),
    [(-1, 0, 10), (0, 0, 10), (1, 1, 20), (2.5, 2, 25), (4, 3, 40), (9, 3, 40)],
)
def test_lookup_by_hand(at, cell, value):
    nodes = np.array([[0.0], [1], [2], [3], [4]])
    values = np.array([[10.0], [20], [20], [30], [40]])
    here, index = np.array([float(at)]), np.array([0])
    assert locate(nodes, here, index)[0] == cell
    assert interpolated(nodes, values, here, index)[0] == value
