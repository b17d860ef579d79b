"""What holds for every strain-softening ground, ends of the ranges included."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st
from reference.softening import random_softening_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants, hoek_brown_constants
from tunnelcalc.support.equilibrium import equilibrium

ANNULI = 40
ROUNDING = 1e-9

shares = st.floats(0, 1)


@st.composite
def grounds(draw):
    """Columns of one section; the residual index is anything up to the peak."""
    gsi = draw(st.floats(1, 100) | st.sampled_from([1, 20, 100]))
    left = draw(st.floats(0.05, 1) | st.sampled_from([1]))
    mi = draw(st.floats(1, 40))
    peak, residual = (
        hoek_brown_constants(np.array([float(g)]), np.array([mi]), np.zeros(1))
        for g in (gsi, max(gsi * left, 0.5))
    )
    values = {
        "in_situ_stress_mpa": draw(st.floats(0.05, 100)),
        "intact_strength_mpa": draw(st.floats(0.5, 1000) | st.sampled_from([0.5, 5, 1000])),
        "critical_shear_strain": draw(
            st.floats(1e-5, 1) | st.sampled_from([0.0, 1e-300, 1e300, np.inf])
        ),
        "deformation_modulus_mpa": draw(st.floats(10, 100_000)),
        "poisson_ratio": draw(st.floats(0, 0.4999) | st.sampled_from([0, 0.4999])),
        "dilation_deg": draw(st.floats(0, 45) | st.sampled_from([0, 45])),
    }
    columns = {name: np.array([float(value)]) for name, value in values.items()}
    columns |= {f"residual_{name}": v for name, v in zip(["mb", "s", "a"], residual, strict=True)}
    return columns | dict(zip(["mb", "s", "a"], peak, strict=True))


def of_one(ground, pressures):
    """State of one section under several pressures."""
    curve = SofteningCurve.of_ground(**ground, annuli=ANNULI)
    return curve.take(np.zeros(len(pressures), dtype=int)).at(np.asarray(pressures, float))


@given(grounds(), shares, shares)
def test_closure_falls_and_the_ring_shrinks_as_the_pressure_rises(ground, one, other):
    p0 = ground["in_situ_stress_mpa"][0]
    found = of_one(ground, np.sort([one * p0, other * p0]))
    assume(np.isfinite(found.closure_ratio).all())
    assert found.closure_ratio[1] <= found.closure_ratio[0] * (1 + ROUNDING)
    assert found.plastic_ratio[1] <= found.plastic_ratio[0] * (1 + ROUNDING)
    assert np.all(found.plastic_ratio >= 1)
    assert np.all(found.slope < 0)


@given(grounds(), shares)
def test_plastic_radius_lies_between_the_limits(ground, share):
    """Not less than that of perfectly plastic ground, nor more than that of brittle ground."""
    pressure = share**2 * ground["in_situ_stress_mpa"]
    found = SofteningCurve.of_ground(**ground, annuli=ANNULI).at(pressure)
    assume(np.isfinite(found.closure_ratio).all())
    residual = HoekBrownConstants(*(ground[f"residual_{n}"] for n in ("mb", "s", "a")))
    shared = {n: v for n, v in ground.items() if not n.startswith(("residual", "critical"))}
    least = HoekBrownCurve.of_ground(**shared).at(pressure)
    most = HoekBrownCurve.of_ground(**shared, residual=residual).at(pressure)
    assert found.plastic_ratio[0] >= least.plastic_ratio[0] * (1 - ROUNDING)
    assert found.plastic_ratio[0] <= most.plastic_ratio[0] * (1 + ROUNDING)


@given(grounds(), shares)
def test_stress_and_moduli_scale(ground, share):
    """All stresses and moduli times four: the same radius and closure, bit by bit or nearly."""
    larger = dict(ground)
    for name in ("in_situ_stress_mpa", "intact_strength_mpa", "deformation_modulus_mpa"):
        larger[name] = ground[name] * 4
    pressure = share * ground["in_situ_stress_mpa"][0]
    one, four = of_one(ground, [pressure]), of_one(larger, [4 * pressure])
    np.testing.assert_allclose(one.plastic_ratio, four.plastic_ratio, rtol=1e-9)
    np.testing.assert_allclose(one.closure_ratio, four.closure_ratio, rtol=1e-9)


@pytest.fixture(scope="module")
def many():
    return random_softening_ground(2500, seed=8)


def test_annuli_reach_zero_stress_without_a_leap(many):
    """The last annulus, which has to end there, is no more than a few mean ones."""
    states = SofteningCurve.of_ground(**many).states
    assert np.all(np.diff(states.root, axis=0) <= 0)
    assert np.all(states.root[-1] == 0)
    assert np.max(states.root[-2]) < 10 / 200


@pytest.mark.parametrize("size", [1, 3, 17, 1000])
def test_result_does_not_depend_on_the_sections_beside(many, size):
    """Bit by bit, in chunks of any size, and more sections than the program takes at once."""
    pressure = 0.02 * many["in_situ_stress_mpa"] * np.random.default_rng(1).random(2500)
    whole = SofteningCurve.of_ground(**many, annuli=ANNULI).at(pressure)
    for start in range(0, 2500, max(size, 100)):
        rows = slice(start, start + size)
        part = {name: values[rows] for name, values in many.items()}
        found = SofteningCurve.of_ground(**part, annuli=ANNULI).at(pressure[rows])
        for ours, theirs in zip(found, whole, strict=True):
            np.testing.assert_array_equal(ours, theirs[rows])


def test_equilibrium_is_found(many):
    """Support of any stiffness, installed at half the closure: every finite section rests."""
    curve = SofteningCurve.of_ground(**many, annuli=ANNULI)
    radius = np.full(2500, 5.0)
    free = curve.at(np.zeros(2500)).closure_ratio * radius
    stiffness = np.geomspace(0.1, 3000, 2500)[None, :]
    rest = equilibrium(curve, radius, stiffness, 0.5 * free[None, :])
    assert np.all(rest.converged == np.isfinite(free))
    resting = np.isfinite(free)
    # A closure of thousands of radii times a great stiffness has no digits left: the error is
    # told as one of pressure.
    point = curve.at(np.where(resting, rest.support_pressure_mpa, 0))
    surplus = rest.closure_m - 0.5 * free - rest.support_pressure_mpa / stiffness[0]
    error = np.abs(surplus) / (1 / stiffness[0] - point.slope * radius)
    assert np.all(error[resting] <= 1e-8 * rest.support_pressure_mpa[resting])
