"""Curves of several laws as one: each section by its own, in its own place."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import WEAK, curve

from tunnelcalc.errors import ShapeError
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.mixed import MixedCurve


@dataclass
class Springs:
    """A law that is none: u / R = p0 - pi, of sections that can be told by their p0."""

    in_situ_stress_mpa: np.ndarray

    @property
    def critical_pressure_mpa(self):
        return np.zeros(self.in_situ_stress_mpa.shape)

    def at(self, support_pressure_mpa):
        closure = self.in_situ_stress_mpa - support_pressure_mpa
        return CurvePoint(np.ones(closure.shape), closure, np.full(closure.shape, -1.0))

    def take(self, index):
        return Springs(self.in_situ_stress_mpa[index])


def springs(*stresses):
    return Springs(np.array(stresses, float))


def weak(*stresses, **changed):
    """Weak ground under the given in-situ stresses."""
    return curve(**(WEAK | changed | {"in_situ_stress_mpa": np.array(stresses, float)}))


def mixed():
    """Seven sections of three laws; p0 is the position + 1."""
    return MixedCurve.of_parts(
        [
            (weak(5, 2), np.array([4, 1])),
            (springs(1, 6, 4), np.array([0, 5, 3])),
            (weak(3, 7, dilation_deg=30, intact_strength_mpa=8.0), np.array([2, 6])),
        ]
    )


PRESSURE = np.array([0.0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6])


def assert_same_bits(found, expected):
    for own, other in zip(found, expected, strict=True):
        assert own.tobytes() == other.tobytes()


def test_stresses_stand_where_their_sections_stand():
    np.testing.assert_array_equal(mixed().in_situ_stress_mpa, np.arange(1, 8))
    critical = mixed().critical_pressure_mpa
    np.testing.assert_array_equal(critical == 0, [True, False, False, True, False, True, False])
    np.testing.assert_array_equal(critical[[4, 1]], weak(5, 2).critical_pressure_mpa)


def test_each_section_follows_its_own_law():
    found = mixed().at(PRESSURE)
    np.testing.assert_array_equal(found.closure_ratio[[0, 5, 3]], [1 - 0.0, 6 - 0.5, 4 - 0.3])
    np.testing.assert_array_equal(found.slope[[0, 5, 3]], [-1, -1, -1])
    first = weak(5, 2).at(PRESSURE[[4, 1]])
    last = weak(3, 7, dilation_deg=30, intact_strength_mpa=8.0).at(PRESSURE[[2, 6]])
    assert_same_bits([values[[4, 1]] for values in found], first)
    assert_same_bits([values[[2, 6]] for values in found], last)


@pytest.mark.parametrize(
    "index",
    [
        pytest.param(np.arange(7), id="all"),
        pytest.param(np.array([6, 5, 4, 3, 2, 1, 0]), id="backwards"),
        pytest.param(np.array([3, 3, 0, 6, 3]), id="repeated"),
        pytest.param(np.array([5, 0]), id="one-part-only"),
        pytest.param(np.array([2]), id="one"),
        pytest.param(np.array([-1, 0]), id="from-the-end"),
        pytest.param(np.array([], dtype=int), id="none"),
        pytest.param(np.array([True, False, True, True, False, False, True]), id="mask"),
        pytest.param(np.zeros(7, dtype=bool), id="empty-mask"),
    ],
)
def test_taken_sections_are_those_of_the_whole(index):
    taken, whole = mixed().take(index), mixed()
    assert_same_bits(taken.at(PRESSURE[index]), [v[index] for v in whole.at(PRESSURE)])
    np.testing.assert_array_equal(taken.in_situ_stress_mpa, whole.in_situ_stress_mpa[index])
    np.testing.assert_array_equal(taken.critical_pressure_mpa, whole.critical_pressure_mpa[index])


def test_taking_twice_is_taking_once():
    first, second = np.array([6, 0, 3, 5, 2]), np.array([4, 0, 0, 3])
    found = mixed().take(first).take(second)
    assert_same_bits(found.at(np.zeros(4)), mixed().take(first[second]).at(np.zeros(4)))
    assert len(found.parts) == 2  # nothing of the first is left


def test_only_part_in_order_is_the_curve_itself():
    only = weak(5, 2)
    assert MixedCurve.of_parts([(only, np.array([0, 1]))]) is only
    with_empty = [(springs(), np.array([], dtype=int)), (only, np.array([0, 1]))]
    assert MixedCurve.of_parts(with_empty) is only


def test_only_part_in_another_order_is_put_in_order():
    found = MixedCurve.of_parts([(springs(5, 2, 8), np.array([2, 0, 1]))])
    np.testing.assert_array_equal(found.in_situ_stress_mpa, [2, 8, 5])


def test_section_with_nan_stays_nan_and_spoils_no_other():
    pressure = np.where(np.arange(7) == 4, np.nan, PRESSURE)
    found, sound = mixed().at(pressure), mixed().at(PRESSURE)
    others = np.arange(7) != 4
    np.testing.assert_array_equal(np.isnan(found.closure_ratio), ~others)
    assert_same_bits([v[others] for v in found], [v[others] for v in sound])


def test_positions_may_change_afterwards():
    positions = np.array([1, 0])
    found = MixedCurve.of_parts([(springs(5, 2), positions)])
    positions[:] = 0
    np.testing.assert_array_equal(found.in_situ_stress_mpa, [2, 5])


@pytest.mark.parametrize(
    "positions",
    [
        pytest.param(([0, 1], [1]), id="twice"),
        pytest.param(([0, 1], [3]), id="one-missing"),
        pytest.param(([1, 2], [3]), id="not-from-0"),
        pytest.param(([-1, 0], [1]), id="negative"),
    ],
)
def test_positions_that_are_not_each_section_once_are_refused(positions):
    one, other = (np.array(p) for p in positions)
    with pytest.raises(ValueError, match="0 to 2, each once"):
        MixedCurve.of_parts([(weak(5, 2), one), (springs(1), other)])


@pytest.mark.parametrize(
    ("positions", "told"),
    [
        pytest.param(np.array([0]), "2 sections has 1 positions", id="too-few"),
        pytest.param(np.array([0.0, 1.0]), "whole numbers", id="not-whole"),
        pytest.param(np.array([True, False]), "whole numbers", id="mask"),
        pytest.param(np.array([[0, 1]]), "one row", id="two-dimensional"),
    ],
)
def test_positions_that_do_not_fit_their_curve_are_refused(positions, told):
    with pytest.raises(ValueError, match=told):
        MixedCurve.of_parts([(weak(5, 2), positions)])


def test_nothing_is_not_a_curve():
    with pytest.raises(ValueError, match="at least one curve"):
        MixedCurve.of_parts([])


def test_pressures_of_another_number_of_sections_are_refused():
    with pytest.raises(ShapeError, match="support_pressure_mpa"):
        mixed().at(np.zeros(8))
