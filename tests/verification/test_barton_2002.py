"""Barton (2002), Int. J. Rock Mech. Min. Sci. 39, 185-216, Table 6: modulus from Q."""

import numpy as np
import pytest

from tunnelcalc.rock_mass.deformation_modulus import barton_2002_mpa

TABLE_6 = [
    pytest.param(100, 2, 2, 1, 1, 1, 100, "46", id="Q-100"),
    pytest.param(90, 9, 1, 1, 1, 1, 100, "22", id="Q-10"),
    pytest.param(60, 12, 1.5, 2, 0.66, 1, 50, "10.7", id="Q-2.5"),
    pytest.param(30, 15, 1, 4, 0.66, 2.5, 33, "3.5", id="Q-0.13"),
]
"""RQD, Jn, Jr, Ja, Jw, SRF, intact strength in MPa, printed modulus in GPa."""


@pytest.mark.parametrize(("rqd", "jn", "jr", "ja", "jw", "srf", "sci", "printed"), TABLE_6)
def test_modulus_has_the_printed_digits(rqd, jn, jr, ja, jw, srf, sci, printed):
    quality = rqd / jn * jr / ja * jw / srf
    found = barton_2002_mpa(np.array([quality]), np.array([float(sci)]))[0] / 1000
    decimals = len(printed.partition(".")[2])
    assert f"{found:.{decimals}f}" == printed
