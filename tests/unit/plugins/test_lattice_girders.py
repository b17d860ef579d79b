"""Lattice girders from declared bars, by hand."""

import math

import pytest
from tunnelcalc_steel_sets.lattice import Bar, lattice_girder


def test_one_bar_is_a_circle():
    found = lattice_girder([Bar(20.0, 7.0)])
    assert found.area_mm2 == pytest.approx(math.pi * 100, rel=1e-15)
    assert found.inertia_mm4 == pytest.approx(math.pi * 20**4 / 64, rel=1e-15)
    assert found.depth_mm == 20.0
    assert found.centroid_mm == pytest.approx(7.0, rel=1e-15)


def test_two_equal_bars_lie_half_the_distance_off_the_middle():
    """d 20, 100 apart: I = 2 (pi 20^4 / 64 + 100 pi 50^2), depth 120."""
    found = lattice_girder([Bar(20.0, 0.0), Bar(20.0, 100.0)])
    inertia = 2 * (math.pi * 20**4 / 64 + 100 * math.pi * 2500)
    assert found.inertia_mm4 == pytest.approx(inertia, rel=1e-14)
    assert (found.depth_mm, found.centroid_mm) == (120.0, 50.0)


def test_three_bars_balance_about_their_centroid():
    """Two of 20 mm below, one of 30 mm 130 mm above: the areas are as 8 to 9, centroid
    130 x 9 / 17; depth from -10 to 145."""
    found = lattice_girder([Bar(20.0, 0.0), Bar(20.0, 0.0), Bar(30.0, 130.0)])
    centroid = 130 * 9 / 17
    assert found.centroid_mm == pytest.approx(centroid, rel=1e-14)
    lower = 2 * (math.pi * 20**4 / 64 + 100 * math.pi * centroid**2)
    upper = math.pi * 30**4 / 64 + 225 * math.pi * (130 - centroid) ** 2
    assert found.inertia_mm4 == pytest.approx(lower + upper, rel=1e-14)
    assert found.depth_mm == 155.0


def test_the_level_from_which_heights_are_measured_does_not_matter():
    bars = [Bar(25.0, 0.0), Bar(25.0, 10.0), Bar(32.0, 150.0)]
    one = lattice_girder(bars)
    other = lattice_girder([Bar(b.diameter_mm, b.height_mm - 1000) for b in bars])
    assert other.inertia_mm4 == pytest.approx(one.inertia_mm4, rel=1e-12)
    assert other.depth_mm == one.depth_mm


@pytest.mark.parametrize("bars", [[], [Bar(0.0, 1.0)], [Bar(math.nan, 1.0)]])
def test_a_girder_without_bars_is_refused(bars):
    with pytest.raises(ValueError, match="bars"):
        lattice_girder(bars)
