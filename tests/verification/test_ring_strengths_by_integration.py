"""Brittle Hoek-Brown and Mohr-Coulomb ground against scipy, section by section.

`scipy.integrate.solve_ivp` integrates equilibrium, compatibility, flow rule and Hooke's law from
the plastic radius inwards, with the strength in the ring as a plain function of the radial stress
(`reference.ground_curve.StrengthCurve`). The program has closed forms and a fixed quadrature.
"""

import numpy as np
import pytest
from reference.ground_curve import StrengthCurve, hoek_brown_strength, mohr_coulomb_strength
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants, MohrCoulomb

COUNT = 200


def shared(draw):
    return {
        "in_situ_stress_mpa": np.exp(draw.uniform(np.log(0.5), np.log(60), COUNT)),
        "deformation_modulus_mpa": np.exp(draw.uniform(np.log(100), np.log(60_000), COUNT)),
        "poisson_ratio": draw.uniform(0, 0.45, COUNT),
        "dilation_deg": draw.choice([0, 30, -1], COUNT, p=[0.1, 0.1, 0.8]),
    }


def slow_curves(ground, peaks, rings):
    names = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio", "dilation_deg")
    rows = zip(*(ground[name].tolist() for name in names), peaks, rings, strict=True)
    return [StrengthCurve.of_strength(p0, h, r, e, nu, psi) for p0, e, nu, psi, h, r in rows]


def brittle_hoek_brown(draw):
    """Residual constants some way below the peak; s = 0 in a third of the sections."""
    ground = random_ground(COUNT, seed=60)
    ground["dilation_deg"] = draw.uniform(0, 30, COUNT)
    share = draw.uniform(0.05, 1, COUNT)
    s = np.where(draw.random(COUNT) < 1 / 3, 0, ground["s"] * share**2)
    a = np.where(draw.random(COUNT) < 0.3, 0.5, draw.uniform(0.5, 0.65, COUNT))
    # Where mb sr / sci + s is above 1, a larger power is a larger strength.
    powerful = ground["mb"] * ground["in_situ_stress_mpa"] / ground["intact_strength_mpa"] > 0.9
    a = np.where(powerful, ground["a"], np.maximum(a, ground["a"]))
    residual = HoekBrownConstants(ground["mb"] * share, s, a)
    curve = HoekBrownCurve.of_ground(**curve_columns(ground), residual=residual)
    sci = ground["intact_strength_mpa"]
    peaks, rings = (
        [hoek_brown_strength(*map(float, row)) for row in zip(sci, *constants, strict=True)]
        for constants in ((ground["mb"], ground["s"], ground["a"]), residual)
    )
    return curve, slow_curves(ground, peaks, rings)


def mohr_coulomb(draw, brittle):
    """Friction from none to 60 degrees, a residual of none to all of the peak."""
    ground = shared(draw)
    ground["dilation_deg"] = np.where(
        ground["dilation_deg"] < 0, draw.uniform(0, 30, COUNT), ground["dilation_deg"]
    )
    stress = ground["in_situ_stress_mpa"]
    friction = np.where(draw.random(COUNT) < 0.15, 0, draw.uniform(0, 60, COUNT))
    cohesion = stress * np.exp(draw.uniform(np.log(0.05), np.log(1), COUNT))
    residual = MohrCoulomb(friction, cohesion)
    if brittle:
        shares = draw.uniform(0.3, 1, (2, COUNT))
        # The angle and c cos phi / (1 - sin phi) both fall, so that the whole line falls.
        residual = MohrCoulomb(friction * shares[0], cohesion * shares[1])
    curve = MohrCoulombCurve.of_ground(
        **ground,
        cohesion_mpa=cohesion,
        friction_angle_deg=friction,
        residual=residual if brittle else None,
    )
    peaks, rings = (
        [mohr_coulomb_strength(*row) for row in zip(*(v.tolist() for v in line), strict=True)]
        for line in ((friction, cohesion), residual)
    )
    return curve, slow_curves(ground, peaks, rings)


