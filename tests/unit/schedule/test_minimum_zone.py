"""Zones shorter than the minimum. Sections are 10 m long unless a case says otherwise; every
result was worked out by hand."""

from __future__ import annotations

import pytest
from unit.schedule.words import zoned


def test_0_switches_the_rule_off():
    assert zoned("0102x20", minimum_zone_m=0.0) == ("0102x20", [])


@pytest.mark.parametrize(
    ("required", "scheduled"),
    [
        pytest.param("11022", "11122", id="lighter-neighbour-before"),
        pytest.param("22011", "22111", id="lighter-neighbour-behind"),
        pytest.param("11011", "11111", id="two-alike"),
        pytest.param("00122", "00222", id="only-one-is-as-heavy"),
        pytest.param("22100", "22200", id="only-one-is-as-heavy-behind"),
        pytest.param("022", "222", id="at-the-start"),
        pytest.param("220", "222", id="at-the-end"),
    ],
)
def test_a_short_zone_joins_the_lighter_of_the_neighbours_that_are_at_least_as_heavy(
    required, scheduled
):
    assert zoned(required, minimum_zone_m=20.0) == (scheduled, [])


@pytest.mark.parametrize(
    ("minimum_zone_m", "scheduled"),
    [
        pytest.param(10.0, "0000200000", id="long-enough"),
        pytest.param(15.0, "0002200000", id="lower-chainage-first"),
        pytest.param(20.0, "0002200000", id="one-section"),
        pytest.param(30.0, "0002220000", id="one-from-each-side"),
        pytest.param(40.0, "0022220000", id="in-turn"),
        pytest.param(41.0, "0022222000", id="whole-sections"),
    ],
)
def test_a_short_zone_heavier_than_both_neighbours_takes_whole_sections_in_turn(
    minimum_zone_m, scheduled
):
    # In every case the lighter zones that are left are long enough, or there are none.
    got = zoned("0000200000", lengths_m=[50.0, *[10.0] * 8, 50.0], minimum_zone_m=minimum_zone_m)
    assert got == (scheduled, [])


def test_a_section_is_never_cut():
    # The zone of 10 m needs 5 m more; the section of 100 m before it is taken whole.
    assert zoned("0020", lengths_m=[50.0, 100.0, 10.0, 50.0], minimum_zone_m=15.0)[0] == "0220"


def test_at_an_end_the_zone_grows_to_the_other_side():
    assert zoned("2000", minimum_zone_m=20.0) == ("2200", [])
    assert zoned("0002", minimum_zone_m=20.0) == ("0022", [])


def test_what_is_left_of_a_lighter_zone_is_short_in_its_turn():
    # The 2 takes section 0 and then, in turn, section 2: the rest of the zone of 0 is 10 m long
    # and joins the 2.
    assert zoned("0200", minimum_zone_m=30.0) == ("2222", [])


def test_a_growing_zone_that_meets_a_heavier_one_joins_it():
    # The 1 takes the 0 behind it, has 20 m of the 40 m, and now has the 2 for a neighbour.
    assert zoned("102", lengths_m=[10.0, 10.0, 50.0], minimum_zone_m=40.0) == ("222", [])


@pytest.mark.parametrize(
    ("length_m", "scheduled"),
    [
        pytest.param(19.9991, "010", id="0.9-mm-short-is-long-enough"),
        pytest.param(19.9989, "110", id="1.1-mm-short-is-short"),
    ],
)
def test_a_zone_is_short_if_it_misses_the_minimum_by_more_than_a_millimetre(length_m, scheduled):
    assert zoned("010", lengths_m=[30.0, length_m, 30.0], minimum_zone_m=20.0)[0] == scheduled


def test_a_gap_stops_the_rule():
    lengths = [10.0, 10.0, 10.0, 50.0]
    assert zoned("0100", lengths_m=lengths, gap_before={1: 5.0}, minimum_zone_m=20.0)[0] == "0110"
    assert zoned("22011", gap_before={2: 5.0, 3: 5.0}, minimum_zone_m=20.0) == ("22011", [])


def test_equal_classes_on_both_sides_of_a_gap_are_two_zones():
    # Across ends that meet they have 20 m; across a gap each is short and takes its neighbour.
    lengths = [50.0, 10.0, 10.0, 50.0]
    one = zoned("0110", lengths_m=lengths, gap_before={2: 0.0009}, minimum_zone_m=20.0)
    two = zoned("0110", lengths_m=lengths, gap_before={2: 0.0011}, minimum_zone_m=20.0)
    assert (one, two) == (("0110", []), ("1111", []))


def test_a_zone_alone_between_ends_or_gaps_stays_as_it_is():
    assert zoned("1", minimum_zone_m=100.0) == ("1", [])
    assert zoned("212", gap_before={1: 5.0, 2: 5.0}, minimum_zone_m=100.0) == ("212", [])


@pytest.mark.parametrize(
    ("required", "scheduled"),
    [
        pytest.param("00x00", "00x00", id="a-short-one-stays"),
        pytest.param("x1x", "x1x", id="between-two-nothing-can-be-done"),
        pytest.param("x1000", "x1100", id="grows-on-the-other-side"),
        pytest.param("0001x", "0011x", id="grows-on-the-other-side-before"),
        pytest.param("x01x", "x11x", id="joins-on-the-other-side"),
        pytest.param("1x2", "1x2", id="no-zone-grows-over-it"),
    ],
)
def test_none_adequate_is_neither_merged_nor_overwritten(required, scheduled):
    assert zoned(required, minimum_zone_m=20.0) == (scheduled, [])


def test_a_section_that_can_take_no_such_class_is_flagged_and_the_other_side_is_taken():
    lengths = [50.0, 10.0, 10.0, 50.0]
    got = zoned("0100", lengths_m=lengths, only={0: "0"}, minimum_zone_m=20.0)
    assert got == ("0110", [0])


def test_where_neither_side_can_give_the_zone_stays_short():
    got = zoned("00100", only={1: "0", 3: "0"}, minimum_zone_m=20.0)
    assert got == ("00100", [1, 3])


def test_a_short_zone_that_can_take_no_heavier_class_keeps_its_own_and_is_flagged():
    assert zoned("11011", only={2: "0"}, minimum_zone_m=20.0) == ("11011", [2])


def test_of_a_short_zone_each_section_joins_by_itself():
    assert zoned("110011", only={2: "0"}, minimum_zone_m=30.0) == ("110111", [2])


def test_a_joining_section_takes_the_next_heavier_adequate_class():
    # Section 2 cannot be 1 and becomes 2, a short zone: it takes section 1. Section 0, now alone,
    # is short and joins in turn; what is left behind is 20 m long and stays.
    assert zoned("11011", only={2: "02"}, minimum_zone_m=20.0) == ("22211", [])


def test_a_section_that_is_taken_takes_the_next_heavier_adequate_class():
    # The 1 asks section 0, which can only be 2 instead: now the 1 has a heavier neighbour.
    assert zoned("01000", only={0: "02"}, minimum_zone_m=20.0) == ("22000", [])
