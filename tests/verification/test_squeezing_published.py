"""Hoek & Marinos (2000), Tunnels & Tunnelling Int. 32, no. 11 and 12; Hoek (1999), Kalgoorlie;
Sakurai (1983, 1997).

The relations are from memory. The boundaries of the bands are published; all other numbers are
independent calculations from the relations.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass import squeezing
from tunnelcalc.rock_mass.hoek_brown import global_strength_mpa, hoek_brown_constants
from tunnelcalc.rock_mass.squeezing import WarningLevel

RATIOS = np.array([0.1, 0.2, 0.3, 0.5])
"""Strength over in-situ stress."""
ONE, NONE = np.ones(4), np.zeros(4)
FIFTH = np.full(4, 0.2)


@pytest.mark.parametrize(("ratio", "band"), [(0.447, 1), (0.283, 2), (0.200, 3), (0.141, 4)])
def test_bands_begin_at_the_published_ratios(ratio, band):
    """Printed with three digits: half of the last one more is still below the boundary."""
    around = np.array([ratio + 0.0006, ratio - 0.0006])
    found = squeezing.squeezing_band(squeezing.squeezing_strain_pct(around, np.ones(2)))
    np.testing.assert_array_equal(found, [band - 1, band])


def test_strength_over_the_quality_of_the_ground():
    quality = np.array([25.0, 35, 45, 60, 75])
    found = squeezing.squeezing_strength_mpa(np.full(5, 35.0), np.full(5, 7.0), quality)
    np.testing.assert_array_equal(np.round(found, 3), [1.557, 2.336, 3.505, 6.442, 11.841])


def test_the_strength_is_not_the_global_strength_of_2002():
    """The same ground under 10 MPa: 8.25 % with its own strength, 2.61 % with the other.

    Followed by hand from the strengths 1.557 and 2.768 MPa.
    """
    columns = [np.array([float(v)]) for v in (35, 7, 25)]
    sci, mi, gsi = columns
    other = global_strength_mpa(sci, *hoek_brown_constants(gsi, mi, np.zeros(1)))
    strains = [
        float(squeezing.squeezing_strain_pct(strength, np.array([10.0]))[0])
        for strength in (squeezing.squeezing_strength_mpa(sci, mi, gsi), other)
    ]
    assert [round(strain, 2) for strain in strains] == [8.25, 2.61]


def test_closure_without_support():
    found = squeezing.squeezing_strain_pct(RATIOS, ONE)
    np.testing.assert_array_equal(np.round(found, 2), [20.0, 5.0, 2.22, 0.80])


def test_strains_of_the_relations_with_support_at_no_support():
    tunnel = squeezing.supported_strain_pct(RATIOS, ONE, NONE)
    face = squeezing.face_strain_pct(RATIOS, ONE, NONE)
    np.testing.assert_array_equal(np.round(tunnel, 2), [10.66, 2.95, 1.39, 0.54])
    np.testing.assert_array_equal(np.round(face, 2), [7.11, 1.97, 0.93, 0.36])


def test_plastic_radius_of_1999():
    bare = squeezing.plastic_radius_ratio_1999(RATIOS, ONE, NONE)
    held = squeezing.plastic_radius_ratio_1999(RATIOS, ONE, FIFTH)
    np.testing.assert_array_equal(np.round(bare, 2), [4.64, 3.13, 2.48, 1.86])
    np.testing.assert_array_equal(np.round(held, 3), [2.637, 2.041, 1.756, 1.454])


def test_closure_of_1999():
    bare = 100 * squeezing.closure_ratio_1999(RATIOS, ONE, NONE)
    held = 100 * squeezing.closure_ratio_1999(RATIOS, ONE, FIFTH)
    np.testing.assert_array_equal(np.round(bare, 2), [20.0, 5.0, 2.22, 0.80])
    assert [f"{value:.3g}" for value in held] == ["4.97", "1.73", "0.935", "0.43"]


@pytest.mark.parametrize(
    ("level", "percent"),
    [(WarningLevel.FIRST, 0.26), (WarningLevel.SECOND, 0.60), (WarningLevel.THIRD, 1.41)],
)
def test_warning_levels_of_a_modulus_of_10000_kgf_cm2(level, percent):
    """One kgf/cm2 is 0.0980665 MPa."""
    found = squeezing.critical_strain_pct(np.array([1e4 * 0.0980665]), level)
    assert round(float(found[0]), 2) == percent
