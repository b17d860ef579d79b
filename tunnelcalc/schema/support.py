"""Support classes: every registered kind with the parameters that it declares."""

from __future__ import annotations

from tunnelcalc.inputs.support_classes import INSTALLED_AT, RESERVED_NAMES
from tunnelcalc.plugin.contract import Parameter, SupportKind
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.schema.parts import (
    Schema,
    choice,
    if_is,
    listing,
    needs,
    number,
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
            "elements": listing("support elements of the class", _element(kinds)),
        },
        ["name", "elements"],
        anyOf=[needs(INSTALLED), installed_by_all],
    )
    return listing("support classes, lightest first", one_class, minItems=1)


def _installed(meaning: str) -> Schema:
    return number(meaning, INSTALLED_AT, "m")


def _element(kinds: list[SupportKind]) -> Schema:
    """An element is checked against its own kind alone, so that an editor names its faults."""
    words = choice("kind of support", [kind.name for kind in kinds])
    each = {"allOf": [if_is("kind", kind.name, _kind(kind)) for kind in kinds]} if kinds else {}
    return {"type": "object", "properties": {"kind": words}, "required": ["kind"], **each}


def _kind(kind: SupportKind) -> Schema:
    always = [p.name for p in kind.parameters if p.only_if is None]
    conditions: dict[tuple[str, str], list[str]] = {}
    for parameter in kind.parameters:
        if parameter.only_if is not None:
            conditions.setdefault(parameter.only_if, []).append(parameter.name)
    keys = {
        "kind": {"const": kind.name, "description": kind.meaning},
        INSTALLED: _installed("distance behind the face; instead of that of the class"),
        **{parameter.name: _parameter(parameter) for parameter in kind.parameters},
    }
    more = {"allOf": [_condition(*item) for item in conditions.items()]} if conditions else {}
    return table(kind.meaning, keys, ["kind", *always], **more)


def _condition(only_if: tuple[str, str], names: list[str]) -> Schema:
    """Parameters that are required with one choice and refused with every other."""
    return if_is(*only_if, needs(*names), without(*names))


def _parameter(parameter: Parameter) -> Schema:
    meaning = parameter.meaning
    if parameter.only_if is not None:
        meaning += f"; only if {' is '.join(parameter.only_if)}"
    if parameter.choices:
        return choice(f"{meaning}; {parameter.allowed()}", parameter.choices)
    return number(meaning, parameter.limits, parameter.unit)
