"""Stages: what each promises, and how a chain of them is checked and run."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.errors import ShapeError, StageError
from tunnelcalc.pipeline.stage import Stage, check_chain, run_stages
from tunnelcalc.sections import Sections


def stage(name, needs, gives, compute=None, whole_alignment=False):
    """By default a stage adds up what it needs."""

    def total(sections):
        return {column: sum(sections[need] for need in needs) for column in gives}

    return Stage(name, "invented", needs, gives, compute or total, whole_alignment)


def ground(count=3):
    return Sections({"length_m": np.arange(1.0, count + 1), "radius_m": np.full(count, 2.0)})


def ignore(chunk):
    """Nobody looks at the chunks."""


DOUBLED = stage("doubling", ("length_m", "radius_m"), ("doubled",))
AFTER = stage("halving", ("doubled",), ("halved",))
WHOLE = stage("zoning", ("doubled",), ("zoned",), whole_alignment=True)


def test_a_chain_in_which_every_need_is_given_before_it_is_used_is_accepted():
    check_chain([DOUBLED, AFTER, WHOLE], ["length_m", "radius_m"])


@pytest.mark.parametrize(
    ("chain", "given", "message"),
    [
        pytest.param([AFTER], ["length_m"], "stage halving needs doubled", id="never-given"),
        pytest.param(
            [AFTER, DOUBLED],
            ["length_m", "radius_m"],
            "stage halving needs doubled",
            id="given-too-late",
        ),
        pytest.param([DOUBLED], ["length_m"], "stage doubling needs radius_m", id="input-missing"),
        pytest.param([DOUBLED], [], "stage doubling needs length_m, radius_m", id="every-one"),
    ],
)
def test_a_need_that_is_not_given_before_is_told_with_stage_and_column(chain, given, message):
    with pytest.raises(StageError, match=message):
        check_chain(chain, given)


def test_a_stage_may_complete_a_column_that_stands_already():
    completing = stage("completing", ("length_m",), ("length_m",))
    check_chain([completing], ["length_m"])
    with pytest.raises(StageError, match="stage completing needs length_m"):
        check_chain([completing], [])


def test_a_stage_in_chunks_cannot_follow_one_over_the_whole_alignment():
    late = stage("late", ("doubled",), ("later",))
    with pytest.raises(StageError, match="stage late works in chunks but follows zoning"):
        check_chain([DOUBLED, WHOLE, late], ["length_m", "radius_m"])


@pytest.mark.parametrize(
    "returned",
    [
        pytest.param({}, id="nothing"),
        pytest.param({"other": np.zeros(3)}, id="another-column"),
        pytest.param({"doubled": np.zeros(3), "other": np.zeros(3)}, id="one-too-many"),
    ],
)
def test_a_stage_that_gives_other_columns_than_it_promised_is_named(returned):
    broken = stage("broken", ("length_m",), ("doubled",), lambda sections: returned)
    with pytest.raises(StageError, match=r"stage broken gave .*, not \['doubled'\]"):
        broken(ground())


def test_a_stage_that_gives_a_column_of_another_length_is_refused():
    broken = stage("broken", ("length_m",), ("doubled",), lambda sections: {"doubled": np.ones(2)})
    with pytest.raises(ShapeError, match=r"doubled \(2,\)"):
        broken(ground(3))


def test_a_stage_that_is_called_without_its_need_is_named():
    with pytest.raises(StageError, match="stage halving needs doubled"):
        AFTER(ground())


def test_a_stage_cannot_change_what_it_is_given():
    def spoil(sections):
        sections["length_m"][0] = 99.0
        return {"doubled": sections["length_m"]}

    with pytest.raises(ValueError, match="read-only"):
        stage("spoiling", ("length_m",), ("doubled",), spoil)(ground())


def test_the_chain_is_checked_before_anything_is_computed():
    def explode(sections):
        raise AssertionError("must not be called")

    first = stage("first", ("length_m",), ("doubled",), explode)
    with pytest.raises(StageError, match="stage second needs nowhere"):
        run_stages([first, stage("second", ("nowhere",), ("x",))], ground(), 2, (), ignore)


def test_chunks_come_in_order_and_have_every_column():
    seen = []
    run_stages([DOUBLED, WHOLE], ground(5), 2, ("doubled",), seen.append)
    assert [chunk.count for chunk in seen] == [2, 2, 1]
    assert np.concatenate([chunk["length_m"] for chunk in seen]).tolist() == [1, 2, 3, 4, 5]
    assert all(set(chunk) == {"length_m", "radius_m", "doubled"} for chunk in seen)


def test_a_column_that_is_not_kept_ends_with_its_chunk():
    seen = []
    whole = run_stages([DOUBLED, AFTER], ground(), 2, ("halved",), seen.append)
    assert set(whole) == {"length_m", "radius_m", "halved"}
    assert all("doubled" in chunk for chunk in seen)


def test_a_stage_over_the_whole_alignment_sees_every_section_at_once():
    counts = []

    def count(sections):
        counts.append(sections.count)
        return {"zoned": sections["doubled"]}

    counting = stage("counting", ("doubled",), ("zoned",), count, whole_alignment=True)
    run_stages([DOUBLED, counting], ground(7), 2, ("doubled",), ignore)
    assert counts == [7]


def test_a_stage_over_the_whole_alignment_cannot_need_a_column_that_was_not_kept():
    with pytest.raises(StageError, match="stage zoning needs doubled"):
        run_stages([DOUBLED, WHOLE], ground(), 2, (), ignore)


def test_chunks_of_no_section_are_refused():
    with pytest.raises(ValueError, match="chunk_sections must be at least 1"):
        run_stages([DOUBLED], ground(), 0, (), ignore)
