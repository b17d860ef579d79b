"""Parameters that the kinds of bolts share, and what the parts of a bolt can carry."""

from __future__ import annotations

import math
from collections.abc import Iterable

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter
from tunnelcalc_rock_bolts.capacity import (
    bar_force_kn,
    bond_force_kn,
    length_beyond_plastic_zone_m,
)
from tunnelcalc_rock_bolts.grouted import neutral_radius_m

ROCK_BOLTS, FRICTION_BOLTS, GROUTED_BOLTS = "rock_bolts", "friction_bolts", "grouted_rock_bolts"
EM_1110_1_2907, NO_PATTERN_RULES = "em_1110_1_2907", "none"
DECLARED, FROM_PARTS, PER_METRE = "declared", "from_parts", "per_metre"
BAR, PLATE, BOND = "bar", "plate", "bond"

SPACINGS = (
    Parameter("spacing_around_m", "spacing around the ring", "m", Limits(0.2, 10)),
    Parameter("spacing_along_m", "spacing along the drive", "m", Limits(0.2, 10)),
)
ANCHORAGE = Parameter(
    "anchorage_length_m",
    "length needed beyond the plastic zone of the supported section",
    "m",
    Limits(0, 20),
)
RULES = Parameter(
    "pattern_rules",
    "rules on length and spacing to be checked",
    choices=(EM_1110_1_2907, NO_PATTERN_RULES),
)


def strength_parameters(only_if: tuple[str, tuple[str, ...]] | None) -> tuple[Parameter, ...]:
    """Strength of the bar, and what may be counted on of it."""
    return (
        Parameter(
            "bar_strength_mpa",
            "strength of the bar's steel",
            "MPa",
            Limits(100, 2500),
            only_if=only_if,
        ),
        Parameter(
            "bar_strength_is",
            "which strength of the bar is stated",
            choices=("yield", "ultimate"),
            only_if=only_if,
        ),
        service_factor(only_if),
    )


def service_factor(only_if: tuple[str, tuple[str, ...]] | None = None) -> Parameter:
    """Share of every limit that may be counted on."""
    return Parameter(
        "service_factor",
        "share of each limit that counts: 1 for a temporary or protected bolt, less for corrosion",
        limits=Limits(0, 1, above=True),
        only_if=only_if,
    )


def bond_per_metre(only_if: tuple[str, tuple[str, ...]] | None = None) -> Parameter:
    """Bond a metre, from pull-out tests."""
    return Parameter(
        "bond_kn_per_m",
        "bond to the ground a metre of bolt, from pull-out tests in this ground",
        "kN/m",
        Limits(0, 2000, above=True),
        only_if=only_if,
    )


def misfits_of_pattern(element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
    """What does not fit in any kind of bolt."""
    length, anchorage = element.number("length_m"), element.number("anchorage_length_m")
    if anchorage >= length:
        yield api.Misfit(
            "anchorage_length_m",
            f"is {anchorage:g} m, not shorter than the bolt, {length:g} m",
            "take longer bolts, or correct the anchorage length",
        )
    around = element.number("spacing_around_m")
    if around > 2 * math.pi * smallest_radius_m:
        yield api.Misfit(
            "spacing_around_m",
            f"is {around:g} m, more than the circumference of the opening",
            "state the spacing between neighbouring bolts of a ring",
        )


def amounts_of_pattern(sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
    """Number and length of bolts a metre of tunnel."""
    bolts = 2 * np.pi * sections["radius_m"] / share_m2(element)
    yield api.Amount("bolts", "no", bolts)
    yield api.Amount("bolt_length", "m", bolts * element.number("length_m"))


def share_m2(element: api.Element) -> float:
    """Share of the wall that a bolt holds. [m2]"""
    return element.number("spacing_around_m") * element.number("spacing_along_m")


def has_parts(element: api.Element) -> bool:
    """Whether bar, plate and bond are limits of their own."""
    return element.kind != ROCK_BOLTS or capacity_by(element) == FROM_PARTS


def capacity_by(element: api.Element) -> str:
    """How the capacity of end-anchored bolts is told; declared where nothing is said."""
    return element.choice("capacity") if "capacity" in element.values else DECLARED


def bar_kn(element: api.Element) -> float:
    """What the bar carries, service factor included. [kN]"""
    if element.kind == FRICTION_BOLTS:
        force = element.number("bar_capacity_kn")
    else:
        force = bar_force_kn(element.number("diameter_mm"), element.number("bar_strength_mpa"))
    return element.number("service_factor") * force


def plate_kn(element: api.Element) -> float:
    """What plate and head carry, service factor included. [kN]"""
    return element.number("service_factor") * element.number("plate_capacity_kn")


def anchored_length_m(sections: api.Sections, element: api.Element) -> Array:
    """(n,) length whose bond counts on the supported section. [m]"""
    radius, length = sections["radius_m"], element.number("length_m")
    inner = sections["supported_plastic_radius_m"]
    if element.kind == GROUTED_BOLTS:
        inner = np.maximum(inner, neutral_radius_m(radius, length))
    beyond = length_beyond_plastic_zone_m(length, radius, inner)
    if element.kind == ROCK_BOLTS:
        return np.minimum(beyond, element.number("bonded_length_m"))
    return beyond


def bond_kn(sections: api.Sections, element: api.Element) -> Array:
    """(n,) what the bond carries on the supported section, service factor included. [kN]"""
    factor = element.number("service_factor")
    if element.kind == ROCK_BOLTS and element.choice("bond") == DECLARED:
        return np.full(sections.count, factor * element.number("bond_capacity_kn"))
    bond = bond_force_kn(element.number("bond_kn_per_m"), anchored_length_m(sections, element))
    return factor * bond


def largest_capacity_kn(element: api.Element) -> tuple[float, str]:
    """Least limit of a bolt on any section, and its name. The bond of a bolt along its whole
    length is taken where no ground has yielded. [kN]"""
    if not has_parts(element):
        return element.number("capacity_kn"), DECLARED
    limits = {BAR: bar_kn(element)}
    if element.kind != GROUTED_BOLTS:
        whole = {"radius_m": np.ones(1), "supported_plastic_radius_m": np.ones(1)}
        limits[PLATE] = plate_kn(element)
        limits[BOND] = float(bond_kn(api.Sections(whole), element)[0])
    name = min(limits, key=lambda key: limits[key])
    return limits[name], name


def free_length_m(element: api.Element) -> float:
    """Length of an end-anchored bolt that stretches. [m]"""
    bonded = has_parts(element) and element.choice("bond") == PER_METRE
    return element.number("length_m") - (element.number("bonded_length_m") if bonded else 0.0)
