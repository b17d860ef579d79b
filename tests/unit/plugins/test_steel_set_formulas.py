"""Steel sets by hand. Blocked sets against statics: see the verification tests."""

import math

import numpy as np
import pytest
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    Profile,
    blocked_capacity_mpa,
    blocked_stiffness_mpa_per_m,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)

SET = Profile(
    area_m2=0.005,
    inertia_m4=2e-5,
    depth_m=0.15,
    yield_strength_mpa=240.0,
    modulus_mpa=200_000.0,
    spacing_m=1.25,
)
RADIUS = np.array([4.0])
NO_GIVE = {"thickness_m": 0.0, "width_m": 0.2, "modulus_mpa": 1e4}


def test_hoop_in_full_contact():
    """K = 200 000 x 0.005 / (1.25 x 16) = 50 MPa/m, capacity 240 x 0.005 / (1.25 x 4) = 0.24 MPa:
    the hoop shortens by p / K = 4.8 mm at yield, 240 / 200 000 of 4 m."""
    stiffness, capacity = hoop_stiffness_mpa_per_m(RADIUS, SET), hoop_capacity_mpa(RADIUS, SET)
    assert stiffness[0] == pytest.approx(50, rel=1e-14)
    assert capacity[0] == pytest.approx(0.24, rel=1e-14)
    assert capacity[0] / stiffness[0] == pytest.approx(240 / 200_000 * 4.0, rel=1e-14)


def test_two_half_rings_between_opposite_blocks():
    """th = 90 degrees, outside the range of the input but known: the bending term of the ring is
    pi^2 / 8 - 1; thrust at the block 0, moment 2 N0 r / pi."""
    half = Blocks(half_angle_rad=math.pi / 2, **NO_GIVE)
    bending = 1.25 * 4.0**4 / (200_000 * 2e-5) * (math.pi**2 / 8 - 1)
    stiffness = blocked_stiffness_mpa_per_m(RADIUS, SET, half)[0]
    assert 1 / stiffness == pytest.approx(1 / 50 + bending, rel=1e-13)
    middle_thrust = 1.25 * 4.0 * math.pi / 2
    moment = 2 / math.pi * middle_thrust * (4.0 - 0.075)
    stress = moment * 0.075 / 2e-5
    assert blocked_capacity_mpa(RADIUS, SET, half)[0] == pytest.approx(240 / stress, rel=1e-13)


def test_soft_blocks_add_their_own_give():
    """A block takes 2 th R S of the wall: th 0.2, so 2 m2; 0.1 m of 500 MPa on 0.04 m2 gives
    2 x 0.1 / (500 x 0.04) = 0.01 m a MPa."""
    hard = Blocks(half_angle_rad=0.2, **NO_GIVE)
    soft = Blocks(half_angle_rad=0.2, thickness_m=0.1, width_m=0.2, modulus_mpa=500.0)
    added = 1 / blocked_stiffness_mpa_per_m(RADIUS, SET, soft)[0]
    added -= 1 / blocked_stiffness_mpa_per_m(RADIUS, SET, hard)[0]
    assert added == pytest.approx(0.01, rel=1e-12)


def test_wider_spaced_blocks_make_a_weaker_and_softer_ring():
    rings = [Blocks(half_angle_rad=math.radians(th), **NO_GIVE) for th in (2, 5, 10, 20, 40, 60)]
    capacity = [blocked_capacity_mpa(RADIUS, SET, ring)[0] for ring in rings]
    stiffness = [blocked_stiffness_mpa_per_m(RADIUS, SET, ring)[0] for ring in rings]
    assert np.all(np.diff(capacity) < 0)
    assert np.all(np.diff(stiffness) < 0)
