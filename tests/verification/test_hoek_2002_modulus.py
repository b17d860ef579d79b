"""Deformation modulus of Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC, Toronto, 267-273.

With D = 0 the relation is that of Hoek & Brown (1997), Int. J. Rock Mech. Min. Sci. 34,
1165-1186, whose table of typical rock masses prints moduli. Cases and digits from memory.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass.deformation_modulus import hoek_2002_mpa

OF_1997 = [
    pytest.param(75, 150, 42_000, -3, id="very-good-hard"),
    pytest.param(50, 80, 9_000, -3, id="average"),
    pytest.param(30, 20, 1_400, -2, id="very-poor"),
]
"""GSI, intact strength in MPa, printed modulus in MPa, its last printed decimal."""


def modulus(gsi, intact_strength):
    return float(
        hoek_2002_mpa(np.array([float(gsi)]), np.zeros(1), np.array([float(intact_strength)]))[0]
    )


@pytest.mark.parametrize(("gsi", "intact_strength", "printed", "decimals"), OF_1997)
def test_modulus_of_the_typical_rock_masses(gsi, intact_strength, printed, decimals):
    assert round(modulus(gsi, intact_strength), decimals) == printed


def test_modulus_of_the_athens_schist():
    """Hoek, chapter on rock mass properties of Practical Rock Engineering: sci 5, GSI 20, from
    memory."""
    assert round(modulus(20, 5)) == 398


@pytest.mark.parametrize(
    ("gsi", "intact_strength", "expected"),
    [(75, 150, 42_170), (50, 80, 8_944), (30, 20, 1_414), (45, 85, 6_914)],
)
def test_modulus_to_the_megapascal(gsi, intact_strength, expected):
    """Independent calculation."""
    assert round(modulus(gsi, intact_strength)) == expected
