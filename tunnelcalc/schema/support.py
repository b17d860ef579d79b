"""Support classes: every registered kind with the parameters that it declares."""

from __future__ import annotations

from collections.abc import Mapping

from tunnelcalc.inputs.support_classes import ADVANCE, INSTALLED_AT, RESERVED_NAMES
from tunnelcalc.inputs.word_tables import SOURCE
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.schema.parts import (
    Schema,
    choice,
    if_is,
    listing,
    needs,
    number,
    path,
    table,
    text,
    without,
)

INSTALLED = "installed_at_m"


def support_classes(registry: Registry) -> Schema:
    """The list of classes."""
    kinds = [registry.support_kind(name) for name in registry.names("support_kind")]
    name = text("a name of its own; not " + " or ".join(RESERVED_NAMES))
    name["not"] = {"enum": list(RESERVED_NAMES)}
    installed_by_all = {"properties": {"elements": {"items": needs(INSTALLED)}}}
    one_class = table(
        "a support class",
        {
            "name": name,
            INSTALLED: _installed("distance behind the face at which the elements are installed"),
            "advance_m_per_day": number(
                "rate at which the face moves on; required where an element hardens with age",
                ADVANCE,
                "m/day",
            ),
            "elements": listing("support elements of the class", _element(kinds)),
        },
        ["name", "elements"],
        anyOf=[needs(INSTALLED), installed_by_all],
    )
    return listing("support classes, lightest first", one_class, minItems=1)


def word_tables(registry: Registry) -> Schema:
    """The tables that give words of choices a meaning, by kind and parameter."""
    kinds = {}
    for name in registry.names("support_kind"):
        found = {
            p.name: path(_columns(p.words_from.word_column, p.words_from.states))
            for p in registry.support_kind(name).parameters
            if p.words_from is not None
        }
        if found:
            kinds[name] = table(f"tables for {name}", found)
    return table("tables of the project's own words for parameters of support kinds", kinds)


def _columns(word_column: str, states: tuple[str, ...]) -> str:
    return f"table with the columns {', '.join((word_column, *states))} and perhaps {SOURCE}"


def _installed(meaning: str) -> Schema:
    return number(meaning, INSTALLED_AT, "m")


def _element(kinds: list[SupportKind]) -> Schema:
    """An element is checked against its own kind alone, so that an editor names its faults."""
    words = choice("kind of support", [kind.name for kind in kinds])
    each = {"allOf": [if_is("kind", kind.name, _kind(kind)) for kind in kinds]} if kinds else {}
    return {"type": "object", "properties": {"kind": words}, "required": ["kind"], **each}


def _kind(kind: SupportKind) -> Schema:
    always = [p.name for p in kind.parameters if p.only_if is None and not p.default]
    conditions: dict[tuple[str, tuple[str, ...]], list[str]] = {}
    for parameter in kind.parameters:
        if parameter.only_if is not None and not parameter.default:
            conditions.setdefault(parameter.only_if, []).append(parameter.name)
    keys = {
        "kind": {"const": kind.name, "description": kind.meaning},
        INSTALLED: _installed("distance behind the face; instead of that of the class"),
        **{parameter.name: parameter_schema(parameter) for parameter in kind.parameters},
    }
    unsaid = {parameter.name: parameter.default for parameter in kind.parameters}
    more = {"allOf": [_condition(item, names, unsaid) for item, names in conditions.items()]}
    more = more if conditions else {}
    return table(kind.meaning, keys, ["kind", *always], **more)


def _condition(
    only_if: tuple[str, tuple[str, ...]], names: list[str], unsaid: Mapping[str, str]
) -> Schema:
    """Parameters that are required with some choices and refused with every other; where the
    choice is not stated, its default is meant."""
    key, words = only_if
    chosen = {"properties": {key: {"enum": choice("", words)["enum"]}}}
    if unsaid.get(key) not in words:
        chosen |= needs(key)
    refused = without(*names) if unsaid.get(key) else {"if": needs(key), "then": without(*names)}
    return {"if": chosen, "then": needs(*names), "else": refused}


def parameter_schema(parameter: Parameter) -> Schema:
    """The value of a parameter."""
    meaning = parameter.meaning
    if parameter.only_if is not None:
        key, words = parameter.only_if
        meaning += f"; only if {key} is {' or '.join(words)}"
    if parameter.default:
        meaning += f"; without it {parameter.default}"
    if parameter.words_from is not None:
        words = choice("", parameter.choices)["enum"]
        meaning += f"; or a {parameter.words_from.word_column} of the project's table, under tables"
        return {"description": meaning, "anyOf": [{"enum": words}, text("")]}
    if parameter.choices:
        return choice(f"{meaning}; {parameter.allowed()}", parameter.choices)
    return number(meaning, parameter.limits, parameter.unit)
