"""Relations of the deformation modulus where the answer is known by hand, and their ranges."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import deformation_modulus as moduli


def of(function, *values):
    """The modulus of one section."""
    found = function(*(np.array([float(value)]) for value in values))
    assert found.shape == (1,)
    return float(found[0])


def test_modulus_of_2002_is_1_gpa_at_gsi_10():
    assert of(moduli.hoek_2002_mpa, 10, 0, 100) == 1000.0


def test_modulus_of_2002_is_tenfold_40_points_higher():
    assert of(moduli.hoek_2002_mpa, 50, 0, 100) == pytest.approx(10_000, rel=1e-15)
    assert of(moduli.hoek_2002_mpa, 90, 0, 100) == pytest.approx(100_000, rel=1e-15)


def test_modulus_of_2002_is_halved_by_full_disturbance():
    assert of(moduli.hoek_2002_mpa, 10, 1, 100) == 500.0
    assert of(moduli.hoek_2002_mpa, 10, 0.5, 100) == 750.0


def test_modulus_of_2002_has_the_root_of_the_strength_up_to_100_mpa():
    assert of(moduli.hoek_2002_mpa, 10, 0, 25) == 500.0
    assert of(moduli.hoek_2002_mpa, 10, 0, 4) == pytest.approx(200.0, rel=1e-15)
    assert of(moduli.hoek_2002_mpa, 10, 0, 100.001) == 1000.0
    assert of(moduli.hoek_2002_mpa, 10, 0, 250) == 1000.0


def test_serafim_and_pereira_give_1_gpa_at_10_and_10_gpa_at_50():
    assert of(moduli.serafim_pereira_1983_mpa, 10) == 1000.0
    assert of(moduli.serafim_pereira_1983_mpa, 50) == 10_000.0


def test_bieniawski_gives_100_gpa_at_100_and_20_gpa_at_60():
    assert of(moduli.bieniawski_1978_mpa, 100) == 100_000.0
    assert of(moduli.bieniawski_1978_mpa, 60) == 20_000.0


def test_barton_gives_10_gpa_for_quality_1_in_rock_of_100_mpa():
    assert of(moduli.barton_2002_mpa, 1, 100) == 10_000.0


def test_barton_doubles_the_modulus_for_eight_times_the_quality_or_the_strength():
    assert of(moduli.barton_2002_mpa, 8, 100) == pytest.approx(20_000, rel=1e-15)
    assert of(moduli.barton_2002_mpa, 1, 800) == pytest.approx(20_000, rel=1e-15)


@pytest.mark.parametrize("rating", [-0.001, 50.001, 51, 100, np.inf, -np.inf, np.nan])
def test_serafim_and_pereira_say_nothing_above_50(rating):
    assert np.isnan(of(moduli.serafim_pereira_1983_mpa, rating))


@pytest.mark.parametrize("rating", [0, 49.999, 50, 100.001, np.inf, -np.inf, np.nan])
def test_bieniawski_says_nothing_at_or_below_50(rating):
    assert np.isnan(of(moduli.bieniawski_1978_mpa, rating))


def test_the_two_relations_with_a_rating_share_no_rating_and_leave_none_out():
    ratings = np.linspace(0, 100, 401)
    lower = np.isfinite(moduli.serafim_pereira_1983_mpa(ratings))
    upper = np.isfinite(moduli.bieniawski_1978_mpa(ratings))
    np.testing.assert_array_equal(lower, ratings <= 50)
    np.testing.assert_array_equal(upper, ~lower)


@pytest.mark.parametrize(
    ("q", "strength"),
    [(0, 50), (-8, 100), (-8, -100), (0.00099, 50), (1001, 50), (1, 0), (1, 1001), (np.inf, 50)],
)
def test_barton_says_nothing_off_the_scale_of_q(q, strength):
    assert np.isnan(of(moduli.barton_2002_mpa, q, strength))


@pytest.mark.parametrize("strength", [0, -1, 1001, np.inf, np.nan])
def test_modulus_of_2002_says_nothing_without_a_strength(strength):
    assert np.isnan(of(moduli.hoek_2002_mpa, 50, 0, strength))


def test_the_named_ranges_say_what_is_allowed():
    assert moduli.SERAFIM_PEREIRA_RMR89.describe() == "a number at least 0, at most 50"
    assert moduli.BIENIAWSKI_RMR89.describe() == "a number above 50, at most 100"
    assert moduli.BARTON_Q.describe() == "a number at least 0.001, at most 1000"


def test_the_ends_of_the_scale_of_q_belong_to_it():
    assert of(moduli.barton_2002_mpa, 0.001, 100) == pytest.approx(1000, rel=1e-15)
    assert of(moduli.barton_2002_mpa, 1000, 100) == pytest.approx(100_000, rel=1e-15)


def test_columns_of_different_length_are_refused():
    with pytest.raises(ShapeError, match="same length"):
        moduli.hoek_2002_mpa(np.ones(2), np.ones(2), np.ones(3))
    with pytest.raises(ShapeError, match="same length"):
        moduli.barton_2002_mpa(np.ones(2), np.ones(3))
