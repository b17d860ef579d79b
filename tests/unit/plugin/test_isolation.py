"""What goes wrong inside a plugin costs its own rows, never the run."""

from __future__ import annotations

import numpy as np
import pytest
from unit.plugin.strangers import Check, Kind

from tunnelcalc import api
from tunnelcalc.plugin.contained_reaction import contained_reaction
from tunnelcalc.plugin.isolation import (
    Contained,
    contained_amounts,
    contained_evaluation,
)
from tunnelcalc.sections import Sections

COUNT = 13
ELEMENT = api.Element("props", "props", 1.0, {"amount_m": 1.0})


def sections(count=COUNT):
    return Sections({"chainage_m": np.arange(count, dtype=float), "radius_m": np.full(count, 2.0)})


def spring_of(reaction, part=None):
    found = contained_reaction(Kind(reaction=reaction), part or sections(), ELEMENT)
    return Contained(np.array([found.stiffness_mpa_per_m, found.capacity_mpa]), found.reason)


def evaluated(evaluate, carries_load=True, part=None):
    check = Check(evaluate=evaluate, carries_load=carries_load)
    return contained_evaluation(check, part or sections(), ELEMENT)


def ones(part):
    return np.ones(part.count)


def raises(error):
    def call(*arguments):
        raise error

    return call


def test_what_a_sound_plugin_returns_passes_unchanged():
    found = spring_of(
        lambda part, element: api.LinearSpring(part["chainage_m"] * 3, part["radius_m"])
    )
    assert found.values[0].tolist() == (np.arange(COUNT) * 3.0).tolist()
    assert found.values[1].tolist() == [2.0] * COUNT
    assert set(found.reason) == {""}
    found, left_out = evaluated(lambda part: api.Evaluation(part["chainage_m"], part["radius_m"]))
    assert found.values[0].tolist() == np.arange(COUNT).tolist()
    assert set(found.reason) == {""}
    assert not np.any(left_out)


FAULTS = [
    pytest.param(
        lambda part: 1 / 0, "ZeroDivisionError: division by zero", id="raises-an-exception"
    ),
    pytest.param(raises(SystemExit("enough")), "SystemExit: enough", id="ends-the-program"),
    pytest.param(raises(MemoryError()), "MemoryError", id="without-a-message"),
    pytest.param(lambda part: None, "NoneType", id="returns-nothing"),
    pytest.param(
        lambda part: np.ones(part.count + 1), "has a wrong shape", id="one-value-too-many"
    ),
    pytest.param(lambda part: np.ones((part.count, 1)), "has a wrong shape", id="two-axes"),
    pytest.param(lambda part: np.float64(1.0), "is a float64, not an array", id="a-number"),
    pytest.param(lambda part: [1.0] * part.count, "is a list, not an array", id="a-list"),
    pytest.param(
        lambda part: np.ma.ones(part.count), "is a MaskedArray, not an array", id="masked"
    ),
    pytest.param(lambda part: np.full(part.count, "1"), "not numbers", id="text"),
    pytest.param(lambda part: np.full(part.count, None), "holds object, not numbers", id="objects"),
    pytest.param(lambda part: np.ones(part.count) * 1j, "holds complex128", id="complex"),
    pytest.param(lambda part: np.full(part.count, np.nan), "is not finite", id="nan"),
    pytest.param(lambda part: np.full(part.count, np.inf), "is not finite", id="infinite"),
    pytest.param(lambda part: np.full(part.count, -0.1), "is below 0", id="negative"),
]


@pytest.mark.parametrize(("value", "reason"), FAULTS)
def test_a_faulty_reaction_gives_rows_without_a_value_and_with_a_reason(value, reason):
    found = spring_of(lambda part, element: api.LinearSpring(ones(part), value(part)))
    assert np.all(np.isnan(found.values))
    assert all(reason in text for text in found.reason)


