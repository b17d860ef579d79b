"""Checks of single bolts: tension, bar, plate, bond, length beyond the plastic zone, density."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_rock_bolts.check_lines import (
    density_lines,
    length_lines,
    part_lines,
    tension_lines,
)
from tunnelcalc_rock_bolts.formulas import MN_PER_KN
from tunnelcalc_rock_bolts.grouted import USUAL_DENSITIES
from tunnelcalc_rock_bolts.grouted_demand import density, force_kn, forces_kn
from tunnelcalc_rock_bolts.parts import (
    BAR,
    BOND,
    FRICTION_BOLTS,
    GROUTED_BOLTS,
    PLATE,
    ROCK_BOLTS,
    bar_kn,
    bond_kn,
    has_parts,
    plate_kn,
    share_m2,
)

ALL_KINDS = (ROCK_BOLTS, FRICTION_BOLTS, GROUTED_BOLTS)


class Tension:
    """Force in a bolt against the least of bar, anchor and plate, declared as one."""

    name = "tension"
    meaning = "force in a bolt against its capacity; Hoek & Brown (1980)"
    applies_to = (ROCK_BOLTS,)
    unit = "kN"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return not has_parts(element)

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        share = element.number("spacing_around_m") * element.number("spacing_along_m")
        force = sections["element_pressure_mpa"] * share / MN_PER_KN
        return api.Evaluation(force, np.full(sections.count, element.number("capacity_kn")))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), element)
        return tension_lines(values, element, found)


@dataclass(frozen=True, slots=True)
class PartOfBolt:
    """Force in a bolt against one of its parts: of all that apply, the least factor governs."""

    name: str
    meaning: str
    applies_to: tuple[str, ...]
    capacity_kn: Callable[[api.Sections, api.Element], Array]
    unit: str = "kN"
    carries_load: bool = True

    def concerns(self, element: api.Element) -> bool:
        return has_parts(element)

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        if element.kind == GROUTED_BOLTS:
            force = force_kn(sections, element)
        else:
            force = sections["element_pressure_mpa"] * share_m2(element) / MN_PER_KN
        return api.Evaluation(force, self.capacity_kn(sections, element))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        section = api.one_section(values)
        forces = {}
        if element.kind == GROUTED_BOLTS:
            forces = {law: float(f[0]) for law, f in forces_kn(section, element).items()}
        return part_lines(self.name, values, element, self.evaluate(section, element), forces)


PARTS = (
    PartOfBolt(
        BAR,
        "force in a bolt against its bar; Hoek & Brown (1980), grouted bolts by equilibrium with "
        "the strength credited to the ground",
        ALL_KINDS,
        lambda sections, element: np.full(sections.count, bar_kn(element)),
    ),
    PartOfBolt(
        PLATE,
        "force in a bolt against plate and head; Hoek & Brown (1980)",
        (ROCK_BOLTS, FRICTION_BOLTS),
        lambda sections, element: np.full(sections.count, plate_kn(element)),
    ),
    PartOfBolt(
        BOND,
        "force in a bolt against its bond beyond the plastic zone, of grouted bolts beyond the "
        "neutral point too; common practice, no source",
        ALL_KINDS,
        bond_kn,
    ),
)


class LengthBeyondPlasticZone:
    """A bolt anchored inside the plastic zone is not credited."""

    name = "length_beyond_plastic_zone"
    meaning = (
        "depth of the supported plastic zone plus anchorage against the bolt's length; "
        "common practice, no source"
    )
    applies_to = ALL_KINDS
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


class UsualBoltDensity:
    """Bolts denser than the relation was made for are not credited by it."""

    name = "usual_bolt_density"
    meaning = "bolt density against the largest in use; Indraratna & Kaiser (1990) [from memory]"
    applies_to = (GROUTED_BOLTS,)
    unit = "1"
    carries_load = False

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        return api.Evaluation(
            density(sections, element), np.full(sections.count, USUAL_DENSITIES[1])
        )

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return density_lines(values, element, self.evaluate(api.one_section(values), element))
