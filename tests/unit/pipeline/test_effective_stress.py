"""Stresses less water by hand: 25 kN/m3 over 196 m of cover and a radius of 4 m, head 100 m."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import sections_of

from tunnelcalc.pipeline.ground_stages import in_situ_stress_stage

RATIOS = [1.0, 0.5, 2.0, 0.8, 1.25, np.nextafter(0.8, 0), np.nextafter(1.25, 2)]


def stressed(drainage: str, head_m: float, **columns):
    ground = sections_of(len(RATIOS), stress_ratio=RATIOS, water_head_m=head_m, **columns)
    return in_situ_stress_stage(drainage)(ground)


@pytest.mark.parametrize("drainage", ["drained", "watertight"])
def test_water_is_taken_off_the_vertical_stress_before_the_ratio_is_applied(drainage):
    found = stressed(drainage, 100.0)
    np.testing.assert_allclose(found["vertical_stress_mpa"], 5.0, rtol=1e-15)
    np.testing.assert_allclose(found["water_pressure_mpa"], 0.981, rtol=1e-15)
    np.testing.assert_allclose(found["effective_vertical_stress_mpa"], 4.019, rtol=1e-14)
    horizontal = found["effective_horizontal_stress_mpa"][:3]
    np.testing.assert_allclose(horizontal, [4.019, 2.0095, 8.038], rtol=1e-14)
    np.testing.assert_allclose(
        found["in_situ_stress_mpa"][:3], [4.019, 3.01425, 6.0285], rtol=1e-14
    )


def test_the_larger_stress_stands_where_stresses_are_far_from_equal_and_only_there():
    found = stressed("drained", 100.0)["larger_stress_mpa"]
    expected = [np.nan, 4.019, 8.038, np.nan, np.nan, 4.019, 5.02375]
    np.testing.assert_allclose(found, expected, rtol=1e-14)


def test_water_presses_on_a_watertight_lining_alone():
    assert np.all(stressed("watertight", 100.0)["lining_water_mpa"] == 0.981)
    assert np.all(stressed("drained", 100.0)["lining_water_mpa"] == 0)
    assert np.all(stressed("", 100.0)["lining_water_mpa"] == 0)


def test_without_stated_drainage_stresses_are_total_and_that_is_marked():
    wet, dry = stressed("", 100.0), stressed("", np.nan)
    for name in ("effective_vertical_stress_mpa", "in_situ_stress_mpa", "larger_stress_mpa"):
        assert wet[name].tobytes() == dry[name].tobytes()
    assert np.all(wet["effective_vertical_stress_mpa"] == wet["vertical_stress_mpa"])
    assert np.all(wet["water_left_out"])
    assert not np.any(dry["water_left_out"])


def test_flow_to_a_drained_lining_is_marked():
    assert np.all(stressed("drained", 100.0)["seepage_forces"])
    assert not np.any(stressed("watertight", 100.0)["seepage_forces"])
    assert not np.any(stressed("drained", 0.0)["seepage_forces"])


@pytest.mark.parametrize("head_m", [0.0, np.nan])
@pytest.mark.parametrize("drainage", ["", "drained", "watertight"])
def test_no_head_leaves_stresses_as_they_are(drainage, head_m):
    found = stressed(drainage, head_m)
    assert np.all(found["water_pressure_mpa"] == 0)
    assert np.all(found["effective_vertical_stress_mpa"] == 5.0)
    assert not np.any(found["water_left_out"])


def test_a_measured_vertical_stress_is_total_stress():
    found = stressed("drained", 100.0, vertical_stress_mpa=3.0)
    np.testing.assert_allclose(found["effective_vertical_stress_mpa"], 2.019, rtol=1e-14)
