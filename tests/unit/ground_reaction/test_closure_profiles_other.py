"""Closure profiles of elastic ground and Hoek's fit: ends of the range, unknown values."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.ground_reaction.closure_profile import (
    hoek_2002,
    panet_1995,
    panet_guenot_1982,
    unlu_gercek_2003,
)

PROFILES = [
    pytest.param(panet_1995, ("distance_m", "radius_m"), id="panet"),
    pytest.param(panet_guenot_1982, ("distance_m", "plastic_radius_m"), id="panet-guenot"),
    pytest.param(unlu_gercek_2003, ("distance_m", "radius_m", "poisson_ratio"), id="unlu-gercek"),
    pytest.param(hoek_2002, ("distance_m", "radius_m"), id="hoek"),
]
VALUES = {"distance_m": 2.0, "radius_m": 0.5, "plastic_radius_m": 0.5, "poisson_ratio": 0.25}


def share(profile, names, size=1, **changed):
    columns = (np.broadcast_to(np.asarray(changed.get(n, VALUES[n]), float), size) for n in names)
    return profile(*columns)


@pytest.mark.parametrize("profile", [panet_1995, panet_guenot_1982])
def test_nothing_is_extrapolated_ahead_of_the_face(profile):
    """Not even where the hyperbola has its pole, at 0.75 or 0.84 radii."""
    distance = np.array([-1e308, -0.84, -0.75, -1e-300, -0.0, 0.0])
    found = profile(distance, np.ones(6))
    np.testing.assert_array_equal(np.isnan(found), [True] * 4 + [False] * 2)
    assert found[4] == found[5]


@pytest.mark.parametrize(("profile", "names"), PROFILES)
def test_any_finite_distance_gives_no_warning(profile, names):
    """Warnings are errors here; divided by half a metre the first and last leave the doubles."""
    most = np.finfo(float).max
    found = share(profile, names, 6, distance_m=[most, 1e300, 1e4, -1e4, -1e300, -most])
    np.testing.assert_array_equal(found[:2], [1, 1])
    assert 0.9999 < found[2] <= 1
    ahead = np.nan if "panet" in profile.__name__ else 0
    np.testing.assert_array_equal(found[3:], [ahead] * 3)


@pytest.mark.parametrize(("profile", "names"), PROFILES)
def test_unknown_value_gives_nan_and_spoils_no_other(profile, names):
    sound = share(profile, names, 3)
    for name in names:
        spoiled = share(profile, names, 3, **{name: [VALUES[name], np.nan, VALUES[name]]})
        np.testing.assert_array_equal(spoiled, [sound[0], np.nan, sound[2]])


@pytest.mark.parametrize(("profile", "names"), PROFILES)
def test_arrays_of_different_length_are_refused_by_name(profile, names):
    *others, last = names
    with pytest.raises(ShapeError, match=last):
        profile(*(np.ones(2) for _ in others), np.ones(3))


@pytest.mark.parametrize(("profile", "names"), PROFILES)
def test_no_sections(profile, names):
    assert share(profile, names, 0).shape == (0,)


def test_poisson_ratio_raises_the_share_at_the_face():
    found = share(
        unlu_gercek_2003, PROFILES[2].values[1], 3, distance_m=0, poisson_ratio=[0, 0.2, 0.4]
    )
    np.testing.assert_allclose(found, [0.19, 0.234, 0.278], rtol=1e-15)
