"""What every registered kind of support keeps to, ours and a stranger's."""

from __future__ import annotations

import math

import numpy as np
import pytest
from contract.elements import RADII_M, bytes_of, choices_of, elements_of
from unit.plugin.strangers import own_points

from tunnelcalc.api import Amount, LinearSpring, Sections
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.support.reaction import FORMS

REGISTRY = load_plugins(own_points())
KINDS = [offer.thing for offer in REGISTRY.of_sort("support_kind")]
PARAMETERS = [
    pytest.param(kind, parameter, id=f"{kind.name}-{parameter.name}")
    for kind in KINDS
    for parameter in kind.parameters
]
ELEMENTS = [
    pytest.param(
        kind,
        element,
        id="-".join([kind.name, *(v for v in element.values.values() if isinstance(v, str))]),
    )
    for kind in KINDS
    for element in elements_of(kind)
]
UNIT_OF = {
    "_mm": "mm",
    "_mm2": "mm2",
    "_mm4": "mm4",
    "_m": "m",
    "_mpa": "MPa",
    "_gpa": "GPa",
    "_kn": "kN",
    "_deg": "deg",
    "_m_per_mn": "m/MN",
}


def unit_in(name: str) -> str:
    """The unit that the longest known ending of a name says; none for a pure number."""
    endings = sorted((e for e in UNIT_OF if name.endswith(e)), key=len)
    return UNIT_OF[endings[-1]] if endings else ""


def sections() -> Sections:
    return Sections({"radius_m": RADII_M})


def arrays(reaction: LinearSpring) -> list[np.ndarray]:
    return [reaction.stiffness_mpa_per_m, reaction.capacity_mpa]


class TestWhatAKindSays:
    @pytest.mark.parametrize("kind", KINDS, ids=lambda kind: kind.name)
    def test_it_says_what_it_is_and_names_each_parameter_once(self, kind):
        assert kind.name.isidentifier()
        assert kind.meaning
        names = [parameter.name for parameter in kind.parameters]
        assert len(set(names)) == len(names)
        assert not {"kind", "installed_at_m"} & set(names)

    @pytest.mark.parametrize("kind", KINDS, ids=lambda kind: kind.name)
    def test_it_says_whether_water_presses_on_it(self, kind):
        assert kind.is_ring is (kind.name in ("shotcrete", "steel_sets"))

    @pytest.mark.parametrize(("kind", "parameter"), PARAMETERS)
    def test_a_parameter_is_a_choice_or_a_number_with_unit_and_range(self, kind, parameter):
        assert parameter.meaning
        if parameter.choices:
            assert len(set(parameter.choices)) == len(parameter.choices) > 1
            assert parameter.unit == ""
            return
        assert parameter.unit == unit_in(parameter.name)
        assert -math.inf < parameter.limits.minimum < parameter.limits.maximum < math.inf

    @pytest.mark.parametrize(("kind", "parameter"), PARAMETERS)
    def test_a_condition_names_a_choice_of_the_same_kind(self, kind, parameter):
        if parameter.only_if is not None:
            other, word = parameter.only_if
            assert {p.name: p.choices for p in kind.parameters}[other].count(word) == 1

    @pytest.mark.parametrize("kind", KINDS, ids=lambda kind: kind.name)
    def test_every_combination_of_choices_has_values_that_fit(self, kind):
        assert len(elements_of(kind)) == len(list(choices_of(kind))) >= 1


@pytest.mark.parametrize(("kind", "element"), ELEMENTS)
class TestHowAKindReacts:
    def test_its_form_is_one_of_the_four(self, kind, element):
        assert kind.reaction_form(element) in FORMS
        assert kind.reaction(sections(), element).form == kind.reaction_form(element)

    def test_its_reaction_is_one_positive_number_a_section(self, kind, element):
        for array in arrays(kind.reaction(sections(), element)):
            assert array.shape == RADII_M.shape
            assert np.all(np.isfinite(array))
            assert np.all(array > 0)

    def test_its_reaction_is_the_same_each_time_and_section_by_section(self, kind, element):
        many = arrays(kind.reaction(sections(), element))
        again = arrays(kind.reaction(sections(), element))
        singly = [
            arrays(kind.reaction(sections().take(slice(i, i + 1)), element))
            for i in range(RADII_M.size)
        ]
        for position, array in enumerate(many):
            assert array.tobytes() == again[position].tobytes()
            assert array.tobytes() == np.concatenate([s[position] for s in singly]).tobytes()

    def test_it_leaves_what_it_is_given_as_it_was(self, kind, element):
        given, values = sections(), dict(element.values)
        before = bytes_of(given)
        kind.reaction(given, element)
        list(kind.amounts(given, element))
        list(kind.misfits(element, 2.0))
        assert bytes_of(given) == before
        assert element.values == values

    def test_its_amounts_are_finite_with_item_and_unit(self, kind, element):
        amounts = list(kind.amounts(sections(), element))
        assert amounts
        assert len({amount.item for amount in amounts}) == len(amounts)
        for amount in amounts:
            assert isinstance(amount, Amount)
            assert amount.item
            assert amount.unit
            assert amount.per_metre.shape == RADII_M.shape
            assert np.all(np.isfinite(amount.per_metre))
            assert np.all(amount.per_metre >= 0)

    def test_a_stiffer_element_is_never_softer_for_the_wall(self, kind, element):
        for name in element.values:
            if not name.endswith("modulus_gpa"):
                continue
            stiffer = type(element)(
                element.kind,
                element.label,
                element.installed_at_m,
                {**element.values, name: element.number(name) * 1.5},
            )
            before, _ = arrays(kind.reaction(sections(), element))
            after, _ = arrays(kind.reaction(sections(), stiffer))
            assert np.all(after > before)

    def test_it_has_a_load_check(self, kind, element):
        assert any(check.carries_load for check in REGISTRY.checks_for(element, ()))
