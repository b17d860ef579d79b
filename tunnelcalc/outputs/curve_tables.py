"""The curves of one section as tables."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from pathlib import Path

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.outputs.cells import number_text, number_texts, write_table
from tunnelcalc.pipeline.plan import WHOLE_CLASS
from tunnelcalc.section_curves import (
    CAPACITY,
    INSTALLED,
    CaseCurves,
    ReactionOfClass,
    ReactionOfElement,
    ReactionOfGround,
    SectionCurves,
    StrengthEnvelope,
)

GROUND_REACTION_HEADER = (
    "stress_case",
    "improved_ring",
    "support_pressure_mpa",
    "supported_closure_mm",
    "supported_closure_pct",
    "supported_plastic_radius_m",
    "point",
)
CLOSURE_PROFILE_HEADER = (
    "stress_case",
    "face_distance_m",
    "profile_closure_mm",
    "closure_share",
    "point",
    "element",
)
SUPPORT_REACTION_HEADER = (
    "stress_case",
    "element",
    "supported_closure_mm",
    "element_pressure_mpa",
    "element_water_mpa",
    "point",
)
STRENGTH_ENVELOPE_HEADER = (
    "strength",
    "minor_stress_mpa",
    "major_stress_mpa",
    "line_major_stress_mpa",
    "line_difference_mpa",
    "line_difference_pct",
    "normal_stress_mpa",
    "shear_stress_mpa",
    "line_shear_stress_mpa",
    "line_shear_difference_mpa",
    "point",
)
THRUST_MOMENT_HEADER = (
    "stress_case",
    "element",
    "springline_angle_deg",
    "lining_thrust_mn_per_m",
    "lining_moment_mnm_per_m",
    "point",
)
FACE, REST = "face", "equilibrium"
UNSUPPORTED, CRITICAL, IN_SITU = "unsupported", "critical", "in_situ"
OTHER = ""

Rows = list[Sequence[str]]
RowsOf = Callable[[CaseCurves, float], Iterator[Sequence[str]]]


def write_curves(folder: Path, curves: SectionCurves) -> tuple[str, ...]:
    """Write every table that has a number to show; returns their names."""
    tables = (
        ("ground_reaction.csv", GROUND_REACTION_HEADER, _each_case(curves, _ground_rows)),
        ("closure_profile.csv", CLOSURE_PROFILE_HEADER, _each_case(curves, _profile_rows)),
        ("support_reaction.csv", SUPPORT_REACTION_HEADER, _each_case(curves, _support_rows)),
        ("thrust_moment.csv", THRUST_MOMENT_HEADER, _each_case(curves, _lining_rows)),
        ("strength_envelope.csv", STRENGTH_ENVELOPE_HEADER, _envelope_rows(curves.envelopes)),
    )
    written = []
    for name, header, rows in tables:
        if rows:
            write_table(folder / name, header, rows)
            written.append(name)
    return tuple(written)


def _each_case(curves: SectionCurves, rows_of: RowsOf) -> Rows:
    return [
        (case.stress_case, *row) for case in curves.cases for row in rows_of(case, curves.radius_m)
    ]


def _ground_rows(case: CaseCurves, radius_m: float) -> Iterator[Sequence[str]]:
    """The ground that the class meets; then, where the class changes it, the ground before."""
    rest = (case.support.rest_pressure_mpa, REST)
    alone = (0.0, UNSUPPORTED)
    if case.before is None:
        yield from _curve_rows(case.ground, radius_m, "no", alone, rest)
    else:
        yield from _curve_rows(case.ground, radius_m, "yes", rest)
        yield from _curve_rows(case.before, radius_m, "no", alone)


def _curve_rows(
    ground: ReactionOfGround, radius_m: float, improved: str, *own: tuple[float, str]
) -> Iterator[Sequence[str]]:
    critical, in_situ = ground.critical_pressure_mpa, ground.in_situ_stress_mpa
    special = (*own, (critical, CRITICAL), (in_situ, IN_SITU))
    if not np.any(np.isfinite(ground.closure_mm)):
        return
    pct = ground.closure_mm / radius_m / 10
    columns = (ground.support_pressure_mpa, ground.closure_mm, pct, ground.plastic_radius_m)
    points = _points(ground.support_pressure_mpa, special)
    names = [improved] * len(points)
    yield from zip(names, *(number_texts(column) for column in columns), points, strict=True)


def _points(values: Array, special: Sequence[tuple[float, str]]) -> list[str]:
    """What is special about each value, joined by a semicolon."""
    return [";".join(name for at, name in special if at == value) for value in values.tolist()]


def _profile_rows(case: CaseCurves, radius_m: float) -> Iterator[Sequence[str]]:
    profile = case.profile
    for distance, closure, share in zip(
        profile.distance_m.tolist(),
        profile.closure_mm.tolist(),
        profile.closure_share.tolist(),
        strict=True,
    ):
        if share != share:
            continue  # ahead of the face not every profile says anything
        here = [e.label for e in case.support.elements if e.installed_at_m == distance]
        names = (*((FACE,) if distance == 0 else ()), *((INSTALLED,) if here else ()))
        numbers = (number_text(value) for value in (distance, closure, share))
        yield (*numbers, ";".join(names), ";".join(here))


def _support_rows(case: CaseCurves, radius_m: float) -> Iterator[Sequence[str]]:
    for element in case.support.elements:
        yield from _element_rows(element, case.support.rest_closure_mm)
    yield from _class_rows(case.support)


def _element_rows(element: ReactionOfElement, rest_closure_mm: float) -> Iterator[Sequence[str]]:
    points = zip(element.closure_mm.tolist(), element.pressure_mpa.tolist(), strict=True)
    rows = [
        (closure, pressure, element.marks.get(position, OTHER))
        for position, (closure, pressure) in enumerate(points)
        if closure == closure
    ]
    if rest_closure_mm == rest_closure_mm and element.rest_pressure_mpa >= 0:
        rows.append((rest_closure_mm, element.rest_pressure_mpa, REST))
    for closure, pressure, name in sorted(rows, key=lambda row: row[:2]):
        numbers = (number_text(value) for value in (closure, pressure, element.water_mpa))
        yield (element.label, *numbers, name)


def _class_rows(support: ReactionOfClass) -> Iterator[Sequence[str]]:
    water = sum(element.water_mpa for element in support.elements)
    rows = [
        (closure, pressure, OTHER)
        for closure, pressure in zip(
            support.closure_mm.tolist(), support.pressure_mpa.tolist(), strict=True
        )
    ]
    if support.rest_closure_mm == support.rest_closure_mm:
        rows.append((support.rest_closure_mm, support.rest_pressure_mpa, REST))
    for closure, pressure, name in sorted(rows, key=lambda row: row[0]):
        numbers = (number_text(value) for value in (closure, pressure, water))
        yield (WHOLE_CLASS, *numbers, name)


def _lining_rows(case: CaseCurves, radius_m: float) -> Iterator[Sequence[str]]:
    """Of each ring its forces by angle, then the limit of its section, a whole turn of it."""
    for ring in case.lining:
        forces = (ring.angle_deg, ring.thrust_mn_per_m, ring.moment_mnm_per_m)
        for angle, *state in zip(*(column.tolist() for column in forces), strict=True):
            if state[0] == state[0]:
                yield (ring.ring, *(number_text(value) for value in (angle, *state)), REST)
        thrust, moment = ring.limit_thrust_mn_per_m, ring.limit_moment_mnm_per_m
        turn = zip([*thrust, *thrust[::-1]], [*moment, *-moment[::-1]], strict=True)
        for pair in turn:
            numbers = (number_text(float(value)) for value in pair)
            yield (ring.ring, OTHER, *numbers, CAPACITY)


def _envelope_rows(envelopes: Sequence[StrengthEnvelope]) -> Rows:
    return [row for envelope in envelopes for row in _rows_of(envelope)]


def _rows_of(envelope: StrengthEnvelope) -> Iterator[Sequence[str]]:
    major, line = envelope.major_stress_mpa, envelope.line_major_stress_mpa
    shear, line_shear = envelope.shear_stress_mpa, envelope.line_shear_stress_mpa
    share = np.divide(line - major, major, out=np.full(major.size, np.nan), where=major > 0)
    # In tension the major stress may pass 0, where a share of it says nothing.
    share = np.where(envelope.minor_stress_mpa >= 0, 100 * share, np.nan)
    columns = (
        envelope.minor_stress_mpa,
        major,
        line,
        line - major,
        share,
        envelope.normal_stress_mpa,
        shear,
        line_shear,
        line_shear - shear,
    )
    points = [envelope.marks.get(index, "") for index in range(major.size)]
    names = [envelope.of] * major.size
    yield from zip(names, *(number_texts(column) for column in columns), points, strict=True)
