"""The figure of what a parameter of a class does on the sections without an adequate class.

Which section is worst may change with the value, so that the worst is told value by value: a
designer must satisfy all of them. The median and the best show how far the sections lie apart, the
length of tunnel where the class is adequate what a value buys.
"""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

import numpy as np

from tunnelcalc import api
from tunnelcalc_report import page
from tunnelcalc_report.marks import GREY, GROUND, OF_LIMIT, SUPPORT, Line
from tunnelcalc_report.page import number

if TYPE_CHECKING:
    from matplotlib.axes import Axes

WORST, WORST_MARK = Line(GROUND, "-", 2.0), "_"
MEDIAN, MEDIAN_MARK = Line(SUPPORT, (0, (6, 2)), 1.4), "x"
BEST, BEST_MARK = Line(GREY, (0, (2, 1.5)), 1.4), "+"
LENGTH = Line(SUPPORT, "-", 1.6, "o")
NOW = Line(GREY, "-", 1.0)
GOVERNING_MARKS = ("o", "s", "^", "v", "D", "P", "X", "<", ">", "*")
MOST_GOVERNING = len(GOVERNING_MARKS)
LOGARITHMIC = 30.0
"""From so many times the least value, or the limit, on, an axis is logarithmic."""


class Spread(NamedTuple):
    """A quantity over the sections, (k,) each: NaN where no section has it."""

    worst: api.Array
    median: api.Array
    best: api.Array


class ParameterFigure:
    """Three drawings over a parameter: factor of safety, closure, length that is adequate."""

    name = "trade_off"

    def draw(self, trade_off: api.TradeOff, folder: Path) -> Iterable[str]:
        with page.drawing():
            return _drawn(trade_off, folder)


def spread(table: api.Array, worst_is_least: bool) -> Spread:
    """The worst, the median and the best section of each value; `table` is (k, n)."""
    rows = []
    for row in table:
        known = np.sort(row[np.isfinite(row)])
        rows.append([known[0], float(np.median(known)), known[-1]] if known.size else 3 * [np.nan])
    least, median, most = np.array(rows, dtype=float).T
    return Spread(least, median, most) if worst_is_least else Spread(most, median, least)


def governing_at_worst(trade_off: api.TradeOff) -> list[str]:
    """Which check governs where the factor is least, value by value; empty without a factor."""
    names = []
    for factors, governing in zip(trade_off.factor_of_safety, trade_off.governing, strict=True):
        known = np.isfinite(factors)
        at = int(np.argmin(np.where(known, factors, np.inf)))
        names.append(str(governing[at]) if known[at] else "")
    return names


def adequate_m(trade_off: api.TradeOff) -> api.Array:
    """(k,) length of the sections where the class is adequate with a value. [m]"""
    return np.array([np.sum(trade_off.length_m[row]) for row in trade_off.adequate])


def _drawn(trade_off: api.TradeOff, folder: Path) -> tuple[str, ...]:
    of_class = f"Class {trade_off.support_class} with {trade_off.name} varied"
    figure = page.headed(of_class, trade_off.title, _facts(trade_off))
    handles = _handles(trade_off)
    notes = _notes(trade_off)
    bottom, legend_top = page.bottom_above_legend(len(handles), notes)
    grid = figure.add_gridspec(
        3,
        1,
        height_ratios=(1.25, 1, 0.7),
        left=page.LEFT,
        right=page.RIGHT,
        top=page.TOP,
        bottom=bottom,
        hspace=0.24,
    )
    top, middle, low = (figure.add_subplot(grid[row, 0]) for row in range(3))
    _factor(top, trade_off)
    _closure(middle, trade_off)
    _length(low, trade_off)
    for axes in (top, middle, low):
        _across(axes, trade_off)
        axes.tick_params(labelbottom=axes is low)
    unit = f" [{trade_off.unit}]" if trade_off.unit else " [-]"
    low.set_xlabel(trade_off.name + ("" if trade_off.of_words else unit))
    page.legend(figure, handles, legend_top)
    page.note(figure, notes)
    return page.saved(figure, folder, trade_off.file_name)


def _facts(trade_off: api.TradeOff) -> tuple[str, ...]:
    count = trade_off.length_m.size
    sections = "1 section" if count == 1 else f"{count} sections"
    length = f"{number(float(np.sum(trade_off.length_m)))} m"
    return (f"the {sections} without an adequate class, {length}",)


def _positions(trade_off: api.TradeOff) -> api.Array:
    """Where the values stand on their axis; words side by side."""
    if trade_off.of_words:
        return np.arange(len(trade_off.tried), dtype=float)
    return np.array(trade_off.tried, dtype=float)


def _now(trade_off: api.TradeOff) -> float | None:
    if trade_off.of_words:
        return trade_off.tried.index(trade_off.now) if trade_off.now in trade_off.tried else None
    return None if trade_off.now is None else float(trade_off.now)


def _across(axes: Axes, trade_off: api.TradeOff) -> None:
    at = _positions(trade_off)
    now = _now(trade_off)
    if trade_off.of_words:
        axes.set_xticks(at, [str(word) for word in trade_off.tried])
        axes.set_xlim(-0.5, at.size - 0.5)
    else:
        margin = 0.03 * (at[-1] - at[0]) or 1.0
        axes.set_xlim(at[0] - margin, at[-1] + margin)
    if now is not None:
        axes.axvline(now, **NOW.looks(), zorder=1)


def _lines(axes: Axes, trade_off: api.TradeOff, found: Spread) -> None:
    at = _positions(trade_off)
    several = trade_off.length_m.size > 1
    shown = [
        (found.worst, WORST, WORST_MARK),
        (found.median, MEDIAN, MEDIAN_MARK),
        (found.best, BEST, BEST_MARK),
    ]
    for values, line, mark in shown if several else shown[:1]:
        axes.plot(at, values, **_looks(trade_off, line, mark))


