"""Ground from the literature whose printed results are not at hand: the inputs are theirs.

All inputs from memory, peak values only; the dilation angles and the moduli marked so are
invented. The results against which the program is checked are independent calculations: scipy
integrates the governing equations.
"""

import numpy as np
import pytest
from reference import GroundCurve
from reference.rock_mass import criterion

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

INVENTED_MODULUS = 2000.0


def of_index(gsi):
    rock = criterion(20.0, 15.0, gsi, 0.0)
    return (7.5, *rock, INVENTED_MODULUS, 0.25)


CASES = [
    pytest.param((108, 300, 7.5, 0.1, 0.5, 40_000, 0.2), id="Sharan-2003-hard-rock"),
    pytest.param((15, 30, 2.0, 0.004, 0.5, 5700, 0.25), id="Lee-Pietruszczak-2008"),
    pytest.param((30, 30, 1.7, 0.0039, 0.55, 5500, 0.25), id="Sharan-2008-a-0.55"),
    pytest.param(of_index(50), id="Carranza-Torres-Fairhurst-2000-GSI-50"),
    pytest.param(of_index(40), id="Carranza-Torres-Fairhurst-2000-GSI-40"),
    pytest.param(of_index(30), id="Carranza-Torres-Fairhurst-2000-GSI-30"),
]
"""p0, sci, mb, s, a, modulus, nu."""


@pytest.mark.parametrize("dilation", [0.0, 7.5, 30.0])
@pytest.mark.parametrize("case", CASES)
def test_ground_reaction_curve(case, dilation):
    slow = GroundCurve(*(float(value) for value in case), dilation)
    names = ("in_situ_stress_mpa", "intact_strength_mpa", "mb", "s", "a")
    names += ("deformation_modulus_mpa", "poisson_ratio", "dilation_deg")
    pressures = slow.p0 * np.array([0, 0.003, 0.01, 0.03, 0.1, 0.3, 0.7])
    curve = HoekBrownCurve.of_ground(
        **{k: np.full(7, float(v)) for k, v in zip(names, (*case, dilation), strict=True)}
    )
    found = curve.at(pressures)
    plastic_ratio, closure_ratio = np.array([slow.at(p) for p in pressures.tolist()]).T
    assert plastic_ratio[0] > 1
    np.testing.assert_allclose(curve.critical_pressure_mpa, slow.critical_pressure, rtol=1e-13)
    np.testing.assert_allclose(found.plastic_ratio, plastic_ratio, rtol=1e-12)
    np.testing.assert_allclose(found.closure_ratio, closure_ratio, rtol=1e-9)
