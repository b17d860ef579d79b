"""Ground of each law at rest with two elements, against `scipy.optimize.brentq`.

The other side integrates the ground's equations with the strength as a plain function of the
radial stress, and brackets the pressure at which ground and support have the same closure
(`reference.equilibrium`). Elements are installed at shares of the unsupported closure.
"""

import math

import numpy as np
import pytest
from reference import Spring, pressure_at_closure, state_at_rest
from reference.ground_curve import StrengthCurve, hoek_brown_strength, mohr_coulomb_strength

from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants, MohrCoulomb
from tunnelcalc.support import equilibrium

COUNT = 30
ELEMENTS = 2


def elastic_columns(draw):
    return {
        "in_situ_stress_mpa": draw.uniform(2, 20, COUNT),
        "deformation_modulus_mpa": np.exp(draw.uniform(np.log(300), np.log(20_000), COUNT)),
        "poisson_ratio": draw.uniform(0, 0.4, COUNT),
    }


def slow_curves(ground, dilation_deg, peaks, rings):
    rows = zip(
        *(v.tolist() for v in ground.values()), dilation_deg.tolist(), peaks, rings, strict=True
    )
    return [StrengthCurve.of_strength(p0, h, r, e, nu, psi) for p0, e, nu, psi, h, r in rows]


def elastic(draw):
    ground = elastic_columns(draw)
    endless = [lambda sr: math.inf] * COUNT
    return ElasticCurve.of_ground(**ground), slow_curves(ground, np.zeros(COUNT), endless, endless)


def brittle_hoek_brown(draw, s_share):
    ground, psi = elastic_columns(draw), draw.uniform(0, 30, COUNT)
    sci = ground["in_situ_stress_mpa"] * draw.uniform(2, 6, COUNT)
    mb, s, a = draw.uniform(0.5, 3, COUNT), draw.uniform(1e-4, 1e-2, COUNT), np.full(COUNT, 0.51)
    residual = HoekBrownConstants(mb * draw.uniform(0.4, 0.9, COUNT), s * s_share, a)
    curve = HoekBrownCurve.of_ground(
        **ground, intact_strength_mpa=sci, mb=mb, s=s, a=a, dilation_deg=psi, residual=residual
    )
    peaks, rings = (
        [hoek_brown_strength(*map(float, row)) for row in zip(sci, *constants, strict=True)]
        for constants in ((mb, s, a), residual)
    )
    return curve, slow_curves(ground, psi, peaks, rings)


def mohr_coulomb(draw, brittle):
    ground, psi = elastic_columns(draw), draw.uniform(0, 30, COUNT)
    peak = MohrCoulomb(
        draw.uniform(15, 45, COUNT), ground["in_situ_stress_mpa"] * draw.uniform(0.05, 0.3, COUNT)
    )
    residual = MohrCoulomb(*(values * draw.uniform(0.5, 0.9, COUNT) for values in peak))
    curve = MohrCoulombCurve.of_ground(
        **ground, **peak._asdict(), dilation_deg=psi, residual=residual if brittle else None
    )
    peaks, rings = (
        [mohr_coulomb_strength(*row) for row in zip(*(v.tolist() for v in line), strict=True)]
        for line in (peak, residual if brittle else peak)
    )
    return curve, slow_curves(ground, psi, peaks, rings)


CASES = {
    "elastic": elastic,
    "brittle-hoek-brown": lambda draw: brittle_hoek_brown(draw, 0.3),
    "mohr-coulomb": lambda draw: mohr_coulomb(draw, brittle=False),
    "brittle-mohr-coulomb": lambda draw: mohr_coulomb(draw, brittle=True),
    "strengthless-wall": lambda draw: brittle_hoek_brown(draw, 0.0),
}


