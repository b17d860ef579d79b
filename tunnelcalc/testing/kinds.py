"""What every kind of support keeps to."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from tunnelcalc.plugin.contract import Amount, SupportKind
from tunnelcalc.plugin.parameter import Parameter, source_of
from tunnelcalc.project import Element
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import FORMS, GroundRing, LinearSpring, PressureOfClosure
from tunnelcalc.testing.elements import combinations
from tunnelcalc.testing.generated import Generated, called, put
from tunnelcalc.testing.reactions import (
    BEYOND,
    CHANGED,
    CLOSURES_M,
    arrays_of,
    capacity_of,
    rising,
)
from tunnelcalc.testing.sections import RADII_M, SMALLEST_RADIUS_M, bytes_of, sections_of_ground

UNIT_OF = {
    "_mm": "mm",
    "_mm2": "mm2",
    "_mm4": "mm4",
    "_m": "m",
    "_m2": "m2",
    "_mpa": "MPa",
    "_gpa": "GPa",
    "_kn": "kN",
    "_kn_per_m": "kN/m",
    "_mn_per_m": "MN/m",
    "_mpa_per_m": "MPa/m",
    "_kg_per_m": "kg/m",
    "_kg_m3": "kg/m3",
    "_kn_m3": "kN/m3",
    "_m_per_mn": "m/MN",
    "_m_per_day": "m/day",
    "_deg": "deg",
    "_pct": "%",
    "_days": "days",
    "_hours": "h",
    "_per_m": "1/m",
}
"""Units by the ending of a name; a name without one of them is a pure number."""
OF_EVERY_ELEMENT = frozenset({"kind", "installed_at_m"})
STEP_M = 1e-8


def unit_in(name: str) -> str:
    """The unit that the longest known ending of a name says; none for a pure number."""
    endings = sorted((ending for ending in UNIT_OF if name.endswith(ending)), key=len)
    return UNIT_OF[endings[-1]] if endings else ""


class KindConformance(Generated):
    """Tests of every kind that a distribution offers."""

    def pytest_generate_tests(self, metafunc: pytest.Metafunc) -> None:
        """A test for every kind, parameter and element."""
        kinds = self.offers.kinds
        names = set(metafunc.fixturenames)
        if "parameter" in names:
            cases = [
                ((kind, parameter), called(kind.name, parameter.name))
                for kind in kinds
                for parameter in kind.parameters
            ]
            put(metafunc, "kind,parameter", cases)
        elif "element" in names:
            each = [(kind, element) for kind in kinds for element in self.elements_of(kind)]
            put(
                metafunc,
                "kind,element",
                [((kind, one), called(kind.name, element=one)) for kind, one in each],
            )
        elif "kind" in names:
            put(metafunc, "kind", [((kind,), kind.name) for kind in kinds])

    def test_a_kind_says_what_it_is_and_names_each_parameter_once(self, kind: SupportKind) -> None:
        assert kind.name.isidentifier()
        assert kind.meaning
        assert isinstance(kind.is_ring, bool)
        names = [parameter.name for parameter in kind.parameters]
        assert all(name.isidentifier() and name == name.lower() for name in names)
        assert len(set(names)) == len(names)
        assert not OF_EVERY_ELEMENT & set(names)

    def test_whatever_is_chosen_has_values_that_fit(self, kind: SupportKind) -> None:
        elements = self.elements_of(kind)
        assert len(elements) >= len(combinations(kind)) >= 1
        for element in elements:
            assert not list(kind.misfits(element, SMALLEST_RADIUS_M))

    def test_a_parameter_is_a_choice_or_a_number_with_unit_and_range(
        self, kind: SupportKind, parameter: Parameter
    ) -> None:
        assert parameter.meaning
        if parameter.choices:
            assert len(set(parameter.choices)) == len(parameter.choices) > 1
            assert parameter.unit == ""
            assert parameter.default in ("", *parameter.choices)
            return
        assert parameter.default == "", "only a choice may have a default"
        assert parameter.unit == unit_in(parameter.name)
        assert -math.inf < parameter.limits.minimum < parameter.limits.maximum < math.inf

    def test_a_condition_names_a_choice_of_the_same_kind(
        self, kind: SupportKind, parameter: Parameter
    ) -> None:
        if parameter.only_if is None:
            return
        other, words = parameter.only_if
        assert not isinstance(words, str), "the words of a condition are a tuple"
        assert words
        assert set(words) <= set({p.name: p.choices for p in kind.parameters}[other])

    def test_a_table_of_words_states_numbers_of_the_same_kind(
        self, kind: SupportKind, parameter: Parameter
    ) -> None:
        table = parameter.words_from
        if table is None:
            return
        assert parameter.choices, "a table adds words to a choice"
        assert parameter.only_if is None, "a choice that takes words from a table is always asked"
        of_name = {p.name: p for p in kind.parameters}
        assert source_of(parameter.name) not in of_name
        assert table.states, "a word stands for some values"
        for name in table.states:
            assert not of_name[name].choices
            other, _ = of_name[name].only_if or ("", ())
            assert other == parameter.name, f"{name} is asked for beside a word that states it"

    def test_an_element_reacts_in_the_form_that_is_announced(
        self, kind: SupportKind, element: Element
    ) -> None:
        form = kind.reaction_form(element)
        assert form in FORMS
        reaction = kind.reaction(sections_of_ground(), element)
        assert reaction.form == form
        if isinstance(reaction, GroundRing):
            assert reaction.changed
            assert set(reaction.changed) <= CHANGED
            return
        assert math.isfinite(reaction.acts_from_m)
        assert reaction.acts_from_m >= 0
        if isinstance(reaction, LinearSpring):
            assert reaction.beyond in BEYOND

    def test_a_reaction_is_one_finite_number_a_section_and_never_pulls(
        self, kind: SupportKind, element: Element
    ) -> None:
        reaction = kind.reaction(sections_of_ground(), element)
        for name, array in arrays_of(reaction, RADII_M.size).items():
            assert isinstance(array, np.ndarray), name
            assert array.shape == RADII_M.shape, name
            assert np.all(np.isfinite(array)), name
            assert np.all(array >= 0), name
        assert np.all(capacity_of(reaction) > 0)
        if isinstance(reaction, LinearSpring):
            assert np.all(reaction.stiffness_mpa_per_m > 0)

    def test_a_reaction_never_falls_with_closure_or_age(
        self, kind: SupportKind, element: Element
    ) -> None:
        found = arrays_of(kind.reaction(sections_of_ground(), element), RADII_M.size)
        assert rising(found, "pressure at")
        assert rising(found, "stiffness at")
        assert rising(found, "capacity at")

    def test_without_closure_there_is_no_pressure(
        self, kind: SupportKind, element: Element
    ) -> None:
        reaction = kind.reaction(sections_of_ground(), element)
        if isinstance(reaction, PressureOfClosure):
            pressure, _ = reaction.pressure_and_slope(np.zeros(RADII_M.size))
            assert pressure.tolist() == [0.0] * RADII_M.size

    def test_the_slope_is_that_of_the_pressure(self, kind: SupportKind, element: Element) -> None:
        """On one side at least: the curve may have corners."""
        reaction = kind.reaction(sections_of_ground(), element)
        if not isinstance(reaction, PressureOfClosure):
            return
        size = RADII_M.size
        for closure in CLOSURES_M[1:]:
            before, here, after = (
                reaction.pressure_and_slope(np.full(size, at))
                for at in (closure - STEP_M, closure, closure + STEP_M)
            )
            slope = here[1]
            room = 1e-3 * slope + 1e-6 * capacity_of(reaction)
            left, right = ((b[0] - a[0]) / STEP_M for a, b in ((before, here), (here, after)))
            assert np.all((np.abs(left - slope) <= room) | (np.abs(right - slope) <= room))

    def test_a_reaction_is_the_same_each_time_and_section_by_section(
        self, kind: SupportKind, element: Element
    ) -> None:
        def found(sections: Sections) -> dict[str, np.ndarray]:
            return arrays_of(kind.reaction(sections, element), sections.count)

        whole = sections_of_ground()
        many, again = found(whole), found(whole)
        halves = [found(whole.take(part)) for part in (slice(None, 2), slice(2, None))]
        singly = [found(whole.take(slice(i, i + 1))) for i in range(whole.count)]
        for name, array in many.items():
            assert array.tobytes() == again[name].tobytes(), name
            for pieces in (halves, singly):
                joined = np.concatenate([piece[name] for piece in pieces])
                assert array.tobytes() == joined.tobytes(), name

    def test_a_kind_leaves_what_it_is_given_as_it_was(
        self, kind: SupportKind, element: Element
    ) -> None:
        given, values = sections_of_ground(), dict(element.values)
        before = bytes_of(given)
        arrays_of(kind.reaction(given, element), given.count)
        list(kind.amounts(given, element))
        list(kind.misfits(element, SMALLEST_RADIUS_M))
        assert bytes_of(given) == before
        assert element.values == values

    def test_amounts_are_finite_with_item_and_unit(
        self, kind: SupportKind, element: Element
    ) -> None:
        amounts = list(kind.amounts(sections_of_ground(), element))
        assert amounts
        assert len({amount.item for amount in amounts}) == len(amounts)
        for amount in amounts:
            assert isinstance(amount, Amount)
            assert amount.item
            assert amount.unit
            assert amount.per_metre.shape == RADII_M.shape
            assert np.all(np.isfinite(amount.per_metre))
            assert np.all(amount.per_metre >= 0)

    def test_a_greater_modulus_never_makes_a_softer_spring(
        self, kind: SupportKind, element: Element
    ) -> None:
        before = kind.reaction(sections_of_ground(), element)
        if not isinstance(before, LinearSpring):
            return
        for name in element.values:
            if not name.endswith(("modulus_gpa", "modulus_mpa")):
                continue
            more = {**element.values, name: element.number(name) * 1.5}
            after = kind.reaction(sections_of_ground(), replace(element, values=more))
            assert isinstance(after, LinearSpring)
            assert np.all(after.stiffness_mpa_per_m >= before.stiffness_mpa_per_m)

    def test_an_element_has_a_load_check(self, kind: SupportKind, element: Element) -> None:
        assert any(check.carries_load for check in self.offers.checks_of(element))
