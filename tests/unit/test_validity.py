"""How a value becomes a level, and which overrides hold where."""

from __future__ import annotations

import numpy as np

from tunnelcalc.validity import (
    NO_OVERRIDE,
    FlagSettings,
    Level,
    Override,
    Side,
    Threshold,
    ThresholdSetting,
    in_force,
    is_raised,
    levels,
    overridden,
    override_numbers,
    severity,
)

CLEAR, ADVISORY, OUTSIDE, NOT_ASSESSED, OVERRIDDEN = Level
ABOVE, BELOW = Side
BAND = (
    Threshold(OUTSIDE, BELOW, 0.5, "invented"),
    Threshold(ADVISORY, BELOW, 0.8, "invented"),
    Threshold(OUTSIDE, ABOVE, 2.0, "invented"),
    Threshold(ADVISORY, ABOVE, 1.25, "invented"),
)


def test_a_band_has_levels_on_both_sides_whatever_the_order_of_its_thresholds():
    values = np.array([0.49, 0.5, 0.79, 0.8, 1.25, 1.26, 2.0, 2.01, np.nan])
    expected = [
        *(OUTSIDE, ADVISORY, ADVISORY, CLEAR, CLEAR, ADVISORY, ADVISORY, OUTSIDE),
        NOT_ASSESSED,
    ]
    everywhere = np.ones(9, dtype=bool)
    for thresholds in (BAND, BAND[::-1]):
        assert levels(values, thresholds, everywhere).tolist() == expected


def test_infinity_is_beyond():
    got = levels(np.array([np.inf, -np.inf]), BAND, np.ones(2, dtype=bool))
    assert got.tolist() == [OUTSIDE, OUTSIDE]


def test_where_outside_does_not_apply_the_softer_level_is_told():
    got = levels(np.array([3.0, 3.0]), BAND, np.array([True, False]))
    assert got.tolist() == [OUTSIDE, ADVISORY]


def test_distances_beyond_two_sides_are_relative_to_their_thresholds():
    """0.4 is half of 0.8; 1.875 is one and a half of 1.25."""
    got = severity(np.array([0.4, 1.875, 0.8, 1.25, np.nan]), BAND)
    np.testing.assert_allclose(got, [0.5, 0.5, 0.0, 0.0, -np.inf], atol=1e-15)


def test_on_one_side_severity_orders_by_the_value():
    below = (BAND[1],)
    got = severity(np.array([3.0, 0.9, 0.1]), below)
    np.testing.assert_allclose(got, [-2.2, -0.1, 0.7])


def test_an_edit_replaces_the_threshold_of_its_level_and_side_alone():
    settings = FlagSettings(
        thresholds=(
            ThresholdSetting("band", ADVISORY, ABOVE, 1.5, "guideline"),
            ThresholdSetting("other", OUTSIDE, ABOVE, 9.0, ""),
        )
    )
    got = {(t.level, t.side): (t.value, t.origin) for t in in_force("band", BAND, settings)}
    assert got[ADVISORY, ABOVE] == (1.5, "project setting: guideline")
    assert got[OUTSIDE, ABOVE] == (2.0, "invented")
    assert len(got) == 4


def test_a_section_within_a_millimetre_of_an_overrides_end_lies_inside():
    overrides = [Override("a", 0, 10, "p", "r"), Override("a", 20, 40, "p", "r")]
    from_m = np.array([-0.0009, 0.0, 10.0, 20.0, 30.0])
    to_m = np.array([10.0, 10.002, 20.0, 30.0, 40.0009])
    got = override_numbers(overrides, from_m, to_m)
    assert got.tolist() == [0, NO_OVERRIDE, NO_OVERRIDE, 1, 1]


def test_every_level_but_clear_can_be_accepted():
    found = np.array([CLEAR, ADVISORY, OUTSIDE, NOT_ASSESSED, OUTSIDE], dtype=np.int8)
    got = overridden(found, np.array([0, 0, 0, 0, NO_OVERRIDE]))
    assert got.tolist() == [CLEAR, OVERRIDDEN, OVERRIDDEN, OVERRIDDEN, OUTSIDE]
    assert got.dtype == np.int8


def test_what_a_designer_must_see():
    assert is_raised(np.arange(5)).tolist() == [False, True, True, False, True]


def test_a_threshold_in_words():
    assert Threshold(OUTSIDE, BELOW, 1 / 3, "x").words("m") == "outside below 0.333333"
    assert Threshold(ADVISORY, ABOVE, 0, "x").words("yes or no") == "advisory where yes"
    assert Threshold(ADVISORY, ABOVE, 0, "x").key == "advisory_above"