@pytest.mark.parametrize(("value", "reason"), FAULTS)
@pytest.mark.parametrize("carries_load", [True, False], ids=["load-check", "rule"])
def test_a_faulty_evaluation_gives_rows_without_a_value_and_with_a_reason(
    value, reason, carries_load
):
    found, left_out = evaluated(
        lambda part: api.Evaluation(value(part), ones(part)), carries_load=carries_load
    )
    assert np.all(np.isnan(found.values))
    assert all(reason in text for text in found.reason)
    assert not np.any(left_out)  # a fault is never taken for a section that a rule leaves out


def test_the_reason_names_the_array_that_is_at_fault():
    found, _ = evaluated(lambda part: api.Evaluation(ones(part), -ones(part)))
    assert set(found.reason) == {"capacity is below 0"}


def test_a_reaction_of_another_form_is_refused():
    found = spring_of(lambda part, element: api.GroundRing(ones(part), {}, ones(part)))
    assert all("is a ground_ring, not the linear_spring" in text for text in found.reason)


def test_a_user_who_stops_the_run_is_obeyed():
    with pytest.raises(KeyboardInterrupt):
        evaluated(raises(KeyboardInterrupt()))


LOST = {
    "raises": lambda part: raises(ValueError("no"))() if 5.0 in part["chainage_m"] else ones(part),
    "nan": lambda part: np.where(part["chainage_m"] == 5.0, np.nan, 1.0),
    "negative": lambda part: np.where(part["chainage_m"] == 5.0, -1.0, 1.0),
    "drops-the-row": lambda part: ones(part)[part["chainage_m"] != 5.0],
    "no-number": lambda part: np.array([None if at == 5 else 1.0 for at in part["chainage_m"]]),
}


@pytest.mark.parametrize("fault", LOST)
@pytest.mark.parametrize("chunk", [1, 2, 3, 5, 6, COUNT])
def test_only_the_section_at_fault_is_lost_whatever_the_chunks(fault, chunk):
    def evaluate(part):
        return api.Evaluation(LOST[fault](part), 2 * ones(part))

    values, reasons = [], []
    for start in range(0, COUNT, chunk):
        part = sections().take(slice(start, start + chunk))
        found, _ = evaluated(evaluate, part=part)
        values.append(found.values)
        reasons.extend(found.reason)
    together = np.concatenate(values, axis=1)
    kept = np.arange(COUNT) != 5
    assert together[:, kept].tolist() == [[1.0] * 12, [2.0] * 12]
    assert np.all(np.isnan(together[:, 5]))
    assert [text != "" for text in reasons] == (~kept).tolist()


@pytest.mark.parametrize("chunk", [1, 2, 3, 5, COUNT])
@pytest.mark.parametrize("length", [1, 2, 3])
def test_an_array_of_fixed_length_is_a_wrong_shape_whatever_the_chunks(length, chunk):
    """It may happen to fit a chunk of just that many sections."""

    def evaluate(part):
        return api.Evaluation(np.ones(length), np.ones(length))

    for start in range(0, COUNT, chunk):
        part = sections().take(slice(start, start + chunk))
        found, _ = evaluated(evaluate, part=part)
        assert np.all(np.isnan(found.values))
        assert all("wrong shape" in text for text in found.reason)


def test_an_error_that_cannot_speak_is_contained():
    class MuteError(Exception):
        def __str__(self):
            raise RuntimeError("no words")

    found, _ = evaluated(raises(MuteError()))
    assert set(found.reason) == {"MuteError"}


def test_no_sections_are_no_fault():
    found, left_out = evaluated(raises(ValueError("not called")), part=sections(0))
    assert found.values.shape == (2, 0)
    assert left_out.shape == (0,)


