"""What holds for the stretches of every flag."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from unit.pipeline.projects import along

from tunnelcalc.outputs.flags_table import stretches_of
from tunnelcalc.validity import Level, Side, Threshold, levels, severity

THRESHOLDS = (
    Threshold(Level.ADVISORY, Side.BELOW, 0.8, "invented"),
    Threshold(Level.ADVISORY, Side.ABOVE, 1.25, "invented"),
    Threshold(Level.OUTSIDE, Side.ABOVE, 2.0, "invented"),
)


@st.composite
def alignments(draw):
    """Values with their levels, on sections that sometimes do not meet."""
    count = draw(st.integers(1, 40))

    def column(strategy):
        return np.array(draw(st.lists(strategy, min_size=count, max_size=count)))

    ends = along(column(st.floats(0.1, 50)))
    shift = np.cumsum(column(st.sampled_from([0.0, 0.0, 0.0, 5.0])))
    values = column(st.sampled_from([np.nan, 0.5, 1.0, 1.1, 1.5, 1.75, 3.0, 4.0]))
    kind = column(st.sampled_from([-1, -1, 0]))
    found = levels(values, THRESHOLDS, np.ones(count, dtype=bool))
    return ends["from_m"] + shift, ends["to_m"] + shift, values, found, kind


@given(alignments())
@settings(max_examples=200, deadline=None)
def test_stretches_cover_every_section_once_and_each_is_as_long_as_can_be(made):
    from_m, to_m, values, found, kind = made
    every = stretches_of(found, kind, from_m, to_m, severity(values, THRESHOLDS))
    first, last = every.first.tolist(), every.last.tolist()
    within = [list(range(a, b + 1)) for a, b in zip(first, last, strict=True)]
    assert [n for stretch in within for n in stretch] == list(range(values.size))
    for stretch in within:
        assert len(set(found[stretch].tolist())) == 1
        assert len(set(kind[stretch].tolist())) == 1
        assert np.all(from_m[stretch[1:]] - to_m[stretch[:-1]] <= 1e-3)
    for end in last[:-1]:
        changed = found[end] != found[end + 1] or kind[end] != kind[end + 1]
        assert changed or from_m[end + 1] - to_m[end] > 1e-3


@given(alignments())
@settings(max_examples=200, deadline=None)
def test_no_value_of_a_stretch_is_worse_than_the_one_that_is_told(made):
    """Worse by hand: further below 0.8 or above 1.25, relative to it."""
    from_m, to_m, values, found, kind = made
    every = stretches_of(found, kind, from_m, to_m, severity(values, THRESHOLDS))
    for a, b, worst in zip(*(positions.tolist() for positions in every), strict=True):
        assert a <= worst <= b
        beyond = [max((0.8 - v) / 0.8, (v - 1.25) / 1.25) for v in values[a : b + 1] if v == v]
        if beyond:
            v = values[worst]
            assert max((0.8 - v) / 0.8, (v - 1.25) / 1.25) == max(beyond)
        else:
            assert worst == a
