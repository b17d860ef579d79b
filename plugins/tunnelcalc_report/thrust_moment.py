"""The figure of a lining: thrust and moment around it, and what its section bears."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
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


class ThrustMomentFigure:
    """Moment across, thrust up: the forces from springline to crown, within the limit."""

    name = "thrust_moment"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        cases = sorted(curves.cases, key=lambda case: case is not curves.governing)
        shown = [
            (case, case.lining)
            for case in cases
            if case.lining is not None and np.all(np.isfinite(case.lining.thrust_mn_per_m))
        ]
        if not shown:
            return ()
        with page.drawing():
            facts = (f"class {curves.support_class}", "without a factor of safety")
            figure = page.sheet("Thrust and moment of the lining", curves, facts)
            handles = _handles(shown)
            bottom, legend_top = page.bottom_above_legend(len(handles))
            axes = figure.add_axes((page.LEFT, bottom, page.RIGHT - page.LEFT, page.TOP - bottom))
            _draw(axes, shown)
            page.legend(figure, handles, legend_top)
            page.note(figure, _notes(shown))
            return page.saved(figure, folder, self.name)


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

    handles = [Line2D([], [], **OF_LIMIT.looks(), label="limit of the composite section")]
    for (case, _), line in zip(shown, OF_CASES, strict=False):
        label = f"forces at rest, {case.stress_case} in-plane stress: square springline, dot crown"
        handles.append(Line2D([], [], **line.looks(), label=label))
    return handles


def _notes(shown: Shown) -> list[str]:
    lining = shown[0][1]
    ends = (("springline", 0), ("crown", -1))
    return [
        f"{place} N {number(float(lining.thrust_mn_per_m[end]))} MN/m, "
        f"M {number(float(lining.moment_mnm_per_m[end]))} MN m/m"
        for place, end in ends
    ]
