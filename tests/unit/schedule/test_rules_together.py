"""Carry and minimum zone together, and the zones that come of them."""

from __future__ import annotations

import numpy as np
from unit.schedule.words import adequacy, ends, numbers, zoned

from tunnelcalc.schedule.zoning import stretches, zone_classes, zone_starts

LONG_ENDS = [50.0, *[10.0] * 8, 50.0]


def test_carry_comes_before_the_minimum_zone():
    # Carried 6 m, the 2 takes 10 m before it, 5 m and 40 m behind: 65 m. Had the minimum zone of
    # 30 m come first, it would have taken 10, 5 and once more 10 m, and section 1 with it.
    lengths = [30.0, 10.0, 10.0, 10.0, 5.0, 40.0, 30.0]
    got = zoned("0002000", lengths_m=lengths, carry_m=6.0, minimum_zone_m=30.0)
    assert got == ("0022220", [])


def test_a_carried_zone_that_is_still_short_takes_more():
    # Carry gives 30 m; the minimum of 40 m takes one more, from the lower chainage.
    got = zoned("0000200000", lengths_m=LONG_ENDS, carry_m=5.0, minimum_zone_m=40.0)
    assert got == ("0022220000", [])


def test_what_the_carry_leaves_short_joins_it():
    # Two zones of 2 are carried 10 m each; the 10 m of 0 between them are too short.
    got = zoned("0002000200", lengths_m=LONG_ENDS, carry_m=10.0, minimum_zone_m=20.0)
    assert got == ("0022222220", [])


def test_with_both_rules_off_the_required_classes_stay():
    assert zoned("0102x2010") == ("0102x2010", [])


def test_the_required_classes_are_left_as_they_were():
    required = numbers("00200")
    zoning = zone_classes(
        required,
        adequacy("00200", {}),
        *ends([50.0, 10.0, 10.0, 10.0, 50.0], {}),
        carry_m=10.0,
        minimum_zone_m=20.0,
    )
    assert required.tolist() == [0, 0, 2, 0, 0]
    assert zoning.scheduled.tolist() == [0, 2, 2, 2, 0]


def test_a_longer_carry_may_leave_a_section_lighter_where_the_minimum_zone_works_too():
    """No slip: the carry makes a zone long enough from one side, so that the minimum zone need
    not take the section on the other side."""
    lengths = [30.0, 10.0, 10.0, 10.0, 5.0, 40.0, 30.0]
    none = zoned("0002000", lengths_m=lengths, minimum_zone_m=30.0)[0]
    longer = zoned("0002000", lengths_m=lengths, carry_m=6.0, minimum_zone_m=30.0)[0]
    # Without carry: 10 m, 10 before, 5 behind and 10 before make 35 m.
    assert none == "0222200"
    # With 6 m: 10 before, 5 and 40 behind are reached, 65 m in all.
    assert longer == "0022220"


def test_stretches_count_the_gaps_before_a_section():
    from_m, to_m = ends([10.0, 10.0, 10.0, 10.0], {1: 0.0009, 2: 0.0011, 3: 7.0})
    assert stretches(from_m, to_m).tolist() == [0, 0, 1, 2]


def test_a_zone_starts_where_class_or_stretch_changes():
    classes = numbers("00112x")
    stretch = np.array([0, 1, 1, 1, 1, 1])
    assert zone_starts(classes, stretch).tolist() == [0, 1, 2, 4, 5]


def test_a_single_section_is_one_zone():
    assert zone_starts(numbers("0"), np.array([0])).tolist() == [0]
