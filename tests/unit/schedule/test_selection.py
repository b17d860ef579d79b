"""The class that a section requires, and what a rule may give in place of another class."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.schedule.selection import NONE_ADEQUATE, next_adequate, required_classes


def test_the_first_listed_class_that_is_adequate_is_required():
    adequate = np.array([[True, True], [False, True], [True, False], [False, False]])
    assert required_classes(adequate).tolist() == [0, 1, 0, NONE_ADEQUATE]


def test_a_heavier_class_need_not_be_adequate_where_a_lighter_one_is():
    assert required_classes(np.array([[False, True, False]])).tolist() == [1]


def test_without_any_class_no_section_has_an_adequate_one():
    assert required_classes(np.empty((3, 0), dtype=bool)).tolist() == [NONE_ADEQUATE] * 3


def test_no_class_number_can_be_taken_for_none_adequate():
    assert NONE_ADEQUATE < 0


@pytest.mark.parametrize(
    ("adequate", "following"),
    [
        pytest.param("111", [0, 1, 2], id="each-is-adequate-itself"),
        pytest.param("101", [0, 2, 2], id="the-next-heavier-one-stands-in"),
        pytest.param("110", [0, 1, NONE_ADEQUATE], id="nothing-heavier-is-left"),
        pytest.param("001", [2, 2, 2], id="only-the-heaviest"),
        pytest.param("000", [NONE_ADEQUATE] * 3, id="none"),
    ],
)
def test_a_class_that_is_not_adequate_gives_way_to_the_next_heavier_adequate_one(
    adequate, following
):
    row = np.array([[character == "1" for character in adequate]])
    assert next_adequate(row).tolist() == [following]
