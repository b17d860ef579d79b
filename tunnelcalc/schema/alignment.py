"""The opening and the chainage of an alignment."""

from __future__ import annotations

from tunnelcalc.chainage import KM_PLUS_M, METRES
from tunnelcalc.inputs.level_tables import AXIS, CROWN
from tunnelcalc.inputs.notation import ASCENDING, DESCENDING
from tunnelcalc.inputs.opening import AREA, DIMENSION, RULES
from tunnelcalc.schema.parts import (
    Schema,
    chainage,
    choice,
    if_any_of,
    if_is,
    listing,
    needs,
    number,
    path,
    table,
    text,
    without,
)
from tunnelcalc.vocabulary import QUANTITIES

SPANNED = ("span_m", "height_m", "area_m2", "equivalent_radius")
PROFILES = "profiles"


def opening() -> Schema:
    """One profile, or a list of profiles, with the levels of the axis."""
    keys = {
        **_shape_keys(),
        PROFILES: _profiles(),
        "axis": table(
            "levels along the alignment, from which cover and water head follow",
            {
                "table": path("table with chainage_m and level_m"),
                "level_of": choice("which line the levels describe", (AXIS, CROWN)),
            },
            ["table", "level_of"],
        ),
    }
    single = without("radius_m", *SPANNED)
    one = table("the opening", keys, **if_any_of([PROFILES], single, _one_shape()))
    return {
        "description": "the opening: one profile, or a list of profiles",
        "type": ["object", "array"],
        "if": {"type": "array"},
        "then": _profiles(),
        "else": one,
    }


def _profiles() -> Schema:
    keys = {
        "name": text("a name of its own"),
        "from_m": chainage("start of the profile"),
        "to_m": chainage("end of the profile"),
        **_shape_keys(),
    }
    one = table("a profile", keys, ["name", "from_m", "to_m"], **_one_shape())
    return listing("profiles by chainage; their limits cut sections", one, minItems=1)


def _shape_keys() -> dict[str, Schema]:
    radius = QUANTITIES["radius_m"]
    return {
        "radius_m": number(radius.meaning, radius.limits, radius.unit),
        "span_m": number("width of an opening that is no circle", DIMENSION, "m"),
        "height_m": number("height of an opening that is no circle", DIMENSION, "m"),
        "area_m2": number("area of an opening that is no circle", AREA, "m2"),
        "equivalent_radius": choice("rule for the radius of the circle that stands for it", RULES),
    }


def _one_shape() -> Schema:
    """A radius, or all that an opening needs which is no circle."""
    spanned = {**needs(*SPANNED), **without("radius_m")}
    return if_any_of(SPANNED, spanned, needs("radius_m"))


def chainage_notation() -> Schema:
    """How chainage is written on the alignment."""
    equation = table(
        "where two chainages meet",
        {
            "back": chainage("chainage of what lies behind"),
            "ahead": chainage("chainage of what follows"),
        },
        ["back", "ahead"],
    )
    return table(
        "how chainage is written; without it in metres, ascending",
        {
            "notation": choice("plain metres, or kilometres+metres", (METRES, KM_PLUS_M)),
            "prefix": text("text before a chainage"),
            "direction": choice("whether chainage grows along the axis", (ASCENDING, DESCENDING)),
            "start": chainage("chainage at which the axis begins; required where it descends"),
            "equations": listing("chainage equations, along the axis", equation),
        },
        **if_is("direction", DESCENDING, needs("start")),
    )
