"""Squeezing relations where the answer is known by hand, and their ranges."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import squeezing
from tunnelcalc.rock_mass.squeezing import WarningLevel


def of(function, *values):
    """The result of one section."""
    found = function(*(np.array([float(value)]) for value in values))
    assert found.shape == (1,)
    return float(found[0])


def test_closure_is_0_2_per_cent_where_the_strength_is_the_stress():
    assert of(squeezing.squeezing_strain_pct, 7, 7) == 0.2


def test_closure_is_fourfold_for_half_the_strength():
    assert of(squeezing.squeezing_strain_pct, 3.5, 7) == 0.8


def test_the_boundaries_of_the_bands_belong_to_the_higher_one():
    found = squeezing.squeezing_band(np.array([0, 0.999, 1, 2.499, 2.5, 4.999, 5, 9.999, 10, 500]))
    np.testing.assert_array_equal(found, [0, 0, 1, 1, 2, 2, 3, 3, 4, 4])


def test_a_closure_that_is_none_has_no_band():
    found = squeezing.squeezing_band(np.array([np.nan, 3, -0.001]))
    np.testing.assert_array_equal(found, [np.nan, 2, np.nan])


def test_full_support_leaves_no_strain():
    assert of(squeezing.supported_strain_pct, 1, 10, 10) == 0
    assert of(squeezing.face_strain_pct, 1, 10, 10) == 0


def test_strains_under_support_where_the_strength_is_the_stress():
    """1 to any power is 1: 0.15 (1 - 1/4) and 0.1 (1 - 1/4)."""
    assert of(squeezing.supported_strain_pct, 10, 10, 2.5) == pytest.approx(0.1125, rel=1e-15)
    assert of(squeezing.face_strain_pct, 10, 10, 2.5) == pytest.approx(0.075, rel=1e-15)


def test_strains_under_support_in_weak_ground():
    """pi / p0 = 1/5 makes the exponent -1.6 / 1.3: with scm / p0 = 2^-1.3 the power is 2^1.6."""
    strength = 10 * 2**-1.3
    tunnel = of(squeezing.supported_strain_pct, strength, 10, 2)
    face = of(squeezing.face_strain_pct, strength, 10, 2)
    assert tunnel == pytest.approx(0.15 * 0.8 * 2**1.6, rel=1e-14)
    assert face == pytest.approx(0.1 * 0.8 * 2**1.6, rel=1e-14)


def test_relations_of_1999_where_the_strength_is_the_stress():
    assert of(squeezing.plastic_radius_ratio_1999, 10, 10, 0) == 1.25
    assert of(squeezing.plastic_radius_ratio_1999, 10, 10, 4) == 1.0
    assert of(squeezing.closure_ratio_1999, 10, 10, 0) == 0.002
    assert of(squeezing.closure_ratio_1999, 10, 10, 4) == pytest.approx(0.001, rel=1e-15)


def test_relations_of_1999_end_below_half_the_stress():
    for function in (squeezing.plastic_radius_ratio_1999, squeezing.closure_ratio_1999):
        assert np.isfinite(of(function, 1, 10, 4.99))
        assert np.isnan(of(function, 1, 10, 5))


def test_plastic_radius_of_1999_says_nothing_of_elastic_ground():
    """1.25 x^-0.57 = 1 at x = 1.25^(1 / 0.57) = 1.479."""
    assert of(squeezing.plastic_radius_ratio_1999, 1.47, 1, 0) > 1
    assert np.isnan(of(squeezing.plastic_radius_ratio_1999, 1.49, 1, 0))


@pytest.mark.parametrize(
    ("function", "most"),
    [
        (squeezing.supported_strain_pct, 1.0),
        (squeezing.face_strain_pct, 1.0),
        (squeezing.plastic_radius_ratio_1999, 0.49),
        (squeezing.closure_ratio_1999, 0.49),
    ],
)
def test_support_outside_the_range_gives_nothing(function, most):
    assert np.isfinite(of(function, 2, 10, most * 10))
    assert np.isnan(of(function, 2, 10, -0.001))
    assert np.isnan(of(function, 2, 10, 10.001))
    assert np.isnan(of(function, 0, 10, 1))
    assert np.isnan(of(function, -2, 10, 1))
    assert np.isnan(of(function, 2, 0, 0))
    assert np.isnan(of(function, 2, -10, -1))


def test_closure_without_strength_or_stress_is_unknown():
    assert np.isnan(of(squeezing.squeezing_strain_pct, 0, 10))
    assert np.isnan(of(squeezing.squeezing_strain_pct, -1, 10))
    assert np.isnan(of(squeezing.squeezing_strain_pct, 1, 0))
    assert np.isnan(of(squeezing.squeezing_strain_pct, 1, -10))


def test_squeezing_strength_of_mi_1_and_no_structure_left():
    """GSI towards 0 leaves 0.0034 sci for mi = 1."""
    assert of(squeezing.squeezing_strength_mpa, 100, 1, 1e-14) == pytest.approx(0.34, rel=1e-12)
    assert np.isnan(of(squeezing.squeezing_strength_mpa, 100, 0, 50))
    assert np.isnan(of(squeezing.squeezing_strength_mpa, 100, -5, 50))


def test_critical_strain_falls_tenfold_for_a_modulus_10000_times_higher():
    low, high = (
        of(lambda e: squeezing.critical_strain_pct(e, WarningLevel.SECOND), modulus)
        for modulus in (10, 100_000)
    )
    assert low / high == pytest.approx(10, rel=1e-13)


def test_critical_strain_needs_a_modulus():
    found = squeezing.critical_strain_pct(np.array([0.0, -5, np.nan, 100]), WarningLevel.FIRST)
    np.testing.assert_array_equal(np.isnan(found), [True, True, True, False])


def test_columns_of_different_length_are_refused():
    two, three = np.ones(2), np.ones(3)
    with pytest.raises(ShapeError, match="same length"):
        squeezing.squeezing_strain_pct(two, three)
    for function in (
        squeezing.squeezing_strength_mpa,
        squeezing.supported_strain_pct,
        squeezing.face_strain_pct,
        squeezing.plastic_radius_ratio_1999,
        squeezing.closure_ratio_1999,
    ):
        with pytest.raises(ShapeError, match="same length"):
            function(two, two, three)
