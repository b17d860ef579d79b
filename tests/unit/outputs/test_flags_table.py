"""The rows of `flags.csv`, on a few invented sections of 10 m."""

from __future__ import annotations

import csv
from dataclasses import replace

import numpy as np
from unit.pipeline.projects import project
from unit.pipeline.screening import of_column, screened

from tunnelcalc.chainage import KM_PLUS_M, Notation
from tunnelcalc.outputs.flags_table import FLAGS_HEADER, write_flags
from tunnelcalc.pipeline.flags_stage import flag_value, screening_lines
from tunnelcalc.plugin.flag import Condition, Flag
from tunnelcalc.sections import Sections
from tunnelcalc.validity import YES_OR_NO, FlagSettings, Level, Override, Side, Threshold

NAN = np.nan


def written(folder, flags, values, settings=None, notation=None, moved=None):
    """The rows of the table as mappings."""
    settings = FlagSettings() if settings is None else settings
    sections = screened(flags, values, settings)
    if moved is not None:
        ends = {name: sections[name] + moved for name in ("from_m", "to_m", "chainage_m")}
        sections = sections.with_columns(ends)
    made = project({}, Sections({}))
    made = made if notation is None else replace(made, notation=notation)
    write_flags(
        folder,
        made,
        sections,
        screening_lines(flags, settings),
        lambda number: flag_value(flags[number], sections),
    )
    with (folder / "flags.csv").open(newline="") as stream:
        return list(csv.DictReader(stream))


def picked(rows, *names):
    return [tuple(row[name] for name in names) for row in rows]


def test_a_row_says_all_about_a_stretch(tmp_path):
    (row,) = written(tmp_path, [of_column("wet", "a")], {"a": [1.5, 1.75]})
    assert row == {
        "from_m": "0",
        "to_m": "20",
        "flag": "wet",
        "level": "advisory",
        "quantity": "value of a",
        "value": "1.75",
        "chainage_m": "15",
        "unit": "m",
        "numbers": "",
        "threshold": "advisory above 1; outside above 2",
        "threshold_source": "advisory above 1: invented; outside above 2: another invention",
        "meaning": "invented meaning",
        "remedy": "invented remedy",
        "person": "",
        "reason": "",
    }
    assert tuple(row) == FLAGS_HEADER


def test_a_new_row_begins_where_the_level_changes_with_the_worst_value_of_each(tmp_path):
    rows = written(tmp_path, [of_column("wet", "a")], {"a": [0.0, 0.5, 0.25, 3.0, 9.0, 1.5]})
    assert picked(rows, "from_m", "to_m", "level", "value", "chainage_m") == [
        ("0", "30", "clear", "0.5", "15"),
        ("30", "50", "outside", "9", "45"),
        ("50", "60", "advisory", "1.5", "55"),
    ]


def test_flags_stand_by_name(tmp_path):
    flags = [of_column("b", "a"), of_column("a", "a")]
    assert picked(written(tmp_path, flags, {"a": [0.0]}), "flag") == [("a",), ("b",)]


def test_below_a_threshold_the_least_value_is_the_worst(tmp_path):
    below = Threshold(Level.ADVISORY, Side.BELOW, 1, "invented")
    rows = written(tmp_path, [of_column("low", "a", below)], {"a": [0.5, 0.25, 0.75]})
    assert picked(rows, "value", "chainage_m") == [("0.25", "15")]


def test_what_is_not_assessed_says_what_is_missing(tmp_path):
    flag = of_column("wet", "a", needs=["b", "c"])
    values = {"a": [9.0, 9.0, 9.0], "b": [NAN, 1.0, 1.0], "c": [NAN, NAN, 1.0]}
    rows = written(tmp_path, [flag], values)
    assert picked(rows, "from_m", "to_m", "level", "value", "chainage_m", "reason") == [
        ("0", "20", "not_assessed", "", "", "no b, no c"),
        ("20", "30", "outside", "9", "25", ""),
    ]


