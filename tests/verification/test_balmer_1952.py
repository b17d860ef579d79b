"""Balmer (1952), Proc. ASTM 52, 1260-1271 [from memory]: the envelope of Mohr's circles.

What its construction promises is checked without its formulas: every point lies on its circle, no
circle of the criterion reaches above the envelope, and the slope of the curve through the points,
by numerical derivative, is the tangent of the angle that the gradient gives.
"""

import numpy as np
import pytest
from scipy.optimize import minimize_scalar

from tunnelcalc.rock_mass import envelope

GROUND = [
    pytest.param(100.0, 10.0, 1.0, 0.5, id="intact"),
    pytest.param(50.0, 1.4026, 0.002218, 0.5081, id="example-of-2002"),
    pytest.param(5.0, 0.5514, 0.000138, 0.5437, id="athens-schist"),
]
"""sci, mb, s, a."""


def points(minor, sci, mb, s, a):
    major = envelope.principal_envelope(minor, sci, mb, s, a)
    gradient = envelope.hoek_brown_gradient(minor, sci, mb, s, a)
    return major, gradient, envelope.normal_and_shear(minor, major, gradient)


@pytest.fixture(params=GROUND)
def rock(request):
    return request.param


def confinements(sci, mb, s):
    """From just above the tensile strength to half of the intact one."""
    tip = s * sci / mb
    return -tip + np.geomspace(1e-3 * tip, tip + sci / 2, 60)


@pytest.mark.parametrize(("sci", "mb", "s", "a"), GROUND)
def test_points_lie_on_their_circles(sci, mb, s, a):
    minor = confinements(sci, mb, s)
    major, _, (normal, shear) = points(minor, sci, mb, s, a)
    radius = (major - minor) / 2
    np.testing.assert_allclose(np.hypot(normal - (major + minor) / 2, shear), radius, rtol=1e-12)


@pytest.mark.parametrize(("sci", "mb", "s", "a"), GROUND)
def test_slope_of_the_envelope_is_that_of_the_tangent_angle(sci, mb, s, a):
    minor = confinements(sci, mb, s)
    step = 1e-5 * (minor + s * sci / mb)
    normal, shear = np.zeros(60), np.zeros(60)
    # Central difference of fourth order along the envelope.
    for weight, shift in ((8, 1), (-8, -1), (-1, 2), (1, -2)):
        _, _, point = points(minor + shift * step, sci, mb, s, a)
        normal += weight * point.normal_stress_mpa
        shear += weight * point.shear_stress_mpa
    angle = envelope.tangent_angle_deg(envelope.hoek_brown_gradient(minor, sci, mb, s, a))
    np.testing.assert_allclose(shear / normal, np.tan(np.radians(angle)), rtol=1e-6)


@pytest.mark.parametrize(("sci", "mb", "s", "a"), GROUND)
def test_gradient_is_the_derivative_of_the_criterion(sci, mb, s, a):
    minor = confinements(sci, mb, s)
    step = 1e-4 * (minor + s * sci / mb)
    rise = sum(
        weight * envelope.principal_envelope(minor + shift * step, sci, mb, s, a)
        for weight, shift in ((8, 1), (-8, -1), (-1, 2), (1, -2))
    )
    found = envelope.hoek_brown_gradient(minor, sci, mb, s, a)
    np.testing.assert_allclose(found, rise / (12 * step), rtol=1e-6)


@pytest.mark.parametrize(("sci", "mb", "s", "a"), GROUND)
@pytest.mark.parametrize("share", [0.01, 0.1, 0.3])
def test_the_envelope_is_the_highest_of_all_circles(sci, mb, s, a, share):
    """Shear stress that any circle of the criterion reaches at the point's normal stress."""
    _, _, point = points(np.array([share * sci]), sci, mb, s, a)
    normal = float(point.normal_stress_mpa[0])

    def below(minor):
        major = minor + sci * (mb * minor / sci + s) ** a
        square = ((major - minor) / 2) ** 2 - (normal - (major + minor) / 2) ** 2
        return -square

    best = minimize_scalar(
        below,
        (-s * sci / mb, normal),
        method="bounded",
        bounds=(-s * sci / mb, normal),
        options={"xatol": 1e-10 * sci},
    )
    assert np.sqrt(-best.fun) == pytest.approx(float(point.shear_stress_mpa[0]), rel=1e-9)
