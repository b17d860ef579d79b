"""What the lines of every registered kind and check keep to; the printed example of lines too."""

from __future__ import annotations

import textwrap

import numpy as np
import pytest
from contract.test_developers_example import printed_block

from tunnelcalc import api, testing
from tunnelcalc.plugin.sheet_contract import AgeingLines, ClassLines, ElementLines
from tunnelcalc.testing.class_checks import applies, ways_of
from tunnelcalc.testing.reactions import capacity_of

CHECKED = testing.CheckConformance()
CHECKED.offers = testing.offers_of("tunnelcalc")
OF_CLASSES = testing.ClassCheckConformance()
OF_CLASSES.offers = CHECKED.offers
REGISTRY = CHECKED.offers.registry
SECTION = 2
"""One of the radii, neither the smallest nor the largest."""


def named(offered, element):
    words = (value for value in element.values.values() if isinstance(value, str))
    return "-".join([offered.name, *words])


ELEMENTS = [
    pytest.param(offer.thing, element, id=named(offer.thing, element))
    for offer in REGISTRY.of_sort("support_kind")
    for element in CHECKED.elements_of(offer.thing)
]
HARDENING = [
    pytest.param(offer.thing, element, id=named(offer.thing, element))
    for offer in REGISTRY.of_sort("support_kind")
    for element in CHECKED.elements_of(offer.thing)
    if offer.thing.reaction_form(element) == api.AdvanceIncrements.form
]
CHECKS = [
    pytest.param(check, element, id=named(check, element)) for check, element in CHECKED.pairs()
]
OF_CLASS = [
    pytest.param(check, members, id=f"{check.name}-{number}-{place}")
    for offer in REGISTRY.of_sort("class_check")
    for number, check in enumerate(ways_of(offer.thing))
    for place, members in enumerate(OF_CLASSES.classes())
    if applies(check, members)
]


def values_of(section):
    return {
        name: column[0] if column.dtype == object else float(column[0])
        for name, column in section.items()
    }


def one(element):
    """One section at rest, and its values."""
    section = CHECKED.given(element).take(np.array([SECTION]))
    return section, values_of(section)


def last(lines, symbol):
    return [line for line in lines if line.symbol == symbol][-1].result


def agree(lines):
    return [line for line in lines if line.disagrees()] == []


@pytest.mark.parametrize(("kind", "element"), ELEMENTS)
def test_the_lines_of_a_kind_give_its_stiffness_and_capacity(kind, element):
    section, values = one(element)
    assert isinstance(kind, ElementLines)
    lines = kind.lines(values, element)
    reaction = kind.reaction(section, element)
    if isinstance(reaction, api.LinearSpring):
        assert last(lines, "K") == reaction.stiffness_mpa_per_m[0]
    assert last(lines, "pmax") == capacity_of(reaction)[0]
    assert agree(lines)
    assert all(line.formula and line.source for line in lines)


@pytest.mark.parametrize("age_days", [0.0, 1e-7, 0.001, 0.2, 0.34, 1.0, 1.3, 9.0, 400.0])
@pytest.mark.parametrize(("kind", "element"), HARDENING)
def test_the_lines_of_a_kind_that_hardens_give_both_at_any_age(kind, element, age_days):
    section, values = one(element)
    assert isinstance(kind, AgeingLines)
    lines = kind.lines_at_age(values, element, age_days)
    stiffness, capacity = kind.reaction(section, element).at_age(np.array([age_days]))
    assert last(lines, "K") == stiffness[0]
    assert last(lines, "pmax") == capacity[0]
    assert agree(lines)
    symbols = [line.symbol for line in lines]
    assert symbols.index("K") < symbols.index("pmax")


@pytest.mark.parametrize(("check", "element"), CHECKS)
def test_the_lines_of_a_check_give_its_demand_and_capacity(check, element):
    section, values = one(element)
    assert isinstance(check, ElementLines)
    lines = check.lines(values, element)
    found = check.evaluate(section, element)
    assert last(lines, "demand") == found.demand[0]
    assert last(lines, "capacity") == found.capacity[0]
    assert agree(lines)
    assert all(line.source for line in lines)


@pytest.mark.parametrize("span_m", [1.0, 5.999, 6.0, 11.0, 18.0, 18.001, 30.0])
def test_the_rule_on_span_has_a_formula_for_every_span(span_m):
    rule = REGISTRY.find("support_check", "pattern_length_by_span")
    element = next(e for check, e in CHECKED.pairs() if check is rule)
    values = {**one(element)[1], "span_m": span_m}
    assert agree(rule.lines(values, element))


def test_a_rule_that_leaves_a_section_out_has_no_lines():
    rule = REGISTRY.find("support_check", "pattern_length_by_block")
    element = next(e for check, e in CHECKED.pairs() if check is rule)
    assert rule.lines({**one(element)[1], "block_width_m": np.nan}, element) == ()


@pytest.mark.parametrize(("check", "members"), OF_CLASS)
def test_the_lines_of_a_check_of_a_class_give_its_demand_and_capacity(check, members):
    section = OF_CLASSES.given(members).take(np.array([SECTION]))
    section = section.with_columns({"lining_water_mpa": np.array([0.3])})
    assert isinstance(check, ClassLines)
    lines = check.lines(values_of(section), members)
    found = check.evaluate(section, members)
    if found.left_out is not None and found.left_out[0]:
        assert lines == ()
        return
    assert last(lines, "demand") == found.demand[0]
    assert last(lines, "capacity") == found.capacity[0]
    assert agree(lines)


def test_the_printed_example_of_lines_agrees_with_the_printed_kind():
    module = printed_block("python", "class PrecastRing")
    space: dict[str, object] = {}
    exec(module, space)
    exec(textwrap.dedent(printed_block("python", "def lines(self")), space)
    kind = space["PrecastRing"]
    kind.lines = space["lines"]
    element = api.Element(
        "precast_ring",
        "precast_ring",
        1.0,
        {"segment_thickness_mm": 300.0, "segment_modulus_gpa": 30.0, "segment_strength_mpa": 40.0},
    )
    values = {"radius_m": 4.0}
    lines = kind().lines(values, element)
    spring = kind().reaction(api.one_section(values), element)
    assert last(lines, "K") == spring.stiffness_mpa_per_m[0]
    assert agree(lines)
