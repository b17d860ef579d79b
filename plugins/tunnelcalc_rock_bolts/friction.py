"""The support kind `friction_bolts`: held along their length by friction or by expansion."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_rock_bolts.formulas import MN_PER_KN
from tunnelcalc_rock_bolts.lines import friction_lines
from tunnelcalc_rock_bolts.parts import (
    ANCHORAGE,
    FRICTION_BOLTS,
    RULES,
    SPACINGS,
    amounts_of_pattern,
    bond_per_metre,
    largest_capacity_kn,
    misfits_of_pattern,
    service_factor,
    share_m2,
)


class FrictionBolts:
    """Friction bolts with plates in a regular pattern over the whole ring.

    The part beyond the plastic zone is the anchor, the plate holds the wall. Capacity in sums is
    that of a section without a plastic zone; the check of the bond takes the length beyond it.
    """

    name = FRICTION_BOLTS
    is_ring = False
    meaning = (
        "friction bolts with plates, by declared bond beyond the plastic zone and declared "
        "stiffness; common practice, no source"
    )
    parameters = (
        Parameter("length_m", "length of the bolt", "m", Limits(0.5, 40)),
        *SPACINGS,
        Parameter(
            "bar_capacity_kn", "what the bolt's steel carries", "kN", Limits(0, 5000, above=True)
        ),
        Parameter(
            "plate_capacity_kn", "what plate and head carry", "kN", Limits(0, 5000, above=True)
        ),
        bond_per_metre(),
        Parameter(
            "deformation_m_per_mn",
            "give of the bolt and its head a force, from a pull-out test",
            "m/MN",
            Limits(0, 100, above=True),
        ),
        service_factor(),
        ANCHORAGE,
        RULES,
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        return misfits_of_pattern(element, smallest_radius_m)

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        stiffness = 1 / (share_m2(element) * element.number("deformation_m_per_mn"))
        force, _ = largest_capacity_kn(element)
        capacity = force * MN_PER_KN / share_m2(element)
        return api.LinearSpring(
            np.full(sections.count, stiffness), np.full(sections.count, capacity)
        )

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        return amounts_of_pattern(sections, element)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return friction_lines(api.one_section(values), element, self.reaction)
