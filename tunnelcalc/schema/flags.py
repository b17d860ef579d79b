"""What a project says of the flags on validity."""

from __future__ import annotations

from tunnelcalc.inputs.flag_settings import NOT_ASSESSED, ORIGIN, OVERRIDES, THRESHOLDS, editable
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.schema.parts import Schema, chainage, choice, listing, needs, number, table, text
from tunnelcalc.validity import NOT_ASSESSED_RULES
from tunnelcalc.vocabulary import UNLIMITED


def flags(registry: Registry) -> Schema:
    """The keys under `flags`."""
    offered: list[ValidityFlag] = [offer.thing for offer in registry.of_sort("validity_flag")]
    keys = {
        NOT_ASSESSED: choice(
            f"as which level not_assessed counts; without it {NOT_ASSESSED_RULES[0]}",
            NOT_ASSESSED_RULES,
        ),
        THRESHOLDS: table(
            "thresholds of this project in place of those of a flag",
            {flag.name: _thresholds(flag) for flag in offered if editable(flag)},
        ),
        OVERRIDES: _overrides([flag.name for flag in offered]),
    }
    return table("flags on validity", keys)


def _thresholds(flag: ValidityFlag) -> Schema:
    sides = editable(flag)
    keys = {
        key: number(f"{flag.quantity}; without it {threshold.value:.6g}", UNLIMITED, flag.unit)
        for key, threshold in sides.items()
    }
    origin = text("where the values come from")
    stated = [needs(key) for key in sides]
    return table(flag.meaning, {**keys, ORIGIN: origin}, anyOf=stated)


def _overrides(names: list[str]) -> Schema:
    keys = {
        "flag": choice("the flag that is accepted", names),
        "from_m": chainage("start"),
        "to_m": chainage("end; sections that lie wholly between are overridden"),
        "person": text("who accepts the flag"),
        "reason": text("why"),
    }
    one = table("a flag accepted by a person on a stretch", keys, list(keys))
    return listing("flags that a person accepts, with name and reason", one)
