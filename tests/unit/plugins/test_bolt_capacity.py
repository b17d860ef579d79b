"""Limits of a bolt by hand."""

import math

import numpy as np
import pytest
from tunnelcalc_rock_bolts.capacity import (
    bar_force_kn,
    bond_force_kn,
    least_limit,
    length_beyond_plastic_zone_m,
    spread_pressure_mpa,
)


def test_bar_of_25_mm_at_500_mpa():
    """pi 25^2 / 4 = 490.87 mm2, times 500 N/mm2 = 245.4 kN."""
    assert bar_force_kn(25.0, 500.0) == pytest.approx(math.pi * 625 / 4 * 0.5, rel=1e-15)
    assert bar_force_kn(25.0, 500.0) == pytest.approx(245.4, abs=0.05)


def test_length_beyond_the_plastic_zone():
    """Bolts of 4 m in an opening of 5 m: plastic radius 5 (none), 7, 9 and 9.5 m."""
    plastic = np.array([5.0, 7.0, 9.0, 9.5, np.nan])
    found = length_beyond_plastic_zone_m(4.0, np.full(5, 5.0), plastic)
    np.testing.assert_array_equal(found, [4.0, 2.0, 0.0, 0.0, np.nan])
    np.testing.assert_array_equal(bond_force_kn(50.0, found), [200.0, 100.0, 0.0, 0.0, np.nan])


def test_the_least_limit_governs_and_is_named():
    limits = {
        "bar_yield": np.array([245.0, 245.0, 245.0, 245.0]),
        "plate": np.array([200.0, 300.0, 245.0, 200.0]),
        "bond": np.array([250.0, 100.0, 245.0, np.nan]),
    }
    found = least_limit(limits, 0.8)
    np.testing.assert_allclose(found.capacity_kn, [160.0, 80.0, 196.0, np.nan], rtol=1e-15)
    assert found.governing.tolist() == ["plate", "bond", "bar_yield", ""]


def test_a_nan_in_the_first_limit_leaves_no_name():
    limits = {"bar_yield": np.array([np.nan]), "plate": np.array([1.0])}
    found = least_limit(limits, 1.0)
    assert math.isnan(found.capacity_kn[0])
    assert found.governing.tolist() == [""]


@pytest.mark.parametrize("factor", [0.0, 1.01, math.nan])
def test_a_factor_outside_its_range_is_refused(factor):
    with pytest.raises(ValueError, match="service_factor"):
        least_limit({"plate": np.array([1.0])}, factor)


def test_a_bolt_without_limits_is_refused():
    with pytest.raises(ValueError, match="limit"):
        least_limit({}, 1.0)


def test_pressure_is_force_over_the_share_of_wall():
    """180 kN on 1.5 m by 1.2 m: 0.1 MPa."""
    assert spread_pressure_mpa(np.array([180.0]), 1.5, 1.2)[0] == pytest.approx(0.1, rel=1e-15)
