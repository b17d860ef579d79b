"""Closure along the drive by Panet, Panet & Guenot, Unlu & Gercek, and Hoek's fit.

Panet (1995); Panet & Guenot (1982), Tunnelling '82; Unlu & Gercek (2003), Tunn. Undergr. Space
Technol. 18, 547-553; Hoek's fit to the measurements of Chern, Shiao & Yu (1998). The formulas
are from memory. The table is an independent calculation from the formulas, not published.
"""

import numpy as np
import pytest

from tunnelcalc.ground_reaction.closure_profile import (
    hoek_2002,
    panet_1995,
    panet_guenot_1982,
    unlu_gercek_2003,
)

DISTANCE_IN_RADII = np.array([-1.0, 0.0, 0.5, 1.0, 2.0, 4.0])
NONE = np.nan
TABLE = [
    pytest.param(panet_1995, (), [NONE, 0.2500, 0.7300, 0.8622, 0.9442, 0.9813], id="panet"),
    pytest.param(
        panet_guenot_1982, (), [NONE, 0.2800, 0.7171, 0.8499, 0.9370, 0.9783], id="panet-guenot"
    ),
    pytest.param(
        unlu_gercek_2003,
        (0.25,),
        [0.0908, 0.2450, 0.7289, 0.8619, 0.9441, 0.9813],
        id="unlu-gercek-nu-0.25",
    ),
    pytest.param(hoek_2002, (), [0.1199, 0.3078, 0.4336, 0.5624, 0.7744, 0.9568], id="hoek"),
]
PROFILES = [
    pytest.param(panet_1995, (), 0.25, id="panet"),
    pytest.param(panet_guenot_1982, (), 0.28, id="panet-guenot"),
    pytest.param(unlu_gercek_2003, (0.0,), 0.19, id="unlu-gercek-nu-0"),
    pytest.param(unlu_gercek_2003, (0.25,), 0.245, id="unlu-gercek-nu-0.25"),
    pytest.param(unlu_gercek_2003, (0.5,), 0.3, id="unlu-gercek-nu-0.5"),
    pytest.param(hoek_2002, (), 2**-1.7, id="hoek"),
]


def share(profile, distance_in_radii, more=(), radius=5.0):
    distance = np.atleast_1d(np.asarray(distance_in_radii, float)) * radius
    return profile(distance, *(np.full(distance.size, value) for value in (radius, *more)))


@pytest.mark.parametrize("radius", [1.0, 5.2])
@pytest.mark.parametrize(("profile", "more", "expected"), TABLE)
def test_table(profile, more, expected, radius):
    """For Panet & Guenot Rp = R."""
    found = share(profile, DISTANCE_IN_RADII, more, radius)
    np.testing.assert_array_equal(np.round(found, 4), expected)


def test_panet_guenot_is_scaled_by_the_plastic_radius():
    """0.28 + 0.72 (1 - (0.84 / 1.84)^2) one plastic radius behind the face, whatever R."""
    found = panet_guenot_1982(np.array([3.0, 12.0, 30.0]), np.array([3.0, 12.0, 30.0]))
    np.testing.assert_allclose(found, 0.28 + 0.72 * (1 - (0.84 / 1.84) ** 2), rtol=1e-15)


@pytest.mark.parametrize(("profile", "more", "at_face"), PROFILES)
def test_share_at_the_face(profile, more, at_face):
    assert share(profile, 0.0, more)[0] == pytest.approx(at_face, rel=1e-15)


@pytest.mark.parametrize(("profile", "more", "at_face"), PROFILES)
def test_everything_has_moved_far_behind(profile, more, at_face):
    assert share(profile, 1e9, more)[0] == 1
    assert share(profile, 50.0, more)[0] > 0.999


@pytest.mark.parametrize(("profile", "more", "at_face"), PROFILES[2:])
def test_nothing_has_moved_far_ahead(profile, more, at_face):
    assert share(profile, -1e9, more)[0] == 0
    assert 0 < share(profile, -50.0, more)[0] < 1e-15


@pytest.mark.parametrize(("profile", "more", "at_face"), PROFILES)
def test_no_step_at_the_face(profile, more, at_face):
    """The steepest, Unlu & Gercek for nu = 0, rises 2.5 per radius."""
    ahead, behind = share(profile, [-1e-9, 1e-9], more)
    assert at_face < behind < at_face + 3e-9
    if np.isfinite(ahead):
        assert at_face - 3e-9 < ahead < at_face


def test_ahead_of_the_face_unlu_gercek_is_the_form_printed():
    """u0 + A (1 - exp(B X)), A = -0.22 nu - 0.19, B = 0.73 nu + 0.81, by hand for nu = 0.3."""
    x = np.array([-2.0, -0.7, -0.1])
    printed = 0.256 - 0.256 * (1 - np.exp(1.029 * x))
    np.testing.assert_allclose(share(unlu_gercek_2003, x, (0.3,)), printed, rtol=1e-14)


def test_behind_the_face_unlu_gercek_is_the_form_printed():
    """u0 + A (1 - (B / (B + X))^2), A = -0.22 nu + 0.81, B = 0.39 nu + 0.65, nu = 0.3."""
    x = np.array([0.1, 0.7, 2.0])
    printed = 0.256 + 0.744 * (1 - (0.767 / (0.767 + x)) ** 2)
    np.testing.assert_allclose(share(unlu_gercek_2003, x, (0.3,)), printed, rtol=1e-14)


@pytest.mark.parametrize("x", [-30.0, -100.0, -300.0])
def test_small_shares_keep_their_digits(x):
    """Far ahead Hoek's fit is exp(1.7 X / 1.10), and Unlu & Gercek u0 exp(B X)."""
    hoek = share(hoek_2002, x)[0]
    assert hoek == pytest.approx(np.exp(1.7 * x / 1.1), rel=1e-11 if x == -30 else 2e-13, abs=0)
    unlu = share(unlu_gercek_2003, x, (0.2,))[0]
    assert unlu == pytest.approx(0.234 * np.exp(0.956 * x), rel=2e-13, abs=0)