@pytest.fixture(scope="module", params=CASES)
def case(request):
    """Curve, the slow curves, radius (n,), stiffness and closure at installation (e, n)."""
    draw = np.random.default_rng(80)
    curve, slow = CASES[request.param](draw)
    radius = draw.uniform(1, 12, COUNT)
    stiffness = np.exp(draw.uniform(np.log(1), np.log(3000), (ELEMENTS, COUNT)))
    # In some sections one element has no stiffness, in a few no element is in time.
    stiffness[0, ::7] = 0
    free = np.array([one.unsupported[1] for one in slow]) * radius
    installed = draw.uniform(0.1, 1.1, (ELEMENTS, COUNT)) * free
    installed[:, ::9] = 1.5 * free[::9]
    return curve, slow, radius, stiffness, installed


@pytest.fixture(scope="module")
def expected(case):
    _, slow, radius, stiffness, installed = case
    return [
        state_at_rest(
            one,
            float(radius[n]),
            [Spring(*pair) for pair in zip(stiffness[:, n], installed[:, n], strict=True)],
        )
        for n, one in enumerate(slow)
    ]


@pytest.fixture
def found(case):
    curve, _, *rest = case
    return equilibrium.equilibrium(curve, *rest)


def test_pressure_agrees(case, expected, found):
    stress = case[0].in_situ_stress_mpa
    pressure = np.array([state.pressure for state in expected])
    assert found.converged.all()
    assert np.sum(pressure == 0) >= 3
    assert np.sum(pressure > 1e-3 * stress) > COUNT / 3
    assert np.max(np.abs(found.support_pressure_mpa - pressure) / stress) < 1e-12
    loaded = pressure > 1e-3 * stress
    np.testing.assert_allclose(found.support_pressure_mpa[loaded], pressure[loaded], rtol=1e-10)


def test_closure_plastic_radius_and_shares_agree(case, expected, found):
    closure = np.array([state.closure for state in expected])
    plastic_ratio = np.array([state.plastic_ratio for state in expected])
    shares = np.array([state.shares for state in expected]).T
    np.testing.assert_allclose(found.closure_m, closure, rtol=1e-10)
    np.testing.assert_allclose(found.plastic_ratio, plastic_ratio, rtol=1e-10)
    error = np.abs(found.element_pressure_mpa - shares) / case[0].in_situ_stress_mpa
    assert error.max() < 1e-12


@pytest.mark.parametrize("share", [0.2, 0.9, 1.1])
def test_pressure_that_holds_a_closure_agrees(case, share):
    curve, slow, radius, _, _ = case
    free = np.array([one.unsupported[1] for one in slow]) * radius
    found = equilibrium.pressure_at_closure(curve, radius, share * free)
    expected = [
        pressure_at_closure(one, float(r), float(share * u))
        for one, r, u in zip(slow, radius, free, strict=True)
    ]
    np.testing.assert_allclose(found, expected, rtol=1e-9)


def test_pressure_that_holds_ground_which_has_no_strength_left_at_a_free_wall():
    """The curve is vertical there: its slope is -infinity without pressure.

    The closure lacks about the root of the pressure, so that an error of 5e-11 in the closure of
    the reference is one of 1e-10 / (1 - share) in its pressure. The program's own closure under
    the pressure found is the one wanted to 1e-15.
    """
    curve, slow = brittle_hoek_brown(np.random.default_rng(81), s_share=0.0)
    free = curve.at(np.zeros(COUNT))
    assert np.sum(np.isneginf(free.slope)) > COUNT / 2
    for share in (0.2, 0.9, 0.999):
        wanted = share * free.closure_ratio
        found = equilibrium.pressure_at_closure(curve, np.ones(COUNT), wanted)
        np.testing.assert_allclose(curve.at(found).closure_ratio, wanted, rtol=1e-14)
        expected = [
            pressure_at_closure(one, 1.0, float(u)) for one, u in zip(slow, wanted, strict=True)
        ]
        np.testing.assert_allclose(found, expected, rtol=1e-10 / (1 - share))


def test_no_element_at_all(case):
    curve, slow, radius, _, _ = case
    found = equilibrium.equilibrium(curve, radius, np.zeros((0, COUNT)), np.zeros((0, COUNT)))
    free = np.array([one.unsupported[1] for one in slow]) * radius
    assert found.converged.all()
    np.testing.assert_allclose(found.closure_m, free, rtol=1e-10)
