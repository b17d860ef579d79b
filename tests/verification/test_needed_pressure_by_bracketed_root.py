"""The pressure at which the ground alone keeps to a closure, against `scipy.optimize.brentq`."""

import numpy as np
import pytest
from reference import pressure_at_closure as bracketed
from reference.samples import curve_columns, curves, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.support.equilibrium import pressure_at_closure

COUNT = 150


@pytest.mark.parametrize("limit", [0.002, 0.02], ids=["0.2-per-cent", "2-per-cent"])
def test_needed_pressure_is_the_bracketed_root(limit):
    """Achieved: 4e-14 of the in-situ stress and 5e-12 of the pressure."""
    ground = random_ground(COUNT, seed=41)
    radius = ground["radius_m"]
    curve = HoekBrownCurve.of_ground(**curve_columns(ground))
    found = pressure_at_closure(curve, radius, limit * radius)
    expected = np.array(
        [bracketed(slow, r, limit * r) for slow, r in zip(curves(ground), radius, strict=True)]
    )
    assert np.sum(expected > 0) > COUNT / 3
    assert np.sum(expected == 0) > COUNT / 10
    assert np.max(np.abs(found - expected) / ground["in_situ_stress_mpa"]) < 5e-13
    np.testing.assert_allclose(found, expected, rtol=5e-11)
