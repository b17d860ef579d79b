"""What the lines of a ring of other ground have of their law: Hoek-Brown or Mohr-Coulomb.

Symbols as in `disturbed_ring`: _d belongs to the ring, _c to the edge of its plastic part.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import ClassVar, Protocol

from tunnelcalc.api import Array, SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines import hoek_brown, mohr_coulomb
from tunnelcalc.ground_reaction.ring_laws import MohrCoulombZones, StrongRingZones
from tunnelcalc.ground_reaction.ring_zones import AnyZones, Edge

OF_MASS = {"pcr": "pcr_u", "p_i": "p_d", "X": "X_u", "u_R": "V", "M_cr": "M_u", "J": "J_u"}
EQUILIBRIUM = "equilibrium of the ring"


@dataclass(frozen=True, slots=True)
class PlasticPart:
    """The plastic part of a ring, from its wall to its edge."""

    wall_place: Array
    edge_place: Array
    depth: Array
    """y = ln(c / R)"""
    wholly: bool
    """all of the ring has yielded"""
    edge: Edge

    @classmethod
    def of_zones(cls, zones: AnyZones, pressure_mpa: Array) -> PlasticPart:
        """The part that has yielded under a pressure on the wall."""
        place = zones.wall_place(pressure_mpa)
        depth, wholly = zones.front(place)
        at = zones.place_at(place, depth)
        return cls(place, at, depth, bool(wholly[0]), zones.edge(at, depth))

    def add_depth(self, work: Working) -> None:
        """y_c, by which all else is written."""
        depth = float(self.depth[0])
        work.known["y_c"] = depth
        if self.wholly:
            work.add("y_c", "all of the ring has yielded", "ln(r_d/R)", depth, "", "geometry")


class RingLines(Protocol):
    """Formulas of a law."""

    columns: ClassVar[tuple[str, ...]]
    criterion: ClassVar[str]
    strength_at_yield: ClassVar[str]
    """of the wall under pcr"""

    def without_ring(
        self, values: SectionValues, pressure_mpa: float, source: str
    ) -> Sequence[SheetLine]:
        """The wall where the ring has no thickness."""

    def add_critical(self, work: Working, zones: AnyZones) -> None:
        """Strength of the two grounds, and pcr_u of the mass."""

    def add_mass(
        self, work: Working, zones: AnyZones, pressure_mpa: float, names: Mapping[str, str]
    ) -> None:
        """The mass under a radial stress at the ring's edge."""

    def add_edge(self, work: Working, zones: AnyZones, part: PlasticPart) -> None:
        """y_c, and radial stress sr_c and half the strength T_c there."""

    def add_integral(self, work: Working, zones: AnyZones, part: PlasticPart) -> None:
        """J of the plastic part."""


class HoekBrownRing:
    """Hoek-Brown ground."""

    columns: ClassVar[tuple[str, ...]] = hoek_brown.COLUMNS
    criterion: ClassVar[str] = "Hoek-Brown criterion in the ring"
    strength_at_yield: ClassVar[str] = "sci*(mb_d*pcr/sci + s_d)^a_d"
    names: ClassVar[Mapping[str, str]] = {
        "mb": "mb_d",
        "s": "s_d",
        "a": "a_d",
        "G": "G_d",
        "X": "X_c",
    }

    def without_ring(
        self, values: SectionValues, pressure_mpa: float, source: str
    ) -> Sequence[SheetLine]:
        return hoek_brown.wall_lines(values, pressure_mpa, source)

    def add_critical(self, work: Working, zones: StrongRingZones) -> None:
        critical = float(zones.mass.critical_pressure_mpa[0])
        hoek_brown.add_critical_pressure(work, critical, {"pcr": "pcr_u"})

    def add_mass(
        self, work: Working, zones: StrongRingZones, pressure_mpa: float, names: Mapping[str, str]
    ) -> None:
        hoek_brown.add_wall(work, zones.mass, pressure_mpa, names)

    def add_edge(self, work: Working, zones: StrongRingZones, part: PlasticPart) -> None:
        formula = "(mb_d*p_i/sci + s_d)^(1 - a_d)"
        power = float(part.wall_place[0])
        work.add("M_i", "N^(1-a) at the wall", formula, power, "", self.criterion)
        part.add_depth(work)
        number = float((part.edge_place ** (1 / (1 - zones.ring.a)))[0])
        formula = "(M_i + (1 - a_d)*mb_d*y_c)^(1/(1 - a_d))"
        work.add("N_c", "N at the edge", formula, number, "", EQUILIBRIUM)
        stress, formula = float(part.edge.radial_mpa[0]), "sci*(N_c - s_d)/mb_d"
        work.add("sr_c", "radial stress at the edge", formula, stress, "MPa", self.criterion)
        strength, formula = float(part.edge.half_strength[0]), "sci*N_c^a_d/2"
        work.add("T_c", "half the strength at the edge", formula, strength, "MPa", self.criterion)

    def add_integral(self, work: Working, zones: StrongRingZones, part: PlasticPart) -> None:
        depth, power = float(part.depth[0]), float(part.edge_place[0])
        brittle = bool(zones.ring.s[0] == 0)
        hoek_brown.add_ring_integral(work, zones.ring, depth, power, self.names, brittle)


