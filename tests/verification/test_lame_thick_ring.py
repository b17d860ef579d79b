"""Closed ring of sprayed concrete: Lame's thick cylinder in plane strain.

Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), art. 28. Here
`scipy.integrate.solve_bvp` solves equilibrium and Hooke's law between the free inner and the
loaded outer face; the program has the closed form. Unknowns: inward displacement u and radial
stress sr, compression positive.
"""

import numpy as np
import pytest
from scipy.integrate import solve_bvp
from tunnelcalc_shotcrete.formulas import (
    inner_hoop_stress_mpa,
    ring_capacity_mpa,
    ring_stiffness_mpa_per_m,
)

RINGS = [
    pytest.param(2.5, 0.15, 15_000.0, 0.20, id="thin"),
    pytest.param(5.2, 0.10, 30_000.0, 0.25, id="thinner-stiff"),
    pytest.param(5.2, 0.60, 10_000.0, 0.0, id="no-Poisson-effect"),
    pytest.param(3.0, 1.50, 20_000.0, 0.45, id="half-filled-nearly-incompressible"),
    pytest.param(1.0, 0.90, 25_000.0, 0.2, id="nearly-full"),
]
PRESSURE = 1.0


def thick_cylinder(radius, thickness, modulus, nu):
    """Outer displacement [m] and inner hoop stress [MPa] under unit pressure outside."""

    def hoop(sr, hoop_strain):
        """In plane strain: E et = (1 - nu^2) st - nu (1 + nu) sr."""
        return (modulus * hoop_strain + nu * (1 + nu) * sr) / (1 - nu**2)

    def rates(r, state):
        u, sr = state
        st = hoop(sr, u / r)
        radial_strain = ((1 - nu**2) * sr - nu * (1 + nu) * st) / modulus
        return np.array([radial_strain, (st - sr) / r])

    def ends(inner, outer):
        return np.array([inner[1], outer[1] - PRESSURE])

    r = np.linspace(radius - thickness, radius, 41)
    guess = np.array([np.full(41, radius / modulus), np.linspace(0, PRESSURE, 41)])
    solution = solve_bvp(rates, ends, r, guess, tol=1e-10, max_nodes=20_000)
    assert solution.success
    inner, outer = solution.y[:, 0], solution.y[:, -1]
    return outer[0], hoop(inner[1], inner[0] / r[0])


@pytest.mark.parametrize(("radius", "thickness", "modulus", "nu"), RINGS)
def test_stiffness_is_that_of_the_thick_cylinder(radius, thickness, modulus, nu):
    movement, _ = thick_cylinder(radius, thickness, modulus, nu)
    found = ring_stiffness_mpa_per_m(np.array([radius]), thickness, modulus, nu)
    np.testing.assert_allclose(found, [PRESSURE / movement], rtol=1e-9)


@pytest.mark.parametrize(("radius", "thickness", "modulus", "nu"), RINGS)
def test_inner_hoop_stress_is_that_of_the_thick_cylinder(radius, thickness, modulus, nu):
    _, stress = thick_cylinder(radius, thickness, modulus, nu)
    found = inner_hoop_stress_mpa(np.array([PRESSURE]), np.array([radius]), thickness)
    np.testing.assert_allclose(found, [stress], rtol=1e-9)


@pytest.mark.parametrize(("radius", "thickness", "modulus", "nu"), RINGS)
def test_capacity_brings_the_inner_face_to_its_strength(radius, thickness, modulus, nu):
    _, stress = thick_cylinder(radius, thickness, modulus, nu)
    found = ring_capacity_mpa(np.array([radius]), thickness, 30.0)
    np.testing.assert_allclose(found * stress, [30.0], rtol=1e-9)


def test_the_often_reprinted_stiffness_is_not_that_of_the_cylinder():
    """(1 - nu) in place of (1 + nu): 1.5 times too stiff for nu = 0.2."""
    radius, thickness, modulus, nu = 2.5, 0.15, 15_000.0, 0.2
    movement, _ = thick_cylinder(radius, thickness, modulus, nu)
    inner = radius - thickness
    reprinted = modulus * (radius**2 - inner**2) / radius
    reprinted /= (1 - nu) * ((1 - 2 * nu) * radius**2 + inner**2)
    assert reprinted * movement / PRESSURE == pytest.approx(1.5, rel=1e-9)
