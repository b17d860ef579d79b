"""The support kind `lattice_girders`."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import replace

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter
from tunnelcalc_steel_sets.kind import STEEL_DENSITY_KG_M3, ring_reaction, spring_of
from tunnelcalc_steel_sets.lines import reaction_lines
from tunnelcalc_steel_sets.parameters import BEYOND_YIELD, STEEL
from tunnelcalc_steel_sets.profile import FOUR_BARS, M_PER_MM, THREE_BARS, girder_of, profile_of
from tunnelcalc_steel_sets.ring_section import ring_section_of


class LatticeGirders:
    """Closed rings of three or four bars held apart by diagonals, embedded in shotcrete."""

    name = "lattice_girders"
    is_ring = True
    meaning = (
        "closed rings of lattice girders embedded in shotcrete, thin ring; declared longitudinal "
        "bars, diagonals count for nothing; statics"
    )
    parameters = (
        Parameter(
            "bars",
            "longitudinal bars: two lower ones and one or two upper ones; which side is lower "
            "does not matter",
            choices=(THREE_BARS, FOUR_BARS),
        ),
        Parameter(
            "lower_bar_diameter_mm", "diameter of each of the two lower bars", "mm", Limits(5, 100)
        ),
        Parameter(
            "upper_bar_diameter_mm",
            "diameter of the upper bar, or of each of two",
            "mm",
            Limits(5, 100),
        ),
        Parameter(
            "bar_layer_distance_mm",
            "distance between the centres of lower and upper bars",
            "mm",
            Limits(10, 1000),
        ),
        *STEEL,
        BEYOND_YIELD,
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        depth = girder_of(element).depth_mm * M_PER_MM
        if depth >= smallest_radius_m / 2:
            yield api.Misfit(
                "bar_layer_distance_mm",
                f"makes the girder {depth:g} m deep, more than half the radius",
                "correct the distance and the diameters, which are in mm",
            )
        names = ("lower_bar_diameter_mm", "upper_bar_diameter_mm")
        touching = sum(element.number(name) for name in names) / 2
        if element.number("bar_layer_distance_mm") <= touching:
            yield api.Misfit(
                "bar_layer_distance_mm",
                f"is not more than the {touching:g} mm at which the bars touch",
                "state the distance between centres, in mm",
            )

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        return ring_reaction(sections["radius_m"], element, *spring_of(sections, element))

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        profile = profile_of(element)
        girders = np.full(sections.count, 1 / profile.spacing_m)
        axis: Array = 2 * np.pi * (sections["radius_m"] - profile.depth_m / 2)
        mass = girders * profile.area_m2 * axis * STEEL_DENSITY_KG_M3
        yield api.Amount("lattice_girders", "no", girders)
        yield api.Amount("longitudinal_bars", "kg", mass)

    def ring_section(self, element: api.Element) -> api.RingSection:
        """As a section that is as deep on both sides as the girder is on its deeper one."""
        girder = girder_of(element)
        below = girder.centroid_mm + element.number("lower_bar_diameter_mm") / 2
        deeper = max(below, girder.depth_mm - below)
        return replace(ring_section_of(element), depth_m=2 * deeper * M_PER_MM)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        stiffness, capacity = spring_of(api.one_section(values), element)
        return reaction_lines(values, element, None, (float(stiffness[0]), float(capacity[0])))
