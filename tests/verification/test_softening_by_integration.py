"""Strain-softening ground against scipy, section by section.

`scipy.integrate.solve_ivp` integrates equilibrium, compatibility, flow rule and Hooke's law from
the plastic radius inwards, with the plastic shear strain as a bracketed root at every step (see
`reference.softening`); the program takes annuli. Ground is invented, but for one case whose
inputs are published.
"""

import numpy as np
import pytest
from reference import share_of_closure
from reference.softening import random_softening_ground, softening_sections
from scipy.optimize import brentq

from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.support.equilibrium import equilibrium

COUNT = 120
ANNULI = [25, 50, 100, 200, 400, 800]

LEE_PIETRUSZCZAK = {
    "in_situ_stress_mpa": 15.0,
    "intact_strength_mpa": 30.0,
    "mb": 2.0,
    "s": 0.004,
    "a": 0.5,
    "residual_mb": 0.6,
    "residual_s": 0.002,
    "residual_a": 0.5,
    "critical_shear_strain": 0.01,
    "deformation_modulus_mpa": 5700.0,
    "poisson_ratio": 0.25,
    "dilation_deg": 0.0,
}
"""Inputs after K. Lee, S. Pietruszczak, Tunn. Undergr. Space Technol. 23 (2008) 588-599, from
memory; the dilation angles used here are ours."""


@pytest.fixture(scope="module")
def ground():
    return random_softening_ground(COUNT, seed=3)


@pytest.fixture(scope="module")
def pressure(ground):
    """Half of the sections without support, the others little supported."""
    draw = np.random.default_rng(4)
    supported = draw.random(COUNT) ** 2 * 0.1 * ground["in_situ_stress_mpa"]
    return np.where(draw.random(COUNT) < 0.5, 0, supported)


@pytest.fixture(scope="module")
def expected(ground, pressure):
    """Rp / R, u / R, phase, each (n,)."""
    sections = softening_sections(ground)
    states = [one.at(p) for one, p in zip(sections, pressure.tolist(), strict=True)]
    return tuple(np.array(values) for values in zip(*states, strict=True))


@pytest.fixture(scope="module")
def errors(ground, pressure, expected):
    """Relative errors of Rp / R and u / R by number of annuli, (len(ANNULI), n) each."""
    found = [SofteningCurve.of_ground(**ground, annuli=n).at(pressure) for n in ANNULI]
    radius = [np.abs(f.plastic_ratio / expected[0] - 1) for f in found]
    closure = [np.abs(f.closure_ratio / expected[1] - 1) for f in found]
    return np.array(radius), np.array(closure)


def test_every_kind_of_ring_is_met(expected):
    """Softening up to the wall, softening to the residual, a drop at the edge, a drop inside."""
    phases = expected[2].tolist()
    assert phases.count("elastic") > 5
    assert min(phases.count(kind) for kind in ("softening", "residual", "drop")) > 20
    assert phases.count("late drop") > 3


def test_drop_at_the_edge_is_exact(expected, errors):
    """Brittle from the edge inwards. Achieved: 3e-12 of the radius, by the integration."""
    drop = expected[2] == "drop"
    assert errors[0][:, drop].max() < 1e-11
    assert errors[1][ANNULI.index(200), drop].max() < 1e-8


@pytest.mark.parametrize(
    ("phase", "typical", "largest"),
    [("softening", 1e-6, 3e-5), ("residual", 1e-5, 2e-4), ("late drop", 1e-5, 6e-5)],
)
def test_200_annuli(expected, errors, phase, typical, largest):
    """Achieved, closure, median and largest: 3e-7 and 2e-5 where the wall is softening, 5e-6 and
    1.4e-4 where it is residual, 5e-6 and 3e-5 where the strength drops inside the ring."""
    chosen = expected[2] == phase
    for error in errors:
        at_200 = error[ANNULI.index(200), chosen]
        assert np.median(at_200) < typical
        assert at_200.max() < largest


