"""Estimates from observations at hand-sized values, and at the ends of their valid ranges."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass import observations as seen

ESTIMATORS = [
    pytest.param(seen.gsi_from_jcond89_and_rqd, (20.0, 60.0), id="jcond89-and-rqd"),
    pytest.param(seen.gsi_from_rmr89_dry, (60.0,), id="rmr89-dry"),
    pytest.param(seen.gsi_from_q_prime, (5.0,), id="q-prime"),
    pytest.param(seen.gsi_from_block_volume, (1e4, 1.0), id="block-volume"),
    pytest.param(seen.intact_strength_from_point_load_mpa, (4.0, 22.0), id="point-load"),
    pytest.param(seen.residual_gsi, (50.0,), id="residual"),
]
"""Each function with one set of sound values."""


def of(function, *values):
    """One value from numbers."""
    return float(function(*(np.array([value], float) for value in values))[0])


def test_joint_rating_and_core_quality_add_up():
    """1.5 x 25 + 80 / 2 = 77.5; the best rating and core give 45 + 50."""
    assert of(seen.gsi_from_jcond89_and_rqd, 25, 80) == 77.5
    assert of(seen.gsi_from_jcond89_and_rqd, 30, 100) == 95.0


def test_dry_rating_is_five_above_the_index():
    assert of(seen.gsi_from_rmr89_dry, 23) == 18.0
    assert of(seen.gsi_from_rmr89_dry, 100) == 95.0


def test_quality_of_one_gives_44():
    assert of(seen.gsi_from_q_prime, 1) == 44.0


def test_quality_e_times_better_gives_nine_more():
    assert of(seen.gsi_from_q_prime, np.e) == pytest.approx(53, rel=1e-15)


def test_unit_block_with_unit_joint_condition_gives_26_and_a_half():
    """Both logarithms are 0."""
    assert of(seen.gsi_from_block_volume, 1, 1) == 26.5


def test_point_load_index_is_multiplied_by_the_factor_of_the_user():
    assert of(seen.intact_strength_from_point_load_mpa, 4, 22) == 88.0
    assert of(seen.intact_strength_from_point_load_mpa, 0.5, 12) == 6.0
    assert of(seen.intact_strength_from_point_load_mpa, 50, 20) == 1000.0


def test_residual_index_at_the_end_of_its_range_is_the_peak_of_the_curve():
    """At 1 / 0.0134 the curve is 1 / (0.0134 e)."""
    assert of(seen.residual_gsi, 74.6) == pytest.approx(1 / (0.0134 * np.e), rel=1e-7)


BEYOND = [
    pytest.param(seen.gsi_from_jcond89_and_rqd, (30.001, 50), id="jcond89-above-30"),
    pytest.param(seen.gsi_from_jcond89_and_rqd, (-0.001, 50), id="jcond89-below-0"),
    pytest.param(seen.gsi_from_jcond89_and_rqd, (20, 100.001), id="rqd-above-100"),
    pytest.param(seen.gsi_from_jcond89_and_rqd, (20, -0.001), id="rqd-below-0"),
    pytest.param(seen.gsi_from_jcond89_and_rqd, (0, 0), id="index-0-from-the-worst"),
    pytest.param(seen.gsi_from_rmr89_dry, (22.999,), id="rating-below-23"),
    pytest.param(seen.gsi_from_rmr89_dry, (100.001,), id="rating-above-100"),
    pytest.param(seen.gsi_from_q_prime, (0,), id="quality-0"),
    pytest.param(seen.gsi_from_q_prime, (-1,), id="quality-negative"),
    pytest.param(seen.gsi_from_q_prime, (0.0075,), id="quality-for-an-index-below-0"),
    pytest.param(seen.gsi_from_q_prime, (504,), id="quality-for-an-index-above-100"),
    pytest.param(seen.gsi_from_block_volume, (0, 1), id="volume-0"),
    pytest.param(seen.gsi_from_block_volume, (-1, 1), id="volume-negative"),
    pytest.param(seen.gsi_from_block_volume, (1000, 0), id="joint-condition-0"),
    pytest.param(seen.gsi_from_block_volume, (1000, -1), id="joint-condition-negative"),
    pytest.param(seen.gsi_from_block_volume, (1, 0.049), id="blocks-for-an-index-below-0"),
    pytest.param(seen.gsi_from_block_volume, (1e7, 12.3), id="blocks-for-an-index-above-100"),
    pytest.param(seen.intact_strength_from_point_load_mpa, (0, 22), id="point-load-0"),
    pytest.param(seen.intact_strength_from_point_load_mpa, (-4, -22), id="both-negative"),
    pytest.param(seen.intact_strength_from_point_load_mpa, (4, 0), id="factor-0"),
    pytest.param(seen.intact_strength_from_point_load_mpa, (50, 20.001), id="strength-above-1000"),
    pytest.param(seen.residual_gsi, (74.601,), id="peak-above-74.6"),
    pytest.param(seen.residual_gsi, (75,), id="peak-75"),
    pytest.param(seen.residual_gsi, (0,), id="peak-0"),
    pytest.param(seen.residual_gsi, (-10,), id="peak-negative"),
]


@pytest.mark.parametrize(("function", "values"), BEYOND)
def test_nothing_is_estimated_outside_the_valid_range(function, values):
    assert np.isnan(of(function, *values))


WITHIN = [
    pytest.param(seen.gsi_from_q_prime, (0.0076,), 0.0, id="quality-low"),
    pytest.param(seen.gsi_from_q_prime, (503,), 100.0, id="quality-high"),
    pytest.param(seen.gsi_from_block_volume, (1, 0.05), 0.0, id="blocks-low"),
    pytest.param(seen.gsi_from_block_volume, (1e7, 12.1), 100.0, id="blocks-high"),
]


@pytest.mark.parametrize(("function", "values", "end"), WITHIN)
def test_the_range_of_the_index_is_used_to_its_ends(function, values, end):
    found = of(function, *values)
    assert 0 < found <= 100
    assert abs(found - end) < 2


def test_beyond_the_pole_of_the_block_equation_no_index_comes_back():
    """ln Vb = 41 and ln Jc = -8: numerator -6.92, denominator -0.158, and their ratio 43.8."""
    numerator = 26.5 + 8.79 * -8 + 0.9 * 41
    denominator = 1 + 0.0151 * -8 - 0.0253 * 41
    assert 0 < numerator / denominator < 100
    assert np.isnan(of(seen.gsi_from_block_volume, np.exp(41), np.exp(-8)))


def test_the_named_ranges_say_what_is_allowed():
    assert seen.GSI_RANGE.describe() == "a number above 0, at most 100"
    assert seen.JCOND89_RANGE.describe() == "a number at least 0, at most 30"
    assert seen.RQD_RANGE_PCT.describe("%") == "a number at least 0, at most 100, in %"
    assert seen.RMR89_DRY_RANGE.describe() == "a number at least 23, at most 100"
    assert seen.Q_PRIME_RANGE.describe() == "a number above 0"
    assert seen.BLOCK_VOLUME_RANGE_CM3.describe("cm3") == "a number above 0, in cm3"
    assert seen.JOINT_CONDITION_RANGE.describe() == "a number above 0"
    assert seen.POINT_LOAD_RANGE_MPA.describe("MPa") == "a number above 0, in MPa"
    assert seen.POINT_LOAD_FACTOR_RANGE.describe() == "a number above 0"
    assert seen.INTACT_STRENGTH_RANGE_MPA.describe() == "a number above 0, at most 1000"
    assert seen.RESIDUAL_GSI_RANGE.describe() == "a number above 0, at most 74.6"


@pytest.mark.parametrize("bad", [np.nan, np.inf, -np.inf, -1e6])
@pytest.mark.parametrize(("function", "values"), ESTIMATORS)
def test_a_bad_row_is_nan_and_spoils_no_other(function, values, bad):
    alone = of(function, *values)
    assert np.isfinite(alone)
    for position in range(len(values)):
        columns = [np.array([value, value, value]) for value in values]
        columns[position][1] = bad
        np.testing.assert_array_equal(function(*columns), [alone, np.nan, alone])


@pytest.mark.parametrize(("function", "values"), ESTIMATORS)
def test_the_columns_given_stay_as_they_were(function, values):
    columns = [np.array([value, -1.0]) for value in values]
    for column in columns:
        column.flags.writeable = False
    assert function(*columns).shape == (2,)


@pytest.mark.parametrize(("function", "values"), [p for p in ESTIMATORS if len(p.values[1]) == 2])
def test_columns_of_different_length_are_refused(function, values):
    with pytest.raises(ShapeError, match="same length"):
        function(np.full(3, values[0]), np.full(2, values[1]))
