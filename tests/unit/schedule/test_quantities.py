"""Quantities by class, by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError
from tunnelcalc.schedule.quantities import excavation_m3_per_m, totals_by_class
from tunnelcalc.schedule.selection import NONE_ADEQUATE


def test_excavation_is_the_area_of_the_circle():
    np.testing.assert_allclose(
        excavation_m3_per_m(np.array([1.0, 2.5])), [math.pi, 6.25 * math.pi], rtol=1e-15
    )


def test_an_amount_a_metre_is_taken_over_the_sections_of_each_class():
    per_metre = np.array([2.0, 3.0, 5.0, 7.0])
    length = np.array([10.0, 1.0, 0.5, 4.0])
    classes = np.array([0, 1, 0, NONE_ADEQUATE])
    # 2 x 10 + 5 x 0.5 = 22.5; 3 x 1 = 3; class 2 has no section; 7 x 4 = 28.
    got = totals_by_class(per_metre, length, classes, np.array([0, 1, 2, NONE_ADEQUATE]))
    assert got.tolist() == [22.5, 3.0, 0.0, 28.0]


def test_arrays_of_different_length_are_refused_by_name():
    with pytest.raises(ShapeError, match="length_m"):
        totals_by_class(np.ones(3), np.ones(2), np.zeros(3), np.array([0]))