@pytest.mark.parametrize(
    ("phase", "least_order"), [("softening", 1.95), ("residual", 1.9), ("late drop", 1.2)]
)
def test_order_of_convergence(expected, errors, phase, least_order):
    """Slope of ln(median error) against ln(annuli). Second order; where the strength drops inside
    the ring the last annulus before it cannot be thinner than one in `STEEPEST`, which makes it
    first order in the end, at small errors. Achieved: 2.0, 2.0, 1.4."""
    chosen = expected[2] == phase
    for error in errors:
        medians = np.median(error[:, chosen], axis=1)
        order = -np.polyfit(np.log(ANNULI), np.log(medians), 1)[0]
        assert order > least_order


@pytest.mark.parametrize(
    ("dilation", "plastic_ratio", "closure_ratio"),
    [(0.0, 2.3001193, 0.014535504), (15.0, 2.4307432, 0.028053053)],
)
def test_published_ground(dilation, plastic_ratio, closure_ratio):
    """Results: independent calculation, by the integration of the reference, no published ones."""
    ground = {name: np.array([value]) for name, value in LEE_PIETRUSZCZAK.items()}
    ground["dilation_deg"] = np.array([dilation])
    by_integration = softening_sections(ground)[0].at(0.0)
    assert by_integration[0] == pytest.approx(plastic_ratio, rel=1e-7)
    assert by_integration[1] == pytest.approx(closure_ratio, rel=1e-7)
    found = SofteningCurve.of_ground(**ground).at(np.zeros(1))
    assert found.plastic_ratio[0] == pytest.approx(plastic_ratio, rel=1e-5)
    assert found.closure_ratio[0] == pytest.approx(closure_ratio, rel=2e-5)


def test_without_dilation_the_closure_follows_from_the_radius():
    """2 G u / R = 2 (1 - nu)(p0 - pcr)(Rp / R)^2 - (1 - 2 nu)(p0 - pi) whatever the strength in
    the ring: without dilation all change of volume is elastic."""
    ground = {name: np.full(40, value) for name, value in LEE_PIETRUSZCZAK.items()}
    pressure = np.linspace(0, 5, 40)
    curve = SofteningCurve.of_ground(**ground, annuli=25)
    found = curve.at(pressure)
    driving = 1.5 * (15 - curve.critical_pressure_mpa) * found.plastic_ratio**2
    expected = (driving - 0.5 * (15 - pressure)) * 1.25 / 5700
    np.testing.assert_allclose(found.closure_ratio, expected, rtol=1e-12)


def test_equilibrium_is_that_of_a_bracketed_root(ground):
    """One element, installed at one radius behind the face, by `scipy.optimize.brentq` on the
    integrated curve."""
    chosen = np.arange(0, COUNT, 15)
    part = {name: values[chosen] for name, values in ground.items()}
    radius = np.full(chosen.size, 5.0)
    stiffness = 0.02 * part["deformation_modulus_mpa"] / radius
    slow = softening_sections(part)
    expected, installed = [], []
    for section, k in zip(slow, stiffness.tolist(), strict=True):
        plastic_ratio, free, _ = section.at(0.0)
        start = share_of_closure(5.0, 5.0, plastic_ratio * 5.0) * free * 5.0
        installed.append(start)

        def surplus(p, section=section, k=k, start=start):
            return k * max(section.at(p)[1] * 5.0 - start, 0.0) - p

        expected.append(brentq(surplus, 0.0, section.p0, xtol=1e-10 * section.p0))
    curve = SofteningCurve.of_ground(**part, annuli=800)
    found = equilibrium(curve, radius, stiffness[None, :], np.array(installed)[None, :])
    assert found.converged.all()
    assert np.sum(np.array(expected) < curve.critical_pressure_mpa) > 4
    np.testing.assert_allclose(found.support_pressure_mpa, expected, rtol=1e-4)
