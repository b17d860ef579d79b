"""Checks of bolts as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_rock_bolts.grouted_lines import INDRARATNA_KAISER, add_density, add_force
from tunnelcalc_rock_bolts.lines import HOEK_BROWN, PRACTICE, PROJECT, add_bar, add_bond
from tunnelcalc_rock_bolts.parts import BAR, BOND, GROUTED_BOLTS, anchored_length_m


def tension_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Force in a bolt against its capacity."""
    work = _working(values, element)
    demand, capacity = float(found.demand[0]), float(found.capacity[0])
    work.add("demand", "force in a bolt", "p*ba*bl*1000", demand, "kN", HOEK_BROWN)
    work.add("capacity", "the least of bar, anchor and plate", "", capacity, "kN", PROJECT)
    return work.lines


def part_lines(
    part: str,
    values: api.SectionValues,
    element: api.Element,
    found: api.Evaluation,
    forces_kn: Mapping[str, float],
) -> Sequence[api.SheetLine]:
    """Force in a bolt against one of its parts; `forces_kn` of grouted bolts by the ground's
    strength."""
    work = _working(values, element)
    demand, capacity = float(found.demand[0]), float(found.capacity[0])
    if element.kind == GROUTED_BOLTS:
        add_force(work, values, element, forces_kn, demand)
    else:
        work.add("demand", "force in a bolt", "p*ba*bl*1000", demand, "kN", HOEK_BROWN)
    if part == BAR:
        add_bar(work, element, "capacity")
    elif part == BOND:
        _add_bond(work, values, element, capacity)
    else:
        work.known["T_plate_kn"] = element.number("plate_capacity_kn")
        work.known["sf"] = element.number("service_factor")
        work.add("capacity", "limit of the plate", "sf*T_plate_kn", capacity, "kN", PROJECT)
    return work.lines


def length_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Depth of the supported plastic zone and anchorage against the length."""
    work = api.Working(
        {
            "Rps": float(values["supported_plastic_radius_m"]),
            "R": float(values["radius_m"]),
            "l_a": element.number("anchorage_length_m"),
        }
    )
    demand, capacity = float(found.demand[0]), float(found.capacity[0])
    meaning = "supported plastic zone and anchorage"
    work.add("demand", meaning, "Rps - R + l_a", demand, "m", PRACTICE)
    work.add("capacity", "length of the bolt", "", capacity, "m", PROJECT)
    return work.lines


def density_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Bolt density against the largest in use."""
    work = _working(values, element)
    add_density(work, values, element, float(found.demand[0]), "demand")
    capacity = float(found.capacity[0])
    work.add("capacity", "largest density in use", "", capacity, "1", INDRARATNA_KAISER)
    return work.lines


def _add_bond(
    work: api.Working, values: api.SectionValues, element: api.Element, capacity: float
) -> None:
    if "bond_kn_per_m" in element.values:
        names = {"R": "radius_m", "Rps": "supported_plastic_radius_m"}
        work.known |= {symbol: float(values[name]) for symbol, name in names.items()}
        work.known["L"] = element.number("length_m")
        inner = "max(Rps, R)"
        if element.kind == GROUTED_BOLTS:
            inner = "max(Rps, rho)"
        section = api.one_section(values)
        length = float(anchored_length_m(section, element)[0])
        formula = f"max(R + L - {inner}, 0)"
        if "bonded_length_m" in element.values:
            work.known["l_b"] = element.number("bonded_length_m")
            formula = f"min({formula}, l_b)"
        meaning = "length whose bond counts"
        work.add("l_anchored", meaning, formula, length, "m", PRACTICE)
    add_bond(work, element, capacity, "l_anchored", "capacity")


def _working(values: api.SectionValues, element: api.Element) -> api.Working:
    return api.Working(
        {
            "p": float(values.get("element_pressure_mpa", np.nan)),
            "ba": element.number("spacing_around_m"),
            "bl": element.number("spacing_along_m"),
        }
    )
