"""The rules on a bolt pattern as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc import api

SOURCE = "EM 1110-1-2907 (1980) [from memory]"
LENGTH = "length of the bolt"


def rule_lines(
    values: api.SectionValues,
    element: api.Element,
    formulas: tuple[str, str],
    found: api.Evaluation,
) -> Sequence[api.SheetLine]:
    """What a rule asks for and what is there; formulas are empty for a number as given."""
    work = api.Working(
        {
            "ba": element.number("spacing_around_m"),
            "bl": element.number("spacing_along_m"),
            "l": element.number("length_m"),
            "B": float(values["span_m"]),
            "b": float(values["block_width_m"]),
        }
    )
    if found.left_out is not None and bool(found.left_out[0]):
        return ()
    # Lengths are compared as they are written: the rule rounds them to a nanometre.
    demand, capacity = (f"round({formula}, 9)" if formula else "" for formula in formulas)
    work.add("demand", "what the rule asks for", demand, float(found.demand[0]), "m", SOURCE)
    work.add("capacity", "what it is held against", capacity, float(found.capacity[0]), "m", SOURCE)
    return work.lines
