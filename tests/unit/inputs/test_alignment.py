"""Intervals along the alignment."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.errors import Problems, Where
from tunnelcalc.inputs.alignment import Piece, check_order, cut_into_sections, section_counts


def told(*ends: tuple[float, float], gap: tuple[float, float] | None = None) -> list[str]:
    pieces = [Piece(a, b, Where("g.csv", n), False) for n, (a, b) in enumerate(ends, 2)]
    if gap:
        pieces.append(Piece(*gap, Where("p.yaml", 9), True))
    problems = Problems()
    check_order(pieces, True, problems)
    return [str(problem).splitlines()[0] for problem in problems]


def test_intervals_that_meet_within_a_millimetre_are_in_order():
    assert told((10, 20), (0, 10.0009), (20.0009, 30)) == []
    assert told((0, 10), (10.0011, 20)) == ["g.csv:3: no ground is given from 10 to 10.0011 m"]
    assert told((0, 10.0011), (10, 20)) == [
        "g.csv:3: the interval 10 to 20 m overlaps the interval 0 to 10.0011 m of g.csv:2 "
        "by 0.0011 m"
    ]


def test_a_declared_gap_stands_in_for_an_interval():
    assert told((0, 10), (15, 20), gap=(10, 15)) == []
    assert told((0, 10), gap=(10, 15)) == [
        "p.yaml:9: the declared gap 10 to 15 m lies after all intervals"
    ]


def test_an_interval_is_compared_with_the_one_that_reaches_furthest():
    assert told((0, 100), (10, 20), (30, 40)) == [
        "g.csv:3: the interval 10 to 20 m overlaps the interval 0 to 100 m of g.csv:2 by 10 m",
        "g.csv:4: the interval 30 to 40 m overlaps the interval 0 to 100 m of g.csv:2 by 10 m",
    ]


def test_gaps_are_not_told_where_an_interval_could_not_be_read():
    problems = Problems()
    pieces = [Piece(0, 10, Where("g.csv", 2), False), Piece(20, 30, Where("g.csv", 4), False)]
    check_order(pieces, False, problems)
    assert len(problems) == 0


@pytest.mark.parametrize(
    ("length", "longest", "count"),
    [
        (100, 10, 10),
        (100.0001, 10, 11),
        (0.3, 0.1, 3),  # 0.3 / 0.1 is a little above 3 in doubles
        (9.99, 10, 1),
        (10 + 5e-9, 10, 1),
        (25, 10, 3),
    ],
)
def test_an_interval_is_cut_into_as_few_sections_as_the_length_allows(length, longest, count):
    assert section_counts(np.array([length]), longest).tolist() == [count]


def test_without_a_length_each_interval_is_one_section():
    assert section_counts(np.array([5.0, 900.0]), None).tolist() == [1, 1]


def test_sections_of_an_interval_are_equal_and_end_where_it_ends():
    cut = cut_into_sections(np.array([0.0, 25.0]), np.array([25.0, 31.1]), 10)
    assert cut.interval.tolist() == [0, 0, 0, 1]
    assert cut.to_m[[2, 3]].tolist() == [25.0, 31.1]
    assert cut.from_m[[0, 3]].tolist() == [0.0, 25.0]
    np.testing.assert_allclose((cut.to_m - cut.from_m)[:3], 25 / 3, rtol=1e-14)
    assert cut.from_m[1:3].tolist() == cut.to_m[:2].tolist()
