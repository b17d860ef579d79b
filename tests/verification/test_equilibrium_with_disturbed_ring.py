"""Elements in ground with a disturbed ring at rest, against `scipy.optimize.brentq`.

The other side brackets the stress at the ring's outer edge, from which shooting gives pressure
and closure at the wall (see `reference.disturbed_ring`). Two elements act from their own closures
at installation.
"""

import numpy as np
import pytest
from reference.disturbed_ring import random_rings, rings
from scipy.optimize import brentq

from tunnelcalc.ground_reaction.disturbed_ring import DisturbedRingCurve
from tunnelcalc.support.equilibrium import equilibrium, pressure_at_closure

COUNT = 20


@pytest.fixture(scope="module")
def case():
    """Ground, radius, stiffness (2, n), closure at installation (2, n)."""
    ground, draw = random_rings(COUNT, seed=80), np.random.default_rng(81)
    radius = draw.uniform(1, 8, COUNT)
    free = DisturbedRingCurve.of_ground(**ground).at(np.zeros(COUNT)).closure_ratio * radius
    stiffness = np.exp(draw.uniform(np.log(5), np.log(3000), (2, COUNT)))
    return ground, radius, stiffness, draw.uniform(0.2, 0.8, (2, COUNT)) * free


def test_pressure_at_rest_agrees(case):
    """Achieved: 3e-14 of the in-situ stress."""
    ground, radius, stiffness, installed = case
    found = equilibrium(DisturbedRingCurve.of_ground(**ground), radius, stiffness, installed)
    assert found.converged.all()
    assert np.sum(found.plastic_ratio > 1) > COUNT / 3
    for section, ring in enumerate(rings(ground)):

        def missing(interface, ring=ring, k=section):
            wall = ring.shot(interface)
            moved = wall.closure * radius[k] - installed[:, k]
            return wall.radial - np.sum(stiffness[:, k] * np.maximum(moved, 0))

        p0 = ring.mass.p0
        interface = brentq(missing, ring.interface(0.0), p0, xtol=1e-14 * p0, rtol=1e-14)
        expected = ring.shot(interface).radial
        assert found.support_pressure_mpa[section] == pytest.approx(expected, abs=1e-12 * p0)


def test_pressure_needed_for_a_closure_leads_back_to_it(case):
    ground, radius, _, installed = case
    curve = DisturbedRingCurve.of_ground(**ground)
    wanted = installed[0]
    pressure = pressure_at_closure(curve, radius, wanted)
    assert np.all(pressure > 0)
    found = [r.at(p).closure_ratio for r, p in zip(rings(ground), pressure.tolist(), strict=True)]
    np.testing.assert_allclose(found * radius, wanted, rtol=5e-9)
