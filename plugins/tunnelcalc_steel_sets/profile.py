"""The profile of an element: the project's own, a designation of its table or of ours, or bars."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cache

from tunnelcalc import api
from tunnelcalc_steel_sets.formulas import Profile
from tunnelcalc_steel_sets.lattice import Bar, LatticeGirder, lattice_girder
from tunnelcalc_steel_sets.plausible import AREA, SECTION
from tunnelcalc_steel_sets.sections_table import SteelSection, packaged_text, read_sections

M_PER_MM = 1e-3
M2_PER_MM2 = 1e-6
M4_PER_MM4 = 1e-12
MPA_PER_GPA = 1e3

OWN = "own"
THREE_BARS, FOUR_BARS = "three", "four"


@dataclass(frozen=True, slots=True)
class SectionOfElement:
    """Area [mm2], second moment of area [mm4] and depth [mm] of one set, width of its flange
    [mm], infinite where it is not known, and where the numbers come from."""

    area_mm2: float
    inertia_mm4: float
    depth_mm: float
    flange_width_mm: float
    source: str


@cache
def packaged_sections() -> dict[str, SteelSection]:
    """The sections of the packaged table that pass its check, by designation."""
    return read_sections(packaged_text())


def section_of(element: api.Element) -> SectionOfElement:
    """The section of `steel_sets` or `lattice_girders`."""
    if "bars" in element.values:
        girder = girder_of(element)
        return SectionOfElement(
            girder.area_mm2, girder.inertia_mm4, girder.depth_mm, float("inf"), "declared bars"
        )
    designation = str(element.values.get("profile", OWN))
    if AREA in element.values:
        row = element.values.get(api.source_of("profile"))
        source = "project" if row is None else f"{designation}: {row}"
        area, inertia, depth = (element.number(name) for name in SECTION)
        return SectionOfElement(area, inertia, depth, float("inf"), source)
    found = packaged_sections()[designation]
    return SectionOfElement(
        found.area_mm2,
        found.inertia_mm4,
        found.height_mm,
        found.width_mm,
        f"{designation}: {found.source}",
    )


def bars_of(element: api.Element) -> list[Bar]:
    """The longitudinal bars of a lattice girder: two lower ones, one or two upper ones."""
    lower = Bar(element.number("lower_bar_diameter_mm"), 0.0)
    upper = Bar(element.number("upper_bar_diameter_mm"), element.number("bar_layer_distance_mm"))
    return [lower, lower, *[upper] * (1 if element.choice("bars") == THREE_BARS else 2)]


def girder_of(element: api.Element) -> LatticeGirder:
    """The girder that its bars make."""
    return lattice_girder(bars_of(element))


def profile_of(element: api.Element) -> Profile:
    """The set in the units of the formulas."""
    section = section_of(element)
    return Profile(
        area_m2=section.area_mm2 * M2_PER_MM2,
        inertia_m4=section.inertia_mm4 * M4_PER_MM4,
        depth_m=section.depth_mm * M_PER_MM,
        yield_strength_mpa=element.number("yield_strength_mpa"),
        modulus_mpa=element.number("steel_modulus_gpa") * MPA_PER_GPA,
        spacing_m=element.number("spacing_m"),
    )
