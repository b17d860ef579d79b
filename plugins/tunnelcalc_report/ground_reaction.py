"""The figure of ground reaction, support reaction and their equilibrium."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from tunnelcalc import api
from tunnelcalc_report import page
from tunnelcalc_report.ground_legend import (
    cases_of,
    critical_looks,
    handles,
    rest_looks,
    turn_looks,
    turns_of,
)
from tunnelcalc_report.marks import BEFORE, GREY, OF_CLASS, OF_LIMIT, few_points, of_element
from tunnelcalc_report.page import megapascals, millimetres, number
from tunnelcalc_report.views import (
    BELOW_ZERO,
    MOST_PLASTIC,
    View,
    capacity_pressure_mpa,
    enlarged,
    whole,
)

if TYPE_CHECKING:
    from matplotlib.axes import Axes

TITLE = "Ground and support"
CLOSURE = "closure of the wall u [mm]"
ABSURD_M = 1e5
PRESSURE = "support pressure p [MPa]"


class GroundReactionFigure:
    """Three drawings: ground and support enlarged, the whole curve, the plastic radius."""

    name = "ground_reaction"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        with page.drawing():
            if any(_is_curve(case.ground) for case in curves.cases):
                return _drawn(curves, folder)
            what, facts, name = TITLE, _facts(curves), self.name
            return page.instead(what, curves, facts, _why_not(curves), folder, name)


def _is_curve(ground: api.ReactionOfGround) -> bool:
    """Whether there is more than the one point without closure, at the in-situ stress."""
    return int(np.count_nonzero(np.isfinite(ground.closure_mm))) > 1


def _why_not(curves: api.SectionCurves) -> str:
    told = " and ".join(megapascals(case.ground.in_situ_stress_mpa) for case in curves.cases)
    return (
        f"No closure of the wall can be computed under any support pressure below the in-situ "
        f"stress of {told}. So there is no ground reaction to draw, and no equilibrium of ground "
        "and support."
    )


def _facts(curves: api.SectionCurves) -> tuple[str, ...]:
    return (
        f"class {curves.support_class}",
        f"radius R {number(curves.radius_m)} m",
        curves.methods["ground_reaction"],
        f"deformation modulus by {curves.methods['deformation_modulus']}",
    )


def _drawn(curves: api.SectionCurves, folder: Path) -> tuple[str, ...]:
    figure = page.sheet(TITLE, curves, _facts(curves))
    view, all_of_it = enlarged(curves), whole(curves)
    entries = handles(curves)
    notes = [*_notes(curves, view, all_of_it), *_notes_on_plastic_radius(curves)]
    bottom, legend_top = page.bottom_above_legend(len(entries), notes)
    grid = figure.add_gridspec(
        2,
        2,
        width_ratios=(1.75, 1),
        left=page.LEFT,
        right=page.RIGHT,
        top=page.TOP,
        bottom=bottom,
        wspace=0.2,
        hspace=0.42,
    )
    main, top, low = (figure.add_subplot(cell) for cell in (grid[:, 0], grid[0, 1], grid[1, 1]))
    _ground_and_support(main, curves, view)
    _whole_curve(top, curves, all_of_it, view)
    _plastic_radius(low, curves)
    page.legend(figure, entries, legend_top)
    page.note(figure, notes)
    return page.saved(figure, folder, "ground_reaction")


def _ground_and_support(axes: Axes, curves: api.SectionCurves, view: View) -> None:
    _grounds(axes, curves)
    support = curves.governing.support
    for position, element in enumerate(support.elements):
        line, turns = element.line_to(support.rest_closure_mm), turns_of(element)
        at = [one for one in few_points(line[0].size, element.marks) if one not in turns]
        axes.plot(*line, **of_element(position).looks(), markevery=at)
        for point, (_, marker) in turns.items():
            place = [element.closure_mm[point]], [element.pressure_mpa[point]]
            axes.plot(*place, **turn_looks(position, marker), zorder=4)
    if len(support.elements) > 1:
        axes.plot(support.closure_mm, support.pressure_mpa, **OF_CLASS.looks())
    axes.axvline(curves.closure_limit_mm, **OF_LIMIT.looks())
    _mark_states(axes, curves)
    axes.set_xlim(view.left, view.right)
    _set_pressures(axes, view.top)
    title = "enlarged where they meet" if view != whole(curves) else ""
    page.label_axes(axes, CLOSURE, PRESSURE, title)


def _grounds(axes: Axes, curves: api.SectionCurves) -> None:
    """The ground that the class meets, and thin, where the class changes it, as it was before."""
    for (case, line), thin in zip(cases_of(curves), BEFORE, strict=False):
        axes.plot(case.ground.closure_mm, case.ground.support_pressure_mpa, **line.looks())
        if case.before is not None:
            axes.plot(case.before.closure_mm, case.before.support_pressure_mpa, **thin.looks())


def _set_pressures(axes: Axes, top: float) -> None:
    axes.set_ylim(-BELOW_ZERO * top, top)
    axes.axhline(0, color=GREY, linewidth=0.8, zorder=1)


def _mark_states(axes: Axes, curves: api.SectionCurves) -> None:
    for case in curves.cases:
        ground, support = case.ground, case.support
        if ground.critical_pressure_mpa > 0:
            at = ground.critical_pressure_mpa
            closure = np.interp(at, ground.support_pressure_mpa, ground.closure_mm)
            axes.plot([closure], [at], **critical_looks())
        filled = case is curves.governing
        axes.plot(
            [support.rest_closure_mm], [support.rest_pressure_mpa], **rest_looks(filled), zorder=5
        )


def _whole_curve(axes: Axes, curves: api.SectionCurves, view: View, within: View) -> None:
    from matplotlib.patches import Rectangle

    _grounds(axes, curves)
    axes.axvline(curves.closure_limit_mm, **OF_LIMIT.looks())
    _mark_states(axes, curves)
    title = "whole curve"
    if within != view:
        size = within.right - within.left, within.top
        axes.add_patch(Rectangle((within.left, 0), *size, fill=False, ec=GREY, lw=0.8, ls="--"))
        title = "whole curve (frame: part at left)"
    axes.locator_params(axis="x", nbins=5)
    axes.set_xlim(0, view.right)
    _set_pressures(axes, view.top)
    page.label_axes(axes, CLOSURE, PRESSURE, title)


def _plastic_radius(axes: Axes, curves: api.SectionCurves) -> None:
    """Draw it against the pressure."""
    radius, top = curves.radius_m, 0.0
    for case, line in cases_of(curves):
        ground = case.ground
        axes.plot(ground.plastic_radius_m, ground.support_pressure_mpa, **line.looks())
        top = max(top, ground.in_situ_stress_mpa)
        filled = case is curves.governing
        at_rest = case.support.rest_plastic_radius_m, case.support.rest_pressure_mpa
        axes.plot(*([value] for value in at_rest), **rest_looks(filled), zorder=5)
    right = min(_largest_plastic_m(curves), MOST_PLASTIC * radius)
    axes.set_xlim(0.95 * radius, radius + 1.08 * max(right - radius, 0.25 * radius))
    _set_pressures(axes, 1.04 * top)
    title = f"plastic radius (wall: {number(radius)} m)"
    page.label_axes(axes, "plastic radius Rp [m]", PRESSURE, title)


def _largest_plastic_m(curves: api.SectionCurves) -> float:
    largest = curves.radius_m
    for case in curves.cases:
        plastic = case.ground.plastic_radius_m
        largest = max(largest, *plastic[np.isfinite(plastic)].tolist())
    return largest


def _notes_on_plastic_radius(curves: api.SectionCurves) -> list[str]:
    largest = _largest_plastic_m(curves)
    if any(np.any(np.isinf(case.ground.plastic_radius_m)) for case in curves.cases):
        return ["without support the plastic zone has no end"]
    if largest > MOST_PLASTIC * curves.radius_m:
        told = f"{number(largest)} m" if largest < ABSURD_M else "more than 100 km"
        return [f"the plastic radius without support, {told}, is beyond its axis"]
    return []


def _notes(curves: api.SectionCurves, view: View, all_of_it: View) -> list[str]:
    notes = []
    support = curves.governing.support
    free = [case.alone.free_closure_mm for case in curves.cases]
    if any(value != value for value in free):
        notes.append("closure without support cannot be computed")
    elif max(free) > all_of_it.right:
        told = " and ".join(f"{millimetres(value)}" for value in free)
        notes.append(f"closure without support, {told}, is beyond the axis")
    if view.left > 0:
        notes.append(f"the closure axis at left begins at {millimetres(view.left)}")
    notes += _beyond_the_axes(curves, view)
    if len(curves.cases) > 1 and support.elements:
        notes.append(f"lines of elements are those of the {curves.governing_case} stress")
    water = sum(element.water_mpa for element in support.elements)
    if water > 0:
        notes.append(f"water on the rings, {number(water)} MPa, is not in these lines")
    notes += [
        f"{element.label} is beyond its capacity at rest"
        for element in support.elements
        if element.rest_pressure_mpa + element.water_mpa > element.capacity_mpa
    ]
    if support.rest_closure_mm != support.rest_closure_mm:
        notes.append("no equilibrium can be computed")
    return notes


def _beyond_the_axes(curves: api.SectionCurves, view: View) -> list[str]:
    """By name, all that has a line or a mark, and not its place, in the enlarged drawing."""
    support, limit = curves.governing.support, curves.closure_limit_mm
    notes = []
    if limit > view.right:
        notes.append("the closure limit is beyond the axis at left")
    elif limit < view.left:
        notes.append("the closure limit lies before the axis at left")
    late = [e.label for e in support.elements if e.installation_closure_mm > view.right]
    if late:
        notes.append(f"installed beyond the closure axis at left: {', '.join(late)}")
    strong = [
        element.label
        for element in support.elements
        if element.label not in late
        and (element.capacity_mpa > view.top or element.capacity_closure_mm > view.right)
    ]
    if len(support.elements) > 1 and (
        capacity_pressure_mpa(support) > view.top or support.first_capacity_closure_mm > view.right
    ):
        strong.append("all elements together")
    if strong:
        notes.append(f"capacity beyond the axes at left: {', '.join(strong)}")
    others = [case for case in curves.cases if case is not curves.governing]
    for case in others:
        rest = case.support.rest_closure_mm, case.support.rest_pressure_mpa
        if rest[0] < view.left or rest[0] > view.right or rest[1] > view.top:
            notes.append(
                f"the equilibrium of the {case.stress_case} stress is off the axes at left"
            )
    return notes
