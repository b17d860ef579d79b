"""project.yaml as a whole."""

from __future__ import annotations

import json

from tunnelcalc.inputs.method_choices import BY_UNIT
from tunnelcalc.inputs.project_file import TRUE, YES_OR_NO
from tunnelcalc.plugin.contract import ClassCheckWithOptions
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import DEFAULT_METHODS
from tunnelcalc.schema.alignment import chainage_notation, opening
from tunnelcalc.schema.flags import flags
from tunnelcalc.schema.ground import ground
from tunnelcalc.schema.parts import (
    NOT_BLANK,
    Schema,
    choice,
    listing,
    needs,
    number,
    table,
    text,
    without,
)
from tunnelcalc.schema.support import parameter_schema, support_classes, word_tables
from tunnelcalc.vocabulary import Limits

DIALECT = "https://json-schema.org/draft/2020-12/schema"
SCHEMA_ID = "urn:tunnelcalc:project"
REQUIRED = ("title", "opening", "ground", "support_classes", "criteria", "schedule")
METHOD_MEANINGS = {
    "strength": "strength of the rock mass",
    "deformation_modulus": "deformation modulus of the rock mass",
    "ground_reaction": "law of the ground around the opening",
    "closure_profile": "closure along the drive, near the face",
}


def project_schema(registry: Registry) -> Schema:
    """The schema, for the plugins that are installed."""
    keys = {
        "title": text("title of the project"),
        "opening": opening(),
        "chainage": chainage_notation(),
        "ground": ground(),
        "methods": _methods(registry),
        "plugins": _plugins(registry),
        "tables": word_tables(registry),
        "support_classes": support_classes(registry),
        "criteria": _criteria(registry),
        "schedule": _schedule(),
        "flags": flags(registry),
    }
    head = {"$schema": DIALECT, "$id": SCHEMA_ID, "title": "project.yaml of tunnelcalc"}
    return {**head, **table("a project of tunnelcalc", keys, REQUIRED)}


def schema_text(registry: Registry) -> str:
    """The schema as the text of a file."""
    return json.dumps(project_schema(registry), indent=2) + "\n"


def _methods(registry: Registry) -> Schema:
    keys = {}
    for step, default in DEFAULT_METHODS.items():
        meaning = METHOD_MEANINGS.get(step, step)
        names = registry.names(step)
        one = choice(f"{meaning}; without it {default}", names)
        units = {
            "description": "the method of single ground units: GROUND UNIT: method",
            "type": "object",
            "propertyNames": {"pattern": NOT_BLANK},
            "additionalProperties": choice("a method", names),
        }
        by_unit = table(
            f"{meaning}, by ground unit",
            {
                "default": choice(f"for all other ground; without it {default}", names),
                BY_UNIT: units,
            },
            [BY_UNIT],
        )
        keys[step] = {"if": {"type": "object"}, "then": by_unit, "else": one}
    return table("methods by name", keys)


def _plugins(registry: Registry) -> Schema:
    names = sorted(source.plugin for source in registry.sources)
    meaning = "further installed plugins whose checks, flags and reports take part"
    return listing(meaning, choice("an installed plugin", names))


def _criteria(registry: Registry) -> Schema:
    keys = {
        "factor_of_safety": number("least factor of safety of any load check", Limits(1, 10)),
        "closure_pct": number(
            "largest supported closure, per cent of the radius", Limits(0, 100, above=True), "%"
        ),
    }
    required = list(keys)
    conditions = []
    for offer in registry.of_sort("class_check"):
        check = offer.thing
        if check.by_choice:
            meaning = f"whether a class must pass {offer.name}: {check.meaning}"
            keys[offer.name] = choice(meaning, YES_OR_NO)
        if isinstance(check, ClassCheckWithOptions):
            keys |= {option.name: parameter_schema(option) for option in check.options}
            asked = [option.name for option in check.options if not option.default]
            all_names = [option.name for option in check.options]
            chosen = {"properties": {check.name: {"enum": choice("", TRUE)["enum"]}}}
            if_chosen = {**chosen, **needs(check.name)}
            conditions.append({"if": if_chosen, "then": needs(*asked), "else": without(*all_names)})
    more = {"allOf": conditions} if conditions else {}
    return table("what makes a class adequate", keys, required, **more)


def _schedule() -> Schema:
    length = Limits(0, 1e5)
    keys = {
        "minimum_zone_m": number("shortest zone; 0 switches the rule off", length, "m"),
        "carry_m": number(
            "length by which a heavier class is carried into lighter ground, both sides; 0 "
            "switches the rule off",
            length,
            "m",
        ),
    }
    return table("how sections become zones", keys, list(keys))
