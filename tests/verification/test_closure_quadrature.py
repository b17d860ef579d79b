"""The program's quadrature of the closure against one of 1600 points, on 5000 random sections.

Independent calculation. The integral J over the plastic ring of sci N^a (r / R)^(K + 1) d ln r, of
which u/R follows, is taken here by eight panels of 200 Gauss points over the ring's outer part
that a double can tell from nothing.
"""

import numpy as np
import pytest
from reference.samples import RANGES, curve_columns, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

COUNT = 5000
PANELS = 8
NODES, WEIGHTS = np.polynomial.legendre.leggauss(200)
NOTHING_BEYOND = 80.0
"""(r / R)^(K + 1) falls inwards by exp(-80) over this much of (K + 1) ln r."""
WHOLE_RANGE = dict(RANGES) | {"gsi": (0.5, 100), "dilation_deg": (0, 60)}


def closure_ratio(curve, plastic_ratio):
    """u / R without support from the plastic radius, where the wall yields."""
    p0, nu, k = curve.in_situ_stress_mpa, curve.poisson_ratio, curve.dilation
    critical, sci, mb, a = curve.critical_pressure_mpa, curve.intact_strength_mpa, curve.mb, curve.a
    edge = (mb * critical / sci + curve.s) ** (1 - a)
    reach = np.minimum(np.log(plastic_ratio), NOTHING_BEYOND / (k + 1))
    integral = np.zeros(plastic_ratio.shape)
    for panel in range(PANELS):
        for node, weight in zip(NODES, WEIGHTS, strict=True):
            below_edge = reach * (panel + (1 + node) / 2) / PANELS
            deviator = sci * (edge - (1 - a) * mb * below_edge) ** (a / (1 - a))
            integral += weight * reach / (2 * PANELS) * deviator * np.exp(-(k + 1) * below_edge)
    ring = (1 - nu) * (2 * (p0 - critical) - (k - 1) * integral) * plastic_ratio ** (k + 1)
    return (ring - (1 - 2 * nu) * p0) / (2 * curve.shear_modulus_mpa)


@pytest.fixture(scope="module", params=[RANGES, WHOLE_RANGE], ids=["usual", "all-that-is-legal"])
def errors(request):
    """Plastic radius and relative error of the closure, where an unsupported wall yields."""
    ground = random_ground(COUNT, seed=50, ranges=request.param)
    curve = HoekBrownCurve.of_ground(**curve_columns(ground))
    found = curve.at(np.zeros(COUNT))
    rows = np.flatnonzero((found.plastic_ratio > 1) & np.isfinite(found.closure_ratio))
    plastic_ratio = found.plastic_ratio[rows]
    expected = closure_ratio(curve.take(rows), plastic_ratio)
    return plastic_ratio, np.abs(found.closure_ratio[rows] / expected - 1)


def test_closure_of_rings_less_than_20_radii_deep(errors):
    """Achieved: 1.0e-9."""
    plastic_ratio, error = errors
    shallow = plastic_ratio < 20
    assert shallow.sum() > 2000
    assert error[shallow].max() < 1.5e-9


def test_closure_of_deeper_rings(errors):
    """Achieved: 8e-11."""
    plastic_ratio, error = errors
    deep = plastic_ratio >= 20
    assert deep.sum() > 500
    assert error[deep].max() < 2e-10
