"""Hoek, Carranza-Torres & Corkum (2002), "Hoek-Brown failure criterion - 2002 edition".

Proc. NARMS-TAC, Toronto, 267-273. The worked example and its printed digits are from memory; its
unit weight is not remembered: 0.027 MN/m3 is the one that gives both printed lines.
"""

import numpy as np
import pytest
from reference import rock_mass
from reference.samples import random_ground

from tunnelcalc.rock_mass.hoek_brown import (
    equivalent_mohr_coulomb,
    global_strength_mpa,
    hoek_brown_constants,
    rock_mass_strength_mpa,
    tensile_strength_mpa,
    tunnel_confinement_mpa,
)

INTACT_STRENGTH = np.array([50.0])
OVERBURDEN = np.array([0.027 * 100])


def slope_confinement(whole, overburden):
    """The paper's relation for slopes, which the program has no use for."""
    return whole * 0.72 * (whole / overburden) ** -0.91


WORKED_EXAMPLE = [
    pytest.param(0.0, tunnel_confinement_mpa, 47.16, 0.58, id="tunnel-100-m-deep-D-0"),
    pytest.param(1.0, slope_confinement, 27.61, 0.35, id="slope-100-m-high-D-1"),
]


@pytest.mark.parametrize(("disturbance", "confinement", "friction", "cohesion"), WORKED_EXAMPLE)
def test_worked_example_gives_the_published_line(disturbance, confinement, friction, cohesion):
    mb, s, a = hoek_brown_constants(np.array([45.0]), np.array([10.0]), np.array([disturbance]))
    whole = global_strength_mpa(INTACT_STRENGTH, mb, s, a)
    line = equivalent_mohr_coulomb(INTACT_STRENGTH, mb, s, a, confinement(whole, OVERBURDEN))
    assert round(float(line.friction_angle_deg[0]), 2) == friction
    assert round(float(line.cohesion_mpa[0]), 2) == cohesion


def test_constants_of_the_worked_example():
    """Independent calculation, by hand from the 2002 equations."""
    mb, s, a = hoek_brown_constants(
        np.array([45.0, 45.0]), np.array([10.0, 10.0]), np.array([0.0, 1.0])
    )
    np.testing.assert_array_equal(np.round(mb, 4), [1.4026, 0.1967])
    np.testing.assert_array_equal(np.round(s, 6), [0.002218, 0.000104])
    np.testing.assert_array_equal(np.round(a, 4), [0.5081, 0.5081])


@pytest.fixture(scope="module")
def ground():
    return random_ground(300, seed=2002)


@pytest.fixture(scope="module")
def rocks(ground):
    names = ("intact_strength_mpa", "mi", "gsi", "disturbance")
    rows = zip(*(ground[name].tolist() for name in names), strict=True)
    return [rock_mass.criterion(*row) for row in rows]


def test_constants_agree_with_the_equations_over_their_whole_range(ground, rocks):
    found = hoek_brown_constants(ground["gsi"], ground["mi"], ground["disturbance"])
    for name in ("mb", "s", "a"):
        expected = [getattr(rock, name) for rock in rocks]
        np.testing.assert_allclose(getattr(found, name), expected, rtol=1e-14)


def test_global_strength_is_the_intercept_of_the_line_fitted_up_to_a_quarter(ground, rocks):
    found = global_strength_mpa(
        ground["intact_strength_mpa"], ground["mb"], ground["s"], ground["a"]
    )
    expected = [rock_mass.global_strength(rock) for rock in rocks]
    np.testing.assert_allclose(found, expected, rtol=1e-11)


def test_friction_and_cohesion_are_those_of_the_least_squares_line(ground, rocks):
    sci, mb, s, a = (ground[name] for name in ("intact_strength_mpa", "mb", "s", "a"))
    stress = ground["in_situ_stress_mpa"]
    whole = global_strength_mpa(sci, mb, s, a)
    line = equivalent_mohr_coulomb(sci, mb, s, a, tunnel_confinement_mpa(whole, stress))
    expected = [
        rock_mass.tunnel_line(rock, largest)
        for rock, largest in zip(rocks, stress.tolist(), strict=True)
    ]
    np.testing.assert_allclose(
        line.friction_angle_deg, [fit.friction_angle_deg for fit in expected], rtol=1e-11
    )
    np.testing.assert_allclose(line.cohesion_mpa, [fit.cohesion for fit in expected], rtol=1e-11)


def test_line_up_to_a_quarter_of_the_intact_strength_gives_the_global_strength(ground):
    """2 c cos(phi) / (1 - sin(phi)) = scm: follows from the paper's derivation."""
    sci, mb, s, a = (ground[name] for name in ("intact_strength_mpa", "mb", "s", "a"))
    line = equivalent_mohr_coulomb(sci, mb, s, a, sci / 4)
    phi = np.radians(line.friction_angle_deg)
    unconfined = 2 * line.cohesion_mpa * np.cos(phi) / (1 - np.sin(phi))
    np.testing.assert_allclose(unconfined, global_strength_mpa(sci, mb, s, a), rtol=1e-12)


def test_unconfined_and_tensile_strength_lie_on_the_criterion(ground, rocks):
    sci = ground["intact_strength_mpa"]
    unconfined = rock_mass_strength_mpa(sci, ground["s"], ground["a"])
    tensile = tensile_strength_mpa(sci, ground["mb"], ground["s"])
    np.testing.assert_allclose(unconfined, [rock.deviator(0.0) for rock in rocks], rtol=1e-12)
    # Under tension on all sides the deviator vanishes: mb (-st) / sci + s = 0.
    np.testing.assert_allclose(ground["mb"] * tensile / sci, ground["s"], rtol=1e-14)
