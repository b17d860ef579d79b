"""The support kind `rock_bolts`."""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_rock_bolts.formulas import (
    capacity_pressure_mpa,
    end_anchored_stiffness_mpa_per_m,
)
from tunnelcalc_rock_bolts.lines import reaction_lines

EM_1110_1_2907 = "em_1110_1_2907"
NO_PATTERN_RULES = "none"


class RockBolts:
    """End-anchored, ungrouted bolts in a regular pattern over the whole ring."""

    name = "rock_bolts"
    is_ring = False
    meaning = (
        "end-anchored ungrouted bolts as springs on still anchors; Hoek & Brown (1980), "
        "Brady & Brown App. C"
    )
    parameters = (
        Parameter("diameter_mm", "diameter of the bar", "mm", Limits(5, 100)),
        Parameter("length_m", "length of the bolt, all of it free", "m", Limits(0.5, 40)),
        Parameter("spacing_around_m", "spacing around the ring", "m", Limits(0.2, 10)),
        Parameter("spacing_along_m", "spacing along the drive", "m", Limits(0.2, 10)),
        Parameter(
            "capacity_kn", "the least of bar, anchor and plate", "kN", Limits(0, 5000, above=True)
        ),
        Parameter("steel_modulus_gpa", "Young's modulus of the bar", "GPa", Limits(10, 300)),
        Parameter(
            "anchor_deformation_m_per_mn",
            "give of anchor, plate and head a force, from a pull-out test",
            "m/MN",
            Limits(0, 10),
        ),
        Parameter(
            "anchorage_length_m",
            "length needed beyond the plastic zone of the supported section",
            "m",
            Limits(0, 20),
        ),
        Parameter(
            "pattern_rules",
            "rules on length and spacing to be checked",
            choices=(EM_1110_1_2907, NO_PATTERN_RULES),
        ),
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
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

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        around, along = element.number("spacing_around_m"), element.number("spacing_along_m")
        stiffness = end_anchored_stiffness_mpa_per_m(
            spacing_around_m=around,
            spacing_along_m=along,
            free_length_m=element.number("length_m"),
            diameter_mm=element.number("diameter_mm"),
            steel_modulus_gpa=element.number("steel_modulus_gpa"),
            anchor_deformation_m_per_mn=element.number("anchor_deformation_m_per_mn"),
        )
        capacity = capacity_pressure_mpa(
            capacity_kn=element.number("capacity_kn"),
            spacing_around_m=around,
            spacing_along_m=along,
        )
        count = sections.count
        return api.LinearSpring(np.full(count, stiffness), np.full(count, capacity))

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        share = element.number("spacing_around_m") * element.number("spacing_along_m")
        bolts = 2 * np.pi * sections["radius_m"] / share
        yield api.Amount("bolts", "no", bolts)
        yield api.Amount("bolt_length", "m", bolts * element.number("length_m"))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return reaction_lines(values, element)