def test_a_column_that_does_not_stand_at_all_is_missing(tmp_path):
    (row,) = written(tmp_path, [of_column("fault", "fault_width_m")], {"a": [1.0]})
    assert row["reason"] == "no fault_width_m"


def test_a_value_that_could_not_be_computed_says_so(tmp_path):
    flag = Flag(
        "late",
        "m",
        "r",
        "q",
        "",
        (Threshold(Level.ADVISORY, Side.ABOVE, 1, "x"),),
        ("a",),
        lambda sections: sections["a"] * np.nan,
    )
    (row,) = written(tmp_path, [flag], {"a": [1.0]})
    assert (row["level"], row["reason"]) == ("not_assessed", "the value could not be computed")


def test_an_override_tells_who_and_why_and_keeps_the_value(tmp_path):
    overrides = (
        Override("wet", 0, 10, "A. Person", "first, with a comma"),
        Override("wet", 10, 20, "B. Person", "second"),
    )
    settings = FlagSettings(overrides=overrides)
    rows = written(tmp_path, [of_column("wet", "a")], {"a": [9.0, 9.0, 9.0]}, settings)
    assert picked(rows, "from_m", "to_m", "level", "value", "person", "reason") == [
        ("0", "10", "overridden", "9", "A. Person", "first, with a comma"),
        ("10", "20", "overridden", "9", "B. Person", "second"),
        ("20", "30", "outside", "9", "", ""),
    ]


def test_an_override_of_clear_sections_cuts_and_names_nothing(tmp_path):
    settings = FlagSettings(overrides=(Override("wet", 0, 10, "A. Person", "r"),))
    rows = written(tmp_path, [of_column("wet", "a")], {"a": [0.0, 0.5]}, settings)
    assert picked(rows, "from_m", "to_m", "level", "person") == [("0", "20", "clear", "")]


def test_a_gap_ends_a_stretch(tmp_path):
    moved = np.array([0.0, 5.0, 5.0])
    rows = written(tmp_path, [of_column("wet", "a")], {"a": [0.0, 0.0, 0.0]}, moved=moved)
    assert picked(rows, "from_m", "to_m") == [("0", "10"), ("15", "35")]


def test_a_value_counts_where_the_flag_applies(tmp_path):
    applies = Condition("b is above 0", lambda sections: sections["b"] > 0)
    flag = of_column("wet", "a", needs=["b"], applies=applies)
    rows = written(tmp_path, [flag], {"a": [9.0, 0.25, 0.5], "b": [0.0, 1.0, 1.0]})
    assert picked(rows, "level", "value", "chainage_m") == [("clear", "0.5", "25")]


def test_yes_and_no_are_words(tmp_path):
    flag = Flag(
        "set",
        "m",
        "r",
        "q",
        YES_OR_NO,
        (Threshold(Level.ADVISORY, Side.ABOVE, 0, "x"),),
        ("a",),
        lambda sections: sections["a"].astype(float),
    )
    rows = written(tmp_path, [flag], {"a": [True, False]})
    assert picked(rows, "level", "value", "unit", "threshold") == [
        ("advisory", "yes", "yes or no", "advisory where yes"),
        ("clear", "no", "yes or no", "advisory where yes"),
    ]


def test_an_infinite_value_has_its_level_and_no_number(tmp_path):
    (row,) = written(tmp_path, [of_column("wet", "a")], {"a": [np.inf]})
    assert (row["level"], row["value"], row["chainage_m"]) == ("outside", "", "")


def test_chainages_stand_beside_as_the_project_writes_them(tmp_path):
    notation = Notation(form=KM_PLUS_M, start=1000.0)
    rows = written(tmp_path, [of_column("wet", "a")], {"a": [0.0, NAN]}, notation=notation)
    told = picked(rows, "from_chainage", "to_chainage", "chainage")
    assert told == [("1+000.00", "1+010.00", "1+005.00"), ("1+010.00", "1+020.00", "")]


def test_without_flags_there_is_a_header_alone(tmp_path):
    assert written(tmp_path, [], {"a": [1.0]}) == []
