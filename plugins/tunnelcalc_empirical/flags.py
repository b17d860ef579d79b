"""Flags where support by rock mass classification is more than the scheduled class has.

They raise a question with both numbers. They never pass or fail a class.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace

import numpy as np

from tunnelcalc.api import (
    PRACTICE,
    Array,
    Condition,
    Flag,
    Level,
    NumberOfFlag,
    Project,
    Sections,
    Side,
    SupportClass,
    Threshold,
)
from tunnelcalc_empirical.formulas import (
    q_bolt_length_m,
    q_support_pressure_mpa,
    rmr_support_pressure_mpa,
)

BARTON = "Barton, Lien & Lunde (1974)"
UNAL = "Unal (1983) [from memory]"
CAPACITY, SCHEDULED = "class_capacity_mpa", "scheduled_class"
LENGTH = "length_m"
"""Parameter by which kinds of bolts state their length."""
MORE = (Threshold(Level.ADVISORY, Side.ABOVE, 0, PRACTICE),)
REMEDY = "find out which of the two leaves something out; the classes are chosen without it"


def of_scheduled(by_class: Array, sections: Sections) -> Array:
    """(n,) a value of each class (n, c), or (c,), for the class that is scheduled; else NaN."""
    number = sections[SCHEDULED].astype(int)
    table = np.broadcast_to(by_class, (sections.count, np.shape(by_class)[-1]))
    if not table.shape[1]:
        return np.full(sections.count, np.nan)
    found = table[np.arange(sections.count), np.maximum(number, 0)]
    return np.where(number >= 0, found, np.nan)


def scheduled_capacity_mpa(sections: Sections) -> Array:
    """(n,) capacity of all elements of the scheduled class together. [MPa]"""
    return of_scheduled(sections[CAPACITY], sections)


def _is_scheduled(sections: Sections) -> Array:
    return sections[SCHEDULED] >= 0


def _q_pressure_mpa(sections: Sections) -> Array:
    return q_support_pressure_mpa(
        sections["q"], sections["joint_set_number"], sections["joint_roughness_number"]
    )


def _rmr_pressure_mpa(sections: Sections) -> Array:
    return rmr_support_pressure_mpa(
        sections["rmr89"], sections["unit_weight_kn_m3"], sections["span_m"]
    )


def _q_length_m(sections: Sections) -> Array:
    return q_bolt_length_m(sections["span_m"], sections["excavation_support_ratio"])


def _of_pressure(
    name: str, system: str, source: str, needs: tuple[str, ...], pressure: Callable[..., Array]
) -> Flag:
    return Flag(
        name,
        f"{system} asks for more support pressure than the scheduled class has capacity: {source}",
        REMEDY,
        f"support pressure by {system}, less the capacity of the scheduled class",
        "MPa",
        MORE,
        needs,
        lambda sections: pressure(sections) - scheduled_capacity_mpa(sections),
        may_be_missing=(CAPACITY, SCHEDULED),
        applies=Condition("a class is scheduled", _is_scheduled),
        numbers=(
            NumberOfFlag(f"support pressure by {system}", "MPa", pressure),
            NumberOfFlag("capacity of the class", "MPa", scheduled_capacity_mpa),
        ),
    )


def longest_bolts_m(classes: tuple[SupportClass, ...]) -> Array:
    """(c,) length of the longest bolts of each class; NaN without any. [m]"""
    lengths = [
        [element.number(LENGTH) for element in one.elements if LENGTH in element.values]
        for one in classes
    ]
    return np.array([max(of_class, default=np.nan) for of_class in lengths])


def bolt_length_of(project: Project) -> Flag:
    """The flag on the length of bolts, with the lengths of a project's classes."""
    return _of_length(longest_bolts_m(project.support_classes))


def _of_length(by_class_m: Array) -> Flag:
    def length(sections: Sections) -> Array:
        return of_scheduled(by_class_m, sections)

    flag = Flag(
        "q_bolt_length",
        f"bolts of the scheduled class are shorter than the Q system asks for: {BARTON}",
        REMEDY,
        "length of bolts by the Q system, less that of the longest of the scheduled class",
        "m",
        MORE,
        ("excavation_support_ratio", "span_m"),
        lambda sections: _q_length_m(sections) - length(sections),
        may_be_missing=(SCHEDULED,),
        numbers=(
            NumberOfFlag("length by the Q system", "m", _q_length_m),
            NumberOfFlag("length of the longest bolts of the class", "m", length),
        ),
    )
    has_bolts = Condition(
        "the scheduled class has bolts", lambda sections: np.isfinite(length(sections))
    )
    return replace(flag, applies=has_bolts, of_project=bolt_length_of)


FLAGS = (
    _of_pressure(
        "q_support_pressure",
        "the Q system",
        BARTON,
        ("q", "joint_set_number", "joint_roughness_number"),
        _q_pressure_mpa,
    ),
    _of_pressure(
        "rmr_support_pressure",
        "the rock mass rating",
        UNAL,
        ("rmr89", "unit_weight_kn_m3", "span_m"),
        _rmr_pressure_mpa,
    ),
    _of_length(np.empty(0)),
)
