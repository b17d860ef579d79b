"""Steel sets on blocks: statics and energy of the piece of ring between two blocks.

The blocks press radially; between them the ring is free of load, so that the section in the
middle carries a thrust N0 and a moment and no shear. An angle x from the middle,

    N(x) = N0 cos x,    M(x) = M0 + N0 r (1 - cos x),

with M0 such that neither end turns, and the force of a block is 2 N0 sin th. Integrals are taken
by `scipy.integrate.quad`, the movement of the blocks follows from the elastic energy.
"""

import math

import numpy as np
import pytest
from scipy.integrate import quad
from tunnelcalc_steel_sets.formulas import (
    Blocks,
    Profile,
    blocked_capacity_mpa,
    blocked_stiffness_mpa_per_m,
    hoop_capacity_mpa,
    hoop_stiffness_mpa_per_m,
)

SET = Profile(
    area_m2=4.3e-3,
    inertia_m4=1.45e-5,
    depth_m=0.14,
    yield_strength_mpa=235.0,
    modulus_mpa=200_000.0,
    spacing_m=1.5,
)
HEAVY_SET = Profile(
    area_m2=1.18e-2,
    inertia_m4=1.1e-4,
    depth_m=0.24,
    yield_strength_mpa=355.0,
    modulus_mpa=210_000.0,
    spacing_m=0.8,
)
SETS = [pytest.param(SET, id="light"), pytest.param(HEAVY_SET, id="heavy")]
HALF_ANGLES_DEG = [2.5, 7.5, 11.25, 20.0, 45.0, 60.0]
RADIUS_M = 5.0


def blocks(half_angle_deg, thickness_m=0.075, modulus_mpa=10_000.0):
    return Blocks(math.radians(half_angle_deg), thickness_m, 0.25, modulus_mpa)


def thrust_and_moment(half_angle, axis_m):
    """N(x) and M(x) for N0 = 1, with M0 found so that the slope does not change end to end."""

    def arching(x):
        return axis_m * (1 - math.cos(x))

    middle_moment = -quad(arching, 0, half_angle, epsrel=1e-12)[0] / half_angle
    return math.cos, lambda x: middle_moment + arching(x)


def middle_thrust_per_pressure(half_angle, radius_m, spacing_m):
    """N0 for unit pressure: two thrusts hold the block on its piece of the wall. [MN/MPa]"""
    force = 2 * half_angle * radius_m * spacing_m
    return force / (2 * math.sin(half_angle))


def pressure_at_yield(profile, block, radius_m):
    """From the largest fibre stress anywhere between two blocks, on a fine grid. [MPa]"""
    axis = radius_m - block.thickness_m - profile.depth_m / 2
    thrust, moment = thrust_and_moment(block.half_angle_rad, axis)
    angles = np.linspace(0, block.half_angle_rad, 721)
    section_modulus = 2 * profile.inertia_m4 / profile.depth_m
    stress = max(thrust(x) / profile.area_m2 + abs(moment(x)) / section_modulus for x in angles)
    middle = middle_thrust_per_pressure(block.half_angle_rad, radius_m, profile.spacing_m)
    return profile.yield_strength_mpa / (stress * middle)


def movement_by_energy(profile, block, radius_m):
    """Movement of ring and block for unit pressure, axis of the ring at R, where the published
    stiffness has it: force x movement = twice the energy."""
    half = block.half_angle_rad
    middle = middle_thrust_per_pressure(half, radius_m, profile.spacing_m)
    thrust, moment = thrust_and_moment(half, radius_m)
    stiff_axially = profile.modulus_mpa * profile.area_m2
    stiff_in_bending = profile.modulus_mpa * profile.inertia_m4

    def twice_energy(x):
        return thrust(x) ** 2 / stiff_axially + moment(x) ** 2 / stiff_in_bending

    energy = 2 * quad(twice_energy, 0, half, epsrel=1e-12)[0] * radius_m * middle**2
    force = 2 * half * radius_m * profile.spacing_m
    squeezed = force * block.thickness_m / (block.modulus_mpa * block.width_m**2)
    return energy / force, squeezed


