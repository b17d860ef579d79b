"""What holds for every observation and every set of tests."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st

from tunnelcalc.rock_mass import observations as seen
from tunnelcalc.rock_mass.characteristic import (
    CautiousSide,
    cautious_by_half_deviation,
    cautious_fractile,
    cautious_mean,
)
from tunnelcalc.rock_mass.laboratory import intact_rock_from_tests

RISING = {
    seen.gsi_from_jcond89_and_rqd: ((0.1, 30), (0, 100)),
    seen.gsi_from_rmr89_dry: ((23, 100),),
    seen.gsi_from_q_prime: ((0.0076, 503),),
    seen.gsi_from_block_volume: ((1, 1e6), (0.1, 12)),
    seen.intact_strength_from_point_load_mpa: ((1e-3, 20), (1, 50)),
    seen.residual_gsi: ((1e-3, 74.6),),
}
"""Each estimator with ranges of observations from all of which there is an estimate."""
ROUNDING = 1e-12
fewer = settings(max_examples=30, deadline=None)
"""A fit takes milliseconds, and the first of them the loading of scipy."""


@pytest.mark.parametrize("function", RISING, ids=lambda f: f.__name__)
@given(data=st.data())
@fewer
def test_a_better_observation_never_gives_a_lower_estimate(function, data):
    values = [data.draw(st.floats(*ends)) for ends in RISING[function]]
    place = data.draw(st.integers(0, len(values) - 1))
    low, high = RISING[function][place]
    more = data.draw(st.floats(values[place], high))
    columns = [np.array([value, value]) for value in values]
    columns[place][1] = more
    found = function(*columns)
    assert np.isfinite(found).all()
    assert found[1] >= found[0] * (1 - ROUNDING)
    if more - values[place] > 1e-3 * (high - low) and function is not seen.residual_gsi:
        assert found[1] > found[0]  # the residual curve is flat at the end of its range


@pytest.mark.parametrize("function", RISING, ids=lambda f: f.__name__)
@given(data=st.data())
@fewer
def test_an_estimate_is_in_the_range_of_its_quantity_or_missing(function, data):
    """Whatever number is given, sound or not."""
    anything = st.floats(-1e150, 1e150) | st.sampled_from([np.nan, np.inf, -np.inf, 0.0])
    columns = [
        np.array(data.draw(st.lists(anything | st.floats(*ends), min_size=3, max_size=3)))
        for ends in RISING[function]
    ]
    found = function(*columns)
    top = 1000 if function is seen.intact_strength_from_point_load_mpa else 100
    assert np.all(np.isnan(found) | ((found > 0) & (found <= top)))


@given(st.floats(1e-3, 74.6))
@fewer
def test_the_residual_index_is_never_above_the_peak_index(gsi):
    assert seen.residual_gsi(np.array([gsi]))[0] < gsi


@st.composite
def triaxial_tests(draw):
    """s3 and s1 of tests that scatter about a criterion."""
    strength, mi = draw(st.floats(1, 400)), draw(st.floats(3, 40))
    count = draw(st.integers(5, 12))
    shares = draw(st.lists(st.floats(0, 0.5), min_size=count, max_size=count))
    errors = draw(st.lists(st.floats(-0.15, 0.15), min_size=count, max_size=count))
    assume(np.ptp(shares) > 0.05)
    minor = np.array(shares) * strength
    difference = np.sqrt(mi * strength * minor + strength**2) * (1 + np.array(errors))
    return minor, minor + difference


@given(triaxial_tests(), st.randoms(use_true_random=False))
@fewer
def test_the_order_of_tests_changes_no_bit(tests, random):
    order = list(range(len(tests[0])))
    random.shuffle(order)
    one = intact_rock_from_tests(*tests)
    other = intact_rock_from_tests(tests[0][order], tests[1][order])
    assert repr(other.regression) == repr(one.regression)
    assert repr(other.least_squares) == repr(one.least_squares)
    assert (other.reason, repr(other.r_squared)) == (one.reason, repr(one.r_squared))
    if not one.reason:
        np.testing.assert_array_equal(
            other.studentised_residuals, np.array(one.studentised_residuals)[order]
        )


@given(triaxial_tests(), st.floats(1e-3, 1e3))
@fewer
def test_stresses_in_another_unit_scale_the_strength_and_leave_mi(tests, factor):
    one = intact_rock_from_tests(*tests)
    assume(not one.reason and one.r_squared > 0.01)
    other = intact_rock_from_tests(tests[0] * factor, tests[1] * factor)
    assert other.reason == ""
    assert other.r_squared == pytest.approx(one.r_squared, rel=1e-9)
    for before, after in (
        (one.regression, other.regression),
        (one.least_squares, other.least_squares),
    ):
        assert after.intact_strength_mpa / factor == pytest.approx(
            before.intact_strength_mpa, rel=1e-6, nan_ok=True
        )
        assert after.mi == pytest.approx(before.mi, rel=1e-6, nan_ok=True)
        np.testing.assert_allclose(after.mi_interval, before.mi_interval, rtol=1e-5, atol=1e-5)


@given(st.floats(1, 400), st.floats(1, 40), st.lists(st.floats(0, 0.7), min_size=5, max_size=12))
@fewer
def test_tests_on_a_criterion_give_it_back(strength, mi, shares):
    assume(np.ptp(shares) > 0.05)
    minor = np.array(shares) * strength
    found = intact_rock_from_tests(minor, minor + np.sqrt(mi * strength * minor + strength**2))
    np.testing.assert_allclose(found.regression[:2], (strength, mi), rtol=1e-9)
    np.testing.assert_allclose(found.least_squares[:2], (strength, mi), rtol=1e-9)
    assert found.outliers == ()
    assume(abs(max(shares) - 0.5) > 1e-6)  # nearer, rounding of the strength decides
    assert found.within_recommended_confinement == (max(shares) < 0.5)


@given(triaxial_tests())
@fewer
def test_a_fit_of_s1_never_leaves_more_of_s1_than_the_regression(tests):
    found = intact_rock_from_tests(*tests)
    assume(np.isfinite(found.least_squares.mi))

    def left(fit):
        strength, mi = fit[:2]
        return np.sum((tests[0] + np.sqrt(mi * strength * tests[0] + strength**2) - tests[1]) ** 2)

    scale = np.sum(tests[1] ** 2)
    assert left(found.least_squares) <= left(found.regression) + 1e-14 * scale


def by_all_rules(mean, deviation, count, side):
    columns = np.array([mean]), np.array([deviation]), np.array([count], float)
    return np.concatenate(
        [
            cautious_mean(*columns, side),
            cautious_fractile(*columns, side),
            cautious_by_half_deviation(*columns[:2], side),
        ]
    )


means = st.floats(-1000, 1000)
deviations = st.floats(0, 500)
counts = st.integers(2, 200)


@given(means, deviations, counts)
@fewer
def test_the_two_sides_lie_about_the_mean(mean, deviation, count):
    low = by_all_rules(mean, deviation, count, CautiousSide.LOW)
    high = by_all_rules(mean, deviation, count, CautiousSide.HIGH)
    assert np.all(low <= mean)
    assert np.all(high >= mean)
    np.testing.assert_allclose(low + high, 2 * mean, atol=1e-9)


@given(means, deviations, st.floats(1, 100), counts)
@fewer
def test_more_scatter_is_never_less_cautious(mean, deviation, further, count):
    one, more = (
        by_all_rules(mean, spread, count, CautiousSide.LOW)
        for spread in (deviation, deviation + further)
    )
    assert np.all(more < one)


@given(means, st.floats(1, 500), counts)
@fewer
def test_one_more_test_of_the_same_scatter_comes_nearer_to_the_mean(mean, deviation, count):
    one, more = (by_all_rules(mean, deviation, n, CautiousSide.HIGH) for n in (count, count + 1))
    assert np.all(more[:2] < one[:2])
    assert more[2] == one[2]
