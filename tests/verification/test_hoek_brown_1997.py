"""Hoek & Brown (1997), Practical estimates of rock mass strength, Int. J. Rock Mech. Min. Sci. 34,
1165-1186.

Where GSI > 25 the rules of 1997 have mb = mi exp((GSI - 100) / 28), s = exp((GSI - 100) / 9) and
a = 0.5: the constants of the 2002 edition for D = 0, except for a. The paper fits its lines in
another way than the edition of 2002: through eight equal steps of s3 from 0 to sci / 4. That fit
stands here in the test, on the program's constants. Cases and printed digits from memory.
"""

import numpy as np
import pytest

from tunnelcalc.rock_mass.hoek_brown import hoek_brown_constants

CASES = [
    pytest.param(150, 25, 75, (46, 0), (13, 0), (64.8, 1), (-0.9, 1), id="very-good-hard"),
    pytest.param(80, 12, 50, (33, 0), (3.5, 1), (13, 0), (-0.15, 2), id="average"),
    pytest.param(20, 8, 30, (24, 0), (0.55, 2), (1.7, 1), (-0.01, 2), id="very-poor"),
    pytest.param(85, 10, 45, (30.12, 2), (3.27, 2), (11.36, 2), (-0.13, 2), id="appendix"),
]
"""sci, mi, GSI; then each with its printed decimals: friction, cohesion, strength, tension."""


def constants(mi, gsi):
    mb, s, _ = hoek_brown_constants(np.array([float(gsi)]), np.array([float(mi)]), np.zeros(1))
    return float(mb[0]), float(s[0])


def line_of_1997(sci, mb, s):
    """Intercept and slope through eight points of the criterion with a = 0.5."""
    s3 = np.linspace(0, sci / 4, 8)
    slope, intercept = np.polyfit(s3, s3 + sci * np.sqrt(mb * s3 / sci + s), 1)
    return intercept, slope


@pytest.mark.parametrize(("sci", "mi", "gsi", "friction", "cohesion", "strength", "tension"), CASES)
def test_constants_give_the_published_strengths(
    sci, mi, gsi, friction, cohesion, strength, tension
):
    mb, s = constants(mi, gsi)
    intercept, slope = line_of_1997(sci, mb, s)
    sine = (slope - 1) / (slope + 1)
    found = (
        np.degrees(np.arcsin(sine)),
        intercept * (1 - sine) / (2 * np.sqrt(1 - sine**2)),
        intercept,
        sci / 2 * (mb - np.sqrt(mb**2 + 4 * s)),
    )
    for value, (published, decimals) in zip(
        found, (friction, cohesion, strength, tension), strict=True
    ):
        assert round(float(value), decimals) == published


@pytest.mark.parametrize(
    ("mi", "gsi", "mb", "s"),
    [
        pytest.param(25, 75, "10.24", "0.0622", id="GSI-75"),
        pytest.param(12, 50, "2.012", "0.00387", id="GSI-50"),
        pytest.param(8, 30, "0.657", "0.000419", id="GSI-30"),
    ],
)
def test_constants_by_the_rules_of_1997(mi, gsi, mb, s):
    """Independent calculation from the rules, to the digits given."""
    for value, digits in zip(constants(mi, gsi), (mb, s), strict=True):
        assert f"{value:.{len(digits.split('.')[1])}f}" == digits
