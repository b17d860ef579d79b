"""Checks of single bolts: tension, and length beyond the plastic zone."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_rock_bolts.formulas import MN_PER_KN
from tunnelcalc_rock_bolts.kind import RockBolts
from tunnelcalc_rock_bolts.lines import length_lines, tension_lines

APPLIES_TO = (RockBolts.name,)


class Tension:
    """Force in a bolt against the least of bar, anchor and plate."""

    name = "tension"
    meaning = "force in a bolt against its capacity; Hoek & Brown (1980)"
    applies_to = APPLIES_TO
    unit = "kN"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        share = element.number("spacing_around_m") * element.number("spacing_along_m")
        force = sections["element_pressure_mpa"] * share / MN_PER_KN
        return api.Evaluation(force, np.full(sections.count, element.number("capacity_kn")))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        return tension_lines(values, element, found)


class LengthBeyondPlasticZone:
    """A bolt anchored inside the plastic zone is not credited."""

    name = "length_beyond_plastic_zone"
    meaning = (
        "depth of the supported plastic zone plus anchorage against the bolt's length; "
        "common practice, no source"
    )
    applies_to = APPLIES_TO
    unit = "m"
    carries_load = False

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        depth = sections["supported_plastic_radius_m"] - sections["radius_m"]
        needed = depth + element.number("anchorage_length_m")
        return api.Evaluation(needed, np.full(sections.count, element.number("length_m")))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        return length_lines(values, element, found)
