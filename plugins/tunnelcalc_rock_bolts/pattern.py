"""Rules on length and spacing of a bolt pattern.

Source: EM 1110-1-2907, Rock Reinforcement, US Army Corps of Engineers (1980), minimum length
and maximum spacing [from memory]. "Spacing not more than half the length" is the same rule as
"length not less than twice the spacing", and is checked once.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Element, Sections
from tunnelcalc_rock_bolts.parts import (
    EM_1110_1_2907,
    FRICTION_BOLTS,
    GROUTED_BOLTS,
    ROCK_BOLTS,
)
from tunnelcalc_rock_bolts.pattern_lines import rule_lines

SPACINGS_IN_LENGTH = 2.0
BLOCK_WIDTHS_IN_LENGTH = 3.0
BLOCK_WIDTHS_IN_SPACING = 1.5
LARGEST_SPACING_M = 2.0
SHORT_SPAN_M, SHORT_SPAN_SHARE = 6.0, 0.5
LONG_SPAN_M, LONG_SPAN_SHARE = 18.0, 0.25
LONGEST_SPAN_M = 30.0

WRITTEN_DECIMALS = 9
"""A nanometre: far finer than any length is written, far coarser than rounding."""

NO_BLOCK_WIDTH = "block_width_m is not given"
BEYOND_SPANS = f"the rule gives no length for spans above {LONGEST_SPAN_M:g} m"


@dataclass(frozen=True, slots=True)
class PatternRule:
    """One rule; `compare` gives what is needed and what is there."""

    name: str
    meaning: str
    compare: Callable[[Sections, Element], api.Evaluation]
    formulas: Callable[[api.SectionValues], tuple[str, str]]
    """of demand and capacity on a calculation sheet"""
    applies_to: tuple[str, ...] = (ROCK_BOLTS, FRICTION_BOLTS, GROUTED_BOLTS)
    unit: str = "m"
    carries_load: bool = False

    def concerns(self, element: Element) -> bool:
        return element.choice("pattern_rules") == EM_1110_1_2907

    def evaluate(self, sections: Sections, element: Element) -> api.Evaluation:
        found = self.compare(sections, element)
        # Three times 0.4 m is not quite 1.2 m in doubles: lengths are compared as written.
        return replace(
            found,
            demand=np.round(found.demand, WRITTEN_DECIMALS),
            capacity=np.round(found.capacity, WRITTEN_DECIMALS),
        )

    def lines(self, values: api.SectionValues, element: Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        return rule_lines(values, element, self.formulas(values), found)


def least_length_by_span_m(span_m: Array) -> Array:
    """Shortest bolt for the span of the opening.

    Parameters
    ----------
    span_m : (n,) width of the opening, 0 to 30. [m]

    Returns
    -------
    (n,) half the span below 6 m, a quarter of it from 18 to 30 m, from 3 to 4.5 m on a straight
    line between; NaN above 30 m. [m]

    Source
    ------
    EM 1110-1-2907 (1980), minimum length [from memory].
    """
    between = (SHORT_SPAN_SHARE * SHORT_SPAN_M, LONG_SPAN_SHARE * LONG_SPAN_M)
    middle = np.interp(span_m, (SHORT_SPAN_M, LONG_SPAN_M), between)
    length = np.where(span_m < SHORT_SPAN_M, SHORT_SPAN_SHARE * span_m, middle)
    length = np.where(span_m > LONG_SPAN_M, LONG_SPAN_SHARE * span_m, length)
    return np.where(span_m > LONGEST_SPAN_M, np.nan, length)


def _wider_spacing(element: Element) -> float:
    return max(element.number("spacing_around_m"), element.number("spacing_along_m"))


def _same(sections: Sections, value: float) -> Array:
    return np.full(sections.count, value)


def _length_by_spacing(sections: Sections, element: Element) -> api.Evaluation:
    needed = SPACINGS_IN_LENGTH * _wider_spacing(element)
    return api.Evaluation(_same(sections, needed), _same(sections, element.number("length_m")))


def _length_by_block(sections: Sections, element: Element) -> api.Evaluation:
    width = sections["block_width_m"]
    return api.Evaluation(
        BLOCK_WIDTHS_IN_LENGTH * width,
        _same(sections, element.number("length_m")),
        np.isnan(width),
        NO_BLOCK_WIDTH,
    )


def _length_by_span(sections: Sections, element: Element) -> api.Evaluation:
    needed = least_length_by_span_m(sections["span_m"])
    there = _same(sections, element.number("length_m"))
    return api.Evaluation(needed, there, np.isnan(needed), BEYOND_SPANS)


def _spacing_by_block(sections: Sections, element: Element) -> api.Evaluation:
    width = sections["block_width_m"]
    return api.Evaluation(
        _same(sections, _wider_spacing(element)),
        BLOCK_WIDTHS_IN_SPACING * width,
        np.isnan(width),
        NO_BLOCK_WIDTH,
    )


def _largest_spacing(sections: Sections, element: Element) -> api.Evaluation:
    return api.Evaluation(
        _same(sections, _wider_spacing(element)), _same(sections, LARGEST_SPACING_M)
    )


def _span_formulas(values: api.SectionValues) -> tuple[str, str]:
    span = float(values["span_m"])
    if span < SHORT_SPAN_M:
        return "0.5*B", "l"
    return ("0.25*B" if span > LONG_SPAN_M else "3 + (B - 6)/(18 - 6)*(4.5 - 3)"), "l"


PATTERN_RULES = (
    PatternRule(
        "pattern_length_by_spacing",
        "twice the spacing against the length; EM 1110-1-2907 (1980) [from memory]",
        _length_by_spacing,
        lambda values: ("2*max(ba, bl)", "l"),
    ),
    PatternRule(
        "pattern_length_by_block",
        "three block widths against the length; EM 1110-1-2907 (1980) [from memory]",
        _length_by_block,
        lambda values: ("3*b", "l"),
    ),
    PatternRule(
        "pattern_length_by_span",
        "length for the span against the length; EM 1110-1-2907 (1980) [from memory]",
        _length_by_span,
        _span_formulas,
    ),
    PatternRule(
        "pattern_spacing_by_block",
        "spacing against one and a half block widths; EM 1110-1-2907 (1980) [from memory]",
        _spacing_by_block,
        lambda values: ("max(ba, bl)", "1.5*b"),
    ),
    PatternRule(
        "pattern_largest_spacing",
        "spacing against 2 m; EM 1110-1-2907 (1980) [from memory]",
        _largest_spacing,
        lambda values: ("max(ba, bl)", ""),
    ),
)
