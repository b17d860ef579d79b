"""Utilisation around the lining by hand, and what an unlined or unequal ring must give."""

import numpy as np
import pytest
from tunnelcalc_composite_lining.composite_section import shotcrete_part
from tunnelcalc_composite_lining.einstein_schwartz import (
    LiningForces,
    full_slip_forces,
    no_slip_forces,
    relative_stiffness,
    shear_swing_mn_per_m,
)
from tunnelcalc_composite_lining.utilisation import utilisation_at, worst_utilisation

ONE = np.ones(1)


def ring(tension=2.0):
    """0.2 m of shotcrete, 25 MPa."""
    return [
        shotcrete_part(
            "shotcrete",
            thickness_m=0.2,
            modulus_mpa=20_000.0 * ONE,
            poisson_ratio=0.2,
            compressive_strength_mpa=25.0 * ONE,
            tensile_strength_mpa=tension * ONE,
        )
    ]


def forces(mean, swing, moment):
    return LiningForces(mean * ONE, swing * ONE, moment * ONE, ONE)


def test_compression_governs_at_the_springline():
    """N 3 MN/m on 0.2 m: 15 MPa; M 0.02: 0.02 x 6 / 0.04 = 3 MPa; 18 / 25, at factor 1.25 0.9."""
    found = worst_utilisation(forces(2.5, 0.5, 0.02), ring(), 1.25)
    assert found.utilisation[0] == pytest.approx(0.9, rel=1e-14)
    assert found.angle_deg[0] == 0.0
    assert found.governing[0] == "shotcrete, compression"


def test_tension_governs_at_the_crown():
    """N 0.5 - 0.3 = 0.2: 1 MPa; M 0.02: 3 MPa; tension 2 over 2 = 1. At the springline -1."""
    found = worst_utilisation(forces(0.5, 0.3, 0.02), ring(), 1.0)
    assert found.utilisation[0] == pytest.approx(1.0, rel=1e-14)
    assert found.angle_deg[0] == 90.0
    assert found.governing[0] == "shotcrete, tension"


def test_utilisation_halfway_has_no_moment():
    found = utilisation_at(forces(2.0, 0.7, 0.05), ring(), 1.0, np.array([45.0]))
    assert found[0] == pytest.approx(10 / 25, rel=1e-14)


def test_equal_stress_is_used_alike_at_every_angle():
    found = worst_utilisation(forces(2.0, 0.0, 0.0), ring(), 1.0)
    assert (found.utilisation[0], found.angle_deg[0]) == (pytest.approx(0.4), 0.0)


def test_tension_on_a_part_that_bears_none_is_infinite():
    found = worst_utilisation(forces(0.1, 0.0, 0.02), ring(tension=0.0), 1.0)
    assert found.utilisation[0] == np.inf
    held = worst_utilisation(forces(1.0, 0.0, 0.02), ring(tension=0.0), 1.0)
    assert held.utilisation[0] == pytest.approx(8 / 25)


def test_a_row_without_forces_stays_nan():
    found = worst_utilisation(forces(np.nan, 0.0, 0.0), ring(), 1.0)
    assert np.isnan(found.utilisation[0])
    assert np.isnan(found.angle_deg[0])
    assert found.governing[0] == ""


def relative(axial, bending):
    return relative_stiffness(
        radius_m=5 * ONE,
        ground_modulus_mpa=1000 * ONE,
        ground_poisson_ratio=0.25 * ONE,
        axial_stiffness_mn_per_m=axial * ONE,
        bending_stiffness_mnm2_per_m=bending * ONE,
    )


@pytest.mark.parametrize("solve", [full_slip_forces, no_slip_forces])
def test_a_lining_without_stiffness_has_no_forces(solve):
    found = solve(3 * ONE, 0.5 * ONE, 5 * ONE, 0.25 * ONE, relative(0.0, 0.0))
    assert [force[0] for force in found[:3]] == [0.0, 0.0, 0.0]


@pytest.mark.parametrize("solve", [full_slip_forces, no_slip_forces])
def test_a_very_soft_lining_carries_nothing(solve):
    found = solve(3 * ONE, 0.5 * ONE, 5 * ONE, 0.25 * ONE, relative(1e-4, 1e-7))
    assert abs(found.mean_thrust_mn_per_m[0]) < 1e-5
    assert abs(found.moment_swing_mnm_per_m[0]) < 1e-7


@pytest.mark.parametrize("solve", [full_slip_forces, no_slip_forces])
def test_equal_stress_bends_nothing(solve):
    found = solve(3 * ONE, 1.0 * ONE, 5 * ONE, 0.25 * ONE, relative(5000.0, 20.0))
    assert found.thrust_swing_mn_per_m[0] == 0
    assert found.moment_swing_mnm_per_m[0] == 0


def test_shear_is_the_change_of_moment_along_the_ring():
    """M = 0.1 cos 2 theta on R = 5: steepest at 45 degrees, 0.2 / 5 MN/m."""
    assert shear_swing_mn_per_m(forces(1.0, 0.0, -0.1), 5 * ONE)[0] == pytest.approx(0.04)
