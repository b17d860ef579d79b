"""What every check of elements keeps to, for each kind that it applies to."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.arrays import Array
from tunnelcalc.plugin.contract import Evaluation, SupportCheck
from tunnelcalc.project import Element
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import GroundRing, LinearSpring, PressureOfClosure
from tunnelcalc.testing.generated import Generated, called, put
from tunnelcalc.testing.reactions import capacity_of, moved_mm
from tunnelcalc.testing.sections import (
    RADII_M,
    bytes_of,
    sections_at_rest,
    sections_of_ground,
)

SHARE_OF_CAPACITY = 0.5
PARTS = ("demand", "capacity")


class CheckConformance(Generated):
    """Tests of every check of elements that a distribution offers."""

    def pytest_generate_tests(self, metafunc: pytest.Metafunc) -> None:
        """A test for every check, with an element of each kind and choice that it is made for."""
        names = set(metafunc.fixturenames)
        if "element" in names:
            wanted = "load_check" if "load_check" in names else "check"
            cases = [
                ((check, element), called(check.name, element.kind, element=element))
                for check, element in self.pairs()
                if check.carries_load or wanted == "check"
            ]
            put(metafunc, f"{wanted},element", cases)
        elif "check" in names:
            put(metafunc, "check", [((check,), check.name) for check in self.offers.checks])

    def pairs(self) -> list[tuple[SupportCheck, Element]]:
        """Every check with the elements that it is made for."""
        return [
            (check, element)
            for check in self.offers.checks
            for kind in check.applies_to
            if kind in self.offers.registry.names("support_kind")
            for element in self.elements_of(self.offers.registry.support_kind(kind))
            if check.concerns(element)
        ]

    def given(self, element: Element, share: float = SHARE_OF_CAPACITY) -> Sections:
        """Sections at rest, the element under a share of the capacity that its kind gives it."""
        kind = self.offers.registry.support_kind(element.kind)
        reaction = kind.reaction(sections_of_ground(), element)
        pressure = share * capacity_of(reaction)
        return sections_at_rest(pressure, capacity_of(reaction), moved_mm(reaction, pressure))

    def test_a_check_says_what_it_compares_and_for_which_kinds(self, check: SupportCheck) -> None:
        assert check.name.isidentifier()
        assert check.meaning
        assert isinstance(check.unit, str)
        assert isinstance(check.carries_load, bool)
        assert check.applies_to
        assert set(check.applies_to) <= set(self.offers.registry.names("support_kind"))

    def test_a_check_is_tried_on_some_element(self, check: SupportCheck) -> None:
        assert any(tried.name == check.name for tried, _ in self.pairs())

    def test_demand_and_capacity_are_one_number_a_section(
        self, check: SupportCheck, element: Element
    ) -> None:
        evaluation = check.evaluate(self.given(element), element)
        left_out = _left_out(evaluation)
        for name in PARTS:
            array = getattr(evaluation, name)
            assert isinstance(array, np.ndarray), name
            assert array.shape == RADII_M.shape, name
            assert np.all(np.isfinite(array[~left_out])), name
            assert np.all(array[~left_out] >= 0), name
        if check.carries_load:
            assert not np.any(left_out), "only a rule may leave sections out"
        if np.any(left_out):
            assert evaluation.left_out_reason

    def test_a_check_gives_the_same_each_time_and_section_by_section(
        self, check: SupportCheck, element: Element
    ) -> None:
        whole = self.given(element)
        many, again = check.evaluate(whole, element), check.evaluate(whole, element)
        cuts = ([slice(None, 2), slice(2, None)], [slice(i, i + 1) for i in range(whole.count)])
        for name in PARTS:
            array = getattr(many, name)
            assert array.tobytes() == getattr(again, name).tobytes(), name
            for cut in cuts:
                pieces = [getattr(check.evaluate(whole.take(p), element), name) for p in cut]
                assert array.tobytes() == np.concatenate(pieces).tobytes(), name

    def test_a_check_leaves_what_it_is_given_as_it_was(
        self, check: SupportCheck, element: Element
    ) -> None:
        whole, values = self.given(element), dict(element.values)
        before = bytes_of(whole)
        check.evaluate(whole, element)
        assert bytes_of(whole) == before
        assert element.values == values

    def test_an_element_without_pressure_has_no_load(
        self, load_check: SupportCheck, element: Element
    ) -> None:
        """An element that changes the ground presses on no wall, and is loaded by the ground."""
        kind = self.offers.registry.support_kind(element.kind)
        if kind.reaction_form(element) == GroundRing.form:
            return
        evaluation = load_check.evaluate(self.given(element, 0.0), element)
        assert evaluation.demand.tolist() == [0.0] * RADII_M.size

    def test_more_pressure_is_never_less_used(
        self, load_check: SupportCheck, element: Element
    ) -> None:
        less, more = (load_check.evaluate(self.given(element, s), element) for s in (0.4, 0.8))
        assert np.all(more.demand >= less.demand)
        assert np.all(more.demand * less.capacity >= less.demand * more.capacity)

    def test_at_the_capacity_of_the_reaction_the_governing_load_check_is_just_met(
        self, load_check: SupportCheck, element: Element
    ) -> None:
        """The kind and its load checks speak of the same limit."""
        kind = self.offers.registry.support_kind(element.kind)
        reaction = kind.reaction(sections_of_ground(), element)
        own = [check for check in self.offers.checks_of(element) if check.carries_load]
        if kind not in self.offers.kinds or not isinstance(
            reaction, LinearSpring | PressureOfClosure
        ):
            return
        full = self.given(element, 1.0)
        used = np.max([_used(check.evaluate(full, element)) for check in own], axis=0)
        np.testing.assert_allclose(used, 1.0, rtol=1e-9)


def _used(evaluation: Evaluation) -> Array:
    return evaluation.demand / evaluation.capacity


def _left_out(evaluation: Evaluation) -> Array:
    if evaluation.left_out is None:
        return np.zeros(RADII_M.shape, dtype=bool)
    return np.asarray(evaluation.left_out, dtype=bool)
