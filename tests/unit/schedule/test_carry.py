"""The heavier class is carried into lighter ground on both sides. Sections are 10 m long unless
a case says otherwise; every result was worked out by hand."""

from __future__ import annotations

import pytest
from unit.schedule.words import zoned


@pytest.mark.parametrize(
    ("carry_m", "scheduled"),
    [
        pytest.param(0.0, "0002000", id="0-switches-the-rule-off"),
        pytest.param(0.0009, "0002000", id="0.9-mm-reach-no-section"),
        pytest.param(0.0011, "0022200", id="1.1-mm-take-a-whole-section"),
        pytest.param(5.0, "0022200", id="half-a-section-takes-it-whole"),
        pytest.param(10.0, "0022200", id="one-section"),
        pytest.param(10.0009, "0022200", id="0.9-mm-of-the-second-section"),
        pytest.param(10.0011, "0222220", id="1.1-mm-of-the-second-section"),
        pytest.param(1000.0, "2222222", id="beyond-both-ends"),
    ],
)
def test_carry_takes_every_section_that_it_overlaps_by_more_than_a_millimetre(carry_m, scheduled):
    assert zoned("0002000", carry_m=carry_m) == (scheduled, [])


@pytest.mark.parametrize(
    ("carry_m", "scheduled"),
    [
        pytest.param(7.0, "0022220", id="35-to-42-and-50-to-57"),
        pytest.param(9.0, "0222220", id="33-to-42-and-50-to-59"),
        pytest.param(11.0, "2222220", id="31-to-42-and-50-to-61"),
        pytest.param(12.0, "2222222", id="30-to-42-and-50-to-62"),
    ],
)
def test_carry_measures_lengths_and_does_not_count_sections(carry_m, scheduled):
    # Ends at 0, 33, 35, 40, 42, 50, 61 and 101 m; the heavier ground lies from 42 to 50 m.
    lengths = [33.0, 2.0, 5.0, 2.0, 8.0, 11.0, 40.0]
    assert zoned("0000200", lengths_m=lengths, carry_m=carry_m) == (scheduled, [])


def test_each_class_is_carried_from_the_ground_that_requires_it():
    # The 2 reaches the 1, the 1 reaches the 0 before it; what a rule gave is not carried on.
    assert zoned("001200", carry_m=10.0) == ("012220", [])


def test_what_was_carried_is_not_carried_further_in_the_next_round():
    # The minimum zone makes the rules go round again.
    assert zoned("0000200000", carry_m=10.0, minimum_zone_m=20.0) == ("0002220000", [])


def test_a_lighter_class_is_never_carried_into_heavier_ground():
    assert zoned("2202", carry_m=10.0) == ("2222", [])
    assert zoned("2222", carry_m=10.0) == ("2222", [])


def test_of_two_classes_that_reach_a_section_the_heavier_one_wins():
    assert zoned("10002", carry_m=40.0) == ("22222", [])
    assert zoned("10002", carry_m=20.0) == ("11222", [])


@pytest.mark.parametrize(
    ("gap_m", "scheduled"),
    [
        pytest.param(0.0009, "2220", id="ends-within-1-mm-meet"),
        pytest.param(0.0011, "2200", id="a-wider-gap-stops"),
        pytest.param(3.0, "2200", id="a-gap-shorter-than-the-carry-stops"),
    ],
)
def test_a_gap_stops_the_carry(gap_m, scheduled):
    assert zoned("0200", gap_before={2: gap_m}, carry_m=8.0) == (scheduled, [])


def test_a_section_without_an_adequate_class_is_not_overwritten():
    assert zoned("x2x", carry_m=10.0) == ("x2x", [])


def test_a_section_without_an_adequate_class_carries_nothing():
    assert zoned("0x0", carry_m=10.0) == ("0x0", [])


def test_the_carried_length_counts_through_a_section_without_an_adequate_class():
    # Only declared gaps and the ends stop a rule.
    assert zoned("00x2", carry_m=10.0) == ("00x2", [])
    assert zoned("00x2", carry_m=15.0) == ("02x2", [])


def test_where_the_carried_class_is_not_adequate_the_next_heavier_adequate_one_is_taken():
    assert zoned("010", only={0: "02"}, carry_m=10.0) == ("211", [])


def test_the_class_that_stands_in_is_not_carried_on():
    assert zoned("0010", only={1: "02"}, carry_m=10.0) == ("0211", [])


def test_without_an_adequate_class_to_give_the_section_keeps_its_class_and_is_flagged():
    assert zoned("020", only={0: "01"}, carry_m=10.0) == ("022", [0])
    assert zoned("020", only={0: "01", 2: "0"}, carry_m=10.0) == ("020", [0, 2])


def test_a_section_that_refuses_does_not_stop_the_carry_beyond_it():
    assert zoned("0002", only={2: "0"}, carry_m=20.0) == ("0202", [2])


def test_an_alignment_without_classes_is_left_alone():
    assert zoned("xxx", carry_m=10.0, minimum_zone_m=50.0) == ("xxx", [])


def test_a_section_that_can_take_only_the_lighter_of_two_carried_classes_takes_that_one():
    # The 1 from below can be given, the 2 from above cannot: the flag tells of the latter.
    assert zoned("102", only={1: "01"}, carry_m=10.0) == ("112", [1])
