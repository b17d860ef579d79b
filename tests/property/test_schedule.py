"""What holds for every schedule, whatever the ground and the rules."""

from __future__ import annotations

from itertools import pairwise
from typing import NamedTuple

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from tunnelcalc.schedule.selection import NONE_ADEQUATE, required_classes
from tunnelcalc.schedule.zoning import stretches, zone_classes, zone_starts

SAME_PLACE_M = 0.001
"""Written out anew: the rules speak of 1 mm."""


class Alignment(NamedTuple):
    from_m: np.ndarray
    to_m: np.ndarray
    adequate: np.ndarray

    @property
    def required(self):
        return required_classes(self.adequate)

    def zoned(self, carry_m=0.0, minimum_zone_m=0.0):
        return zone_classes(
            self.required,
            self.adequate,
            self.from_m,
            self.to_m,
            carry_m=carry_m,
            minimum_zone_m=minimum_zone_m,
        )

    def part(self, index):
        return Alignment(self.from_m[index], self.to_m[index], self.adequate[index])


# Quarters of a metre are exact in a double: no overlap is decided by rounding.
lengths_m = st.integers(1, 120).map(lambda quarters: quarters / 4)
rule_lengths_m = st.integers(0, 300).map(lambda quarters: quarters / 4)


@st.composite
def alignments(draw):
    count = draw(st.integers(1, 30))
    class_count = draw(st.integers(1, 4))
    lengths = np.array(draw(st.lists(lengths_m, min_size=count, max_size=count)))
    gaps = draw(st.lists(st.sampled_from([0.0] * 6 + [2.5]), min_size=count, max_size=count))
    # Rows are drawn from a few kinds of ground, so that zones of several sections come about.
    row = st.lists(st.booleans(), min_size=class_count, max_size=class_count)
    grounds = draw(st.lists(row, min_size=1, max_size=4))
    rows = draw(st.lists(st.sampled_from(grounds), min_size=count, max_size=count))
    to_m = np.cumsum(lengths + np.array(gaps))
    return Alignment(to_m - lengths, to_m, np.array(rows, dtype=bool))


def carried_one_by_one(alignment, carry_m):
    """The carry rule as it is written, for one pair of sections after the other."""
    from_m, to_m = alignment.from_m.tolist(), alignment.to_m.tolist()
    adequate, required = alignment.adequate.tolist(), alignment.required.tolist()
    scheduled, not_applied = list(required), [False] * len(required)

    def unbroken(one, other):
        first, last = min(one, other), max(one, other)
        return all(from_m[k + 1] - to_m[k] <= SAME_PLACE_M for k in range(first, last))

    def overlap(source, section):
        start = max(from_m[section], from_m[source] - carry_m)
        return min(to_m[section], to_m[source] + carry_m) - start

    for section, own in enumerate(required):
        if own == NONE_ADEQUATE or carry_m == 0:
            continue
        reaching = {
            required[source]
            for source in range(len(required))
            if unbroken(source, section) and overlap(source, section) > SAME_PLACE_M
        }
        for heavier in sorted(number for number in reaching if number > own):
            if scheduled[section] >= heavier:
                continue
            allowed = [c for c in range(heavier, len(adequate[section])) if adequate[section][c]]
            if allowed:
                scheduled[section] = allowed[0]
            else:
                not_applied[section] = True
    return scheduled, not_applied


