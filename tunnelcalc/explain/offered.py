"""Lines of what plugins offer: their own where they have any, else the result alone."""

from __future__ import annotations

import math
from collections.abc import Callable, Sequence
from typing import Any

from tunnelcalc.calculation.line import SheetLine
from tunnelcalc.explain.section import ComputedSection
from tunnelcalc.plugin.contract import SectionValues
from tunnelcalc.plugin.method_contract import Method
from tunnelcalc.plugin.registry import describe

Lines = tuple[SheetLine, ...]
Notes = tuple[str, ...]
SAME = 1e-12
"""Of a number: the run and a line say the same thing."""


def plugin_of(section: ComputedSection, sort: str, name: str) -> str:
    """The plugin that offers something."""
    return section.registry.offers[sort, name].source.plugin


def lines_of(
    thing: Any, who: str, call: Callable[[Any], Sequence[SheetLine]], by: str = "lines"
) -> tuple[Lines, Notes]:
    """The lines of a thing, which its method `by` gives, and a note where it has none or fails.

    A stranger's lines cost their own rows, never the sheet.
    """
    if not callable(getattr(thing, by, None)):
        return (), (f"given by {who}, which shows no formula",)
    try:
        found = tuple(call(thing))
    except (Exception, SystemExit) as error:  # a stranger's lines may raise anything
        return (), (f"given by {who}, whose lines failed: {describe(error)}",)
    if not all(isinstance(line, SheetLine) for line in found):
        return (), (f"given by {who}, whose lines are no lines of a sheet",)
    return found, ()


def method_lines(
    section: ComputedSection, step: str, method: Method, values: SectionValues, *more: float
) -> tuple[Lines, Notes]:
    """The lines of a method by name."""
    who = f"plugin {plugin_of(section, step, method.name)}, {method.source}"
    return lines_of(method, who, lambda thing: thing.lines(values, *more))


def last(lines: Sequence[SheetLine], symbol: str) -> float | None:
    """The result of the last line of a symbol; None where there is none."""
    return next((line.result for line in reversed(lines) if line.symbol == symbol), None)


def differ(one: float, other: float) -> bool:
    """Whether two numbers are not the same but for rounding."""
    if one == other or (math.isnan(one) and math.isnan(other)):
        return False
    return not abs(one - other) <= SAME * max(abs(one), abs(other))
