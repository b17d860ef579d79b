"""The support kind `rock_bolts`: end-anchored, ungrouted."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Parameter
from tunnelcalc_rock_bolts.anchor_share import stretch_share_of_section
from tunnelcalc_rock_bolts.formulas import (
    capacity_pressure_mpa,
    end_anchored_stiffness_mpa_per_m,
)
from tunnelcalc_rock_bolts.lines import reaction_lines
from tunnelcalc_rock_bolts.parts import (
    ANCHORAGE,
    DECLARED,
    FROM_PARTS,
    PER_METRE,
    ROCK_BOLTS,
    RULES,
    SPACINGS,
    amounts_of_pattern,
    bond_per_metre,
    free_length_m,
    largest_capacity_kn,
    misfits_of_pattern,
    strength_parameters,
)

STILL, MOVING = "still", "moving"
PARTS = ("capacity", (FROM_PARTS,))
BOND_PER_METRE = ("bond", (PER_METRE,))
FORCE = Limits(0, 5000, above=True)


class RockBolts:
    """End-anchored, ungrouted bolts in a regular pattern over the whole ring."""

    name = ROCK_BOLTS
    is_ring = False
    meaning = (
        "end-anchored ungrouted bolts as springs, on still anchors or on anchors that move with "
        "the ground; Hoek & Brown (1980), Brady & Brown App. C"
    )
    parameters = (
        Parameter(
            "diameter_mm", "diameter of the bar, of the core of a thread", "mm", Limits(5, 100)
        ),
        Parameter(
            "length_m", "length of the bolt, free but for bonded_length_m", "m", Limits(0.5, 40)
        ),
        *SPACINGS,
        Parameter(
            "capacity",
            "whether the capacity is declared as one force, or follows from bar, plate and bond",
            choices=(DECLARED, FROM_PARTS),
            default=DECLARED,
        ),
        Parameter(
            "capacity_kn",
            "the least of bar, anchor and plate",
            "kN",
            FORCE,
            only_if=("capacity", (DECLARED,)),
        ),
        *strength_parameters(PARTS),
        Parameter("plate_capacity_kn", "what plate and head carry", "kN", FORCE, only_if=PARTS),
        Parameter(
            "bond",
            "whether the anchor's bond is declared as one force, or a metre",
            choices=(DECLARED, PER_METRE),
            only_if=PARTS,
        ),
        Parameter(
            "bond_capacity_kn",
            "what the anchor carries, from pull-out tests",
            "kN",
            FORCE,
            only_if=("bond", (DECLARED,)),
        ),
        bond_per_metre(BOND_PER_METRE),
        Parameter(
            "bonded_length_m",
            "length of the anchor that is bonded",
            "m",
            Limits(0, 20, above=True),
            only_if=BOND_PER_METRE,
        ),
        Parameter("steel_modulus_gpa", "Young's modulus of the bar", "GPa", Limits(10, 300)),
        Parameter(
            "anchor_deformation_m_per_mn",
            "give of anchor, plate and head a force, from a pull-out test",
            "m/MN",
            Limits(0, 10),
        ),
        Parameter(
            "anchor",
            "whether the anchor stands still, or moves with the ground about it",
            choices=(STILL, MOVING),
            default=STILL,
        ),
        ANCHORAGE,
        RULES,
    )

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        yield from misfits_of_pattern(element, smallest_radius_m)
        if free_length_m(element) <= 0:
            yield api.Misfit(
                "bonded_length_m",
                f"is {element.number('bonded_length_m'):g} m, not shorter than the bolt, "
                f"{element.number('length_m'):g} m",
                "take longer bolts, or name grouted_rock_bolts for bolts bonded all along",
            )

    def reaction_form(self, element: api.Element) -> str:
        return api.LinearSpring.form

    def reaction(self, sections: api.Sections, element: api.Element) -> api.Reaction:
        stiffness = still_stiffness_mpa_per_m(element) * stretch_share(sections, element)
        force, _ = largest_capacity_kn(element)
        capacity = capacity_pressure_mpa(
            capacity_kn=force,
            spacing_around_m=element.number("spacing_around_m"),
            spacing_along_m=element.number("spacing_along_m"),
        )
        return api.LinearSpring(stiffness, np.full(sections.count, capacity))

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        return amounts_of_pattern(sections, element)

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        moves = moves_with_ground(element)
        share = stretch_share(api.one_section(values), element) if moves else None
        return reaction_lines(
            values, element, still_stiffness_mpa_per_m(element), None if share is None else share[0]
        )


def moves_with_ground(element: api.Element) -> bool:
    """Whether the anchor moves; it stands still where nothing is said."""
    return "anchor" in element.values and element.choice("anchor") == MOVING


def still_stiffness_mpa_per_m(element: api.Element) -> float:
    """Stiffness on a still anchor. [MPa/m]"""
    return end_anchored_stiffness_mpa_per_m(
        spacing_around_m=element.number("spacing_around_m"),
        spacing_along_m=element.number("spacing_along_m"),
        free_length_m=free_length_m(element),
        diameter_mm=element.number("diameter_mm"),
        steel_modulus_gpa=element.number("steel_modulus_gpa"),
        anchor_deformation_m_per_mn=element.number("anchor_deformation_m_per_mn"),
    )


def stretch_share(sections: api.Sections, element: api.Element) -> Array:
    """(n,) share of the wall's movement that stretches the bolt. [-]"""
    if not moves_with_ground(element):
        return np.ones(sections.count)
    no_dilation = np.zeros(sections.count)  # elastic ground has none to state
    return stretch_share_of_section(
        radius_m=sections["radius_m"],
        free_length_m=free_length_m(element),
        in_situ_stress_mpa=sections["in_situ_stress_mpa"],
        deformation_modulus_mpa=sections["deformation_modulus_mpa"],
        poisson_ratio=sections["poisson_ratio"],
        dilation_deg=sections.get("dilation_deg", no_dilation),
        critical_pressure_mpa=sections["critical_pressure_mpa"],
        plastic_radius_m=sections["plastic_radius_m"],
        closure_mm=sections["closure_mm"],
    )
