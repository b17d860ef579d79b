"""Strength envelopes where the answer is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import envelope
from tunnelcalc.rock_mass.hoek_brown import hoek_brown_constants, tensile_strength_mpa
from tunnelcalc.rock_mass.mohr_coulomb import shear_strength_mpa, slope

INTACT = {"intact_strength_mpa": 100.0, "mb": 8.0, "s": 1.0, "a": 0.5}
"""Intact rock, whose tensile strength is 12.5 MPa."""


def test_criterion_at_no_and_at_some_confinement():
    """100 sqrt(8 x 37.5 / 100 + 1) = 200 above the confinement."""
    found = envelope.principal_envelope(np.array([0.0, 37.5]), **INTACT)
    np.testing.assert_array_equal(found, [100.0, 237.5])


def test_tip_belongs_to_the_envelope_and_nothing_beyond_it():
    found = envelope.principal_envelope(np.array([-12.5, -12.501, -1e9, np.nan]), **INTACT)
    np.testing.assert_array_equal(found, [-12.5, np.nan, np.nan, np.nan])


def test_tip_is_found_whatever_the_rounding_of_the_tensile_strength():
    rng = np.random.default_rng(1952)
    gsi, mi, sci = rng.uniform(5, 100, 2000), rng.uniform(3, 33, 2000), rng.uniform(1, 250, 2000)
    mb, s, a = hoek_brown_constants(gsi, mi, rng.uniform(0, 1, 2000))
    tip = -tensile_strength_mpa(sci, mb, s)
    major = envelope.principal_envelope(tip, sci, mb, s, a)
    assert np.isfinite(major).all()
    beyond = envelope.principal_envelope(tip * (1 + 1e-9), sci, mb, s, a)
    assert np.isnan(beyond).all()


def test_gradient_of_intact_rock_is_1_and_half_of_mi_at_no_confinement():
    found = envelope.hoek_brown_gradient(np.array([0.0, 37.5]), **INTACT)
    np.testing.assert_array_equal(found, [5.0, 3.0])


def test_gradient_is_infinite_at_the_tip_and_nothing_beyond_it():
    found = envelope.hoek_brown_gradient(np.array([-12.5, -12.6]), **INTACT)
    np.testing.assert_array_equal(found, [np.inf, np.nan])


def test_circle_at_the_tip_is_a_point():
    minor = np.array([-12.5])
    point = envelope.normal_and_shear(
        minor,
        envelope.principal_envelope(minor, **INTACT),
        envelope.hoek_brown_gradient(minor, **INTACT),
    )
    assert (point.normal_stress_mpa[0], point.shear_stress_mpa[0]) == (-12.5, 0.0)


def test_point_of_a_circle_by_hand():
    """g = 4: sn = 1 + 10 / 5 and tau = 10 x 2 / 5."""
    found = envelope.normal_and_shear(np.array([1.0]), np.array([11.0]), np.array([4.0]))
    assert (found.normal_stress_mpa[0], found.shear_stress_mpa[0]) == (3.0, 4.0)


def test_without_friction_the_point_is_the_top_of_the_circle():
    found = envelope.normal_and_shear(np.array([1.0]), np.array([11.0]), np.array([1.0]))
    assert (found.normal_stress_mpa[0], found.shear_stress_mpa[0]) == (6.0, 5.0)


@pytest.mark.parametrize(
    ("minor", "major", "gradient"),
    [(1, 0.99, 4), (1, 11, 0), (1, 11, -1), (np.nan, 11, 4), (1, np.nan, 4), (1, 11, np.nan)],
)
def test_what_is_no_circle_at_failure_has_no_point(minor, major, gradient):
    """The row beside it keeps its values."""
    found = envelope.normal_and_shear(
        np.array([1.0, minor]), np.array([11.0, major]), np.array([4.0, gradient])
    )
    assert (found.normal_stress_mpa[0], found.shear_stress_mpa[0]) == (3.0, 4.0)
    assert np.isnan(found.shear_stress_mpa[1])
    assert np.isnan(found.normal_stress_mpa[1])


def test_tangent_angle_is_30_degrees_for_a_gradient_of_3():
    found = envelope.tangent_angle_deg(np.array([1, 3, np.inf, 0.99, np.nan]))
    np.testing.assert_allclose(found, [0, 30, 90, np.nan, np.nan], rtol=1e-14, atol=1e-14)


@pytest.mark.parametrize("angle", [0, 0.01, 12, 33.3, 60, 80])
def test_points_of_a_straight_envelope_are_the_straight_line(angle):
    cohesion, minor = 0.7, np.array([-0.1, 0, 0.5, 3, 40])
    count = minor.size
    columns = np.full(count, cohesion), np.full(count, float(angle))
    major = envelope.straight_envelope(minor, cohesion, angle)
    gradient = slope(columns[1])
    point = envelope.normal_and_shear(minor, major, gradient)
    expected = shear_strength_mpa(point.normal_stress_mpa, *columns)
    np.testing.assert_allclose(point.shear_stress_mpa, expected, rtol=1e-12)
    np.testing.assert_allclose(envelope.tangent_angle_deg(gradient), angle, atol=1e-12)


@pytest.mark.parametrize("angle", [0.001, 1, 30, 60])
def test_straight_envelope_ends_at_its_tip(angle):
    tip = -0.7 / np.tan(np.radians(angle))
    found = envelope.straight_envelope(np.array([tip, tip * 1.001]), 0.7, angle)
    assert found[0] == pytest.approx(tip, rel=1e-9)
    assert np.isnan(found[1])


def error(**changed):
    """Of intact rock from -12.5 to 37.5 MPa against a line of 100 MPa + 3 s3, k = 3."""
    values = INTACT | {
        "confinement_mpa": 37.5,
        "cohesion_mpa": 100 / (2 * np.sqrt(3)),
        "friction_angle_deg": 30.0,
    }
    found = envelope.line_error(**{n: np.array([v]) for n, v in (values | changed).items()})
    return [float(column[0]) for column in found]


def test_error_of_a_line_by_hand():
    """Line less criterion: 62.5 + 12.5 at the tip, 0 at no confinement, 212.5 - 237.5 at 37.5 MPa.

    With t for the root, s3 = 12.5 (t^2 - 1), and k s1 = g (q + k s3) is 3 t^2 - 2 t - 5 = 0. At
    t = 5/3, s3 = 200/9, the line has 500/3 MPa and the criterion 1700/9 MPa: 15/17 of it.
    """
    difference, minor, relative, relative_minor = error()
    assert difference == pytest.approx(75, rel=1e-14)
    assert minor == -12.5
    assert relative == pytest.approx(-2 / 17, rel=1e-13)
    assert relative_minor == pytest.approx(200 / 9, rel=1e-9)


def test_error_between_the_ends_is_where_the_gradients_are_equal():
    """1 + 4 / t = 3 at t = 2, s3 = 37.5 MPa: there the line 40 + 3 s3 has 152.5 and the criterion
    237.5; at the tip they differ by 15."""
    difference, minor, *_ = error(cohesion_mpa=20 / np.sqrt(3), confinement_mpa=50.0)
    assert difference == pytest.approx(-85, rel=1e-14)
    assert minor == pytest.approx(37.5, rel=1e-14)


def test_error_of_a_line_that_is_steep_at_high_confinement():
    """At 1000 MPa the line 80 + 3 s3 has 3080, the criterion 1000 + 100 x 9."""
    difference, minor, relative, relative_minor = error(
        cohesion_mpa=40 / np.sqrt(3), confinement_mpa=1000.0
    )
    assert difference == pytest.approx(1180, rel=1e-13)
    assert relative == pytest.approx(1180 / 1900, rel=1e-13)
    assert (minor, relative_minor) == (1000, 1000)


@pytest.mark.parametrize(
    ("cohesion", "difference", "minor", "relative"),
    [(60, 120, -12.5, 157.5 / 237.5 - 1), (40, -120, 37.5, 117.5 / 237.5 - 1)],
)
def test_line_without_friction_is_worst_at_an_end(cohesion, difference, minor, relative):
    """q = 2 c; at the tip it is above by q, at 37.5 MPa below by 200 - q."""
    found = error(friction_angle_deg=0.0, cohesion_mpa=float(cohesion))
    assert found == pytest.approx([difference, minor, relative, 37.5], rel=1e-14)


@pytest.mark.parametrize(
    "changed",
    [
        {"confinement_mpa": 0.0},
        {"confinement_mpa": -1.0},
        {"intact_strength_mpa": 0.0},
        {"mb": 0.0},
        {"mb": -8.0},
        {"s": -0.1},
        {"a": 1.0},
        {"a": 0.0},
        {"cohesion_mpa": -0.1},
        {"friction_angle_deg": 90.0},
        {"friction_angle_deg": -1.0},
        *({name: np.nan} for name in (*INTACT, "confinement_mpa", "cohesion_mpa")),
        {"friction_angle_deg": np.nan},
    ],
    ids=str,
)
def test_error_outside_the_valid_ranges_is_unknown(changed):
    assert np.isnan(error(**changed)).all()


def test_error_of_ground_without_any_unconfined_strength_has_no_relative_part():
    difference, minor, *relative = error(s=0.0)
    assert difference == pytest.approx(100, rel=1e-14)
    assert minor == 0
    assert np.isnan(relative).all()


def test_an_exponent_next_to_1_overflows_nothing():
    assert np.isfinite(error(a=1 - 1e-12)).all()


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        envelope.line_error(*(np.ones(2) for _ in range(6)), np.ones(3))