@pytest.mark.parametrize("half_angle", HALF_ANGLES_DEG)
@pytest.mark.parametrize("profile", SETS)
def test_capacity_is_first_yield_by_statics(profile, half_angle):
    block = blocks(half_angle)
    found = blocked_capacity_mpa(np.array([RADIUS_M]), profile, block)
    np.testing.assert_allclose(found, [pressure_at_yield(profile, block, RADIUS_M)], rtol=1e-10)


@pytest.mark.parametrize("half_angle", HALF_ANGLES_DEG)
@pytest.mark.parametrize("profile", SETS)
def test_stiffness_is_that_of_the_elastic_ring(profile, half_angle):
    """The published stiffness takes the thrust as N0 all along when it shortens the ring. By
    energy the movement is larger, by no more than (radius of gyration / R)^2 of itself."""
    block = blocks(half_angle)
    ring, squeezed = movement_by_energy(profile, block, RADIUS_M)
    published = 1 / blocked_stiffness_mpa_per_m(np.array([RADIUS_M]), profile, block)[0] - squeezed
    gyration = profile.inertia_m4 / (profile.area_m2 * RADIUS_M**2)
    rounding = 1e-9
    assert 1 - rounding <= ring / published <= 1 + gyration + rounding


@pytest.mark.parametrize("half_angle", [0.5, *HALF_ANGLES_DEG])
@pytest.mark.parametrize("radius", [0.6, 2.0, 5.0, 15.0, 30.0])
@pytest.mark.parametrize("profile", SETS)
def test_blocks_never_make_a_set_stronger_or_stiffer_than_full_contact(profile, radius, half_angle):
    radii, block = np.array([radius]), blocks(half_angle, thickness_m=0.0)
    assert blocked_capacity_mpa(radii, profile, block) <= hoop_capacity_mpa(radii, profile)
    stiffness = blocked_stiffness_mpa_per_m(radii, profile, block)
    assert stiffness <= hoop_stiffness_mpa_per_m(radii, profile) * (1 + 1e-12)


def test_many_blocks_are_full_contact():
    radii, block = np.array([RADIUS_M]), blocks(0.5, thickness_m=0.0)
    np.testing.assert_allclose(
        blocked_capacity_mpa(radii, SET, block), hoop_capacity_mpa(radii, SET), rtol=3e-3
    )
    np.testing.assert_allclose(
        blocked_stiffness_mpa_per_m(radii, SET, block),
        hoop_stiffness_mpa_per_m(radii, SET),
        rtol=1e-5,
    )


def printed_capacity(profile, block, radius_m):
    """As in Hoek & Brown (1980) and Brady & Brown, App. C; only here, to show what it is worth."""
    th, x = block.half_angle_rad, profile.depth_m
    arm = radius_m - (block.thickness_m + 0.5 * x)
    inner = 3 * profile.inertia_m4 + x * profile.area_m2 * arm * (1 - math.cos(th))
    top = 3 * profile.area_m2 * profile.inertia_m4 * profile.yield_strength_mpa
    return top / (2 * profile.spacing_m * radius_m * th * inner)


@pytest.mark.parametrize("half_angle", [2.5, 5.0, 7.5, 11.25])
def test_printed_capacity_is_more_than_statics_allows(half_angle):
    block = blocks(half_angle)
    printed = printed_capacity(SET, block, RADIUS_M)
    assert printed > 1.5 * pressure_at_yield(SET, block, RADIUS_M)


def test_printed_capacity_of_close_blocks_is_more_than_the_whole_section_can_carry():
    block = blocks(5.0)
    assert printed_capacity(SET, block, RADIUS_M) > hoop_capacity_mpa(np.array([RADIUS_M]), SET)[0]
