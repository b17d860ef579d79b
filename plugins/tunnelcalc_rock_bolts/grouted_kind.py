"""The support kind `grouted_rock_bolts`: fully grouted, acting in the ground."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_rock_bolts.formulas import MN_PER_KN
from tunnelcalc_rock_bolts.grouted import grouted_ring
from tunnelcalc_rock_bolts.grouted_demand import density
from tunnelcalc_rock_bolts.grouted_lines import ring_lines
from tunnelcalc_rock_bolts.parts import (
    ANCHORAGE,
    GROUTED_BOLTS,
    RULES,
    SPACINGS,
    amounts_of_pattern,
    bar_kn,
    bond_per_metre,
    misfits_of_pattern,
    share_m2,
    strength_parameters,
)


class GroutedRockBolts:
    """Bolts grouted over their whole length in a regular pattern over the whole ring.

    They react by a change of the ground from the wall to the neutral point, never as a spring.
    """

    name = GROUTED_BOLTS
    is_ring = False
    meaning = (
        "fully grouted bolts as stronger ground up to their neutral point, by the bolt density of "
        "Indraratna & Kaiser (1990) [from memory]"
    )
    parameters = (
        Parameter(
            "diameter_mm", "diameter of the bar, of the core of a thread", "mm", Limits(5, 100)
        ),
        Parameter("length_m", "length of the bolt, all of it grouted", "m", Limits(0.5, 40)),
        *SPACINGS,
        Parameter(
            "friction_factor",
            "share of the tangential stress that acts as shear on the bolt: tan of its friction "
            "angle for a rough bar",
            limits=Limits(0, 1.5, above=True),
        ),
        *strength_parameters(None),
        bond_per_metre(),
        ANCHORAGE,
        RULES,
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        return misfits_of_pattern(element, smallest_radius_m)

    def reaction_form(self, element: api.Element) -> str:
        return api.GroundRing.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        capacity = bar_kn(element) * MN_PER_KN / share_m2(element)
        return grouted_ring(
            sections,
            density(sections, element),
            element.number("length_m"),
            np.full(sections.count, capacity),
        )

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        return amounts_of_pattern(sections, element)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        reaction = self.reaction(api.one_section(values), element)
        assert isinstance(reaction, api.GroundRing)
        beta = float(density(api.one_section(values), element)[0])
        return ring_lines(values, element, beta, reaction)
