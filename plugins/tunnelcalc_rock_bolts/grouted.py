"""Fully grouted bolts: a change of the ground in a ring, not a spring at the wall.

Along a fully grouted bolt the shear of the ground on the bolt turns at the neutral point. Between
the wall and that point the bolt holds the ground back: there strength acts as if it were
multiplied by 1 + beta. Beyond it the bolt is anchored and loads the ground.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array, GroundRing

M_PER_MM = 1e-3
USUAL_DENSITIES = (0.05, 0.20)
"""Range of beta in practice [-]; Indraratna & Kaiser (1990) [from memory]."""


class ImprovedMohrCoulomb(NamedTuple):
    """Friction angle (n,) [deg] and cohesion (n,) [MPa] of the bolted ground."""

    friction_angle_deg: Array
    cohesion_mpa: Array


class ImprovedHoekBrown(NamedTuple):
    """mb and s (n,) [-] of the bolted ground; sci and a do not change."""

    mb: Array
    s: Array


def bolt_density(
    radius_m: Array,
    *,
    diameter_mm: float,
    friction_factor: float,
    spacing_around_m: float,
    spacing_along_m: float,
) -> Array:
    """Density of fully grouted bolts.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    diameter_mm : d of the bar. [mm]
    friction_factor : lambda, share of the tangential stress that acts as shear on the bolt's
        surface, declared. [-]
    spacing_around_m, spacing_along_m : ST and SL, between bolts at the wall. [m]

    Returns
    -------
    (n,) beta = pi d lambda R / (SL ST). [-]

    Limits
    ------
    Usual range 0.05 to 0.20; what lies outside is for the caller to flag. Bolts of even length
    over the whole ring, grouted before the ground moves.

    Source
    ------
    B. Indraratna, P. K. Kaiser, Int. J. Rock Mech. Min. Sci. 27 (1990) 269-281 [from memory].
    """
    share = spacing_around_m * spacing_along_m
    return math.pi * diameter_mm * M_PER_MM * friction_factor * radius_m / share


def neutral_radius_m(radius_m: Array, length_m: float) -> Array:
    """Radius at which the shear on a fully grouted bolt turns.

    Parameters
    ----------
    radius_m : (n,) R of the opening. [m]
    length_m : L of the bolt, above 0. [m]

    Returns
    -------
    (n,) rho = L / ln(1 + L / R), between R and R + L / 2. [m]

    Limits
    ------
    A bolt without a plate that carries; its end may be in yielded or in elastic ground.

    Source
    ------
    B. Indraratna, P. K. Kaiser, Int. J. Rock Mech. Min. Sci. 27 (1990) 269-281 [from memory];
    balance of shear that falls with 1 / r along the bolt.
    """
    return length_m / np.log1p(length_m / radius_m)


def improved_mohr_coulomb(
    friction_angle_deg: Array, cohesion_mpa: Array, bolt_density: Array
) -> ImprovedMohrCoulomb:
    """Strength of bolted Mohr-Coulomb ground between the wall and the neutral point.

    Parameters
    ----------
    friction_angle_deg : (n,) phi, 0 <= phi < 90. [deg]
    cohesion_mpa : (n,) c. [MPa]
    bolt_density : (n,) beta, 0 or more. [-]

    Returns
    -------
    phi* = asin((m* - 1) / (m* + 1)) [deg], m* = (1 + beta) tan^2(45 + phi / 2), and c* =
    c sqrt(1 + beta) [MPa], at which the unconfined strength is 1 + beta times what it was.

    Source
    ------
    B. Indraratna, P. K. Kaiser, Int. J. Rock Mech. Min. Sci. 27 (1990) 269-281 [from memory].
    """
    sine = np.sin(np.radians(friction_angle_deg))
    slope = (1 + bolt_density) * (1 + sine) / (1 - sine)
    friction = np.degrees(np.arcsin((slope - 1) / (slope + 1)))
    return ImprovedMohrCoulomb(friction, cohesion_mpa * np.sqrt(1 + bolt_density))


def improved_hoek_brown(mb: Array, s: Array, bolt_density: Array) -> ImprovedHoekBrown:
    """Constants of bolted Hoek-Brown ground between the wall and the neutral point.

    Parameters
    ----------
    mb, s : (n,) constants of the ground in the ring: residual ones where it has such. [-]
    bolt_density : (n,) beta, 0 or more. [-]

    Returns
    -------
    (1 + beta) mb and (1 + beta) s, with sci and a as they were: the stress difference that the
    ground bears grows by (1 + beta)^a. [-]

    Limits
    ------
    An analogue to the Mohr-Coulomb form, on its safe side: there the whole strength grows by
    1 + beta.

    Source
    ------
    Scaling linear in beta as in R. R. Osgoui, P. Oreste, Int. J. Numer. Anal. Methods Geomech.
    34 (2010) 1651-1686 [from memory].
    """
    return ImprovedHoekBrown((1 + bolt_density) * mb, (1 + bolt_density) * s)


def grouted_ring(
    sections: Mapping[str, Array], bolt_density: Array, length_m: float, capacity_mpa: Array
) -> GroundRing:
    """The change of the ground by fully grouted bolts.

    Parameters
    ----------
    sections : columns (n,): `radius_m`, and those of the strength that the ground's law uses.
    bolt_density : (n,) beta. [-]
    length_m : L of the bolts. [m]
    capacity_mpa : (n,) pressure that stands for the bolts in sums. [MPa]

    Returns
    -------
    Ring from the wall to the neutral point, rho - R deep [m], with mb and s [-], friction angle
    [deg] and cohesion [MPa] of the bolted ground, as far as the sections have them.

    Limits
    ------
    Beyond the neutral point, where the bolts load the ground, it is left as it was. That is
    exact where the anchored part lies in elastic ground.

    Source
    ------
    `neutral_radius_m`, `improved_hoek_brown` and `improved_mohr_coulomb`.
    """
    changed: dict[str, Array] = {}
    if {"mb", "s"} <= sections.keys():
        constants = improved_hoek_brown(sections["mb"], sections["s"], bolt_density)
        changed |= {"mb": constants.mb, "s": constants.s}
    if {"friction_angle_deg", "cohesion_mpa"} <= sections.keys():
        line = improved_mohr_coulomb(
            sections["friction_angle_deg"], sections["cohesion_mpa"], bolt_density
        )
        changed |= line._asdict()
    radius = sections["radius_m"]
    return GroundRing(neutral_radius_m(radius, length_m) - radius, changed, capacity_mpa)
