"""The ground of a project: its tables, and how values are taken from them."""

from __future__ import annotations

from tunnelcalc.inputs.estimates import ESTIMATED, source_names
from tunnelcalc.inputs.ground import SECTION_LENGTH
from tunnelcalc.inputs.unit_values import CAUTIOUS, RULES, VALUE_SETS
from tunnelcalc.project import DRAINAGE
from tunnelcalc.schema.parts import (
    NOT_BLANK,
    Schema,
    chainage,
    choice,
    if_is,
    listing,
    needs,
    number,
    path,
    table,
    text,
)


def ground() -> Schema:
    """The keys under `ground`."""
    keys = {
        "table": path("the ground table, one row an interval; of a workbook FILE#SHEET"),
        "units": path("properties by ground unit; a cell of the ground table overrides"),
        "section_length_m": number("sections are no longer than this", SECTION_LENGTH, "m"),
        "gaps": _gaps(),
        "other_columns": listing("columns that are carried along as they are", text("a column")),
        "aliases": {
            "description": "columns of the tables that have another name: NAME IN THE FILE: name",
            "type": "object",
            "propertyNames": {"pattern": NOT_BLANK},
            "additionalProperties": text("the name that the program knows"),
        },
        "drainage": choice(
            "what becomes of ground water at the lining; stated, stresses are effective", DRAINAGE
        ),
        "terrain": path("levels of the terrain, with chainage_m and level_m"),
        "water_table": path("levels of the water table, with chainage_m and level_m"),
        "layers": path("ground units above the opening"),
        "tests": path("triaxial and uniaxial tests by ground unit"),
        "estimates": _estimates(),
        "values": choice("which values of the ground units are used", VALUE_SETS),
        "cautious_rule": choice("how a cautious value follows from statistics", RULES),
    }
    stated = if_is("values", CAUTIOUS, needs("cautious_rule"))
    return table("the ground along the alignment", keys, ["table"], **stated)


def _gaps() -> Schema:
    keys = {
        "from_m": chainage("start of the gap"),
        "to_m": chainage("end of the gap"),
        "reason": text("why there is no ground data"),
    }
    gap = table("a declared gap", keys, ["from_m", "to_m", "reason"])
    return listing("stretches without ground data", gap)


def _estimates() -> Schema:
    meaning = "order of preference of the sources of {}, the preferred one first"
    keys = {
        name: listing(
            meaning.format(name), choice("a source", source_names(name)), uniqueItems=True
        )
        for name in ESTIMATED
    }
    return table("which source is taken where several are given", keys)
