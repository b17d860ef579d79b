"""What the lines of every registered kind and check keep to; the printed example of lines too."""

from __future__ import annotations

import textwrap

import numpy as np
import pytest
from contract.elements import elements_of, sections_for_checks
from contract.test_developers_example import printed_block
from unit.plugin.strangers import own_points

from tunnelcalc import api
from tunnelcalc.plugin.isolation import contained_spring
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.plugin.sheet_contract import ElementLines, ValueLines

REGISTRY = load_plugins(own_points())
SECTION = 2
"""One of the radii, neither the smallest nor the largest."""


def named(offered, element):
    words = (value for value in element.values.values() if isinstance(value, str))
    return "-".join([offered.name, *words])


ELEMENTS = [
    pytest.param(offer.thing, element, id=named(offer.thing, element))
    for offer in REGISTRY.of_sort("support_kind")
    for element in elements_of(offer.thing)
]
CHECKS = [
    pytest.param(offer.thing, element, id=named(offer.thing, element))
    for offer in REGISTRY.of_sort("support_check")
    for kind in offer.thing.applies_to
    for element in elements_of(REGISTRY.support_kind(kind))
    if offer.thing.concerns(element)
]


def one(element):
    """One section at rest, and its values."""
    sections = sections_for_checks(0.1, 1.0)
    spring = contained_spring(REGISTRY.support_kind(element.kind), sections, element)
    sections = sections.with_columns({"element_capacity_mpa": spring.values[1]})
    section = sections.take(np.array([SECTION]))
    return section, {name: float(column[0]) for name, column in section.items()}


def last(lines, symbol):
    return [line for line in lines if line.symbol == symbol][-1].result


def agree(lines):
    return [line for line in lines if line.disagrees()] == []


@pytest.mark.parametrize(("kind", "element"), ELEMENTS)
def test_the_lines_of_a_kind_give_its_stiffness_and_capacity(kind, element):
    section, values = one(element)
    assert isinstance(kind, ElementLines)
    lines = kind.lines(values, element)
    spring = kind.reaction(section, element)
    assert last(lines, "K") == spring.stiffness_mpa_per_m[0]
    assert last(lines, "pmax") == spring.capacity_mpa[0]
    assert agree(lines)
    assert all(line.formula and line.source for line in lines)


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
    (element,) = [e for e in elements_of(REGISTRY.support_kind("rock_bolts")) if rule.concerns(e)]
    values = {**one(element)[1], "span_m": span_m}
    assert agree(rule.lines(values, element))


def test_a_rule_that_leaves_a_section_out_has_no_lines():
    rule = REGISTRY.find("support_check", "pattern_length_by_block")
    (element,) = [e for e in elements_of(REGISTRY.support_kind("rock_bolts")) if rule.concerns(e)]
    assert rule.lines({**one(element)[1], "block_width_m": np.nan}, element) == ()


@pytest.mark.parametrize("offer", list(REGISTRY.of_sort("class_check")), ids=lambda o: o.name)
def test_the_lines_of_a_check_of_a_class_give_its_demand_and_capacity(offer):
    section = sections_for_checks(0.1, 1.0).take(np.array([SECTION]))
    more = {"class_capacity_mpa": 0.7, "ring_capacity_mpa": 0.4, "lining_water_mpa": 0.3}
    section = section.with_columns({name: np.array([value]) for name, value in more.items()})
    values = {name: float(column[0]) for name, column in section.items()}
    assert isinstance(offer.thing, ValueLines)
    lines = offer.thing.lines(values)
    found = offer.thing.evaluate(section)
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
