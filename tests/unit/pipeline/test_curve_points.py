"""Where curves are computed: exact at what matters, close where they bend."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.pipeline.curve_points import (
    FIRST_POINTS,
    LARGEST_BEND,
    distances_m,
    minor_stresses_mpa,
    pressures_mpa,
    section_curve,
)


def row(value: float) -> np.ndarray:
    return np.array([value])


def squeezing(in_situ_stress_mpa: float = 5.0) -> HoekBrownCurve:
    """Weak invented ground."""
    return HoekBrownCurve.of_ground(
        in_situ_stress_mpa=row(in_situ_stress_mpa),
        intact_strength_mpa=row(10.0),
        mb=row(0.6),
        s=row(0.0005),
        a=row(0.52),
        deformation_modulus_mpa=row(800.0),
        poisson_ratio=row(0.3),
        dilation_deg=row(5.0),
    )


def test_pressures_run_from_0_to_the_in_situ_stress_and_hold_what_must_be_exact():
    curve = squeezing()
    pressures = pressures_mpa(curve, [0.123456789, np.nan, 99.0])
    assert pressures[0] == 0
    assert pressures[-1] == 5.0
    assert np.all(np.diff(pressures) > 0)
    assert curve.critical_pressure_mpa[0] in pressures
    assert 0.123456789 in pressures
    assert pressures.size < 400


def test_straight_lines_between_the_points_show_the_curve():
    curve = squeezing()
    pressures = pressures_mpa(curve, [])
    at = section_curve(curve)
    closures = at(pressures).closure_ratio
    third = pressures[:-1] + np.diff(pressures) / 3
    drawn = np.interp(third, pressures, closures)
    # At the middle the bend was at most that; a parabola is off by 8/9 of it at a third.
    assert np.all(np.abs(drawn / at(third).closure_ratio - 1) < 1.1 * LARGEST_BEND)


def test_points_are_closer_where_ground_yields_than_where_it_is_elastic():
    curve = squeezing()
    steps = np.diff(pressures_mpa(curve, []))
    assert steps[0] < 0.25 * steps[-1]


def test_elastic_ground_is_straight_and_gets_no_more_points():
    curve = ElasticCurve.of_ground(
        in_situ_stress_mpa=row(2.0), deformation_modulus_mpa=row(9000.0), poisson_ratio=row(0.2)
    )
    np.testing.assert_array_equal(pressures_mpa(curve, []), np.linspace(0, 2, FIRST_POINTS))


@pytest.mark.parametrize("stress", [np.nan, 0.0])
def test_without_an_in_situ_stress_there_is_no_point(stress):
    assert pressures_mpa(squeezing(stress), []).size == 0


def test_distances_hold_the_face_and_every_place_of_installation():
    distances = distances_m(3.0, 7.0, [1.7, 4.4, 60.0])
    assert {0.0, 1.7, 4.4, 60.0} <= set(distances.tolist())
    assert distances[0] == -12.0
    assert distances[-1] == 75.0
    assert np.all(np.diff(distances) > 0)


@pytest.mark.parametrize(("plastic", "furthest"), [(3.0, 30.0), (100.0, 350.0), (np.nan, 30.0)])
def test_distances_reach_as_far_as_the_wall_moves(plastic, furthest):
    assert distances_m(3.0, plastic, [])[-1] == pytest.approx(furthest, rel=1e-12)


def test_minor_stresses_are_close_at_the_tip_and_hold_their_ends():
    stresses = minor_stresses_mpa(-0.2, 3.0, [0.0, 1.23, np.nan, 7.0])
    assert (stresses[0], stresses[-1]) == (-0.2, 3.0)
    assert {0.0, 1.23} <= set(stresses.tolist())
    assert stresses[1] - stresses[0] < 0.05 * (stresses[-1] - stresses[-2])
