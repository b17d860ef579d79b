"""What every check of a class as a whole keeps to."""

from __future__ import annotations

from itertools import chain

import numpy as np
import pytest

from tunnelcalc.plugin.contract import ClassCheck, ClassCheckWithOptions
from tunnelcalc.project import Element
from tunnelcalc.sections import Sections, of_element
from tunnelcalc.support.reaction import AdvanceIncrements
from tunnelcalc.testing.elements import option_sets
from tunnelcalc.testing.generated import Generated, put
from tunnelcalc.testing.reactions import capacity_of, moved_mm
from tunnelcalc.testing.sections import (
    RADII_M,
    bytes_of,
    sections_at_rest,
    sections_of_ground,
)
from tunnelcalc.vocabulary import GROUND

PARTS = ("demand", "capacity")
STATE = (
    "element_pressure_mpa",
    "element_capacity_mpa",
    "element_moved_mm",
    "element_water_mpa",
    "element_acts_from_m",
)
AGEING = (
    "worst_pressure_mpa",
    "worst_capacity_mpa",
    "worst_age_days",
    "worst_distance_m",
    "early_pressure_mpa",
)
"""What stands in the sections for every element, and for one that ages besides."""


class ClassCheckConformance(Generated):
    """Tests of every class check that a distribution offers, on classes of all known kinds.

    A check with options is tried with every combination of its words.
    """

    def pytest_generate_tests(self, metafunc: pytest.Metafunc) -> None:
        """A test for every check, with every class that it is made for."""
        names = set(metafunc.fixturenames)
        if "members" in names:
            cases = [
                ((configured, members), f"{check.name}-{number}-{members[0].kind}-{place}")
                for check in self.offers.class_checks
                for number, configured in enumerate(ways_of(check))
                for place, members in enumerate(self.classes())
                if applies(configured, members)
            ]
            put(metafunc, "check,members", cases)
        elif "check" in names:
            put(metafunc, "check", [((check,), check.name) for check in self.offers.class_checks])

    def classes(self) -> list[tuple[Element, ...]]:
        """Classes of one element each, and one of the first element of every kind."""
        registry = self.offers.registry
        kinds = [registry.support_kind(name) for name in registry.names("support_kind")]
        each = [self.elements_of(kind) for kind in kinds]
        return [*((element,) for element in chain(*each)), tuple(some[0] for some in each)]

    def given(self, members: tuple[Element, ...]) -> Sections:
        """A class at rest, each element under half its capacity."""
        ground = sections_of_ground()
        registry = self.offers.registry
        reactions = [registry.support_kind(m.kind).reaction(ground, m) for m in members]
        capacity = np.sum([capacity_of(reaction) for reaction in reactions], axis=0)
        moved = moved_mm(reactions[0], 0.5 * capacity_of(reactions[0]))
        of_class = sections_at_rest(0.5 * capacity, capacity, moved)
        for position, reaction in enumerate(reactions):
            own = capacity_of(reaction)
            alone = sections_at_rest(0.5 * own, own, moved_mm(reaction, 0.5 * own))
            nothing = np.zeros(alone.count)
            more = {"element_water_mpa": nothing, "element_acts_from_m": nothing + position}
            alone = alone.with_columns(more)
            ages = AGEING if isinstance(reaction, AdvanceIncrements) else ()
            columns = {of_element(name, position): alone[name] for name in (*STATE, *ages)}
            of_class = of_class.with_columns(columns)
        return of_class

    def test_a_check_says_what_it_compares(self, check: ClassCheck) -> None:
        assert check.name.isidentifier()
        assert check.meaning
        assert isinstance(check.unit, str)
        assert isinstance(check.carries_load, bool)
        assert isinstance(check.by_choice, bool)
        assert set(check.requires) <= set(GROUND)
        names = [option.name for option in getattr(check, "options", ())]
        assert len(set(names)) == len(names)
        assert not names or check.by_choice, "options are read where a check is chosen"

    def test_demand_and_capacity_are_one_number_a_section(
        self, check: ClassCheck, members: tuple[Element, ...]
    ) -> None:
        evaluation = check.evaluate(self.given(members), members)
        sound = np.ones(RADII_M.shape, dtype=bool)
        if evaluation.left_out is not None:
            sound = ~np.asarray(evaluation.left_out, dtype=bool)
            assert np.all(sound) or evaluation.left_out_reason
        for name in PARTS:
            array = getattr(evaluation, name)
            assert isinstance(array, np.ndarray), name
            assert array.shape == RADII_M.shape, name
            assert np.all(np.isfinite(array[sound])), name
            assert np.all(array[sound] >= 0), name

    def test_a_check_gives_the_same_each_time_and_section_by_section(
        self, check: ClassCheck, members: tuple[Element, ...]
    ) -> None:
        whole = self.given(members)
        many, again = check.evaluate(whole, members), check.evaluate(whole, members)
        cut = [slice(i, i + 1) for i in range(whole.count)]
        for name in PARTS:
            array = getattr(many, name)
            assert array.tobytes() == getattr(again, name).tobytes(), name
            pieces = [getattr(check.evaluate(whole.take(p), members), name) for p in cut]
            assert array.tobytes() == np.concatenate(pieces).tobytes(), name

    def test_a_check_leaves_what_it_is_given_as_it_was(
        self, check: ClassCheck, members: tuple[Element, ...]
    ) -> None:
        whole = self.given(members)
        before, values = bytes_of(whole), [dict(member.values) for member in members]
        check.evaluate(whole, members)
        assert bytes_of(whole) == before
        assert [dict(member.values) for member in members] == values


def ways_of(check: ClassCheck) -> list[ClassCheck]:
    """The check with every combination of its options, or as it is."""
    if not isinstance(check, ClassCheckWithOptions):
        return [check]
    return [check.configured(values) for values in option_sets(check.options)]


def applies(check: ClassCheck, members: tuple[Element, ...]) -> bool:
    """Whether a check is made for a class at all."""
    return not isinstance(check, ClassCheckWithOptions) or check.concerns_class(members)
