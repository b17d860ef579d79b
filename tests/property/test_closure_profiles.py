"""What holds for every closure profile and distance."""

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from tunnelcalc.ground_reaction.closure_profile import (
    hoek_2002,
    panet_1995,
    panet_guenot_1982,
    unlu_gercek_2003,
)

BEHIND_ONLY = (panet_1995, panet_guenot_1982)
PROFILES = [*BEHIND_ONLY, unlu_gercek_2003, hoek_2002]
ROUNDING = 1e-15
"""Of exp and log1p, which do not promise to keep the order of neighbouring doubles. [-]"""

any_distance = st.floats(allow_nan=False, allow_infinity=False) | st.floats(-100, 100)
radii = st.floats(0.5, 30)
poisson_ratios = st.floats(0, 0.5)


def share(profile, distances, radius, nu):
    distances = np.array(distances, float)
    more = [nu] if profile is unlu_gercek_2003 else []
    return profile(distances, *(np.full(distances.size, value) for value in (radius, *more)))


@pytest.mark.parametrize("profile", PROFILES)
@given(one=any_distance, other=any_distance, radius=radii, nu=poisson_ratios)
def test_share_lies_between_0_and_1_and_never_falls_along_the_drive(
    profile, one, other, radius, nu
):
    distances = np.sort([one, other])
    found = share(profile, distances, radius, nu)
    defined = distances >= 0 if profile in BEHIND_ONLY else np.array([True, True])
    np.testing.assert_array_equal(np.isnan(found), ~defined)
    assert np.all((found[defined] >= 0) & (found[defined] <= 1))
    if defined.all():
        assert found[0] <= found[1] * (1 + ROUNDING)


@pytest.mark.parametrize("profile", [*BEHIND_ONLY, unlu_gercek_2003])
@given(
    one=st.floats(0, 1e300) | st.floats(0, 100),
    other=st.floats(0, 1e300) | st.floats(0, 100),
    radius=radii,
    nu=poisson_ratios,
)
def test_hyperbolas_never_fall_behind_the_face_not_even_by_rounding(
    profile, one, other, radius, nu
):
    found = share(profile, np.sort([one, other]), radius, nu)
    assert found[0] <= found[1]


@pytest.mark.parametrize("profile", PROFILES)
@given(distances=st.lists(any_distance, min_size=2, max_size=40), radius=radii)
def test_share_of_a_section_does_not_depend_on_its_neighbours(profile, distances, radius):
    together = share(profile, distances, radius, 0.3)
    alone = np.concatenate([share(profile, [x], radius, 0.3) for x in distances])
    assert together.tobytes() == alone.tobytes()
