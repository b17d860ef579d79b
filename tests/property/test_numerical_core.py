"""What holds for every ground and every support: of the ground reaction and the equilibrium.

Values are drawn over the whole range that the inputs allow, ends included.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve, ground_reaction
from tunnelcalc.rock_mass.hoek_brown import hoek_brown_constants
from tunnelcalc.support.equilibrium import equilibrium, pressure_at_closure

QUADRATURE = 3e-9
"""The error of a closure that the program's quadrature may leave. [-]"""
ROUNDING = 1e-11
"""What rounding may leave of a plastic radius in the weakest ground. [-]"""
CHUNKS = [1, 3, 17, 1000]
MOST_CHUNKS = 200

shares = st.floats(0, 1)


@st.composite
def grounds(draw):
    """Columns of one section."""
    gsi = draw(st.floats(0.5, 100) | st.sampled_from([0.5, 20, 100]))
    disturbance = draw(st.floats(0, 1) | st.sampled_from([0, 1]))
    mb, s, a = hoek_brown_constants(
        *(np.array([float(v)]) for v in (gsi, draw(st.floats(1, 40)), disturbance))
    )
    values = {
        "in_situ_stress_mpa": draw(st.floats(0.05, 100)),
        "intact_strength_mpa": draw(st.floats(0.5, 1000) | st.sampled_from([0.5, 5, 1000])),
        "deformation_modulus_mpa": draw(st.floats(10, 100_000)),
        "poisson_ratio": draw(st.floats(0, 0.4999) | st.sampled_from([0, 0.4999])),
        "dilation_deg": draw(st.floats(0, 60) | st.sampled_from([0, 60])),
    }
    columns = {name: np.array([float(value)]) for name, value in values.items()}
    return columns | {"mb": mb, "s": s, "a": a}


def of_one(ground, pressures, radius=1.0, **changed):
    """Plastic radius and closure of one section under several pressures. [m]"""
    one = {name: values[0] for name, values in (ground | changed).items()}
    return ground_reaction(np.asarray(pressures), radius_m=np.array(radius), **one)


@given(grounds(), shares, shares)
def test_closure_falls_and_the_ring_shrinks_as_the_pressure_rises(ground, one, other):
    p0 = ground["in_situ_stress_mpa"][0]
    found = of_one(ground, np.sort([one * p0, other * p0]))
    assume(np.isfinite(found.closure_m).all())
    assert found.closure_m[1] <= found.closure_m[0] * (1 + QUADRATURE)
    assert found.plastic_radius_m[1] <= found.plastic_radius_m[0] * (1 + ROUNDING)
    assert np.all(found.closure_m >= 0)


@given(grounds(), shares)
def test_plastic_radius_is_never_less_than_the_radius(ground, share):
    pressure = [0, share * ground["in_situ_stress_mpa"][0]]
    radii = of_one(ground, pressure).plastic_radius_m
    assert np.all((radii >= 1) | np.isnan(radii))


@given(grounds(), shares)
def test_closure_is_never_less_than_that_of_elastic_ground(ground, share):
    p0, modulus = ground["in_situ_stress_mpa"][0], ground["deformation_modulus_mpa"][0]
    closure = of_one(ground, [share * p0]).closure_m[0]
    assume(np.isfinite(closure))
    elastic = (p0 - share * p0) * (1 + ground["poisson_ratio"][0]) / modulus
    assert closure >= elastic * (1 - QUADRATURE)


@given(grounds(), shares, st.floats(0.5, 30))
def test_state_in_radii_does_not_depend_on_the_radius(ground, share, radius):
    pressure = [share * ground["in_situ_stress_mpa"][0]]
    unit, scaled = of_one(ground, pressure), of_one(ground, pressure, radius)
    np.testing.assert_allclose(scaled.closure_m, unit.closure_m * radius, rtol=1e-15)
    np.testing.assert_allclose(scaled.plastic_radius_m, unit.plastic_radius_m * radius, rtol=1e-15)


@given(grounds(), shares, st.floats(0.01, 100))
def test_closure_goes_with_one_over_the_modulus(ground, share, factor):
    pressure = [share * ground["in_situ_stress_mpa"][0]]
    stiffer = {"deformation_modulus_mpa": ground["deformation_modulus_mpa"] * factor}
    one, other = of_one(ground, pressure), of_one(ground, pressure, **stiffer)
    np.testing.assert_allclose(other.closure_m * factor, one.closure_m, rtol=1e-14)
    np.testing.assert_array_equal(other.plastic_radius_m, one.plastic_radius_m)


@given(grounds(), st.floats(0, 0.99), st.floats(1e-3, 1e3))
def test_stresses_in_another_unit_change_nothing(ground, share, factor):
    """Closure and plastic radius follow from ratios of stresses, strengths and moduli."""
    p0 = ground["in_situ_stress_mpa"][0]
    stresses = ("in_situ_stress_mpa", "intact_strength_mpa", "deformation_modulus_mpa")
    scaled = {name: ground[name] * factor for name in stresses}
    one = of_one(ground, [share * p0])
    other = of_one(ground, [share * scaled["in_situ_stress_mpa"][0]], **scaled)
    assume(one.closure_m[0] < 1e6)  # beyond, rounding alone moves the closure
    np.testing.assert_allclose(other.closure_m, one.closure_m, rtol=1e-8)
    np.testing.assert_allclose(other.plastic_radius_m, one.plastic_radius_m, rtol=1e-9)