class MohrCoulombRing:
    """Mohr-Coulomb ground."""

    columns: ClassVar[tuple[str, ...]] = mohr_coulomb.COLUMNS
    criterion: ClassVar[str] = "Mohr-Coulomb criterion in the ring"
    strength_at_yield: ClassVar[str] = "(k1_d*pcr + q_d)"
    names: ClassVar[Mapping[str, str]] = {"phi": "phi_d", "c": "c_d", "k1": "k1_d", "q": "q_d"}

    def without_ring(
        self, values: SectionValues, pressure_mpa: float, source: str
    ) -> Sequence[SheetLine]:
        return mohr_coulomb.wall_lines(values, pressure_mpa, source)

    def add_critical(self, work: Working, zones: MohrCoulombZones) -> None:
        mohr_coulomb.add_strength(work, zones.mass, {})
        mohr_coulomb.add_strength(work, zones.ring, self.names)
        critical = float(zones.mass.critical_pressure_mpa[0])
        mohr_coulomb.add_critical_pressure(work, critical, {"pcr": "pcr_u"})

    def add_mass(
        self, work: Working, zones: MohrCoulombZones, pressure_mpa: float, names: Mapping[str, str]
    ) -> None:
        mohr_coulomb.add_wall(work, zones.mass, pressure_mpa, names)

    def add_edge(self, work: Working, zones: MohrCoulombZones, part: PlasticPart) -> None:
        strength = float(zones.strength_mpa(part.wall_place)[0])
        formula = "max(k1_d*p_i + q_d, 0)"
        work.add("H_i", "strength at the wall", formula, strength, "MPa", self.criterion)
        part.add_depth(work)
        sloping = float(zones.ring.friction_slope[0]) > 0
        formula = "p_i + H_i*(exp(k1_d*y_c) - 1)/k1_d" if sloping else "p_i + H_i*y_c"
        stress = float(part.edge.radial_mpa[0])
        work.add("sr_c", "radial stress at the edge", formula, stress, "MPa", EQUILIBRIUM)
        half, formula = float(part.edge.half_strength[0]), "max(k1_d*sr_c + q_d, 0)/2"
        work.add("T_c", "half the strength at the edge", formula, half, "MPa", self.criterion)

    def add_integral(self, work: Working, zones: MohrCoulombZones, part: PlasticPart) -> None:
        exponent = (zones.ring.dilation + 1) * part.depth
        mean = zones.weighted_strength_mpa(exponent, part.wall_place, part.edge_place, part.depth)
        growth = float(work.known["X_c"]) ** (float(zones.ring.dilation[0]) + 1)
        formula = "H_i*(X_c^(k1_d + 1 + Kpsi) - 1)/(k1_d + 1 + Kpsi)"
        meaning = "strength in the ring, over y = ln(r/R), weighted"
        work.add("J", meaning, formula, float(mean[0]) * growth, "MPa", hoek_brown.MOVEMENT)
