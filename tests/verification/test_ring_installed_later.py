"""A ring that is strengthened on the way, against ground unloaded step by step.

The other side is a finite element line that keeps the stresses and movements of every step (see
`reference.incremental_ring`). It shows which of two simple curves is on the safe side.
"""

import numpy as np
import pytest
from reference.incremental_ring import Ground

from tunnelcalc.ground_reaction.improved_ring import ImprovedRingCurve
from tunnelcalc.ground_reaction.later_ring import LaterRingCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve

GROUNDS = {
    "no-dilation": Ground(5.0, 1000.0, 0.25, 0.0, (25.0, 0.25), (29.0, 0.3), 1.35),
    "dilating": Ground(8.0, 1000.0, 0.3, 8.0, (28.0, 0.3), (34.0, 0.4), 1.3),
    "much-stronger": Ground(5.0, 1000.0, 0.25, 5.0, (22.0, 0.25), (30.0, 0.8), 1.5),
}
STEPS = 50
OF_ELEMENTS = 1e-3
"""Error of the closure that the elements leave. [-]"""


def curves(ground):
    """Without the ring, and with it from the beginning; STEPS rows each."""
    shared = {
        "in_situ_stress_mpa": ground.p0,
        "deformation_modulus_mpa": ground.modulus,
        "poisson_ratio": ground.nu,
        "dilation_deg": ground.psi_deg,
        "friction_angle_deg": ground.mass[0],
        "cohesion_mpa": ground.mass[1],
    }
    ring = {
        "ring_friction_angle_deg": ground.ring[0],
        "ring_cohesion_mpa": ground.ring[1],
        "ring_ratio": ground.ring_ratio,
    }
    columns = {name: np.full(STEPS, value) for name, value in (shared | ring).items()}
    before = MohrCoulombCurve.of_ground(**{name: columns[name] for name in shared})
    return before, ImprovedRingCurve.of_mohr_coulomb(**columns)


def falling(ground):
    return np.linspace(0.98, 0.02, STEPS) * ground.p0


@pytest.mark.parametrize("name", GROUNDS)
def test_without_and_with_the_ring_from_the_beginning_both_agree(name):
    """The elements find the curve of the strengthened ring too, in their own way."""
    ground = GROUNDS[name]
    pressure = falling(ground)
    for curve, below in zip(curves(ground), (-1.0, 2 * ground.p0), strict=True):
        found = curve.at(pressure).closure_ratio
        np.testing.assert_allclose(found, ground.closures(pressure, below), rtol=OF_ELEMENTS)


@pytest.mark.parametrize("share", [0.3, 0.15, 0.05])
@pytest.mark.parametrize("name", GROUNDS)
def test_the_sum_is_on_the_safe_side_and_the_ring_from_the_beginning_is_not(name, share):
    ground = GROUNDS[name]
    pressure, installed = falling(ground), share * ground.p0
    before, improved = curves(ground)
    later = LaterRingCurve.of_curves(before, improved, np.full(STEPS, installed))
    expected = ground.closures(pressure, installed)
    found, least = (c.at(pressure).closure_ratio for c in (later, improved))
    most = before.at(pressure).closure_ratio
    assert np.all(found >= expected * (1 - OF_ELEMENTS))
    assert np.all(found <= 1.3 * expected)
    assert np.all(found <= most * (1 + 1e-12))
    assert np.any(least < 0.9 * expected)


def test_ground_that_moves_on_far_enough_forgets_when_the_ring_came():
    """Once the ring yields again its stresses are those of the ring from the beginning, and the
    closure is too."""
    ground = GROUNDS["no-dilation"]
    pressure = falling(ground)
    _, improved = curves(ground)
    expected = ground.closures(pressure, 0.3 * ground.p0)[-1]
    assert improved.at(pressure).closure_ratio[-1] == pytest.approx(expected, rel=OF_ELEMENTS)
