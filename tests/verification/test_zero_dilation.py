"""Without dilation the volume change of the plastic ring is elastic, and the closure is exact.

u/R = (2 (1 - nu)(p0 - pcr)(Rp/R)^2 - (1 - 2 nu)(p0 - pi)) / (2 G) for any criterion: integration of
the flow rule du/dr + u/r = f(r) by equilibrium. It holds for every a.
"""

import numpy as np
import pytest
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve


@pytest.mark.parametrize("share", [0.0, 0.01, 0.3, 0.9])
def test_closure_without_dilation_is_the_identity(share):
    ground = random_ground(3000, seed=4) | {"dilation_deg": np.zeros(3000)}
    curve = HoekBrownCurve.of_ground(**curve_columns(ground))
    p0, nu, critical = (
        curve.in_situ_stress_mpa,
        curve.poisson_ratio,
        curve.critical_pressure_mpa,
    )
    pressure = share * critical
    found = curve.at(pressure)
    doubled_shear = ground["deformation_modulus_mpa"] / (1 + nu)
    expected = 2 * (1 - nu) * (p0 - critical) * found.plastic_ratio**2
    expected = (expected - (1 - 2 * nu) * (p0 - pressure)) / doubled_shear
    yields = critical > 0
    assert yields.sum() > 1500
    np.testing.assert_allclose(found.closure_ratio[yields], expected[yields], rtol=1e-12)
