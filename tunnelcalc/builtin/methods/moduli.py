"""Deformation modulus of the rock mass."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Sections, SectionValues, SheetLine
from tunnelcalc.builtin.methods.lines import moduli as written
from tunnelcalc.builtin.methods.lines.symbols import arrays
from tunnelcalc.rock_mass import deformation_modulus as relations
from tunnelcalc.vocabulary import UNLIMITED

OF_2006 = "Hoek & Diederichs (2006), Int. J. Rock Mech. Min. Sci. 43, 203-215"


@dataclass(frozen=True, slots=True)
class Relation:
    """A published relation from ground columns to a modulus."""

    name: str
    source: str
    needs: tuple[str, ...]
    requires: Mapping[str, Limits]
    relation: Callable[..., Array]
    formula: str | Callable[[SectionValues], str]
    """of a calculation sheet, or what chooses it"""

    def modulus_mpa(self, sections: Sections) -> Array:
        return self.relation(*(sections[name] for name in self.needs))

    def lines(self, values: SectionValues) -> Sequence[SheetLine]:
        formula = self.formula if isinstance(self.formula, str) else self.formula(values)
        result = self.relation(*arrays(values, self.needs).values())
        return written.modulus_line(values, self.needs, formula, result, self.source)


def _best_of_2006(gsi: Array, disturbance: Array, intact_modulus_mpa: Array) -> Array:
    """The form with the intact modulus where that is known, else the simplified form."""
    detailed = relations.hoek_diederichs_with_intact_modulus_mpa(
        gsi, disturbance, intact_modulus_mpa
    )
    simplified = relations.hoek_diederichs_simplified_mpa(gsi, disturbance)
    return np.where(np.isnan(intact_modulus_mpa), simplified, detailed)


QUALITY: Mapping[str, Limits] = {"gsi": UNLIMITED, "disturbance": UNLIMITED}

MODULI: tuple[api.ModulusMethod, ...] = (
    Relation(
        "hoek_diederichs_2006",
        OF_2006 + ", with the intact modulus where it is known, else simplified",
        ("gsi", "mass_disturbance", "intact_modulus_mpa"),
        QUALITY,
        _best_of_2006,
        written.best_of_2006,
    ),
    Relation(
        "hoek_diederichs_2006_simplified",
        OF_2006 + ", simplified form",
        ("gsi", "mass_disturbance"),
        QUALITY,
        relations.hoek_diederichs_simplified_mpa,
        written.SIMPLIFIED,
    ),
    Relation(
        "hoek_2002",
        "Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC Toronto",
        ("gsi", "mass_disturbance", "intact_strength_mpa"),
        {**QUALITY, "intact_strength_mpa": UNLIMITED},
        relations.hoek_2002_mpa,
        written.OF_2002,
    ),
    Relation(
        "serafim_pereira_1983",
        "Serafim & Pereira (1983), Int. Symp. Eng. Geol. Underground Constr., Lisbon",
        ("rmr89",),
        {"rmr89": relations.SERAFIM_PEREIRA_RMR89},
        relations.serafim_pereira_1983_mpa,
        written.SERAFIM_PEREIRA,
    ),
    Relation(
        "bieniawski_1978",
        "Bieniawski (1978), Int. J. Rock Mech. Min. Sci. 15, 237-247",
        ("rmr89",),
        {"rmr89": relations.BIENIAWSKI_RMR89},
        relations.bieniawski_1978_mpa,
        written.BIENIAWSKI,
    ),
    Relation(
        "barton_2002",
        "Barton (2002), Int. J. Rock Mech. Min. Sci. 39, 185-216",
        ("q", "intact_strength_mpa"),
        {"q": relations.BARTON_Q, "intact_strength_mpa": UNLIMITED},
        relations.barton_2002_mpa,
        written.BARTON,
    ),
)
