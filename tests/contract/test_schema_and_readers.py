"""The schema and the readers are two descriptions of one file: they say the same."""

from __future__ import annotations

import pytest
from contract.full_project import (
    SCHEMA,
    changed,
    full_project,
    leaves,
    mappings,
    problems_of,
    schema_at,
)
from jsonschema import Draft202012Validator

from tunnelcalc.inputs.support_classes import RESERVED_NAMES

UNKNOWN = "no_such_key"
FREE = (("ground", "aliases"), ("methods", "strength", "by_unit"))
"""Mappings whose keys are the user's."""

MAPPINGS = [place for place in mappings(full_project()) if place not in FREE]
LEAVES = dict.fromkeys([*leaves(full_project()), *leaves(full_project(without_profiles=True))])
NUMBERS = [p for p in LEAVES if {"minimum", "exclusiveMinimum"} & set(schema_at(p))]
CHOICES = [p for p in LEAVES if "enum" in schema_at(p)]


def dotted(place):
    return ".".join(map(str, place)) or "project"


def project_with(place, value):
    """The full project with a value at a place; an opening of one profile unless it says more."""
    return changed(full_project(without_profiles="profiles" not in place), place, value)


def test_the_full_project_meets_the_schema():
    # Without it, every test below could pass for another reason than the one it names.
    Draft202012Validator.check_schema(SCHEMA)
    for project in (full_project(), full_project(without_profiles=True)):
        assert [error.message for error in Draft202012Validator(SCHEMA).iter_errors(project)] == []


@pytest.mark.parametrize("place", MAPPINGS, ids=dotted)
def test_the_schema_has_the_keys_that_the_reader_knows(tmp_path, place):
    project = project_with((*place, UNKNOWN), 1)
    (unknown,) = [p for p in problems_of(tmp_path, project) if UNKNOWN in p.name]
    assert unknown.message == "is unknown"
    assert set(unknown.allowed.split(", ")) == set(schema_at(place)["properties"])
    assert schema_at(place)["additionalProperties"] is False


@pytest.mark.parametrize("place", NUMBERS, ids=dotted)
def test_the_schema_has_the_range_that_the_reader_has(tmp_path, place):
    project = project_with(place, "1e400")
    (problem,) = [p for p in problems_of(tmp_path, project) if p.value == "1e400"]
    assert problem.message == 'holds "1e400", which is out of range'
    assert schema_at(place)["description"].endswith(f"; {problem.allowed}")


@pytest.mark.parametrize("place", CHOICES, ids=dotted)
def test_the_schema_has_the_words_that_the_reader_has(tmp_path, place):
    project = project_with(place, UNKNOWN)
    problem = next(p for p in problems_of(tmp_path, project) if p.value == UNKNOWN)
    shown, _, unshown = problem.allowed.partition(" or one of ")
    words = set(shown.replace(" or ", ", ").split(", "))
    # Beside its words the schema has what YAML makes of some of them.
    of_schema = {word for word in schema_at(place)["enum"] if isinstance(word, str)}
    assert words <= of_schema
    # Of very many words the reader names the nearest, and how many more there are.
    assert len(of_schema - words) == int(unshown.removesuffix(" more") or 0)


@pytest.mark.parametrize("name", RESERVED_NAMES)
def test_the_schema_refuses_the_names_that_are_reserved(name):
    part = schema_at(("support_classes", 0, "name"))
    assert not Draft202012Validator(part).is_valid(name)
    assert Draft202012Validator(part).is_valid(name + "x")
