"""The empirical cross-checks as flags: they agree, or raise with both numbers."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from tunnelcalc_empirical.flags import FLAGS, longest_bolts_m
from unit.pipeline.projects import project
from unit.pipeline.screening import levels_of, screened

from tunnelcalc import api
from tunnelcalc.pipeline.flags_stage import flag_numbers
from tunnelcalc.sections import Sections
from tunnelcalc.validity import Level

Q_PRESSURE, RMR_PRESSURE, Q_LENGTH = FLAGS
CLEAR, ADVISORY, NOT_ASSESSED = Level.CLEAR, Level.ADVISORY, Level.NOT_ASSESSED


def given(capacities, scheduled, **columns):
    """Sections with the capacity of each class, and the number of the scheduled one."""
    return {"class_capacity_mpa": capacities, "scheduled_class": scheduled, **columns}


def test_q_pressure_is_put_against_the_capacity_of_the_scheduled_class():
    """Q 1, Jn 9, Jr 2: 0.1 MPa."""
    values = given(
        [[0.05, 0.2], [0.05, 0.2], [0.05, 0.2], [0.05, 0.2]],
        [0, 1, -1, 0],
        q=[1.0, 1.0, 1.0, np.nan],
        joint_set_number=[9.0] * 4,
        joint_roughness_number=[2.0] * 4,
    )
    assert levels_of(Q_PRESSURE, values).tolist() == [ADVISORY, CLEAR, CLEAR, NOT_ASSESSED]
    sections = screened([Q_PRESSURE], values)
    (of_q, pressure), (of_class, capacity) = flag_numbers(Q_PRESSURE, sections)
    assert (of_q.unit, of_class.unit) == ("MPa", "MPa")
    assert pressure[0] == pytest.approx(0.1)
    np.testing.assert_array_equal(capacity, [0.05, 0.2, np.nan, 0.05])


def test_a_class_without_capacity_is_below_any_demand():
    values = given([[0.0]], [0], q=[1.0], joint_set_number=[9.0], joint_roughness_number=[2.0])
    assert levels_of(Q_PRESSURE, values).tolist() == [ADVISORY]


def test_rmr_load_is_put_against_the_same_capacity():
    """RMR 40, 26 kN/m3, span 10 m: 0.156 MPa."""
    inputs = {"rmr89": [40.0] * 2, "unit_weight_kn_m3": [26.0] * 2, "span_m": [10.0] * 2}
    values = given([[0.155], [0.157]], [0, 0], **inputs)
    assert levels_of(RMR_PRESSURE, values).tolist() == [ADVISORY, CLEAR]


def classes(*lengths):
    return tuple(
        api.SupportClass(
            str(number),
            tuple(api.Element("bolts", "bolts", 1.0, {"length_m": one}) for one in of_class),
        )
        for number, of_class in enumerate(lengths)
    )


def test_the_longest_bolts_of_a_class_count():
    found = longest_bolts_m(classes((3.0, 4.0), ()))
    np.testing.assert_array_equal(found, [4.0, np.nan])


def test_bolts_that_are_shorter_than_q_asks_for_raise_a_flag():
    """Span 10 m, ESR 1: 3.5 m."""
    made = replace(project({}, Sections({})), support_classes=classes((3.0,), (4.0,), ()))
    flag = Q_LENGTH.of_project(made)
    values = {
        "scheduled_class": [0, 1, 2, -1],
        "span_m": [10.0] * 4,
        "excavation_support_ratio": [1.0] * 4,
    }
    assert levels_of(flag, values).tolist() == [ADVISORY, CLEAR, CLEAR, CLEAR]
    (_, asked), (_, there) = flag_numbers(flag, screened([flag], values))
    assert asked[0] == pytest.approx(3.5)
    np.testing.assert_array_equal(there, [3.0, 4.0, np.nan, np.nan])


def test_no_flag_can_go_beyond_an_advice():
    for flag in FLAGS:
        assert {threshold.level for threshold in flag.thresholds} == {Level.ADVISORY}