@given(alignments(), rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_carry_equals_the_rule_applied_to_one_pair_of_sections_after_the_other(alignment, carry_m):
    zoning = alignment.zoned(carry_m=carry_m)
    scheduled, not_applied = carried_one_by_one(alignment, carry_m)
    assert zoning.scheduled.tolist() == scheduled
    assert zoning.rule_not_applied.tolist() == not_applied


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_every_scheduled_class_is_adequate_and_none_is_lighter_than_required(
    alignment, carry_m, minimum_zone_m
):
    scheduled = alignment.zoned(carry_m, minimum_zone_m).scheduled
    required = alignment.required
    assert scheduled.shape == required.shape
    decided = required != NONE_ADEQUATE
    assert np.all(scheduled[decided] >= required[decided])
    assert np.all(alignment.adequate[decided, scheduled[decided]])
    assert np.all(scheduled[~decided] == NONE_ADEQUATE)


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_the_zones_cover_the_alignment_once(alignment, carry_m, minimum_zone_m):
    scheduled = alignment.zoned(carry_m, minimum_zone_m).scheduled
    starts = zone_starts(scheduled, stretches(alignment.from_m, alignment.to_m))
    bounds = [*starts.tolist(), len(scheduled)]
    covered = 0.0
    for first, end in pairwise(bounds):
        assert len(set(scheduled[first:end].tolist())) == 1
        inner = alignment.from_m[first + 1 : end] - alignment.to_m[first : end - 1]
        assert np.all(inner <= SAME_PLACE_M)
        covered += alignment.to_m[end - 1] - alignment.from_m[first]
    assert bounds[0] == 0
    assert covered == np.sum(alignment.to_m - alignment.from_m)  # quarters of a metre: exact


@given(alignments())
@settings(deadline=None)
def test_with_both_rules_off_the_schedule_is_what_is_required(alignment):
    zoning = alignment.zoned(0.0, 0.0)
    assert zoning.scheduled.tolist() == alignment.required.tolist()
    assert not np.any(zoning.rule_not_applied)


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_no_short_zone_is_left_that_a_rule_could_mend(alignment, carry_m, minimum_zone_m):
    scheduled = alignment.zoned(carry_m, minimum_zone_m).scheduled.tolist()
    stretch = stretches(alignment.from_m, alignment.to_m)
    starts = zone_starts(np.array(scheduled), stretch).tolist()

    def can_take(section, number):
        return bool(np.any(alignment.adequate[section, number:]))

    for first, end in pairwise([*starts, len(scheduled)]):
        number = scheduled[first]
        length = alignment.to_m[end - 1] - alignment.from_m[first]
        if number == NONE_ADEQUATE or length >= minimum_zone_m - SAME_PLACE_M:
            continue
        beside = [
            other
            for edge, other in ((first, first - 1), (end - 1, end))
            if 0 <= other < len(scheduled)
            and stretch[other] == stretch[edge]
            and scheduled[other] != NONE_ADEQUATE
        ]
        heavier = [scheduled[other] for other in beside if scheduled[other] > number]
        if heavier:
            assert not any(can_take(section, min(heavier)) for section in range(first, end))
        else:
            assert not any(can_take(other, number) for other in beside)


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_running_again_gives_the_same_and_the_minimum_zone_finds_nothing_more(
    alignment, carry_m, minimum_zone_m
):
    zoning = alignment.zoned(carry_m, minimum_zone_m)
    again = alignment.zoned(carry_m, minimum_zone_m)
    assert zoning.scheduled.tobytes() == again.scheduled.tobytes()
    assert zoning.rule_not_applied.tobytes() == again.rule_not_applied.tobytes()
    settled = zone_classes(
        zoning.scheduled,
        alignment.adequate,
        alignment.from_m,
        alignment.to_m,
        carry_m=0.0,
        minimum_zone_m=minimum_zone_m,
    )
    assert settled.scheduled.tolist() == zoning.scheduled.tolist()


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_a_longer_carry_alone_makes_no_section_lighter(alignment, one_m, other_m):
    """Without a minimum zone. With one it is not so: a zone that the carry has made long enough
    takes no more sections (see the unit tests of both rules together)."""
    shorter = alignment.zoned(carry_m=min(one_m, other_m)).scheduled
    longer = alignment.zoned(carry_m=max(one_m, other_m)).scheduled
    assert np.all(longer >= shorter)


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_each_stretch_between_gaps_is_scheduled_by_itself(alignment, carry_m, minimum_zone_m):
    whole = alignment.zoned(carry_m, minimum_zone_m)
    stretch = stretches(alignment.from_m, alignment.to_m)
    for number in set(stretch.tolist()):
        index = stretch == number
        alone = alignment.part(index).zoned(carry_m, minimum_zone_m)
        assert whole.scheduled[index].tolist() == alone.scheduled.tolist()
        assert whole.rule_not_applied[index].tolist() == alone.rule_not_applied.tolist()


@given(alignments(), rule_lengths_m, rule_lengths_m)
@settings(max_examples=150, deadline=None)
def test_a_rule_is_refused_only_where_the_heaviest_class_is_not_adequate(
    alignment, carry_m, minimum_zone_m
):
    zoning = alignment.zoned(carry_m, minimum_zone_m)
    assert not np.any(zoning.rule_not_applied & alignment.adequate[:, -1])
    assert not np.any(zoning.rule_not_applied & (alignment.required == NONE_ADEQUATE))
