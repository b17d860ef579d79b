"""Pieces of a JSON Schema, as the program reads YAML: by text, so that `2e9` and `"5.2"` are
numbers and a number may be a name.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from typing import Any

from tunnelcalc.text import as_number
from tunnelcalc.vocabulary import Limits

Schema = dict[str, Any]

NUMBER_TEXT = r"^\s*[+-]?([0-9]+\.?[0-9]*|\.[0-9]+)([eE][+-]?[0-9]+)?\s*$"
NOT_BLANK = r"\S"
NOTHING = False
"""The schema that no value meets."""


def text(meaning: str) -> Schema:
    """Text in one line that is not blank."""
    types = ["string", "number", "boolean"]
    return {"description": meaning, "type": types, "pattern": NOT_BLANK}


def path(meaning: str) -> Schema:
    """The path of a table."""
    return text(f"{meaning}; a path inside the project folder, relative to it")


def chainage(meaning: str) -> Schema:
    """A chainage as it is written on the alignment."""
    return {
        "description": f"{meaning}; 12345.6 or 12+345.60",
        "type": ["number", "string"],
        "pattern": "[0-9]",
    }


def number(meaning: str, limits: Limits, unit: str = "") -> Schema:
    """A number within limits, in a unit that the description names."""
    found: Schema = {
        "description": f"{meaning}; {limits.describe(unit)}",
        "type": ["number", "string"],
        "pattern": NUMBER_TEXT,
    }
    if math.isfinite(limits.minimum):
        found["exclusiveMinimum" if limits.above else "minimum"] = _plain(limits.minimum)
    if math.isfinite(limits.maximum):
        found["exclusiveMaximum" if limits.below else "maximum"] = _plain(limits.maximum)
    if limits.whole:
        found["multipleOf"] = 1
    return found


def _plain(value: float) -> float | int:
    return int(value) if value == int(value) else value


def choice(meaning: str, words: Sequence[str]) -> Schema:
    """One of several words; YAML may take a word for a number."""
    numbers = [_plain(value) for value in map(as_number, words) if value is not None]
    truths = [{"true": True, "false": False}[word] for word in words if word in ("true", "false")]
    return {"description": meaning, "enum": [*words, *numbers, *truths]}


def listing(meaning: str, items: Schema, **more: Any) -> Schema:
    """A list."""
    return {"description": meaning, "type": "array", "items": items, **more}


def table(
    meaning: str, keys: Mapping[str, Schema | bool], required: Sequence[str] = (), **more: Any
) -> Schema:
    """Keys with values; a key that is not named is refused."""
    found: Schema = {"description": meaning, "type": "object", "properties": dict(keys)}
    if required:
        found["required"] = list(required)
    return {**found, "additionalProperties": False, **more}


def if_any_of(keys: Sequence[str], then: Schema, otherwise: Schema) -> Schema:
    """What holds where one of the keys stands, and what where none does."""
    return {"if": {"anyOf": [needs(key) for key in keys]}, "then": then, "else": otherwise}


def if_is(key: str, word: str, then: Schema, otherwise: Schema | None = None) -> Schema:
    """What holds where a key says this word, and what where it says another."""
    said = {"properties": {key: {"enum": choice("", [word])["enum"]}}}
    found: Schema = {"if": {**said, **needs(key)}, "then": then}
    if otherwise is not None:
        found["else"] = {"if": needs(key), "then": otherwise}
    return found


def needs(*keys: str) -> Schema:
    """These keys must stand."""
    return {"required": list(keys)}


def without(*keys: str) -> Schema:
    """These keys must not stand."""
    return {"properties": dict.fromkeys(keys, NOTHING)}
