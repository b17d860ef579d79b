"""The figure of a lining: thrust and moment around it, and what its section bears."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tunnelcalc import api
from tunnelcalc_report import page
from tunnelcalc_report.marks import GREY, OF_CASES, OF_LIMIT, PALE
from tunnelcalc_report.page import number

if TYPE_CHECKING:
    from matplotlib.axes import Axes

Shown = Sequence[tuple[api.CaseCurves, api.ThrustAndMoment]]
"""One ring under each in-plane stress."""
COLUMNS = 3
GAP = 0.075
"""Between axes, of the sheet's width or height."""
TITLE = 0.02
"""Height of the title of axes."""


class ThrustMomentFigure:
    """Moment across, thrust up: the forces from springline to crown, within the limit."""

    name = "thrust_moment"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        cases = sorted(curves.cases, key=lambda case: case is not curves.governing)
        rings: dict[str, list[tuple[api.CaseCurves, api.ThrustAndMoment]]] = {}
        for case in cases:
            for ring in case.lining:
                if np.all(np.isfinite(ring.thrust_mn_per_m)):
                    rings.setdefault(ring.ring, []).append((case, ring))
        if not rings:
            return ()
        with page.drawing():
            facts = (f"class {curves.support_class}", "without a factor of safety")
            figure = page.sheet("Thrust and moment of the lining", curves, facts)
            handles = _handles(next(iter(rings.values())))
            bottom, legend_top = page.bottom_above_legend(len(handles))
            places = _places(len(rings), bottom)
            for (name, shown), place in zip(rings.items(), places, strict=True):
                axes = figure.add_axes(place)
                axes.set_title(page.shortened(name, page.LONGEST_LABEL // COLUMNS))
                _draw(axes, shown)
            page.legend(figure, handles, legend_top)
            page.note(figure, _notes(rings))
            return page.saved(figure, folder, self.name)


def _places(count: int, bottom: float) -> list[tuple[float, float, float, float]]:
    """Left, bottom, width and height of the axes, row by row from the top."""
    columns = min(count, COLUMNS)
    rows = -(-count // columns)
    width = (page.RIGHT - page.LEFT - (columns - 1) * GAP) / columns
    top = page.TOP - TITLE
    height = (top - bottom - (rows - 1) * 2 * GAP) / rows
    return [
        (
            page.LEFT + number % columns * (width + GAP),
            top - number // columns * (height + 2 * GAP) - height,
            width,
            height,
        )
        for number in range(count)
    ]


def _draw(axes: Axes, shown: Shown) -> None:
    limit = shown[0][1]
    moments = np.concatenate([limit.limit_moment_mnm_per_m, -limit.limit_moment_mnm_per_m[::-1]])
    thrusts = np.concatenate([limit.limit_thrust_mn_per_m, limit.limit_thrust_mn_per_m[::-1]])
    axes.fill(moments, thrusts, facecolor=PALE, alpha=0.6, linewidth=0)
    axes.plot(moments, thrusts, **OF_LIMIT.looks())
    for (_, lining), line in zip(shown, OF_CASES, strict=False):
        axes.plot(lining.moment_mnm_per_m, lining.thrust_mn_per_m, **line.looks())
        for end, marker in ((0, "s"), (-1, "o")):
            at = lining.moment_mnm_per_m[end], lining.thrust_mn_per_m[end]
            axes.plot(*at, marker=marker, color=line.color, markerfacecolor="white")
    axes.axhline(0, color=GREY, linewidth=0.8)
    axes.axvline(0, color=GREY, linewidth=0.8)
    page.label_axes(axes, "moment M [MN m/m]", "thrust N [MN/m]")


def _handles(shown: Shown) -> list[Any]:
    from matplotlib.lines import Line2D

    handles = [Line2D([], [], **OF_LIMIT.looks(), label="limit of the ring's section")]
    for (case, _), line in zip(shown, OF_CASES, strict=False):
        label = f"forces, {case.stress_case} in-plane stress: square springline, dot crown"
        handles.append(Line2D([], [], **line.looks(), label=label))
    return handles


def _notes(rings: Mapping[str, Shown]) -> list[str]:
    ends = (("springline", 0), ("crown", -1))
    return [
        f"{name}, {place} N {number(float(shown[0][1].thrust_mn_per_m[end]))} MN/m, "
        f"M {number(float(shown[0][1].moment_mnm_per_m[end]))} MN m/m"
        for name, shown in rings.items()
        for place, end in ends
    ]
