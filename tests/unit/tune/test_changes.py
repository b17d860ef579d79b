"""A class with values changed: what a word leaves without use goes, what it needs is told."""

from __future__ import annotations

from types import MappingProxyType

import pytest
from unit.plugin.strangers import own_points

from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import Element, SupportClass
from tunnelcalc.tune.changes import Change, changed, lacking

REGISTRY = load_plugins(own_points())
KIND = REGISTRY.support_kind("steel_sets")
RIGID = {
    "profile": "HEB 120",
    "yield_strength_mpa": 235.0,
    "steel_modulus_gpa": 200.0,
    "spacing_m": 1.0,
    "contact": "embedded",
    "joints": "rigid",
    "beyond_yield": "not_declared",
}
JOINTS = {"joint_count": 4.0, "slip_load_kn": 150.0, "joint_travel_mm": 200.0}


def sets(values: dict[str, float | str]) -> SupportClass:
    made = (
        Element("steel_sets", "steel_sets", 1.0, MappingProxyType(values)),
        Element("steel_sets", "steel_sets_2", 3.0, MappingProxyType(RIGID)),
    )
    return SupportClass("sets", made)


def change(name: str, value: float | str) -> Change:
    element, _, parameter = name.rpartition(".")
    return Change(element, parameter, value, f"{name}={value}")


def test_a_word_with_what_it_needs_lacks_nothing():
    asked = [change("steel_sets.joints", "sliding")]
    asked += [change(f"steel_sets.{name}", value) for name, value in JOINTS.items()]
    made, idle = changed(sets(RIGID), asked, REGISTRY)
    assert idle == ()
    assert made.elements[0].values == {**RIGID, **JOINTS, "joints": "sliding"}
    assert made.elements[1].values == RIGID
    assert list(lacking(made.elements[0], KIND)) == []


def test_what_a_word_needs_and_nobody_states_is_lacking():
    made, _ = changed(sets(RIGID), [change("steel_sets.joints", "sliding")], REGISTRY)
    assert [parameter.name for parameter in lacking(made.elements[0], KIND)] == list(JOINTS)


def test_what_a_word_leaves_without_use_goes():
    sliding = {**RIGID, **JOINTS, "joints": "sliding"}
    held = change("steel_sets.slip_load_kn", 90.0)
    made, idle = changed(sets(sliding), [held, change("steel_sets.joints", "rigid")], REGISTRY)
    assert idle == (held,)
    assert made.elements[0].values == RIGID


def test_a_choice_that_comes_into_use_unsaid_has_its_default():
    bare = {name: value for name, value in RIGID.items() if name != "beyond_yield"}
    made, _ = changed(sets(bare), [change("steel_sets.spacing_m", 2.0)], REGISTRY)
    assert made.elements[0].values == {**RIGID, "spacing_m": 2.0}


@pytest.mark.parametrize(
    ("name", "installed", "advance"),
    [
        ("installed_at_m", (2.5, 4.5), None),
        ("steel_sets_2.installed_at_m", (1.0, 2.5), None),
        ("advance_m_per_day", (1.0, 3.0), 2.5),
    ],
)
def test_distances_and_the_rate_of_advance_change_too(name, installed, advance):
    made, idle = changed(sets(RIGID), [change(name, 2.5)], REGISTRY)
    assert idle == ()
    assert tuple(element.installed_at_m for element in made.elements) == installed
    if advance is None:
        assert made.advance_m_per_day != made.advance_m_per_day
    else:
        assert made.advance_m_per_day == advance


ROW = {
    "section_area_mm2": 5000.0,
    "section_inertia_mm4": 2e7,
    "section_depth_mm": 150.0,
    "profile_source": "sections.csv, line 2",
}
WORDS = {("steel_sets", "profile"): {"MY 1": ROW}}


def test_a_word_of_the_project_brings_the_values_of_its_row():
    made, idle = changed(sets(RIGID), [change("steel_sets.profile", "MY 1")], REGISTRY, WORDS)
    assert idle == ()
    assert made.elements[0].values == {**RIGID, **ROW, "profile": "MY 1"}


def test_a_word_of_the_project_keeps_them_while_something_else_changes():
    own = {**RIGID, **ROW, "profile": "MY 1"}
    made, _ = changed(sets(own), [change("steel_sets.spacing_m", 2.0)], REGISTRY, WORDS)
    assert made.elements[0].values == {**own, "spacing_m": 2.0}


def test_a_word_of_the_project_takes_them_with_it():
    own = sets({**RIGID, **ROW, "profile": "MY 1"})
    made, _ = changed(own, [change("steel_sets.profile", "HEB 200")], REGISTRY, WORDS)
    assert made.elements[0].values == {**RIGID, "profile": "HEB 200"}
    made, _ = changed(own, [change("steel_sets.profile", "own")], REGISTRY, WORDS)
    assert "section_area_mm2" in [p.name for p in lacking(made.elements[0], KIND)]


def test_what_a_row_states_cannot_be_held():
    held = change("steel_sets.section_area_mm2", 9000.0)
    own = {**RIGID, **ROW, "profile": "MY 1"}
    made, idle = changed(sets(own), [held], REGISTRY, WORDS)
    assert idle == (held,)
    assert made.elements[0].values == own
