"""Bolt density of an element of fully grouted bolts, and the force that its sections ask of it."""

from __future__ import annotations

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_rock_bolts.grouted import bolt_density, neutral_radius_m
from tunnelcalc_rock_bolts.grouted_force import (
    HoekBrownGround,
    MohrCoulombGround,
    force_in_hoek_brown_kn,
    force_in_mohr_coulomb_kn,
)
from tunnelcalc_rock_bolts.parts import share_m2


def density(sections: api.Sections, element: api.Element) -> Array:
    """(n,) beta. [-]"""
    return bolt_density(
        sections["radius_m"],
        diameter_mm=element.number("diameter_mm"),
        friction_factor=element.number("friction_factor"),
        spacing_around_m=element.number("spacing_around_m"),
        spacing_along_m=element.number("spacing_along_m"),
    )


def forces_kn(sections: api.Sections, element: api.Element) -> dict[str, Array]:
    """Greatest force (n,) in a bolt by each way in which the strength of the sections is known,
    NaN where it is not: hoek_brown, mohr_coulomb. [kN]"""
    beta, radius = density(sections, element), sections["radius_m"]
    places = (
        beta,
        radius,
        sections["supported_plastic_radius_m"],
        neutral_radius_m(radius, element.number("length_m")),
        sections["support_pressure_mpa"],
        share_m2(element),
    )
    found: dict[str, Array] = {}
    if set(HoekBrownGround._fields) <= sections.keys():
        ground = HoekBrownGround(*(sections[name] for name in HoekBrownGround._fields))
        found["hoek_brown"] = force_in_hoek_brown_kn(ground, *places)
    if set(MohrCoulombGround._fields) <= sections.keys():
        line = MohrCoulombGround(*(sections[name] for name in MohrCoulombGround._fields))
        found["mohr_coulomb"] = force_in_mohr_coulomb_kn(line, *places)
    return found


def force_kn(sections: api.Sections, element: api.Element) -> Array:
    """(n,) greatest force in a bolt. [kN]

    Where the strength is known in both ways, as in Hoek-Brown ground with its equivalent line, the
    larger counts: the shear that Indraratna & Kaiser assume is more than what the Hoek-Brown form
    credits to the ground, and the bolt has to bear it.
    """
    force = np.full(sections.count, np.nan)
    for one in forces_kn(sections, element).values():
        force = np.fmax(force, one)
    yields = sections["supported_plastic_radius_m"] > sections["radius_m"]
    # Ground that has not yielded needs no bolts, whatever its strength.
    return np.where(yields, force, 0 * sections["supported_plastic_radius_m"])
