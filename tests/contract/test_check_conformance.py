"""What every registered check keeps to, for every kind that it applies to."""

from __future__ import annotations

import numpy as np
import pytest
from contract.elements import RADII_M, bytes_of, elements_of, sections_for_checks
from unit.plugin.strangers import own_points

from tunnelcalc.plugin.isolation import contained_spring
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.sections import Sections
from tunnelcalc.vocabulary import GROUND

REGISTRY = load_plugins(own_points())
CHECKS = [offer.thing for offer in REGISTRY.of_sort("support_check")]
PAIRS = [
    pytest.param(
        check,
        element,
        id="-".join(
            [check.name, kind, *(v for v in element.values.values() if isinstance(v, str))]
        ),
    )
    for check in CHECKS
    for kind in check.applies_to
    for element in elements_of(REGISTRY.support_kind(kind))
    if check.concerns(element)
]
LOAD_PAIRS = [pair for pair in PAIRS if pair.values[0].carries_load]


def given(element, element_pressure_mpa=0.1):
    """Sections at rest, with the capacity that the kind itself gives to the element."""
    kind = REGISTRY.support_kind(element.kind)
    bare = sections_for_checks(element_pressure_mpa, 1.0)
    capacity = contained_spring(kind, bare, element).values[1]
    return bare.with_columns({"element_capacity_mpa": capacity})


CLASS_CHECKS = [offer.thing for offer in REGISTRY.of_sort("class_check")]
GIVEN_TO_CLASS_CHECKS = {
    "radius_m": 4.0,
    "unit_weight_kn_m3": 25.0,
    "support_pressure_mpa": 0.2,
    "supported_closure_mm": 10.0,
    "supported_plastic_radius_m": 6.0,
    "class_capacity_mpa": 1.2,
    "ring_capacity_mpa": 0.9,
    "lining_water_mpa": 0.3,
}


@pytest.mark.parametrize("check", CLASS_CHECKS, ids=lambda check: check.name)
class TestHowACheckOfAClassEvaluates:
    def test_it_says_what_it_compares_and_what_it_cannot_do_without(self, check):
        assert check.name.isidentifier()
        assert all((check.meaning, check.unit))
        assert isinstance(check.carries_load, bool)
        assert isinstance(check.by_choice, bool)
        assert set(check.requires) <= set(GROUND)

    def test_demand_and_capacity_are_one_number_a_section_from_what_it_is_promised(self, check):
        growing = np.linspace(1.0, 1.4, 5)
        columns = {name: value * growing for name, value in GIVEN_TO_CLASS_CHECKS.items()}
        whole = Sections(columns)
        before = bytes_of(whole)
        evaluation = check.evaluate(whole)
        singly = [check.evaluate(whole.take(slice(i, i + 1))) for i in range(5)]
        for name in ("demand", "capacity"):
            array = getattr(evaluation, name)
            assert array.shape == (5,)
            assert np.all(array > 0)
            assert array.tobytes() == b"".join(getattr(one, name).tobytes() for one in singly)
        assert bytes_of(whole) == before


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: check.name)
def test_a_check_says_what_it_compares_and_for_which_kinds(check):
    assert check.name.isidentifier()
    assert check.meaning
    assert check.unit
    assert isinstance(check.carries_load, bool)
    assert check.applies_to
    assert set(check.applies_to) <= set(REGISTRY.names("support_kind"))


def test_every_check_is_tried_on_some_element():
    assert {pair.values[0].name for pair in PAIRS} == {check.name for check in CHECKS}


@pytest.mark.parametrize(("check", "element"), PAIRS)
class TestHowACheckEvaluates:
    def test_demand_and_capacity_are_one_number_a_section(self, check, element):
        evaluation = check.evaluate(given(element), element)
        for array in (evaluation.demand, evaluation.capacity):
            assert array.shape == RADII_M.shape
            assert np.all(np.isfinite(array))
            assert np.all(array >= 0)
        assert np.all(evaluation.capacity > 0)
        assert evaluation.left_out is None or not np.any(evaluation.left_out)

    def test_it_gives_the_same_each_time_and_section_by_section(self, check, element):
        whole = given(element)
        many, again = check.evaluate(whole, element), check.evaluate(whole, element)
        singly = [check.evaluate(whole.take(slice(i, i + 1)), element) for i in range(RADII_M.size)]
        for name in ("demand", "capacity"):
            array = getattr(many, name)
            assert array.tobytes() == getattr(again, name).tobytes()
            pieces = [getattr(evaluation, name) for evaluation in singly]
            assert array.tobytes() == np.concatenate(pieces).tobytes()

    def test_it_leaves_what_it_is_given_as_it_was(self, check, element):
        whole, values = given(element), dict(element.values)
        before = bytes_of(whole)
        check.evaluate(whole, element)
        assert bytes_of(whole) == before
        assert element.values == values


@pytest.mark.parametrize(("check", "element"), LOAD_PAIRS)
class TestHowALoadCheckEvaluates:
    def test_an_element_without_pressure_has_no_load(self, check, element):
        evaluation = check.evaluate(given(element, 0.0), element)
        assert evaluation.demand.tolist() == [0.0] * RADII_M.size

    def test_more_pressure_is_more_load_against_the_same_capacity(self, check, element):
        less, more = (check.evaluate(given(element, p), element) for p in (0.1, 0.2))
        np.testing.assert_allclose(more.demand, 2 * less.demand, rtol=1e-12)  # linear elements
        assert more.capacity.tolist() == less.capacity.tolist()

    def test_at_the_capacity_of_the_reaction_demand_equals_capacity(self, check, element):
        """The kind and its load check speak of the same limit."""
        whole = given(element)
        full = whole.with_columns({"element_pressure_mpa": whole["element_capacity_mpa"]})
        evaluation = check.evaluate(full, element)
        np.testing.assert_allclose(evaluation.demand, evaluation.capacity, rtol=1e-12)
