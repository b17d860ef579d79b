"""Measures of hazards by hand: published relations, written out here."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import all_by, evaluated, sections_of

from tunnelcalc.pipeline.ground_stages import in_situ_stress_stage
from tunnelcalc.pipeline.hazard_stage import hazard_stage


def hazards(drainage: str = "", **columns):
    count = np.size(columns.get("stress_ratio", 1.0))
    return hazard_stage()(in_situ_stress_stage(drainage)(sections_of(count, **columns)))


def test_squeezing_and_face_by_hand():
    """Hoek & Marinos (2000): (0.0034 mi^0.8) sci (1.029 + 0.025 exp(-0.1 mi))^GSI, and
    0.2 (strength / p0)^-2, 0.1 (strength / p0)^-2 exp(...) at the face without support."""
    found = hazards()
    strength = 0.0034 * 10**0.8 * 20 * (1.029 + 0.025 * np.exp(-1.0)) ** 30
    np.testing.assert_allclose(found["squeezing_strength_mpa"], strength, rtol=1e-12)
    np.testing.assert_allclose(
        found["squeezing_strain_pct"], 0.2 * (strength / 5) ** -2, rtol=1e-12
    )
    # At the face without support: 0.1 (1 - p/p0) (strength / p0)^(-(3 p/p0 + 1)/(3.8 p/p0 + 0.54)).
    np.testing.assert_allclose(
        found["face_strain_pct"], 0.1 * (strength / 5) ** (-1 / 0.54), rtol=1e-12
    )


def test_squeezing_looks_at_the_effective_mean_stress():
    wet = hazards("drained", water_head_m=100.0, stress_ratio=[0.5])
    strength = wet["squeezing_strength_mpa"]
    np.testing.assert_allclose(
        wet["squeezing_strain_pct"], 0.2 * (strength / 3.01425) ** -2, rtol=1e-12
    )


@pytest.mark.parametrize(("ratio", "wall"), [(1.0, 10.0), (0.5, 12.5), (2.0, 25.0)])
def test_spalling_depth_follows_from_the_largest_stress_at_the_wall(ratio, wall):
    """Martin, Kaiser & McCreath (1999): R (1.25 smax / sci - 0.51); Kirsch: 3 s1 - s3."""
    found = hazards(stress_ratio=[ratio])
    depth = max(4.0 * (1.25 * wall / 20 - 0.51), 0.0)
    np.testing.assert_allclose(found["spalling_depth_m"], depth, rtol=1e-12, atol=1e-15)


def test_strong_ground_does_not_spall():
    assert hazards(intact_strength_mpa=200.0)["spalling_depth_m"][0] == 0


def test_what_needs_an_index_is_not_known_where_constants_were_entered():
    chosen = all_by(
        strength="mohr_coulomb",
        ground_reaction="mohr_coulomb_perfectly_plastic",
    )
    ground = sections_of(
        gsi=np.nan,
        mi=np.nan,
        rock_mass_modulus_mpa=1500.0,
        friction_angle_deg=28.0,
        cohesion_mpa=0.4,
    )
    found = evaluated(ground, methods=chosen)
    assert np.isnan(found["squeezing_strain_pct"][0])
    assert np.isnan(found["face_strain_pct"][0])
    assert found["spalling_depth_m"][0] > 0
    assert found["closure_mm"][0] > 0
