"""Rules of EM 1110-1-2907 (1980) [from memory] on length and spacing, each at its boundaries."""

import numpy as np
import pytest
from tunnelcalc_rock_bolts.pattern import PATTERN_RULES, least_length_by_span_m

from tunnelcalc.project import Element
from tunnelcalc.sections import Sections

RULES = {rule.name: rule for rule in PATTERN_RULES}


def just_above(value):
    return float(np.nextafter(value, np.inf))


SPANS = [
    pytest.param(2.0, 1.0, id="half-the-span"),
    pytest.param(5.999, 2.9995, id="just-below-6-m"),
    pytest.param(6.0, 3.0, id="6-m"),
    pytest.param(12.0, 3.75, id="half-way-between"),
    pytest.param(18.0, 4.5, id="18-m"),
    pytest.param(18.001, 4.50025, id="just-above-18-m"),
    pytest.param(24.0, 6.0, id="a-quarter-of-the-span"),
    pytest.param(30.0, 7.5, id="30-m"),
    pytest.param(just_above(30.0), np.nan, id="no-rule-above-30-m"),
    pytest.param(np.nan, np.nan, id="unknown-span"),
]


@pytest.mark.parametrize(("span", "length"), SPANS)
def test_least_length_by_span(span, length):
    np.testing.assert_allclose(least_length_by_span_m(np.array([span])), [length], rtol=1e-14)


def test_least_length_has_no_step_between_the_ranges_of_span():
    spans = np.linspace(0, 30, 30_001)
    assert np.max(np.abs(np.diff(least_length_by_span_m(spans)))) < 0.5 * 0.001 * 1.001


def evaluated(rule, *, length=4.0, around=1.5, along=1.5, block_width=0.4, radius=5.0):
    values = {
        "length_m": length,
        "spacing_around_m": around,
        "spacing_along_m": along,
        "pattern_rules": "em_1110_1_2907",
    }
    sections = Sections(
        {"span_m": np.array([2 * radius]), "block_width_m": np.array([block_width])}
    )
    return RULES[rule].evaluate(sections, Element("rock_bolts", "rock_bolts", 1.0, values))


BOUNDARIES = [
    pytest.param("pattern_length_by_spacing", {"length": 3.0}, 3.0, 3.0, id="twice-the-spacing"),
    pytest.param(
        "pattern_length_by_spacing", {"along": 2.0}, 4.0, 4.0, id="the-wider-spacing-counts"
    ),
    pytest.param(
        "pattern_length_by_block",
        {"block_width": 0.5, "length": 1.5},
        1.5,
        1.5,
        id="three-block-widths",
    ),
    pytest.param(
        "pattern_length_by_block",
        {"block_width": 0.4, "length": 1.2},
        1.2,
        1.2,
        id="three-block-widths-that-have-no-exact-double",
    ),
    pytest.param(
        "pattern_length_by_span", {"radius": 3.0, "length": 3.0}, 3.0, 3.0, id="span-of-6-m"
    ),
    pytest.param(
        "pattern_spacing_by_block", {"block_width": 1.0}, 1.5, 1.5, id="one-and-a-half-blocks"
    ),
    pytest.param("pattern_largest_spacing", {"around": 2.0}, 2.0, 2.0, id="2-m"),
]


@pytest.mark.parametrize(("rule", "values", "demand", "capacity"), BOUNDARIES)
def test_rule_at_its_boundary(rule, values, demand, capacity):
    found = evaluated(rule, **values)
    assert found.demand[0] == pytest.approx(demand, rel=1e-15)
    assert found.capacity[0] == pytest.approx(capacity, rel=1e-15)
    assert found.demand[0] <= found.capacity[0]


BEYOND = [
    pytest.param("pattern_length_by_spacing", {"around": 2.01}, id="twice-the-spacing"),
    pytest.param("pattern_length_by_block", {"block_width": 1.34}, id="three-block-widths"),
    pytest.param("pattern_length_by_span", {"radius": 7.01}, id="span"),
    pytest.param("pattern_spacing_by_block", {"along": 0.601}, id="one-and-a-half-blocks"),
    pytest.param("pattern_largest_spacing", {"along": 2.00000001}, id="2-m"),
]


@pytest.mark.parametrize(("rule", "values"), BEYOND)
def test_rule_just_beyond_its_boundary_fails(rule, values):
    found = evaluated(rule, **values)
    assert found.demand[0] > found.capacity[0]


@pytest.mark.parametrize(
    ("rule", "values", "reason"),
    [
        pytest.param(
            "pattern_length_by_block", {"block_width": np.nan}, "block_width_m", id="length"
        ),
        pytest.param(
            "pattern_spacing_by_block", {"block_width": np.nan}, "block_width_m", id="spacing"
        ),
        pytest.param("pattern_length_by_span", {"radius": 15.01}, "above 30 m", id="span"),
    ],
)
def test_rule_that_cannot_be_applied_leaves_the_section_out_and_says_why(rule, values, reason):
    found = evaluated(rule, **values)
    np.testing.assert_array_equal(found.left_out, [True])
    assert reason in found.left_out_reason


def test_rules_with_all_they_need_leave_nothing_out():
    for name in RULES:
        left_out = evaluated(name).left_out
        assert left_out is None or not left_out.any()


@pytest.mark.parametrize("choice", ["em_1110_1_2907", "none"])
def test_rules_are_checked_only_where_the_project_names_them(choice):
    element = Element("rock_bolts", "rock_bolts", 1.0, {"pattern_rules": choice})
    assert {rule.concerns(element) for rule in PATTERN_RULES} == {choice == "em_1110_1_2907"}
