"""Strength envelopes of one section as data, with the straight line that stands for them."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.curve_points import minor_stresses_mpa
from tunnelcalc.rock_mass import envelope, mohr_coulomb
from tunnelcalc.rock_mass.hoek_brown import tensile_strength_mpa
from tunnelcalc.section_curves import PEAK, RESIDUAL, RING, StrengthEnvelope
from tunnelcalc.sections import Sections

CURVED = {PEAK: "", RESIDUAL: "residual_", RING: "ring_"}
STRAIGHT = {PEAK: "", RESIDUAL: "residual_"}
TENSION_SHARE = 0.25
"""Of the greatest minor stress: a straight criterion knows no tensile strength, and its tip may
lie anywhere. It is shown no further into tension than this."""

TENSION, UNCONFINED, TOP = "tension", "unconfined", "confinement"
LARGEST, LARGEST_RELATIVE = "largest_difference", "largest_relative_difference"


def envelopes(section: Sections) -> tuple[StrengthEnvelope, ...]:
    """The envelopes of a computed section: peak, then residual and of the disturbed ring where
    there are any. A ring as strong as the mass is none."""
    found = []
    peak = _constants(section, CURVED[PEAK])
    for of, prefix in CURVED.items():
        constants = _constants(section, prefix)
        if np.all(np.isfinite(constants)) and not (of == RING and constants == peak):
            found.append(_curved(section, of, *constants))
    if found:
        return tuple(found)
    for of, prefix in STRAIGHT.items():
        line = [_value(section, f"{prefix}{n}") for n in ("cohesion_mpa", "friction_angle_deg")]
        if np.all(np.isfinite(line)):
            found.append(_straight(section, of, *line))
    return tuple(found)


def _constants(section: Sections, prefix: str) -> list[float]:
    return [_value(section, f"{prefix}{name}") for name in ("mb", "s", "a")]


def _value(section: Sections, name: str) -> float:
    return float(section[name][0]) if name in section else np.nan


def _curved(section: Sections, of: str, mb: float, s: float, a: float) -> StrengthEnvelope:
    """Hoek-Brown, from the tensile strength to the upper end of the tunnel's confinement."""
    sci, top = _value(section, "intact_strength_mpa"), _value(section, "confinement_mpa")
    cohesion, friction = np.nan, np.nan
    tip = -float(tensile_strength_mpa(*(np.array([value]) for value in (sci, mb, s)))[0])
    places = {TENSION: tip, UNCONFINED: 0.0, TOP: top}
    if of == PEAK:
        cohesion, friction = _value(section, "cohesion_mpa"), _value(section, "friction_angle_deg")
        error = envelope.line_error(
            *(np.array([v]) for v in (sci, mb, s, a, top, cohesion, friction))
        )
        places[LARGEST] = float(error.minor_stress_mpa[0])
        places[LARGEST_RELATIVE] = float(error.relative_minor_stress_mpa[0])
    minor = minor_stresses_mpa(tip, top, tuple(places.values()))
    major = envelope.principal_envelope(minor, sci, mb, s, a)
    gradient = envelope.hoek_brown_gradient(minor, sci, mb, s, a)
    normal, shear = envelope.normal_and_shear(minor, major, gradient)
    return StrengthEnvelope(
        of,
        True,
        top,
        cohesion,
        friction,
        minor,
        major,
        normal,
        shear,
        _line_major(minor, cohesion, friction),
        _line_shear(normal, cohesion, friction),
        _marks(minor, places),
    )


def _straight(section: Sections, of: str, cohesion: float, friction: float) -> StrengthEnvelope:
    """Mohr-Coulomb, up to the in-situ stress: no minor stress around the opening is larger."""
    top = _value(section, "in_situ_stress_mpa")
    tangent = np.tan(np.radians(friction))
    tip = -cohesion / tangent if tangent > 0 else -np.inf
    least = max(tip, -TENSION_SHARE * top)
    places = {TENSION: tip, UNCONFINED: 0.0, TOP: top}
    minor = minor_stresses_mpa(least, top, tuple(places.values()))
    major = _line_major(minor, cohesion, friction)
    gradient = mohr_coulomb.slope(np.full(minor.size, friction))
    normal, shear = envelope.normal_and_shear(minor, major, gradient)
    marks = _marks(minor, places)
    return StrengthEnvelope(
        of, False, top, cohesion, friction, minor, major, normal, shear, major, shear, marks
    )


def _line_major(minor_mpa: Array, cohesion_mpa: float, friction_deg: float) -> Array:
    """The straight line in principal stresses, straight beyond its own tip too, as its error is
    told. [MPa]"""
    line = (np.full(minor_mpa.size, value) for value in (cohesion_mpa, friction_deg))
    cohesion, friction = line
    start = mohr_coulomb.unconfined_strength_mpa(cohesion, friction)
    return start + mohr_coulomb.slope(friction) * minor_mpa


def _line_shear(normal_mpa: Array, cohesion_mpa: float, friction_deg: float) -> Array:
    """The straight line at normal stresses; NaN beyond its tip. [MPa]"""
    cohesion, friction = (np.full(normal_mpa.size, value) for value in (cohesion_mpa, friction_deg))
    return mohr_coulomb.shear_strength_mpa(normal_mpa, cohesion, friction)


def _marks(minor_mpa: Array, places: Mapping[str, float]) -> dict[int, str]:
    """What is special about single points."""
    marks: dict[int, str] = {}
    for name, place in places.items():
        for index in np.flatnonzero(minor_mpa == place).tolist():
            marks[index] = f"{marks[index]};{name}" if index in marks else name
    return marks
