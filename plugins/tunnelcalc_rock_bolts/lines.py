"""Bolts that act as springs, as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Callable, Sequence

from tunnelcalc import api
from tunnelcalc_rock_bolts.formulas import M_PER_MM, MPA_PER_GPA, capacity_pressure_mpa
from tunnelcalc_rock_bolts.parts import (
    BAR,
    BOND,
    FRICTION_BOLTS,
    PER_METRE,
    PLATE,
    bar_kn,
    free_length_m,
    has_parts,
    largest_capacity_kn,
    plate_kn,
)

HOEK_BROWN = "Hoek & Brown, Underground Excavations in Rock (1980)"
BRADY_BROWN = "Brady & Brown, Rock Mechanics for Underground Mining, App. C, k = K R"
LAME = "Lame, elastic ground around a circle"
PROJECT = "project"
PRACTICE = "common practice, no source"


def reaction_lines(
    values: api.SectionValues,
    element: api.Element,
    still_mpa_per_m: float,
    stretch_share: float | None,
) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of end-anchored bolts; `stretch_share` where the anchor moves."""
    number = element.number
    work = api.Working(
        {
            "d_mm": number("diameter_mm"),
            "Es_gpa": number("steel_modulus_gpa"),
            "L": number("length_m"),
            "Q_a": number("anchor_deformation_m_per_mn"),
            "ba": number("spacing_around_m"),
            "bl": number("spacing_along_m"),
        }
    )
    diameter, modulus = number("diameter_mm") * M_PER_MM, number("steel_modulus_gpa") * MPA_PER_GPA
    work.add("d", "diameter of the bar", "d_mm/1000", diameter, "m", PROJECT)
    work.add("Es", "Young's modulus of the bar", "Es_gpa*1000", modulus, "MPa", PROJECT)
    if has_parts(element) and element.choice("bond") == PER_METRE:
        work.known["l_b"] = number("bonded_length_m")
        work.add("l", "free length", "L - l_b", free_length_m(element), "m", PROJECT)
    else:
        work.known["l"] = work.known["L"]
    formula = "1/(ba*bl*(4*l/(pi*d^2*Es) + Q_a))"
    meaning = "stiffness of the pattern"
    if stretch_share is None:
        work.add("K", meaning, formula, still_mpa_per_m, "MPa/m", BRADY_BROWN)
    else:
        meaning = "stiffness of the pattern on still anchors"
        work.add("K_still", meaning, formula, still_mpa_per_m, "MPa/m", BRADY_BROWN)
        _add_moving(work, values, still_mpa_per_m, stretch_share)
    _add_capacity(work, element)
    return work.lines


