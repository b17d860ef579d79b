"""Rest of yielding ground on sliding steel sets, section by section by `scipy.optimize.brentq`.

Independent calculation: the reaction is rebuilt from the thrust in the ring, which is the least
that slip load and remaining travel allow. The plugin's pressure must put the ground at rest at the
same closure.
"""

import numpy as np
import pytest
from scipy.optimize import brentq
from tunnelcalc_steel_sets.sliding import (
    sliding_pressure_and_slope,
    slip_closure_m,
    slip_pressure_mpa,
)

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

RADIUS, SPACING, EA_MN, JOINTS = 4.0, 1.0, 1200.0, 3
P0 = 4.0
ONE = np.ones(1)
CURVE = HoekBrownCurve.of_ground(
    in_situ_stress_mpa=P0 * ONE,
    intact_strength_mpa=8.0 * ONE,
    mb=0.6 * ONE,
    s=3e-4 * ONE,
    a=0.53 * ONE,
    deformation_modulus_mpa=600.0 * ONE,
    poisson_ratio=0.3 * ONE,
    dilation_deg=3.0 * ONE,
)


def closure(pressure):
    return CURVE.at(pressure * ONE).closure_ratio[0] * RADIUS


def thrust_mn(shortening_m, slip_load_mn, travel_m):
    """Thrust of a ring whose circumference is shorter by `shortening_m`."""
    spring = EA_MN / (2 * np.pi * RADIUS)
    if spring * shortening_m <= slip_load_mn:
        return spring * shortening_m
    slid = min(JOINTS * travel_m, shortening_m - slip_load_mn / spring)
    return spring * (shortening_m - slid)


@pytest.mark.parametrize(
    ("slip_load_kn", "travel_mm", "where"),
    [
        pytest.param(5000.0, 100.0, "stands", id="never-slides"),
        pytest.param(300.0, 1000.0, "slides", id="slides"),
        pytest.param(300.0, 20.0, "locked", id="travel-used-up"),
        pytest.param(0.0, 50.0, "locked", id="no-slip-load"),
    ],
)
def test_rest_is_where_ring_and_ground_agree(slip_load_kn, travel_mm, where):
    installed = 0.5 * closure(0.0)
    free = closure(0.0) - installed

    def excess(moved):
        load = thrust_mn(2 * np.pi * moved, slip_load_kn / 1000, travel_mm / 1000)
        pressure = min(load / (SPACING * RADIUS), P0)
        return closure(pressure) - installed - moved

    rest = brentq(excess, 0.0, free, xtol=1e-14, rtol=1e-14)
    slip = slip_pressure_mpa(RADIUS * ONE, slip_load_kn, SPACING)
    travel = slip_closure_m(travel_mm, JOINTS)
    stiffness = EA_MN / (SPACING * RADIUS**2)
    found = sliding_pressure_and_slope(
        rest * ONE,
        stiffness_mpa_per_m=stiffness * ONE,
        slip_pressure_mpa=slip,
        slip_closure_m=travel,
    )
    assert closure(found.pressure_mpa[0]) == pytest.approx(installed + rest, rel=1e-10)
    slope = 0.0 if where == "slides" else stiffness
    assert found.slope_mpa_per_m[0] == slope
    elastic = slip[0] / stiffness
    assert where == (
        "stands" if rest < elastic else "slides" if rest < elastic + travel else "locked"
    )
