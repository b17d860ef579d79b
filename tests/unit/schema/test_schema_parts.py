from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st
from jsonschema import Draft202012Validator

from tunnelcalc.schema.parts import chainage, choice, if_is, number, text
from tunnelcalc.text import as_number
from tunnelcalc.vocabulary import Limits


def meets(value: object, schema: dict) -> bool:
    Draft202012Validator.check_schema(schema)
    return Draft202012Validator(schema).is_valid(value)


@pytest.mark.parametrize("above", [False, True])
@pytest.mark.parametrize("below", [False, True])
@given(value=st.floats(-10, 20, allow_nan=False) | st.sampled_from([0.0, 10.0]))
def test_a_number_is_in_range_where_the_program_says_so(above, below, value):
    limits = Limits(0, 10, above=above, below=below)
    assert meets(value, number("", limits)) == bool(limits.contain(value))


@pytest.mark.parametrize("value", [-1e300, -1, 0, 2.5, 1e300])
def test_a_number_without_limits_is_any_number(value):
    assert meets(value, number("", Limits()))


def test_a_whole_number_has_no_decimals():
    schema = number("", Limits(0, whole=True))
    assert meets(3, schema)
    assert meets(3.0, schema)
    assert not meets(3.5, schema)


@given(st.text("0123456789.eE+-_ ,x", max_size=8) | st.floats().map(repr))
def test_a_text_is_a_number_where_the_program_reads_one(written):
    assert meets(written, number("", Limits())) == (as_number(written) is not None)


@pytest.mark.parametrize("value", [None, [], {}, [1], True, "", " "])
def test_what_is_no_number_is_refused(value):
    assert not meets(value, number("", Limits()))


@pytest.mark.parametrize("value", ["a", 2030, 1.5, True, " a "])
def test_any_single_value_is_text(value):
    assert meets(value, text(""))


@pytest.mark.parametrize("value", [None, [], {}, "", " \t"])
def test_nothing_is_no_text(value):
    assert not meets(value, text(""))


@pytest.mark.parametrize("value", [12345.6, -5, "12+345.60", "km 12+345.60", "12+345.60@2"])
def test_a_chainage_may_be_a_number_or_written(value):
    assert meets(value, chainage(""))


def test_a_word_that_yaml_takes_for_a_number_is_that_word():
    assert meets(25, choice("", ["25", "none"]))
    assert meets("25", choice("", ["25", "none"]))
    assert not meets(26, choice("", ["25", "none"]))


@pytest.mark.parametrize(
    ("value", "holds"),
    [
        ({"a": "x", "b": 1}, True),
        ({"a": "x"}, False),
        ({"a": "y"}, True),
        ({"a": "y", "b": 1}, False),
        ({"b": 1}, True),
        ({}, True),
    ],
)
def test_a_condition_asks_for_a_key_with_one_word_and_refuses_it_with_others(value, holds):
    then, otherwise = {"required": ["b"]}, {"properties": {"b": False}}
    assert meets(value, if_is("a", "x", then, otherwise)) is holds


def test_limits_are_written_as_whole_numbers_where_they_are():
    schema = number("a length", Limits(0, 1e6), "m")
    assert [repr(schema[key]) for key in ("minimum", "maximum")] == ["0", "1000000"]
    assert schema["description"] == "a length; a number at least 0, at most 1e+06, in m"
    assert "maximum" not in number("", Limits(0.5, math.inf))
