"""YAML as text with places: no value is guessed, no key is lost."""

from __future__ import annotations

import pytest

from tunnelcalc.errors import Problems
from tunnelcalc.inputs.yaml_tree import Listing, Scalar, Table, Tree, parse


def told(text: str) -> list[str]:
    problems = Problems()
    parse("p.yaml", text, problems)
    return [str(problem) for problem in problems]


def tree(text: str) -> Tree:
    problems = Problems()
    found = parse("p.yaml", text, problems)
    assert list(problems) == []
    assert found is not None
    return found


@pytest.mark.parametrize("text", ["no", "1:20", "2e9", "0o17", "2024-01-01", "1_000", "=", ".inf"])
def test_a_value_keeps_its_text(text: str):
    found = tree(f"key: {text}")
    assert isinstance(found, Table)
    value = found.entries["key"][1]
    assert isinstance(value, Scalar)
    assert value.text == text


@pytest.mark.parametrize("text", ["", "~", "null"])
def test_nothing_is_an_empty_text(text: str):
    found = tree(f"key: {text}")
    assert isinstance(found, Table)
    value = found.entries["key"][1]
    assert isinstance(value, Scalar)
    assert value.text == ""


def test_every_value_has_its_line_and_column():
    found = tree("a:\n  - b: 1\n    c: [x, y]\n")
    assert isinstance(found, Table)
    where, items = found.entries["a"]
    assert str(where) == "p.yaml:1:1"
    assert isinstance(items, Listing)
    entry = items.items[0]
    assert isinstance(entry, Table)
    assert str(entry.entries["c"][0]) == "p.yaml:3:5"
    listing = entry.entries["c"][1]
    assert isinstance(listing, Listing)
    assert [str(item.where) for item in listing.items] == ["p.yaml:3:9", "p.yaml:3:12"]


@pytest.mark.parametrize(
    ("text", "problem"),
    [
        pytest.param("a: 1\na: 2", 'p.yaml:2:1: key "a" stands twice, first in line 1', id="twice"),
        pytest.param(
            'a: 1\n"a": 2', 'p.yaml:2:1: key "a" stands twice, first in line 1', id="quoted-twice"
        ),
        pytest.param("? [a]\n: 1", "p.yaml:1:3: is not a plain key", id="key-is-a-list"),
        pytest.param("a: &x {b: 1}\nc:\n  <<: *x", "p.yaml:3:3: is not a plain key", id="merge"),
        pytest.param(
            "a:\n\t- b",
            "p.yaml:2:1: is indented with a tab, which YAML does not allow",
            id="tab",
        ),
        pytest.param(
            "a: 1\nb: x\x07",
            "p.yaml:2: is not YAML: it holds the control character \\x07",
            id="bell",
        ),
        pytest.param(
            "a: 1\n---\nb: 2",
            "p.yaml:2:1: is not YAML: a second document begins here",
            id="two-documents",
        ),
        pytest.param(
            "a: *b", "p.yaml:1:4: is not YAML: found undefined alias 'b'", id="undefined-alias"
        ),
        pytest.param(
            'a: "\\UFFFFFFFF"',
            "p.yaml: is not YAML: an escape or a number in it has no meaning",
            id="escape",
        ),
        pytest.param("&a [*a]", "p.yaml:1:1: is nested too deeply", id="list-inside-itself"),
        pytest.param("", "p.yaml: is empty", id="empty"),
    ],
)
def test_what_cannot_be_meant_is_told(text: str, problem: str):
    first, *others = told(text)
    assert first.splitlines()[0] == problem
    assert others == []


def test_an_alias_may_repeat_a_value():
    found = tree("a: &x {b: 1}\nc: *x")
    assert isinstance(found, Table)
    assert found.entries["c"][1] == found.entries["a"][1]


def test_only_what_is_too_large_is_told_and_no_key_is_called_missing():
    problems = Problems()
    assert parse("p.yaml", "a: " + "[" * 45 + "]" * 45 + "\nb: 1", problems) is None
    assert len(problems) == 1
