"""Closure of the unsupported wall along the drive."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Sections, SectionValues, SheetLine
from tunnelcalc.builtin.methods.lines import profiles as written
from tunnelcalc.builtin.methods.lines.symbols import arrays, row
from tunnelcalc.ground_reaction import closure_profile as profiles
from tunnelcalc.vocabulary import UNLIMITED

NEARLY_ELASTIC = 2.0
"""Rp / R up to which profiles that do not follow the plastic zone are taken to hold. Common
practice, no source."""


@dataclass(frozen=True, slots=True)
class Profile:
    """A published profile; `share_of` takes the distance, then the columns in `needs`."""

    name: str
    source: str
    needs: tuple[str, ...]
    requires: Mapping[str, Limits]
    largest_plastic_ratio: float
    share_of: Callable[..., Array]
    formula: written.ProfileFormula

    def share(self, sections: Sections, distance_m: Array) -> Array:
        return self.share_of(distance_m, *(sections[name] for name in self.needs))

    def lines(self, values: SectionValues, distance_m: float) -> Sequence[SheetLine]:
        share = self.share_of(row(distance_m), *arrays(values, self.needs).values())
        needs, formula = self.needs, self.formula
        return written.share_line(values, needs, formula, distance_m, share, self.source)


PROFILES: tuple[api.ClosureProfileMethod, ...] = (
    Profile(
        "vlachopoulos_diederichs_2009",
        "Vlachopoulos & Diederichs (2009), Rock Mech. Rock Eng. 42, 131-146",
        ("radius_m", "plastic_radius_m"),
        {},
        math.inf,
        profiles.vlachopoulos_diederichs_2009,
        written.VLACHOPOULOS_DIEDERICHS,
    ),
    Profile(
        "panet_1995",
        "Panet (1995), Presses ENPC; elastic ground",
        ("radius_m",),
        {},
        NEARLY_ELASTIC,
        profiles.panet_1995,
        written.PANET,
    ),
    Profile(
        "panet_guenot_1982",
        "Panet & Guenot (1982), Tunnelling '82; scaled by the plastic radius",
        ("plastic_radius_m",),
        {},
        math.inf,
        profiles.panet_guenot_1982,
        written.PANET_GUENOT,
    ),
    Profile(
        "unlu_gercek_2003",
        "Unlu & Gercek (2003), Tunn. Undergr. Space Technol. 18, 547-553; elastic ground",
        ("radius_m", "poisson_ratio"),
        {"poisson_ratio": UNLIMITED},
        NEARLY_ELASTIC,
        profiles.unlu_gercek_2003,
        written.UNLU_GERCEK,
    ),
    Profile(
        "hoek_2002",
        "Hoek (2002), fit to measurements of Chern et al. (1998)",
        ("radius_m",),
        {},
        NEARLY_ELASTIC,
        profiles.hoek_2002,
        written.HOEK,
    ),
)
