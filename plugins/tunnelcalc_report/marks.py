"""How lines and marks look: told apart by dash and shape first, by colour only besides.

The colours differ in lightness, so that they also differ in grey print, and are told apart by
readers who see no red or green.
"""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass, field
from typing import Any

INK = "#16181d"
GREY = "#70757f"
PALE = "#dfe2e7"
GROUND = "#16181d"
SUPPORT = "#0f4c81"
ATTENTION = "#a63a00"

Dash = str | tuple[float, tuple[float, ...]]


@dataclass(frozen=True, slots=True)
class Line:
    """A line's looks, as matplotlib takes them."""

    color: str
    dash: Dash = "-"
    width: float = 1.4
    marker: str = ""
    more: dict[str, Any] = field(default_factory=dict)

    def looks(self) -> dict[str, Any]:
        return {
            "color": self.color,
            "linestyle": self.dash,
            "linewidth": self.width,
            "marker": self.marker or None,
            "markersize": 5.0,
            "markerfacecolor": "white",
            "markeredgecolor": self.color,
            **self.more,
        }


OF_CASES = (Line(GROUND, "-", 2.2), Line(GROUND, (0, (6, 2)), 1.5))
"""The governing stress case, then the other."""

BEFORE = (Line(GROUND, "-", 0.7), Line(GROUND, (0, (6, 2)), 0.7))
"""The ground without the ring that a class improves, by stress case."""

OF_CLASS = Line(SUPPORT, (0, (8, 2, 2, 2)), 2.0)
OF_LIMIT = Line(ATTENTION, (0, (1, 2)), 1.6)

OF_ELEMENTS = (
    Line("#1f77a8", (0, (4, 2)), 1.3, "o"),
    Line("#8a5a00", (0, (1, 1.5)), 1.5, "s"),
    Line("#5b2a86", (0, (6, 2, 1, 2)), 1.3, "^"),
    Line("#2e6b34", (0, (3, 1, 1, 1, 1, 1)), 1.3, "v"),
    Line("#7a1f3d", "-", 1.0, "D"),
    Line("#4d4d4d", (0, (10, 3)), 1.1, "P"),
)
"""Elements in the order of their class; a seventh begins again."""


def of_element(position: int) -> Line:
    """The looks of an element by its position in the class."""
    return OF_ELEMENTS[position % len(OF_ELEMENTS)]


OF_TURNS = ("<", ">", "p", "h")
"""Where a line turns, in the order of its turns; a fifth begins again."""
AT_CAPACITY = "X"
FEW_MARKERS = 6


def few_points(count: int, marked: Collection[int]) -> list[int]:
    """At which points of a line its markers stand: those that are special, or of a line of which
    only the beginning is, a few."""
    if len(marked) > 1 or count <= FEW_MARKERS:
        return sorted(marked) or list(range(count))
    return list(range(0, count, -(-count // FEW_MARKERS)))
