"""Where a flag is raised, and where it cannot be assessed."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pytest

from tunnelcalc.errors import StageError
from tunnelcalc.pipeline.collect import flag_counts
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.schedule_stages import flags_stage
from tunnelcalc.sections import Sections

NAN = np.nan


@dataclass
class Above:
    """Raised where the first of its columns is above 1, whatever stands in the others."""

    name: str
    needs: tuple[str, ...]
    meaning: str = "invented"
    threshold: str = "above 1"
    origin: str = "invented"
    remedy: str = "none"

    def raised(self, sections):
        return sections[self.needs[0]] > 1


class Declared(Above):
    """Raised where its text column says so."""

    def raised(self, sections):
        return sections[self.needs[0]] == "present"


def flagged(flags, incidents=None, **columns):
    count = len(next(iter(columns.values())))
    given = {"chainage_m": np.arange(count) * 10.0} | columns
    stage = flags_stage(flags, Incidents() if incidents is None else incidents)
    return stage(Sections({name: np.array(v) for name, v in given.items()}))


def test_each_flag_has_a_column_of_its_own():
    flags = [Above("low", ("a",)), Above("high", ("b",))]
    got = flagged(flags, a=[0.0, 2.0], b=[2.0, 0.0])
    assert got["flag_raised"].tolist() == [[False, True], [True, False]]
    assert not np.any(got["flag_not_assessed"])


def test_where_a_needed_value_is_missing_the_flag_is_not_assessed_and_not_raised():
    got = flagged([Above("both", ("a", "b"))], a=[2.0, 2.0, NAN, 0.0], b=[0.0, NAN, 0.0, NAN])
    assert got["flag_raised"][:, 0].tolist() == [True, False, False, False]
    assert got["flag_not_assessed"][:, 0].tolist() == [False, True, True, True]


def test_a_flag_may_need_a_column_of_yes_and_no():
    class Set(Above):
        def raised(self, sections):
            return sections["a"]

    got = flagged([Set("set", ("a",))], a=[True, False])
    assert got["flag_raised"][:, 0].tolist() == [True, False]
    assert not np.any(got["flag_not_assessed"])


def test_a_flag_may_need_a_column_of_text_and_an_empty_text_is_missing():
    words = np.array(["present", "none", ""], dtype=object)
    got = flagged([Declared("swelling", ("swelling_minerals",))], swelling_minerals=words)
    assert got["flag_raised"][:, 0].tolist() == [True, False, False]
    assert got["flag_not_assessed"][:, 0].tolist() == [False, False, True]


def test_without_flags_the_columns_are_empty():
    assert flagged([], a=[1.0, 2.0])["flag_raised"].shape == (2, 0)


def test_a_flag_that_needs_a_column_nobody_gives_is_told():
    with pytest.raises(StageError, match="stage flags needs nowhere"):
        flagged([Above("lost", ("nowhere",))], a=[1.0])


def test_a_flag_that_fails_on_one_section_is_not_assessed_there_and_told():
    class Failing(Above):
        def raised(self, sections):
            if np.any(sections["a"] == 7):
                raise RuntimeError("cannot say")
            return sections["a"] > 1

    incidents = Incidents()
    got = flagged([Failing("failing", ("a",))], incidents, a=[2.0, 7.0, 0.0])
    assert got["flag_raised"][:, 0].tolist() == [True, False, False]
    assert got["flag_not_assessed"][:, 0].tolist() == [False, True, False]
    (told,) = incidents.listed()
    assert (told.what, told.sections, told.first_chainage_m) == ("flag failing", 1, 10.0)
    assert told.reason == "RuntimeError: cannot say"


def test_a_flag_is_counted_where_it_is_raised_and_where_it_is_not_assessed():
    flags = [Above("low", ("a",)), Above("high", ("b",))]
    sections = flagged(flags, a=[2.0, 2.0, NAN], b=[0.0, 0.0, 2.0])
    low, high = flag_counts(flags, sections)
    assert (low.name, low.raised, low.not_assessed) == ("low", 2, 1)
    assert (high.name, high.raised, high.not_assessed) == ("high", 1, 0)