def at_rest(ground, radius, stiffness, installed_shares):
    """Rest of one section with elements installed at shares of the free closure, and that."""
    curve = HoekBrownCurve.of_ground(**ground)
    free = curve.at(np.zeros(1)).closure_ratio * radius
    installed = np.array(installed_shares).reshape(-1, 1) * free
    rest = equilibrium(
        curve, np.array([radius]), np.array(stiffness, float).reshape(-1, 1), installed
    )
    return rest, free[0], installed


stiffnesses = st.floats(0.1, 1e6) | st.sampled_from([0.0, 1e9])
elements = st.lists(st.tuples(stiffnesses, st.floats(0, 1.2)), min_size=1, max_size=4)


@given(grounds(), st.floats(0.5, 30), elements)
@settings(max_examples=200, deadline=None)
def test_ground_and_elements_at_rest_agree_on_the_closure(ground, radius, support):
    stiffness, installed_shares = map(list, zip(*support, strict=True))
    rest, free, installed = at_rest(ground, radius, stiffness, installed_shares)
    assert rest.converged[0] == np.isfinite(free)
    assume(np.isfinite(free))
    pressure, p0 = rest.support_pressure_mpa[0], ground["in_situ_stress_mpa"][0]
    assert 0 <= pressure <= p0
    assert rest.closure_m[0] <= free * (1 + QUADRATURE)
    parts = rest.element_pressure_mpa[:, 0]
    np.testing.assert_allclose(parts.sum(), pressure, rtol=1e-12)
    acting = parts > 0
    if acting.any():
        # Each spring that carries something says where the wall is; the ground does as well.
        held = installed[acting, 0] + parts[acting] / np.array(stiffness)[acting]
        curve = HoekBrownCurve.of_ground(**ground)
        slope = -curve.at(np.array([pressure])).slope[0] * radius
        apart = np.abs(held - rest.closure_m[0])
        assert np.all(apart <= 1e-8 * rest.closure_m[0] + slope * max(1e-8 * pressure, 1e-12 * p0))


@given(grounds(), st.floats(0.5, 30), elements, st.floats(1, 100))
@settings(max_examples=200, deadline=None)
def test_stiffer_support_never_raises_the_closure(ground, radius, support, factor):
    stiffness, installed_shares = map(list, zip(*support, strict=True))
    rest, free, _ = at_rest(ground, radius, stiffness, installed_shares)
    assume(np.isfinite(free))
    slack = QUADRATURE * ground["in_situ_stress_mpa"][0]
    stiffer, _, _ = at_rest(ground, radius, np.array(stiffness) * factor, installed_shares)
    more, _, _ = at_rest(ground, radius, [*stiffness, 50.0], [*installed_shares, 0.3])
    for other in (stiffer, more):
        assert other.closure_m[0] <= rest.closure_m[0] * (1 + QUADRATURE)
        assert other.support_pressure_mpa[0] >= rest.support_pressure_mpa[0] - slack


@given(grounds(), st.floats(1e-4, 0.1))
def test_needed_pressure_keeps_the_closure_within_its_limit(ground, limit):
    curve = HoekBrownCurve.of_ground(**ground)
    pressure = pressure_at_closure(curve, np.ones(1), np.array([limit]))
    assert 0 <= pressure[0] < ground["in_situ_stress_mpa"][0]
    closure = curve.at(pressure).closure_ratio[0]
    if pressure[0] > 0:
        assert closure == pytest.approx(limit, rel=1e-6)
    else:
        assert closure <= limit


COUNT = 1000


@pytest.fixture(scope="module")
def many():
    """Ground, radius, pressures, stiffness (3, n) and closure at installation (3, n)."""
    ground = random_ground(COUNT, seed=60)
    draw = np.random.default_rng(61)
    curve = HoekBrownCurve.of_ground(**curve_columns(ground))
    free = curve.at(np.zeros(COUNT)).closure_ratio * ground["radius_m"]
    pressure = draw.random(COUNT) ** 3 * ground["in_situ_stress_mpa"]
    stiffness = np.exp(draw.uniform(0, 9, (3, COUNT)))
    return ground, pressure, stiffness, draw.uniform(0, 1.1, (3, COUNT)) * free


def every_result(many, rows):
    """(k, n) all that the curve and the equilibrium give for the sections `rows`."""
    ground, pressure, stiffness, installed = many
    curve = HoekBrownCurve.of_ground(**{n: v[rows] for n, v in curve_columns(ground).items()})
    radius = ground["radius_m"][rows]
    rest = equilibrium(curve, radius, stiffness[:, rows], installed[:, rows])
    needed = pressure_at_closure(curve, radius, 0.01 * radius)
    return np.vstack([curve.critical_pressure_mpa, *curve.at(pressure[rows]), *rest, needed])


@pytest.mark.parametrize("size", CHUNKS)
def test_results_are_the_same_bits_in_chunks_of_any_size(many, size):
    together = every_result(many, np.arange(COUNT))
    pieces = [np.arange(k, min(k + size, COUNT)) for k in range(0, COUNT, size)][:MOST_CHUNKS]
    in_chunks = np.hstack([every_result(many, rows) for rows in pieces])
    assert in_chunks.tobytes() == together[:, : in_chunks.shape[1]].tobytes()


@pytest.mark.parametrize("seed", [1, 2, 3])
def test_results_are_the_same_bits_in_any_order(many, seed):
    order = np.random.default_rng(seed).permutation(COUNT)
    together = every_result(many, np.arange(COUNT))
    assert every_result(many, order).tobytes() == together[:, order].tobytes()