CASES = {
    "brittle-hoek-brown": brittle_hoek_brown,
    "mohr-coulomb": lambda draw: mohr_coulomb(draw, brittle=False),
    "brittle-mohr-coulomb": lambda draw: mohr_coulomb(draw, brittle=True),
}


@pytest.fixture(scope="module", params=CASES)
def case(request):
    """Curve, reference curves, pressures: half of the walls without support."""
    draw = np.random.default_rng(61)
    curve, slow = CASES[request.param](draw)
    share = np.where(draw.random(COUNT) < 0.5, 0, draw.random(COUNT) ** 2)
    return curve, slow, share * curve.in_situ_stress_mpa


@pytest.fixture(scope="module")
def expected(case):
    """(n,) Rp / R and u / R."""
    _, slow, pressure = case
    states = [one.at(p) for one, p in zip(slow, pressure.tolist(), strict=True)]
    return np.array(states).T


def test_range_is_covered(case, expected):
    """Elastic walls, shallow and deep rings, and walls left without strength."""
    curve, _, pressure = case
    plastic_ratio = expected[0]
    assert np.isfinite(curve.critical_pressure_mpa).all()
    assert np.sum(plastic_ratio == 1) > 10
    assert np.sum((plastic_ratio > 1) & (plastic_ratio < 20)) > 60
    assert np.sum(plastic_ratio > 20) > 3
    if isinstance(curve, HoekBrownCurve):
        assert np.sum((curve.s == 0) & (pressure == 0) & (plastic_ratio > 1)) > 15


def test_critical_pressure_is_the_bracketed_root(case):
    curve, slow, _ = case
    critical = np.array([one.critical_pressure for one in slow])
    error = np.abs(curve.critical_pressure_mpa - critical) / curve.in_situ_stress_mpa
    assert error.max() < 1e-14
    np.testing.assert_array_equal(curve.critical_pressure_mpa == 0, critical == 0)


def test_plastic_radius_agrees(case, expected):
    """Achieved: 4e-12 in rings of 1e30 radii, at the tolerance of the integration."""
    curve, _, pressure = case
    np.testing.assert_allclose(curve.at(pressure).plastic_ratio, expected[0], rtol=1e-11)


def test_closure_agrees(case, expected):
    """Achieved: 4e-11, at the tolerance of the integration."""
    curve, _, pressure = case
    np.testing.assert_allclose(curve.at(pressure).closure_ratio, expected[1], rtol=1e-10)


def test_slope_is_that_of_the_governing_equation(case, expected):
    """From the differential equation at the wall, with the reference's own closure. A wall that
    has lost all its strength gives way infinitely fast."""
    curve, slow, pressure = case
    found = curve.at(pressure).slope
    rows = zip(slow, pressure.tolist(), expected[1].tolist(), found.tolist(), strict=True)
    for one, p, closure, slope in rows:
        if p < one.critical_pressure and one.ring(p) == 0:
            assert slope == -np.inf
        else:
            assert slope == pytest.approx(one.slope(p, closure), rel=1e-10)


@pytest.mark.parametrize("share", [0.0, 0.02, 0.3, 0.9])
def test_closure_without_dilation_is_the_identity_for_any_strength_in_the_ring(case, share):
    """u/R = (2 (1 - nu)(p0 - pcr)(Rp/R)^2 - (1 - 2 nu)(p0 - pi)) / (2 G) where the volume change
    of the ring is elastic: integration of the flow rule by equilibrium, pcr from the peak."""
    given = case[0]
    fields = {name: getattr(given, name) for name in given.__dataclass_fields__}
    curve = type(given)(**fields | {"dilation": np.ones(COUNT)})
    p0, nu, critical = curve.in_situ_stress_mpa, curve.poisson_ratio, curve.critical_pressure_mpa
    pressure = share * critical
    found = curve.at(pressure)
    rows = (critical > 0) & np.isfinite(found.closure_ratio)
    assert rows.sum() > COUNT / 2
    identity = 2 * (1 - nu) * (p0 - critical) * found.plastic_ratio**2
    identity = (identity - (1 - 2 * nu) * (p0 - pressure)) / (2 * curve.shear_modulus_mpa)
    np.testing.assert_allclose(found.closure_ratio[rows], identity[rows], rtol=1e-12)