@pytest.mark.parametrize("column", ["chainage_m", "radius_m"])
def test_a_plugin_that_changes_its_input_is_refused_and_the_input_stays(column):
    given = sections()

    def spoil(part):
        part[column][:] = 99.0
        return api.Evaluation(ones(part), ones(part))

    found, _ = evaluated(spoil, part=given)
    assert all("read-only" in text for text in found.reason)
    assert given[column].tolist() == sections()[column].tolist()


def test_what_a_plugin_returns_is_copied():
    kept = {}

    def remember(part):
        kept["demand"] = ones(part)
        return api.Evaluation(kept["demand"], ones(part))

    found, _ = evaluated(remember)
    kept["demand"][:] = 99.0
    assert found.values[0].tolist() == [1.0] * COUNT


def half_left_out(demand=1.0, reason="width_m is not given"):
    """Leaves out the even sections."""

    def evaluate(part):
        even = part["chainage_m"] % 2 == 0
        return api.Evaluation(np.where(even, demand, 1.0), ones(part), even, reason)

    return evaluate


EVEN = (np.arange(COUNT) % 2 == 0).tolist()


@pytest.mark.parametrize("demand", [1.0, np.nan, np.inf, -1.0])
def test_a_rule_may_leave_sections_out_for_a_reason_of_its_own(demand):
    found, left_out = evaluated(half_left_out(demand), carries_load=False)
    assert left_out.tolist() == EVEN
    assert np.isnan(found.values).tolist() == [EVEN, EVEN]
    assert [text != "" for text in found.reason] == EVEN
    assert set(found.reason) == {"", "width_m is not given"}


def test_a_load_check_that_leaves_sections_out_is_at_fault_there():
    found, left_out = evaluated(half_left_out(), carries_load=True)
    assert not np.any(left_out)
    assert np.isnan(found.values).tolist() == [EVEN, EVEN]
    assert [text != "" for text in found.reason] == EVEN


@pytest.mark.parametrize("reason", ["", None, 5])
def test_the_reason_for_leaving_out_is_always_a_text(reason):
    found, _ = evaluated(half_left_out(reason=reason), carries_load=False)
    assert all(isinstance(text, str) for text in found.reason)
    assert [text != "" for text in found.reason] == EVEN


def test_a_rule_that_leaves_some_out_and_fails_on_another_keeps_the_two_apart():
    def evaluate(part):
        if 5.0 in part["chainage_m"]:
            raise ValueError("no")
        return half_left_out()(part)

    found, left_out = evaluated(evaluate, carries_load=False)
    assert left_out.tolist() == EVEN
    assert found.reason[5] == "ValueError: no"
    assert found.values[0, 7] == 1.0


@pytest.mark.parametrize(
    "left_out",
    [
        pytest.param(lambda part: np.ones(part.count + 1), id="wrong-shape"),
        pytest.param(lambda part: np.full(part.count, np.nan), id="nan"),
        pytest.param(lambda part: np.full(part.count, -1.0), id="negative"),
        pytest.param(lambda part: "yes", id="text"),
    ],
)
def test_a_mask_that_is_none_leaves_nothing_out(left_out):
    found, mask = evaluated(
        lambda part: api.Evaluation(ones(part), ones(part), left_out(part)), carries_load=False
    )
    assert not np.any(mask)
    assert np.all(np.isnan(found.values))
    assert all(text != "" for text in found.reason)


def amounts_of(amounts):
    return contained_amounts(Kind(amounts=amounts), sections(), ELEMENT)


def test_sound_amounts_pass():
    found, fault = amounts_of(lambda part, element: [api.Amount("props", "no", ones(part))])
    assert fault == ""
    assert [(amount.item, amount.unit) for amount in found] == [("props", "no")]


@pytest.mark.parametrize(("value", "reason"), FAULTS)
def test_faulty_amounts_are_all_left_out_with_a_reason(value, reason):
    def amounts(part, element):
        yield api.Amount("sound", "no", ones(part))
        yield api.Amount("faulty", "no", value(part))

    found, fault = amounts_of(amounts)
    assert found == ()
    assert reason in fault
