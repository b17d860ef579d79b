"""The methods by name that come with the distribution, offered through the hooks."""

from __future__ import annotations

from collections.abc import Callable, Mapping

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array, Sections
from tunnelcalc.ground_reaction import closure_profile
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.rock_mass import deformation_modulus, hoek_brown


class HoekBrown2002:
    """Generalised Hoek-Brown criterion from the geological strength index."""

    name = "hoek_brown_2002"
    source = "Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC Toronto"
    needs = (
        "intact_strength_mpa",
        "mi",
        "gsi",
        "disturbance",
        "vertical_stress_mpa",
        "stress_ratio",
    )
    gives = (
        "mb",
        "s",
        "a",
        "rock_mass_strength_mpa",
        "tensile_strength_mpa",
        "global_strength_mpa",
        "confinement_mpa",
        "friction_angle_deg",
        "cohesion_mpa",
    )

    def compute(self, sections: Sections) -> Mapping[str, Array]:
        sci = sections["intact_strength_mpa"]
        mb, s, a = hoek_brown.hoek_brown_constants(
            sections["gsi"], sections["mi"], sections["disturbance"]
        )
        whole = hoek_brown.global_strength_mpa(sci, mb, s, a)
        largest = sections["vertical_stress_mpa"] * np.maximum(1, sections["stress_ratio"])
        confinement = hoek_brown.tunnel_confinement_mpa(whole, largest)
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


class HoekDiederichs2006:
    """The form with the intact modulus where that is known, else the simplified form."""

    name = "hoek_diederichs_2006"
    source = "Hoek & Diederichs (2006), Int. J. Rock Mech. Min. Sci. 43, 203-215"
    needs = ("gsi", "disturbance", "intact_modulus_mpa")

    def modulus_mpa(self, sections: Sections) -> Array:
        gsi, disturbance = sections["gsi"], sections["disturbance"]
        intact = sections["intact_modulus_mpa"]
        detailed = deformation_modulus.hoek_diederichs_with_intact_modulus_mpa(
            gsi, disturbance, intact
        )
        simplified = deformation_modulus.hoek_diederichs_simplified_mpa(gsi, disturbance)
        return np.where(np.isnan(intact), simplified, detailed)


class HoekBrownPerfectlyPlastic:
    """Elastic, perfectly plastic Hoek-Brown ground with constant dilation."""

    name = "hoek_brown_perfectly_plastic"
    source = (
        "Carranza-Torres (2004), Int. J. Rock Mech. Min. Sci. 41, stresses; elastic strains in "
        "the plastic zone by Hooke's law from the actual stresses"
    )
    needs = (
        "in_situ_stress_mpa",
        "intact_strength_mpa",
        "mb",
        "s",
        "a",
        "deformation_modulus_mpa",
        "poisson_ratio",
        "dilation_deg",
    )

    def curve(self, sections: Sections) -> api.GroundCurve:
        return HoekBrownCurve.of_ground(**{name: sections[name] for name in self.needs})


class VlachopoulosDiederichs2009:
    """Closure profile that follows from the plastic radius of the unsupported section."""

    name = "vlachopoulos_diederichs_2009"
    source = "Vlachopoulos & Diederichs (2009), Rock Mech. Rock Eng. 42, 131-146"
    needs = ("radius_m", "plastic_radius_m")

    def share(self, sections: Sections, distance_m: Array) -> Array:
        return closure_profile.vlachopoulos_diederichs_2009(
            distance_m, sections["radius_m"], sections["plastic_radius_m"]
        )


@api.hookimpl
def tunnelcalc_register_strengths(register: Callable[[api.StrengthMethod], None]) -> None:
    register(HoekBrown2002())


@api.hookimpl
def tunnelcalc_register_deformation_moduli(
    register: Callable[[api.ModulusMethod], None],
) -> None:
    register(HoekDiederichs2006())


@api.hookimpl
def tunnelcalc_register_ground_reactions(
    register: Callable[[api.GroundReactionMethod], None],
) -> None:
    register(HoekBrownPerfectlyPlastic())


@api.hookimpl
def tunnelcalc_register_closure_profiles(
    register: Callable[[api.ClosureProfileMethod], None],
) -> None:
    register(VlachopoulosDiederichs2009())
