"""What stands on the screen: engineering rounding, with units."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TextIO

from rich.box import SIMPLE_HEAD
from rich.console import Console
from rich.table import Table
from rich.text import Text

LEAST_WIDTHS = {"governed by": 16}
MOST_WIDTHS = {"class": 20, "ground unit": 24}
"""Long names wrap, so that they never squeeze the numbers."""
PAGE_WIDTH = 118
"""Width of what is written to a file or a pipe."""


class Screen(Console):
    """A console that leaves it to the command what a reader who left means for it."""

    def on_broken_pipe(self) -> None:
        raise BrokenPipeError


def console(stream: TextIO | None = None) -> Console:
    """A console that prints names as they are: no markup, no highlighting."""
    screen = Screen(file=stream, markup=False, highlight=False, emoji=False, soft_wrap=False)
    if not screen.is_terminal:
        screen.width = PAGE_WIDTH
    return screen


def table(title: str, *columns: str, right: Sequence[str] = (), wide: Sequence[str] = ()) -> Table:
    """A plain table with a title: `right` columns hold numbers, `wide` ones may wrap."""
    made = Table(
        title=title, title_justify="left", title_style="bold", box=SIMPLE_HEAD, padding=(0, 1, 0, 0)
    )
    for name in columns:
        made.add_column(
            name,
            min_width=LEAST_WIDTHS.get(name),
            max_width=MOST_WIDTHS.get(name),
            justify="right" if name in right else "left",
            no_wrap=name not in wide and name not in MOST_WIDTHS,
            overflow="fold",
        )
    return made


def row(*cells: str) -> list[Text]:
    """Cells that are printed as they are."""
    return [Text(cell) for cell in cells]


def rounded(value: float, digits: int = 3) -> str:
    """A number to a few significant digits, without an exponent where that is readable."""
    if value != value:
        return "-"
    if value == 0:
        return "0"
    if abs(value) >= 1e7 or abs(value) < 1e-4:
        return f"{value:.{digits - 1}e}"
    text = f"{value:.{digits}g}"
    return f"{float(text):.0f}" if "e" in text else text


def metres(value: float) -> str:
    """A chainage or length to the decimetre."""
    return f"{value:.1f}"
