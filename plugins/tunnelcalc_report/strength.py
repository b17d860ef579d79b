"""The figures of the strength of the ground: principal stresses, and shear against normal."""

from __future__ import annotations

from collections.abc import Iterable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from tunnelcalc import api
from tunnelcalc_report import page
from tunnelcalc_report.marks import ATTENTION, GREY, GROUND, PALE, SUPPORT, Line
from tunnelcalc_report.page import number

if TYPE_CHECKING:
    from matplotlib.axes import Axes

LOOKS = {
    "peak": Line(GROUND, "-", 2.2),
    "residual": Line("#8a5a00", (0, (1, 1.5)), 1.8),
    "ring": Line("#5b2a86", (0, (6, 2, 1, 2)), 1.5),
}
OF_LINE = Line(SUPPORT, (0, (6, 3)), 1.5)
OF_CIRCLES = Line(GREY, "-", 0.9)
NAMES = {
    "peak": "strength of the mass",
    "residual": "residual strength",
    "ring": "strength of the disturbed ring",
}
UNKNOWN = (
    "Neither the constants of a curved criterion nor cohesion and friction angle are known here. "
    "So there is no strength to draw."
)


class StrengthEnvelopeFigure:
    """Major against minor stress at failure, and the straight line over the tunnel's range."""

    name = "strength_envelope"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        return _draw(curves, folder, self.name, "Strength in principal stresses", _principal)


class ShearStrengthFigure:
    """Shear against normal stress on the plane of failure, with circles of stress."""

    name = "shear_strength"

    def draw(self, curves: api.SectionCurves, folder: Path) -> Iterable[str]:
        return _draw(curves, folder, self.name, "Shear strength", _shear)


def _draw(
    curves: api.SectionCurves, folder: Path, name: str, what: str, drawing: Any
) -> tuple[str, ...]:
    shown = [e for e in curves.envelopes if np.any(np.isfinite(e.major_stress_mpa))]
    method = curves.methods["strength"]
    with page.drawing():
        if not shown:
            return page.instead(what, curves, (method,), UNKNOWN, folder, name)
        facts = (method, *_facts(shown[0]))
        if drawing is _shear and not any(_resists_shear(envelope) for envelope in shown):
            return page.instead(what, curves, facts, _without_shear(shown[0]), folder, name)
        figure = page.sheet(what, curves, facts)
        handles = _handles(shown, with_circles=drawing is _shear)
        bottom, legend_top = page.bottom_above_legend(len(handles))
        axes = figure.add_axes((page.LEFT, bottom, page.RIGHT - page.LEFT, page.TOP - bottom))
        drawing(axes, shown)
        page.legend(figure, handles, legend_top)
        page.note(figure, _notes(shown[0]))
        return page.saved(figure, folder, name)


def _resists_shear(envelope: api.StrengthEnvelope) -> bool:
    return bool(np.any(envelope.shear_stress_mpa > 0))


def _without_shear(envelope: api.StrengthEnvelope) -> str:
    line = "" if envelope.curved else f", with {_line(envelope)}"
    return f"The ground has no shear strength at any stress{line}. So there is nothing to draw."


def _facts(envelope: api.StrengthEnvelope) -> tuple[str, ...]:
    top = f"confinement range to s3max {number(envelope.confinement_mpa)} MPa"
    return (top,) if envelope.curved else (f"shown to the in-situ stress {top.split()[-2]} MPa",)


def _notes(envelope: api.StrengthEnvelope) -> list[str]:
    if not envelope.curved:
        notes = ["the criterion is a straight line and knows no tensile strength"]
        return notes if _resists_shear(envelope) else [*notes, "the ground has no shear strength"]
    difference = envelope.line_major_stress_mpa - envelope.major_stress_mpa
    notes = []
    for index, marks in envelope.marks.items():
        at = f"at s3 = {number(float(envelope.minor_stress_mpa[index]))} MPa"
        if "largest_difference" in marks.split(";"):
            notes.append(
                "major stress by the straight line less the criterion: largest "
                f"{difference[index]:+.3g} MPa {at}"
            )
        if "largest_relative_difference" in marks.split(";"):
            share = 100 * difference[index] / envelope.major_stress_mpa[index]
            notes.append(f"from s3 = 0 largest {share:+.3g} % {at}")
    return notes