def _looks(trade_off: api.TradeOff, line: Line, mark: str) -> dict[str, Any]:
    """A line, or the mark that stands for it where nothing lies between two values."""
    looks = line.looks()
    if trade_off.of_words or len(trade_off.tried) == 1:
        size = {"markersize": 10, "markeredgewidth": line.width}
        looks = {**looks, **size, "linestyle": "none", "marker": mark}
    return looks


def _factor(axes: Axes, trade_off: api.TradeOff) -> None:
    found = spread(trade_off.factor_of_safety, worst_is_least=True)
    _lines(axes, trade_off, found)
    at, governing = _positions(trade_off), np.array(governing_at_worst(trade_off), dtype=object)
    for name, marker in _governing_marks(trade_off):
        here = governing == name
        axes.plot(at[here], found.worst[here], **_governing(marker), zorder=4)
    axes.axhline(trade_off.required_factor, **OF_LIMIT.looks())
    scale = _scaled(axes, [*found, np.array([trade_off.required_factor])])
    page.label_axes(axes, "", "factor of safety [-]", f"least factor of safety of the class{scale}")


def _closure(axes: Axes, trade_off: api.TradeOff) -> None:
    found = spread(trade_off.closure_pct, worst_is_least=False)
    _lines(axes, trade_off, found)
    axes.axhline(trade_off.closure_limit_pct, **OF_LIMIT.looks())
    scale = _scaled(axes, [*found, np.array([trade_off.closure_limit_pct])])
    page.label_axes(axes, "", "closure [% of R]", f"closure of the wall at rest{scale}")


def _length(axes: Axes, trade_off: api.TradeOff) -> None:
    # A section is adequate or not: the length does not change evenly from value to value.
    between = {"linestyle": "none"} if trade_off.of_words else {"drawstyle": "steps-mid"}
    looks = {**LENGTH.looks(), **between}
    axes.plot(_positions(trade_off), adequate_m(trade_off), **looks, clip_on=False, zorder=4)
    whole = float(np.sum(trade_off.length_m))
    axes.axhline(whole, **OF_LIMIT.looks())
    axes.set_ylim(0, 1.12 * whole)
    page.label_axes(axes, "", "length [m]", "length of these sections where the class is adequate")


def _scaled(axes: Axes, values: list[api.Array]) -> str:
    """Make an axis logarithmic where it must hold far different values, and say so."""
    every = np.concatenate(values)
    every = every[np.isfinite(every)]
    if np.min(every) > 0 and np.max(every) > LOGARITHMIC * np.min(every):
        axes.set_yscale("log")
        axes.yaxis.set_major_formatter(lambda value, _: number(float(value)))
        axes.set_ylim(0.7 * np.min(every), 1.4 * np.max(every))
        return ", log scale"
    axes.set_ylim(0, 1.1 * np.max(every))
    return ""


def _governing_marks(trade_off: api.TradeOff) -> list[tuple[str, str]]:
    names = [name for name in dict.fromkeys(governing_at_worst(trade_off)) if name]
    return list(zip(names, GOVERNING_MARKS, strict=False))


def _governing(marker: str) -> dict[str, Any]:
    looks = {"marker": marker, "color": GROUND, "markersize": 5.5, "mfc": "white"}
    return {**looks, "linestyle": "none"}


def _handles(trade_off: api.TradeOff) -> list[Any]:
    """What the lines and marks mean."""
    from matplotlib.lines import Line2D

    def handle(label: str, **looks: Any) -> Any:
        return Line2D([], [], label=label, **looks)

    several = trade_off.length_m.size > 1
    made = [
        handle(
            "worst section at each value" if several else "the section",
            **_looks(trade_off, WORST, WORST_MARK),
        )
    ]
    if several:
        made.append(handle("median of the sections", **_looks(trade_off, MEDIAN, MEDIAN_MARK)))
        made.append(handle("best section at each value", **_looks(trade_off, BEST, BEST_MARK)))
    limits = (
        f"limits: factor {number(trade_off.required_factor)}, closure "
        f"{number(trade_off.closure_limit_pct)} % of R, all the length"
    )
    made.append(handle(limits, **OF_LIMIT.looks()))
    now = _now(trade_off)
    if now is not None:
        told = trade_off.now if isinstance(trade_off.now, str) else number(now)
        unit = f" {trade_off.unit}" if trade_off.unit else ""
        made.append(handle(f"the project now: {told}{unit}", **NOW.looks()))
    where = " at the worst section" if several else ""
    made += [
        handle(f"governs{where}: {name}", **_governing(marker))
        for name, marker in _governing_marks(trade_off)
    ]
    return made


def _notes(trade_off: api.TradeOff) -> list[str]:
    notes = [f"held meanwhile: {', '.join(trade_off.held)}"] if trade_off.held else []
    at, now = _positions(trade_off), _now(trade_off)
    if now is not None and not at[0] <= now <= at[-1]:
        notes.append("the project's value lies outside the range that was tried")
    if trade_off.now is not None and now is None:
        notes.append(f"the project now: {trade_off.now}, which was not tried")
    unknown = int(np.count_nonzero(~trade_off.evaluated))
    if unknown:
        notes.append(f"{unknown} of {trade_off.evaluated.size} trials could not be evaluated")
    names = {name for name in governing_at_worst(trade_off) if name}
    if len(names) > MOST_GOVERNING:
        notes.append("more checks govern than there are marks: see trade_off.csv")
    return notes
