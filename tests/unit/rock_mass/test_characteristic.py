"""Cautious values by each rule, on tests whose answer follows by hand from printed quantiles."""

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.rock_mass.characteristic import (
    CautiousSide,
    cautious_by_half_deviation,
    cautious_fractile,
    cautious_mean,
    student_quantile,
)

LOW, HIGH = CautiousSide.LOW, CautiousSide.HIGH

# Standard statistical tables: percentage points of Student's t, printed to three decimals.
ONE_SIDED_95 = [(1, 6.314), (2, 2.920), (3, 2.353), (4, 2.132), (9, 1.833), (29, 1.699)]
TWO_SIDED_95 = [(1, 12.706), (2, 4.303), (3, 3.182), (4, 2.776), (8, 2.306), (30, 2.042)]
TABLES = [
    pytest.param(probability, degrees, printed, id=f"{probability}-{degrees}")
    for probability, rows in ((0.95, ONE_SIDED_95), (0.975, TWO_SIDED_95))
    for degrees, printed in rows
]

# EN 1990:2002, table D1, 5 % fractile with unknown standard deviation, from memory: the factor
# k_n of mean - k_n s. Its second decimal is not everywhere that of the formula behind it: 8 and 20
# tests give 2.010 and 1.772.
FRACTILE_FACTORS = [(3, 3.37), (4, 2.63), (5, 2.33), (6, 2.18), (8, 2.00), (10, 1.92), (20, 1.76)]
SECOND_DECIMAL = 0.015


def row(*values):
    return tuple(np.array([value], float) for value in values)


@pytest.mark.parametrize(("probability", "degrees", "printed"), TABLES)
def test_quantiles_are_those_of_the_printed_table(probability, degrees, printed):
    assert round(float(student_quantile(probability, np.array([degrees]))[0]), 3) == printed


def test_there_is_no_quantile_below_one_degree_of_freedom():
    found = student_quantile(0.95, np.array([0.0, 0.5, -1.0, np.nan, 1.0]))
    np.testing.assert_array_equal(np.isnan(found), [True, True, True, True, False])


def test_the_median_of_student_is_zero():
    assert student_quantile(0.5, np.array([7.0]))[0] == pytest.approx(0, abs=1e-12)


@pytest.mark.parametrize(
    ("side", "expected"), [pytest.param(LOW, 80.0, id="low"), pytest.param(HIGH, 120.0, id="high")]
)
def test_cautious_mean_of_four_tests(side, expected):
    """t = 2.353 for 3 degrees: 100 -/+ 2.353 s / 2 with s = 40 / 2.353."""
    found = cautious_mean(*row(100, 40 / 2.353, 4), side)
    assert found[0] == pytest.approx(expected, abs=20 * 0.0005 / 2.353)


@pytest.mark.parametrize(
    ("side", "sign"), [pytest.param(LOW, -1, id="low"), pytest.param(HIGH, 1, id="high")]
)
@pytest.mark.parametrize(("count", "factor"), FRACTILE_FACTORS)
def test_cautious_fractile_has_the_factors_of_the_standard(count, factor, side, sign):
    found = cautious_fractile(*row(0, 1, count), side)
    assert found[0] * sign == pytest.approx(factor, abs=SECOND_DECIMAL)


def test_cautious_fractile_of_three_tests():
    """t = 2.920 for 2 degrees; sqrt(1 + 1/3) = 1.15470: 100 - 10 x 3.3717."""
    found = cautious_fractile(*row(100, 10, 3), LOW)
    assert found[0] == pytest.approx(100 - 33.717, abs=10 * 0.0005 * 1.1547)


def test_half_a_deviation_to_either_side():
    mean, deviation = row(100, 20)
    assert cautious_by_half_deviation(mean, deviation, LOW)[0] == 90.0
    assert cautious_by_half_deviation(mean, deviation, HIGH)[0] == 110.0


@pytest.mark.parametrize("count", [0.0, 1.0, 1.9, -3.0, np.nan])
@pytest.mark.parametrize("rule", [cautious_mean, cautious_fractile])
def test_fewer_than_two_tests_give_no_value(rule, count):
    assert np.isnan(rule(*row(100, 10, count), LOW)[0])


@pytest.mark.parametrize("rule", [cautious_mean, cautious_fractile])
def test_two_tests_are_enough(rule):
    """t = 6.314 for 1 degree: over sqrt(2), and times sqrt(1.5)."""
    factor = {cautious_mean: 4.465, cautious_fractile: 7.733}[rule]
    assert rule(*row(100, 1, 2), LOW)[0] == pytest.approx(100 - factor, abs=0.0007)


def all_rules(mean, deviation, count, side):
    return [
        cautious_mean(mean, deviation, count, side),
        cautious_fractile(mean, deviation, count, side),
        cautious_by_half_deviation(mean, deviation, side),
    ]


@pytest.mark.parametrize("side", CautiousSide)
def test_tests_without_scatter_give_their_mean(side):
    for found in all_rules(*row(73, 0, 5), side):
        assert found[0] == 73.0


@pytest.mark.parametrize("deviation", [-1e-9, -5.0, np.nan])
def test_a_deviation_that_is_none_gives_no_value(deviation):
    for found in all_rules(*row(73, deviation, 5), LOW):
        assert np.isnan(found[0])


def test_one_further_test_is_less_certain_than_the_mean():
    columns = row(100, 10, 12)
    assert cautious_fractile(*columns, LOW)[0] < cautious_mean(*columns, LOW)[0] < 100


def test_many_tests_leave_the_mean_and_the_normal_fractile():
    """The 95 % point of the normal distribution, 1.645 in the printed table."""
    columns = row(0, 1, 1e8)
    assert cautious_mean(*columns, HIGH)[0] == pytest.approx(0, abs=1e-3)
    assert round(float(cautious_fractile(*columns, HIGH)[0]), 3) == 1.645


def test_half_a_deviation_stands_for_thirteen_tests():
    twelve, thirteen = (cautious_mean(*row(0, 1, count), HIGH)[0] for count in (12, 13))
    assert thirteen < 0.5 < twelve


def test_a_value_below_zero_is_not_clipped():
    assert cautious_fractile(*row(10, 5, 3), LOW)[0] < 0


def test_a_bad_row_spoils_no_other():
    columns = np.full(3, 100.0), np.array([10.0, np.nan, 10.0]), np.array([5.0, 5.0, 1.0])
    for found in all_rules(*columns, LOW)[:2]:
        np.testing.assert_array_equal(np.isnan(found), [False, True, True])


@pytest.mark.parametrize("side", [0, 2, -0.5])
def test_a_side_that_is_none_is_refused(side):
    mean, deviation, count = row(100, 10, 5)
    for call in (
        lambda: cautious_mean(mean, deviation, count, side),
        lambda: cautious_fractile(mean, deviation, count, side),
        lambda: cautious_by_half_deviation(mean, deviation, side),
    ):
        with pytest.raises(ValueError, match="not a valid CautiousSide"):
            call()


def test_columns_of_different_length_are_refused():
    two, three = np.ones(2), np.ones(3)
    for call in (
        lambda: cautious_mean(two, two, three, LOW),
        lambda: cautious_fractile(two, three, two, LOW),
        lambda: cautious_by_half_deviation(three, two, LOW),
    ):
        with pytest.raises(ShapeError, match="same length"):
            call()