def friction_lines(
    section: api.Sections,
    element: api.Element,
    reaction: Callable[[api.Sections, api.Element], api.Reaction],
) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of friction bolts."""
    number = element.number
    work = api.Working(
        {
            "Q": number("deformation_m_per_mn"),
            "ba": number("spacing_around_m"),
            "bl": number("spacing_along_m"),
            "L": number("length_m"),
        }
    )
    found = reaction(section, element)
    assert isinstance(found, api.LinearSpring)
    stiffness = float(found.stiffness_mpa_per_m[0])
    work.add("K", "stiffness of the pattern", "1/(ba*bl*Q)", stiffness, "MPa/m", HOEK_BROWN)
    _add_capacity(work, element)
    return work.lines


def _add_moving(
    work: api.Working, values: api.SectionValues, still_mpa_per_m: float, stretch_share: float
) -> None:
    """The share of the movement that stretches the bolt, and what a still anchor would add."""
    radius, plastic = float(values["radius_m"]), float(values["plastic_radius_m"])
    anchor = radius + work.known["l"]
    work.known["R"] = radius
    work.add("ra", "radius at the anchor", "R + l", anchor, "m", LAME)
    source = "secant over the movement of the unsupported wall; " + LAME
    meaning = "stretch of the bolt a movement of the wall"
    if plastic <= radius:
        work.add("share_a", meaning, "1 - R/ra", stretch_share, "", source)
    else:
        names = {
            "p0": "in_situ_stress_mpa",
            "pcr": "critical_pressure_mpa",
            "E": "deformation_modulus_mpa",
            "nu": "poisson_ratio",
            "Rp": "plastic_radius_m",
            "u_mm": "closure_mm",
            "psi": "dilation_deg",
        }
        work.known |= {symbol: float(values[name]) for symbol, name in names.items()}
        formula = "1 - min((p0 - pcr)*Rp^2*(1 + nu)/(E*ra)/(u_mm/1000), R/ra)"
        if plastic > anchor:
            formula = "1 - (R/ra)^((1 + sin(radians(psi)))/(1 - sin(radians(psi))))"
        work.add("share_a", meaning, formula, stretch_share, "", source)
    stiffness = still_mpa_per_m * stretch_share
    meaning = "stiffness of the pattern on moving anchors"
    work.add("K", meaning, "K_still*share_a", stiffness, "MPa/m", HOEK_BROWN)
    meaning = "by how much still anchors would be too stiff"
    work.add("dK", meaning, "K_still - K", still_mpa_per_m - stiffness, "MPa/m", source)
    meaning = "the same, of the moving ones"
    ratio = 100 * (still_mpa_per_m - stiffness) / stiffness
    work.add("dK_pct", meaning, "100*dK/K", ratio, "%", source)


def _add_capacity(work: api.Working, element: api.Element) -> None:
    """The least limit of a bolt on ground that has not yielded, spread over its share."""
    force, least = largest_capacity_kn(element)
    if has_parts(element):
        add_bar(work, element)
        work.known["sf"] = element.number("service_factor")
        work.known["T_plate_kn"] = element.number("plate_capacity_kn")
        work.add(PLATE, "limit of the plate", "sf*T_plate_kn", plate_kn(element), "kN", PROJECT)
        add_bond(work, element, _whole_bond_kn(element), "L")
        names = f"min({BAR}, {PLATE}, {BOND})"
        meaning = f"the least limit: {least}"
        work.add("T_kn", meaning, names, force, "kN", HOEK_BROWN)
    else:
        work.known["T_kn"] = force
    capacity = capacity_pressure_mpa(
        capacity_kn=force,
        spacing_around_m=element.number("spacing_around_m"),
        spacing_along_m=element.number("spacing_along_m"),
    )
    formula = "T_kn/1000/(ba*bl)"
    work.add("pmax", "capacity of the pattern", formula, capacity, "MPa", HOEK_BROWN)


def add_bar(work: api.Working, element: api.Element, symbol: str = BAR) -> None:
    """What the bar carries."""
    work.known["sf"] = element.number("service_factor")
    if element.kind == FRICTION_BOLTS:
        work.known["T_bar_kn"] = element.number("bar_capacity_kn")
        meaning, formula = "limit of the steel", "sf*T_bar_kn"
    else:
        work.known["d_mm"] = element.number("diameter_mm")
        work.known["s_bar"] = element.number("bar_strength_mpa")
        meaning = f"limit of the bar by its {element.choice('bar_strength_is')} strength"
        formula = "sf*s_bar*pi*d_mm^2/4/1000"
    work.add(symbol, meaning, formula, bar_kn(element), "kN", PROJECT)


def add_bond(
    work: api.Working, element: api.Element, bond_kn: float, length: str, symbol: str = BOND
) -> None:
    """What the bond carries; `length` names the length that counts where it is told a metre."""
    work.known["sf"] = element.number("service_factor")
    if "bond_kn_per_m" in element.values and _by_metre(element):
        work.known["t_kn_m"] = element.number("bond_kn_per_m")
        if "bonded_length_m" in element.values:
            work.known["l_b"] = element.number("bonded_length_m")
            length = f"min({length}, l_b)"
        formula = f"sf*t_kn_m*{length}"
    else:
        work.known["T_bond_kn"] = element.number("bond_capacity_kn")
        formula = "sf*T_bond_kn"
    work.add(symbol, "limit of the bond", formula, bond_kn, "kN", PROJECT)


def _by_metre(element: api.Element) -> bool:
    return "bond" not in element.values or element.choice("bond") == PER_METRE


def _whole_bond_kn(element: api.Element) -> float:
    factor = element.number("service_factor")
    if not _by_metre(element):
        return factor * element.number("bond_capacity_kn")
    length = element.number("length_m")
    if "bonded_length_m" in element.values:
        length = min(length, element.number("bonded_length_m"))
    return factor * (element.number("bond_kn_per_m") * length)
