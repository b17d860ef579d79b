"""The level of each flag on each section, and the counts."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.screening import (
    ADVISORY_ABOVE_1,
    OUTSIDE_ABOVE_2,
    of_column,
    screened,
)

from tunnelcalc.errors import StageError
from tunnelcalc.pipeline.flags_stage import (
    FLAG_LEVEL,
    WORSE_UNDER_LARGER_STRESS,
    flag_counts,
    flag_value,
    screening_lines,
)
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.plugin.flag import Condition, Flag
from tunnelcalc.validity import (
    YES_OR_NO,
    FlagSettings,
    Level,
    Override,
    Side,
    Threshold,
    ThresholdSetting,
)

NAN = np.nan
CLEAR, ADVISORY, OUTSIDE, NOT_ASSESSED, OVERRIDDEN = Level


def words(sections, number=0):
    return [Level(code) for code in sections[FLAG_LEVEL][:, number].tolist()]


def where(column, above):
    return Condition(f"{column} is above {above}", lambda sections: sections[column] > above)


def test_each_flag_has_a_column_of_small_numbers_of_its_own():
    got = screened([of_column("a", "a"), of_column("b", "b")], {"a": [0.0, 3.0], "b": [1.5, 0.0]})
    assert got[FLAG_LEVEL].dtype == np.int8
    assert words(got, 0) == [CLEAR, OUTSIDE]
    assert words(got, 1) == [ADVISORY, CLEAR]


def test_at_a_threshold_a_value_is_not_beyond_it():
    got = screened([of_column("a", "a")], {"a": [1.0, np.nextafter(1, 2), 2.0, np.nextafter(2, 3)]})
    assert words(got) == [CLEAR, ADVISORY, ADVISORY, OUTSIDE]


def test_where_a_needed_value_is_missing_the_flag_is_not_assessed_whatever_the_value():
    flag = of_column("both", "a", needs=["b"])
    got = screened([flag], {"a": [3.0, 3.0, NAN, 0.0], "b": [0.0, NAN, 0.0, NAN]})
    assert words(got) == [OUTSIDE, NOT_ASSESSED, NOT_ASSESSED, NOT_ASSESSED]


def test_a_value_that_cannot_be_told_is_not_assessed():
    flag = Flag(
        "late",
        "m",
        "r",
        "q",
        "",
        (ADVISORY_ABOVE_1,),
        ("a",),
        lambda sections: np.where(sections["a"] > 5, np.nan, sections["a"]),
    )
    assert words(screened([flag], {"a": [9.0, 2.0]})) == [NOT_ASSESSED, ADVISORY]


def test_what_may_be_missing_does_not_hinder():
    flag = Flag(
        "absent",
        "m",
        "r",
        "q",
        YES_OR_NO,
        (Threshold(ADVISORY, Side.ABOVE, 0, "invented"),),
        (),
        lambda sections: np.isnan(sections["a"]).astype(float),
        may_be_missing=("a",),
    )
    assert words(screened([flag], {"a": [NAN, 1.0]})) == [ADVISORY, CLEAR]


def test_where_a_flag_does_not_apply_it_is_clear_unless_an_input_is_missing():
    flag = of_column("some", "a", needs=["b"], applies=where("b", 0))
    got = screened([flag], {"a": [9.0, 9.0, 9.0], "b": [1.0, 0.0, NAN]})
    assert words(got) == [OUTSIDE, CLEAR, NOT_ASSESSED]


def test_where_the_outside_threshold_does_not_hold_the_advisory_one_does():
    flag = of_column("some", "a", needs=["b"], outside_applies=where("b", 0))
    got = screened([flag], {"a": [9.0, 9.0, 1.0], "b": [1.0, 0.0, 0.0]})
    assert words(got) == [OUTSIDE, ADVISORY, CLEAR]


def test_without_an_advisory_threshold_it_is_clear_there():
    flag = of_column("some", "a", OUTSIDE_ABOVE_2, needs=["b"], outside_applies=where("b", 0))
    assert words(screened([flag], {"a": [9.0, 9.0], "b": [1.0, 0.0]})) == [OUTSIDE, CLEAR]


def test_a_threshold_below_0_and_values_below_0_are_values_like_others():
    below = Threshold(ADVISORY, Side.BELOW, -1, "invented")
    got = screened([of_column("deep", "a", below)], {"a": [-2.0, -1.0, 0.0, -np.inf]})
    assert words(got) == [ADVISORY, CLEAR, CLEAR, ADVISORY]


def test_an_empty_text_is_missing():
    flag = Flag(
        "declared",
        "m",
        "r",
        "q",
        YES_OR_NO,
        (Threshold(OUTSIDE, Side.ABOVE, 0, "invented"),),
        ("word",),
        lambda sections: (sections["word"] == "present").astype(float),
    )
    got = screened([flag], {"word": ["present", "none", ""]})
    assert words(got) == [OUTSIDE, CLEAR, NOT_ASSESSED]


def test_a_ground_column_that_no_table_gives_is_missing_everywhere():
    flags = [
        of_column("number", "fault_width_m"),
        of_column("deviation", "gsi_sd"),
        of_column("word", "excavation"),
    ]
    got = screened(flags, {"a": [0.0, 0.0]})
    assert words(got, 0) == words(got, 1) == words(got, 2) == [NOT_ASSESSED, NOT_ASSESSED]
    assert not {"fault_width_m", "gsi_sd", "excavation"} & set(got)


def test_a_check_that_no_class_has_never_fails():
    flag = Flag(
        "fails",
        "m",
        "r",
        "q",
        YES_OR_NO,
        (Threshold(ADVISORY, Side.ABOVE, 0, "invented"),),
        ("fails_invented",),
        lambda sections: sections["fails_invented"].astype(float),
    )
    assert words(screened([flag], {"a": [0.0]})) == [CLEAR]


def test_a_flag_that_needs_a_column_nobody_gives_is_told():
    with pytest.raises(StageError, match="stage flags needs nowhere"):
        screened([of_column("lost", "nowhere")], {"a": [1.0]})


def test_without_flags_the_column_is_empty():
    assert screened([], {"a": [1.0, 2.0]})[FLAG_LEVEL].shape == (2, 0)


def failing_at_7(sections):
    if np.any(sections["a"] == 7):
        raise RuntimeError("cannot say")
    return sections["a"]


def test_a_flag_that_fails_on_one_section_is_not_assessed_there_and_told():
    flag = Flag("failing", "m", "r", "q", "", (ADVISORY_ABOVE_1,), ("a",), failing_at_7)
    incidents = Incidents()
    got = screened([flag], {"a": [2.0, 7.0, 0.0]}, incidents=incidents)
    assert words(got) == [ADVISORY, NOT_ASSESSED, CLEAR]
    (told,) = incidents.listed()
    assert (told.what, told.sections, told.first_chainage_m) == ("flag failing", 1, 15.0)
    assert told.reason == "RuntimeError: cannot say"


def test_a_flag_of_the_wrong_shape_is_told_and_not_assessed():
    flag = Flag(
        "short", "m", "r", "q", "", (ADVISORY_ABOVE_1,), ("a",), lambda sections: np.zeros(1)
    )
    incidents = Incidents()
    assert words(screened([flag], {"a": [0.0, 0.0]}, incidents=incidents)) == [NOT_ASSESSED] * 2
    assert "shape" in incidents.listed()[0].reason


def accepted(flag, from_m, to_m):
    return Override(flag, from_m, to_m, "A. Person", "invented reason")


def test_a_section_is_overridden_where_it_lies_wholly_inside_and_is_not_clear():
    """Sections of 10 m; the override ends 2 mm inside the last one."""
    settings = FlagSettings(overrides=(accepted("a", 10, 49.998),))
    got = screened([of_column("a", "a")], {"a": [9.0, 9.0, 1.5, NAN, 9.0]}, settings)
    assert words(got) == [OUTSIDE, OVERRIDDEN, OVERRIDDEN, OVERRIDDEN, OUTSIDE]


def test_what_is_clear_stays_clear_and_other_flags_stay_as_they_are():
    settings = FlagSettings(overrides=(accepted("a", 0, 20),))
    flags = [of_column("a", "a"), of_column("b", "b")]
    got = screened(flags, {"a": [0.0, 9.0], "b": [9.0, 9.0]}, settings)
    assert words(got, 0) == [CLEAR, OVERRIDDEN]
    assert words(got, 1) == [OUTSIDE, OUTSIDE]


def test_an_edited_threshold_is_compared_and_says_that_it_is_the_projects():
    edited = ThresholdSetting("a", ADVISORY, Side.ABOVE, 1.8, "invented guideline")
    settings = FlagSettings(thresholds=(edited,))
    flag = of_column("a", "a")
    assert words(screened([flag], {"a": [1.8, 1.9, 2.1]}, settings)) == [CLEAR, ADVISORY, OUTSIDE]
    (line,) = screening_lines([flag], settings)
    assert line.threshold == "advisory above 1.8; outside above 2"
    assert line.origin == (
        "advisory above 1.8: project setting: invented guideline; "
        "outside above 2: another invention"
    )


def test_an_edited_threshold_without_an_origin_says_project_setting():
    edited = ThresholdSetting("a", ADVISORY, Side.ABOVE, 5, "")
    flag = of_column("a", "a", ADVISORY_ABOVE_1)
    (line,) = screening_lines([flag], FlagSettings(thresholds=(edited,)))
    assert line.origin == "project setting"


def test_a_line_says_where_a_flag_and_its_outside_threshold_hold():
    flag = of_column("a", "a", applies=where("a", 0), outside_applies=where("a", 9))
    (line,) = screening_lines([flag], FlagSettings())
    assert line.threshold == (
        "advisory above 1; outside above 2 where a is above 9; only where a is above 0"
    )


def test_the_value_of_a_flag_is_told_where_it_applies():
    flag = of_column("a", "a", applies=where("a", 1))
    sections = screened([flag], {"a": [2.0, 0.5]})
    np.testing.assert_array_equal(flag_value(flag, sections), [2.0, NAN])


def test_a_flag_is_counted_at_each_level():
    settings = FlagSettings(overrides=(accepted("a", 50, 60),))
    flag = of_column("a", "a")
    sections = screened([flag], {"a": [0.0, 0.0, 0.0, 1.5, 9.0, 9.0, NAN, NAN, 9.0]}, settings)
    (count,) = flag_counts(screening_lines([flag], settings), sections)
    assert (count.name, count.clear, count.advisory, count.outside) == ("a", 3, 1, 2)
    assert (count.not_assessed, count.overridden, count.raised) == (2, 1, 4)


@pytest.mark.parametrize("column", WORSE_UNDER_LARGER_STRESS)
def test_where_a_section_is_run_twice_a_flag_sees_the_worse_state(column):
    columns = {
        column: [0.5, 0.5, 1.5, 0.5, 0.5],
        f"larger_{column}": [NAN, 1.5, 0.5, 0.9, NAN],
        "larger_stress_mpa": [NAN, 4.0, 4.0, 4.0, 4.0],
    }
    got = screened([of_column("worse", column)], columns)
    # A state under the larger stress that cannot be computed is never read as clear.
    assert words(got) == [CLEAR, ADVISORY, ADVISORY, CLEAR, NOT_ASSESSED]
