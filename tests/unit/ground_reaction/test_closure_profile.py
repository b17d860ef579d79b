"""Share of the final closure along the drive, where it is known by hand."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.ground_reaction.closure_profile import vlachopoulos_diederichs_2009


def share(distance, radius=5.0, plastic_ratio=1.0):
    distance = np.atleast_1d(np.asarray(distance, float))
    size = distance.shape
    return vlachopoulos_diederichs_2009(
        distance, np.full(size, radius), np.full(size, plastic_ratio * radius)
    )


def test_share_at_the_face_of_elastic_ground():
    """exp(-0.15) / 3."""
    assert share(0.0)[0] == pytest.approx(np.exp(-0.15) / 3, rel=1e-15)


@pytest.mark.parametrize("plastic_ratio", [1.0, 3.0, 20.0])
def test_profile_has_no_step_at_the_face(plastic_ratio):
    before, after = share([-1e-12, 1e-12], plastic_ratio=plastic_ratio)
    assert before == pytest.approx(after, rel=1e-11)


@pytest.mark.parametrize("plastic_ratio", [1.0, 3.0, 20.0])
def test_share_rises_from_nothing_far_ahead_to_everything_far_behind(plastic_ratio):
    shares = share(np.linspace(-60, 3000, 4000), plastic_ratio=plastic_ratio)
    assert np.all(np.diff(shares) >= 0)
    assert shares[0] < 1e-5
    assert shares[-1] == pytest.approx(1, abs=1e-15)


def test_deep_plastic_zone_moves_later():
    shares = [share(10.0, plastic_ratio=ratio)[0] for ratio in (1.0, 2.0, 4.0, 8.0)]
    assert np.all(np.diff(shares) < 0)


def test_very_distant_sections_are_not_beyond_the_range_of_a_double():
    np.testing.assert_array_equal(share([-1e6, 1e6]), [0, 1])


def test_arrays_of_different_length_are_refused_by_name():
    with pytest.raises(ShapeError, match="plastic_radius_m"):
        vlachopoulos_diederichs_2009(np.zeros(2), np.ones(2), np.ones(3))
