"""The ends of a range are rounded towards its inside."""

from __future__ import annotations

import math

import pytest

from tunnelcalc.tune.ends import inward


@pytest.mark.parametrize(
    ("low", "high", "printed"),
    [
        (40.0, 400.0, (40.0, 400.0, 4)),
        (87.612, 123.456, (87.62, 123.4, 4)),
        (0.0, 1 / 3, (0.0, 0.3333, 4)),
        (99996.0, 1e6, (100000.0, 1e6, 4)),
    ],
)
def test_the_lower_end_goes_up_and_the_upper_down(low, high, printed):
    assert inward(low, high, 4) == printed


def test_a_narrow_range_has_more_digits_and_never_none_inside():
    assert inward(1.00001, 1.00002, 4) == (1.00001, 1.00002, 6)
    low, high, _ = inward(1 / 3, 1 / 3, 4)
    assert low == high == 1 / 3


def test_no_range_stays_none():
    assert all(math.isnan(end) for end in inward(math.nan, math.nan, 4)[:2])
