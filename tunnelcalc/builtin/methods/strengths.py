"""Strength of the rock mass: from the quality of the ground, or entered directly."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Limits, Sections, SectionValues, SheetLine
from tunnelcalc.builtin.methods.lines import strengths as written
from tunnelcalc.rock_mass import hoek_brown, mohr_coulomb
from tunnelcalc.vocabulary import UNLIMITED

OF_2002 = "Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC Toronto"
CONSTANTS = ("mb", "s", "a")
RESIDUAL_CONSTANTS = ("residual_mb", "residual_s", "residual_a")
DERIVED = (
    "rock_mass_strength_mpa",
    "tensile_strength_mpa",
    "global_strength_mpa",
    "confinement_mpa",
    "friction_angle_deg",
    "cohesion_mpa",
)
IN_SITU = ("effective_vertical_stress_mpa", "effective_horizontal_stress_mpa")


def _hoek_brown_columns(sections: Sections, mb: Array, s: Array, a: Array) -> dict[str, Array]:
    """Constants, the strengths that follow, and the straight line over the tunnel's stresses."""
    sci = sections["intact_strength_mpa"]
    whole = hoek_brown.global_strength_mpa(sci, mb, s, a)
    vertical, horizontal = (sections[name] for name in IN_SITU)
    confinement = hoek_brown.tunnel_confinement_mpa(whole, np.maximum(vertical, horizontal))
    line = hoek_brown.equivalent_mohr_coulomb(sci, mb, s, a, confinement)
    return {
        "mb": mb,
        "s": s,
        "a": a,
        "rock_mass_strength_mpa": hoek_brown.rock_mass_strength_mpa(sci, s, a),
        "tensile_strength_mpa": hoek_brown.tensile_strength_mpa(sci, mb, s),
        "global_strength_mpa": whole,
        "confinement_mpa": confinement,
        "friction_angle_deg": line.friction_angle_deg,
        "cohesion_mpa": line.cohesion_mpa,
    }


class HoekBrown2002:
    """Generalised Hoek-Brown criterion from the geological strength index."""

    name = "hoek_brown_2002"
    source = OF_2002
    needs = ("intact_strength_mpa", "mi", "gsi", "residual_gsi", "mass_disturbance", *IN_SITU)
    requires: Mapping[str, Limits] = {
        "gsi": UNLIMITED,
        "mi": UNLIMITED,
        "disturbance": UNLIMITED,
        "intact_strength_mpa": UNLIMITED,
    }
    requires_of_residual: Mapping[str, Limits] = {"residual_gsi": UNLIMITED}
    gives = (*CONSTANTS, *DERIVED, *RESIDUAL_CONSTANTS)

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        mi, disturbance = sections["mi"], sections["mass_disturbance"]
        peak = hoek_brown.hoek_brown_constants(sections["gsi"], mi, disturbance)
        residual = hoek_brown.hoek_brown_constants(sections["residual_gsi"], mi, disturbance)
        return {
            **_hoek_brown_columns(sections, *peak),
            **dict(zip(RESIDUAL_CONSTANTS, residual, strict=True)),
        }

    def lines(self, values: SectionValues) -> Sequence[SheetLine]:
        return written.of_quality(values, self.source)


class HoekBrownConstants:
    """Generalised Hoek-Brown criterion from constants that tests or back-analysis gave."""

    name = "hoek_brown_constants"
    source = f"constants as entered, a = 0.5 for the original form of 1980; criterion: {OF_2002}"
    needs = ("intact_strength_mpa", *CONSTANTS, *RESIDUAL_CONSTANTS, *IN_SITU)
    requires: Mapping[str, Limits] = {
        "intact_strength_mpa": UNLIMITED,
        **dict.fromkeys(CONSTANTS, UNLIMITED),
    }
    requires_of_residual: Mapping[str, Limits] = dict.fromkeys(RESIDUAL_CONSTANTS, UNLIMITED)
    gives = (*CONSTANTS, *DERIVED, *RESIDUAL_CONSTANTS)

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        return {
            **_hoek_brown_columns(sections, *(sections[name] for name in CONSTANTS)),
            **{name: sections[name] for name in RESIDUAL_CONSTANTS},
        }

    def lines(self, values: SectionValues) -> Sequence[SheetLine]:
        return written.of_constants(values, self.source)


class MohrCoulomb:
    """A straight strength line from constants that tests or back-analysis gave."""

    name = "mohr_coulomb"
    source = "Mohr-Coulomb criterion, cohesion and friction angle as entered"
    line = ("friction_angle_deg", "cohesion_mpa")
    residual_line = ("residual_friction_angle_deg", "residual_cohesion_mpa")
    needs = (*line, *residual_line)
    requires: Mapping[str, Limits] = dict.fromkeys(line, UNLIMITED)
    requires_of_residual: Mapping[str, Limits] = dict.fromkeys(residual_line, UNLIMITED)
    gives = ("rock_mass_strength_mpa", "global_strength_mpa", *line, *residual_line)

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        strength = mohr_coulomb.unconfined_strength_mpa(
            sections["cohesion_mpa"], sections["friction_angle_deg"]
        )
        return {
            "rock_mass_strength_mpa": strength,
            "global_strength_mpa": strength,
            **{name: sections[name] for name in self.needs},
        }

    def lines(self, values: SectionValues) -> Sequence[SheetLine]:
        return written.of_straight_line(values, self.source)


STRENGTHS: tuple[api.StrengthMethod, ...] = (HoekBrown2002(), HoekBrownConstants(), MohrCoulomb())
