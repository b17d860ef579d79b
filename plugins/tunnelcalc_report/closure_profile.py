"""The figure of the closure along the drive, with the places of installation."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tunnelcalc import api
from tunnelcalc_report import page
from tunnelcalc_report.marks import GREY, OF_CASES, PALE, of_element
from tunnelcalc_report.page import megapascals, millimetres, number, per_cent

if TYPE_CHECKING:
    from matplotlib.axes import Axes

TITLE = "Closure along the drive"
WHY_NOT = (
    "The closure without support cannot be computed. So there is no closure along the drive to "
    "draw, and none at which support is installed."
)
LEAST_RADII, MOST_RADII = 8.0, 30.0
AHEAD_RADII = 2.5
AHEAD_SHARE = 0.16
NEARLY_ALL = 0.95
MOST_OF_INSTALLED = 12.0
"""How far the figure goes, as a multiple of the closure where the last element is installed."""


class ClosureProfileFigure:
    """Closure without support against the distance from the face."""

    name = "closure_profile"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        with page.drawing():
            if np.any(np.isfinite(curves.governing.profile.closure_mm)):
                return _drawn(curves, folder)
            facts = (f"radius R {number(curves.radius_m)} m", curves.methods["closure_profile"])
            return page.instead(TITLE, curves, facts, WHY_NOT, folder, self.name)


def _drawn(curves: api.SectionCurves, folder: Path) -> tuple[str, ...]:
    case = curves.governing
    facts = (
        f"radius R {number(curves.radius_m)} m",
        f"plastic radius {number(float(case.ground.plastic_radius_m[0]))} m",
        f"closure far behind the face {millimetres(case.ground.free_closure_mm)}",
        curves.methods["closure_profile"],
    )
    figure = page.sheet(TITLE, curves, facts)
    handles = _handles(curves)
    bottom, legend_top = page.bottom_above_legend(len(handles))
    axes = figure.add_axes((page.LEFT, bottom, 0.94 - page.LEFT, page.TOP - bottom))
    notes = _profile(axes, curves)
    page.legend(figure, handles, legend_top)
    page.note(figure, ("closure without support", *notes))
    return page.saved(figure, folder, "closure_profile")


def _cases(curves: api.SectionCurves) -> list[tuple[api.CaseCurves, Any]]:
    others = [case for case in curves.cases if case is not curves.governing]
    return list(zip([curves.governing, *others], OF_CASES, strict=False))


def _profile(axes: Axes, curves: api.SectionCurves) -> list[str]:
    case, right = curves.governing, _furthest_m(curves)
    ahead = max(AHEAD_RADII * curves.radius_m, AHEAD_SHARE * right)
    left = max(-ahead, float(case.profile.distance_m[0]))
    axes.axvspan(left, 0, facecolor=PALE, hatch="//", edgecolor="white", linewidth=0)
    axes.axvline(0, color=GREY, linewidth=1.2)
    highest = 0.0
    for other, line in _cases(curves):
        profile = other.profile
        axes.plot(profile.distance_m, profile.closure_mm, **line.looks())
        shown = profile.closure_mm[(profile.distance_m <= right) & np.isfinite(profile.closure_mm)]
        highest = max(highest, *shown)
    for position, element in enumerate(case.support.elements):
        looks = {**of_element(position).looks(), "markersize": 8, "markeredgewidth": 1.6}
        at = element.installed_at_m, element.installation_closure_mm
        axes.plot([at[0], at[0], left], [0, at[1], at[1]], **{**looks, "marker": None}, zorder=2)
        axes.plot([at[0]], [at[1]], **{**looks, "linestyle": "none"}, zorder=5 - 0.1 * position)
    top = 1.06 * highest if highest > 0 else 1.0
    axes.set_xlim(left, right)
    axes.set_ylim(0, top)
    page.label_axes(axes, "distance from the face x [m], positive behind it", "closure u [mm]")
    axes.text(
        0.5 * left,
        0.96 * top,
        "ground ahead",
        ha="center",
        va="top",
        fontsize=8,
        bbox={"facecolor": "white", "edgecolor": "none", "pad": 2},
    )
    final = case.ground.free_closure_mm
    if final > 0:
        # The same curve read as a share: one scale a figure, two ways to read it.
        share = axes.secondary_yaxis("right", functions=_shares_of(final))
        of = f", {case.stress_case} stress" if len(curves.cases) > 1 else ""
        share.set_ylabel(f"share of the closure far behind the face [%]{of}")
    reached = _share_at(case.profile, right)
    if reached < NEARLY_ALL:
        return [f"at the edge of the figure {per_cent(reached)} has taken place"]
    return []


def _shares_of(final_mm: float) -> Any:
    """From closure to its share in per cent, and back."""
    return lambda closure: closure / final_mm * 100, lambda share: share * final_mm / 100


def _furthest_m(curves: api.SectionCurves) -> float:
    """Where the figure ends: where next to all has happened, or what can be read."""
    profile, radius = curves.governing.profile, curves.radius_m
    near_all = profile.distance_m[profile.closure_share >= NEARLY_ALL]
    end = float(near_all[0]) if near_all.size else np.inf
    elements = curves.governing.support.elements
    installed = max((element.installed_at_m for element in elements), default=0.0)
    moved = max((element.installation_closure_mm for element in elements), default=np.inf)
    end = max(min(1.15 * end, MOST_RADII * radius), LEAST_RADII * radius)
    # Closure may be without bound: what has happened at installation must still be read.
    within = profile.distance_m[profile.closure_mm <= MOST_OF_INSTALLED * moved]
    end = min(end, float(within[-1])) if within.size else end
    return min(max(end, 1.3 * installed), float(profile.distance_m[-1]))


def _share_at(profile: api.ClosureAlongDrive, distance_m: float) -> float:
    known = np.isfinite(profile.closure_share)
    return float(np.interp(distance_m, profile.distance_m[known], profile.closure_share[known]))


def _handles(curves: api.SectionCurves) -> list[Any]:
    from matplotlib.lines import Line2D

    made = [
        Line2D(
            [],
            [],
            label=f"{case.stress_case} stress p0 {megapascals(case.ground.in_situ_stress_mpa)}: "
            f"{millimetres(case.ground.free_closure_mm)} far behind the face, "
            f"{per_cent(_share_at(case.profile, 0.0))} at the face",
            **line.looks(),
        )
        for case, line in _cases(curves)
    ]
    case = curves.governing
    for position, element in enumerate(case.support.elements):
        share = element.installation_closure_mm / case.ground.free_closure_mm
        label = (
            f"{element.label}: {number(element.installed_at_m)} m behind the face, "
            f"{millimetres(element.installation_closure_mm)}, {per_cent(share)}"
        )
        made.append(Line2D([], [], label=label, **of_element(position).looks()))
    return made
