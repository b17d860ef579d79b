"""What lines and marks of the figure of ground and support mean, with their numbers."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

import numpy as np

from tunnelcalc import api
from tunnelcalc_report.marks import (
    AT_CAPACITY,
    ATTENTION,
    BEFORE,
    GROUND,
    OF_CASES,
    OF_CLASS,
    OF_LIMIT,
    OF_TURNS,
    SUPPORT,
    of_element,
)
from tunnelcalc_report.page import megapascals, millimetres, number


def handles(curves: api.SectionCurves) -> list[Any]:
    """The entries of the legend."""
    return [
        *_of_ground(curves),
        *_of_states(curves),
        *_of_elements(curves.governing.support),
        _handle(_limit(curves), **{**OF_LIMIT.looks(), "color": ATTENTION}),
    ]


def cases_of(curves: api.SectionCurves) -> list[tuple[api.CaseCurves, Any]]:
    """The governing stress case first, each with its looks."""
    others = [case for case in curves.cases if case is not curves.governing]
    return list(zip([curves.governing, *others], OF_CASES, strict=False))


def turns_of(element: api.ReactionOfElement) -> dict[int, tuple[str, str]]:
    """Names and marks of the points at which a line turns; a spring has none but its capacity,
    which its own marker shows."""
    names = {
        point: ", ".join(name for name in told.split(";") if name != api.INSTALLED)
        for point, told in sorted(element.marks.items())
    }
    known = {point: name for point, name in names.items() if name}
    if api.BEYOND in known.values():
        return {}
    markers = iter(OF_TURNS * len(known))
    return {
        point: (name.replace("_", " "), AT_CAPACITY if api.CAPACITY in name else next(markers))
        for point, name in known.items()
    }


def turn_looks(position: int, marker: str) -> dict[str, Any]:
    """The mark of a turn, filled: the line's own markers are open."""
    color = of_element(position).color
    return {"marker": marker, "color": color, "markersize": 8, "linestyle": "none"}


def critical_looks() -> dict[str, Any]:
    """The mark of the critical pressure."""
    return {"marker": "o", "color": GROUND, "markersize": 7, "mfc": "white", "linestyle": "none"}


def rest_looks(filled: bool) -> dict[str, Any]:
    """The mark of an equilibrium, filled for the governing stress case."""
    face = SUPPORT if filled else "white"
    return {"marker": "D", "color": SUPPORT, "markersize": 8, "mfc": face, "linestyle": "none"}


def _handle(label: str, **looks: Any) -> Any:
    from matplotlib.lines import Line2D

    return Line2D([], [], label=label, **looks)


def _of_ground(curves: api.SectionCurves) -> Iterator[Any]:
    for case, line in cases_of(curves):
        ground = case.ground
        name = f"ground, {case.stress_case} stress p0 {megapascals(ground.in_situ_stress_mpa)}"
        how = "alone" if case.before is None else "with the improved ring"
        yield _handle(f"{name}: {millimetres(ground.free_closure_mm)} {how}", **line.looks())
    for (case, _), thin in zip(cases_of(curves), BEFORE, strict=False):
        if case.before is not None:
            name = f"ground without the ring, {case.stress_case} stress"
            free = millimetres(case.before.free_closure_mm)
            yield _handle(f"{name}: {free} alone", **thin.looks())
    pressures = [case.ground.critical_pressure_mpa for case, _ in cases_of(curves)]
    if any(value > 0 for value in pressures):
        told = " and ".join(number(value) for value in pressures)
        yield _handle(f"critical pressure {told} MPa: ground yields below", **critical_looks())


def _of_states(curves: api.SectionCurves) -> Iterator[Any]:
    for case, _ in cases_of(curves):
        filled, support = case is curves.governing, case.support
        rest, moved = support.rest_pressure_mpa, support.rest_closure_mm
        state = f"{megapascals(rest)}, {millimetres(moved)}" if moved == moved else "unknown"
        which = f", {case.stress_case} stress" if len(curves.cases) > 1 else ""
        yield _handle(f"equilibrium{which}: {state}", **rest_looks(filled))


def _of_elements(support: api.ReactionOfClass) -> Iterator[Any]:
    for position, element in enumerate(support.elements):
        if not np.any(np.isfinite(element.closure_mm)) and element.rest_pressure_mpa == 0:
            start = millimetres(element.installation_closure_mm)
            told = f"{element.label}: from {start}, carries nothing at the wall: no line"
            yield _handle(told, linestyle="none")
            continue
        yield _handle(_of_element(element), **of_element(position).looks())
        for point, (name, marker) in turns_of(element).items():
            at = millimetres(element.closure_mm[point]), megapascals(element.pressure_mpa[point])
            label = f"{element.label}: {name} at {', '.join(at)}"
            yield _handle(label, **turn_looks(position, marker))
    if len(support.elements) > 1:
        yield _handle("all elements together", **OF_CLASS.looks())


def _limit(curves: api.SectionCurves) -> str:
    limit = f"{millimetres(curves.closure_limit_mm)}, {number(curves.closure_limit_pct)} % of R"
    return f"closure limit {limit}"


def _of_element(element: api.ReactionOfElement) -> str:
    return (
        f"{element.label}: from {millimetres(element.installation_closure_mm)}, capacity "
        f"{megapascals(element.capacity_mpa)}, at rest {megapascals(element.rest_pressure_mpa)}"
    )