def _principal(axes: Axes, envelopes: list[api.StrengthEnvelope]) -> None:
    first = envelopes[0]
    axes.axvspan(0, first.confinement_mpa, facecolor=PALE, alpha=0.6, linewidth=0)
    for envelope in envelopes:
        axes.plot(
            envelope.minor_stress_mpa, envelope.major_stress_mpa, **LOOKS[envelope.of].looks()
        )
    if first.curved:
        axes.plot(first.minor_stress_mpa, first.line_major_stress_mpa, **OF_LINE.looks())
    _mark_differences(axes, first, first.minor_stress_mpa, first.major_stress_mpa)
    least = min(float(envelope.minor_stress_mpa[0]) for envelope in envelopes)
    width = first.confinement_mpa - least
    axes.set_xlim(least - 0.04 * width, first.confinement_mpa + 0.04 * width)
    axes.axhline(0, color=GREY, linewidth=0.8)
    axes.axvline(0, color=GREY, linewidth=0.8)
    page.label_axes(axes, "minor stress s3 [MPa]", "major stress at failure s1 [MPa]")


def _shear(axes: Axes, envelopes: list[api.StrengthEnvelope]) -> None:
    first = envelopes[0]
    within = first.minor_stress_mpa >= 0
    normal = first.normal_stress_mpa
    axes.axvspan(
        float(normal[within][0]), float(normal[-1]), facecolor=PALE, alpha=0.6, linewidth=0
    )
    for index in _circles(first):
        _circle(axes, float(first.minor_stress_mpa[index]), float(first.major_stress_mpa[index]))
    for envelope in envelopes:
        axes.plot(
            envelope.normal_stress_mpa, envelope.shear_stress_mpa, **LOOKS[envelope.of].looks()
        )
    if first.curved:
        axes.plot(normal, first.line_shear_stress_mpa, **OF_LINE.looks())
    axes.axvline(0, color=GREY, linewidth=0.8)
    top = 1.1 * max(
        float(np.nanmax(first.shear_stress_mpa)), float(np.nanmax(first.line_shear_stress_mpa))
    )
    low = min(float(envelope.normal_stress_mpa[0]) for envelope in envelopes)
    high = max(float(envelope.normal_stress_mpa[-1]) for envelope in envelopes)
    low, high = low - 0.04 * (high - low), high + 0.1 * (high - low)
    # One scale on both axes: a circle of stress is then round.
    width, height = axes.get_window_extent().size
    if (high - low) / top < width / height:
        high = low + top * width / height
    else:
        top = (high - low) * height / width
    axes.set_xlim(low, high)
    axes.set_ylim(0, top)
    page.label_axes(axes, "normal stress sn [MPa]", "shear stress at failure tau [MPa]")


def _circles(envelope: api.StrengthEnvelope) -> list[int]:
    """Points whose circle of stress is drawn: unconfined, half the range, the whole range."""
    half = int(np.argmin(np.abs(envelope.minor_stress_mpa - 0.5 * envelope.confinement_mpa)))
    zero = int(np.argmin(np.abs(envelope.minor_stress_mpa)))
    return [zero, half, envelope.minor_stress_mpa.size - 1]


def _circle(axes: Axes, minor: float, major: float) -> None:
    angle = np.linspace(0, np.pi, 181)
    middle, radius = 0.5 * (major + minor), 0.5 * (major - minor)
    axes.plot(middle + radius * np.cos(angle), radius * np.sin(angle), **OF_CIRCLES.looks())


def _mark_differences(
    axes: Axes, envelope: api.StrengthEnvelope, across: api.Array, up: api.Array
) -> None:
    for index, marks in envelope.marks.items():
        if any(mark.startswith("largest") for mark in marks.split(";")):
            axes.plot([across[index]], [up[index]], **_difference())


def _difference() -> dict[str, Any]:
    return {"marker": "x", "color": ATTENTION, "markersize": 7, "mew": 1.8, "linestyle": "none"}


def _line(envelope: api.StrengthEnvelope) -> str:
    cohesion, friction = envelope.cohesion_mpa, envelope.friction_angle_deg
    return f"cohesion {number(cohesion)} MPa, friction angle {number(friction)} deg"


def _handles(envelopes: list[api.StrengthEnvelope], with_circles: bool) -> list[Any]:
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    first = envelopes[0]
    made: list[Any] = [
        Line2D([], [], label=NAMES[envelope.of], **LOOKS[envelope.of].looks())
        for envelope in envelopes
    ]
    if first.curved:
        label = f"equivalent straight line: {_line(first)}"
        made.append(Line2D([], [], label=label, **OF_LINE.looks()))
    else:
        for handle, envelope in zip(made, envelopes, strict=True):
            handle.set_label(f"{NAMES[envelope.of]}: {_line(envelope)}")
    upper = "s3max" if first.curved else "the in-situ stress"
    made.append(Patch(label=f"minor stresses from 0 to {upper}", fc=PALE, ec=GREY, lw=0.5))
    if with_circles:
        made.append(
            Line2D(
                [],
                [],
                label="circles of stress at failure: s3 = 0, half and all of the range",
                **OF_CIRCLES.looks(),
            )
        )
    elif first.curved:
        made.append(Line2D([], [], label="largest differences, see note", **_difference()))
    return made
