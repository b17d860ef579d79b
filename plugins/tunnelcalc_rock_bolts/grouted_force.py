"""Force in fully grouted bolts that the strength credited to the bolted ground asks for.

Bolted ground bears H* = st* - sr where the ground alone bears H. Radial equilibrium of the ring,

    d sr / d ln r = H* = H + (what the bolts give)

is that of ground with H and of a shear from the bolts on it. A bolt holds the share SL ST r / R of
a cylinder of radius r, so that its axial force T grows from the wall to the neutral point by

    dT / dr = SL ST r / R (H* - H) / r,    T = SL ST / R times the integral of H* - H over r

For Mohr-Coulomb ground H* - H is beta st, and dT / dr = pi d lambda st: the shear on the bolt's
surface that Indraratna & Kaiser (1990) assume. The bar must carry T, or the strength is not there.

Where only part of the ring has yielded, to c, the deviator beyond it is H*(c) (c / r)^2 and meets H
before c sqrt(H* / H) = c + W: from there on the ground needs no bolts. What it needs up to there is
convex in r and lies below its chord, so that with w the lesser of W and rho - c

    rest of the integral <= (H* - H)(c) w (1 - w / (2 W))

which is taken: on the safe side.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array
from tunnelcalc_rock_bolts.grouted import improved_hoek_brown, improved_mohr_coulomb

KN_PER_MN = 1e3
NODES, WEIGHTS = np.polynomial.legendre.leggauss(16)


class HoekBrownGround(NamedTuple):
    """Strength of the ground without bolts: sci (n,) [MPa], mb, s, a (n,) [-]."""

    intact_strength_mpa: Array
    mb: Array
    s: Array
    a: Array


class MohrCoulombGround(NamedTuple):
    """Strength of the ground without bolts: phi (n,) [deg], c (n,) [MPa]."""

    friction_angle_deg: Array
    cohesion_mpa: Array


def reach_beyond_m(edge_m: Array, neutral_radius_m: Array, strength_ratio: Array) -> Array:
    """w (1 - w / (2 W)): length beyond the yielded part over which the bolts give what they give
    at its edge.

    Parameters
    ----------
    edge_m : (n,) c of the yielded part of the ring, not above rho. [m]
    neutral_radius_m : (n,) rho. [m]
    strength_ratio : (n,) H* / H at the edge, 1 or more. [-]

    Returns
    -------
    (n,) length. [m]  0 where all of the ring has yielded.

    Source
    ------
    Derivation at the head of this module.
    """
    width = edge_m * (np.sqrt(strength_ratio) - 1)
    there = np.minimum(width, neutral_radius_m - edge_m)
    return there * (1 - there / (2 * np.where(width > 0, width, 1)))


def force_in_hoek_brown_kn(
    ground: HoekBrownGround,
    bolt_density: Array,
    radius_m: Array,
    plastic_radius_m: Array,
    neutral_radius_m: Array,
    support_pressure_mpa: Array,
    share_m2: float,
) -> Array:
    """Greatest force in a bolt in Hoek-Brown ground.

    Parameters
    ----------
    ground : strength without bolts.
    bolt_density : (n,) beta, 0 or more. [-]
    radius_m, plastic_radius_m, neutral_radius_m : (n,) R, Rp of the supported section, rho. [m]
    support_pressure_mpa : (n,) pi on the wall. [MPa]
    share_m2 : SL ST. [m2]

    Returns
    -------
    (n,) T at the neutral point. [kN]  0 where the wall has not yielded.

    Limits
    ------
    Plate not counted, ring yielded from the wall. The bolts stop the ground as they are credited
    with; blocks that hang on them come besides.

    Source
    ------
    Derivation at the head of this module.
    """
    sci, _, _, a = ground
    mb, s = improved_hoek_brown(ground.mb, ground.s, bolt_density)
    ratio = (1 + bolt_density) ** a
    at_wall = (mb * support_pressure_mpa / sci + s) ** (1 - a)

    def given(r: Array) -> Array:
        power = at_wall + (1 - a) * mb * np.log(r / radius_m)
        return sci * power ** (a / (1 - a)) * (1 - 1 / ratio)

    edge = np.clip(plastic_radius_m, radius_m, neutral_radius_m)
    beyond = reach_beyond_m(edge, neutral_radius_m, ratio)
    return _force_kn(given, radius_m, edge, beyond, share_m2)


def force_in_mohr_coulomb_kn(
    ground: MohrCoulombGround,
    bolt_density: Array,
    radius_m: Array,
    plastic_radius_m: Array,
    neutral_radius_m: Array,
    support_pressure_mpa: Array,
    share_m2: float,
) -> Array:
    """Greatest force in a bolt in Mohr-Coulomb ground.

    Parameters
    ----------
    ground : strength without bolts.
    bolt_density : (n,) beta, above 0. [-]
    radius_m, plastic_radius_m, neutral_radius_m : (n,) R, Rp of the supported section, rho. [m]
    support_pressure_mpa : (n,) pi on the wall. [MPa]
    share_m2 : SL ST. [m2]

    Returns
    -------
    (n,) T at the neutral point, the integral of pi d lambda st. [kN]  0 where the wall has not
    yielded.

    Limits
    ------
    As `force_in_hoek_brown_kn`.

    Source
    ------
    B. Indraratna, P. K. Kaiser, Int. J. Rock Mech. Min. Sci. 27 (1990) 269-281 [from memory],
    for the shear; derivation at the head of this module.
    """
    improved = improved_mohr_coulomb(*ground, bolt_density)
    sine, cosine = (f(np.radians(improved.friction_angle_deg)) for f in (np.sin, np.cos))
    slope = 2 * sine / (1 - sine)
    unconfined = 2 * improved.cohesion_mpa * cosine / (1 - sine)
    at_wall = slope * support_pressure_mpa + unconfined

    def stresses(r: Array) -> tuple[Array, Array]:
        """sr and H*."""
        growth = slope * np.log(r / radius_m)
        radial = support_pressure_mpa + at_wall * np.expm1(growth) / slope
        return radial, at_wall * np.exp(growth)

    def given(r: Array) -> Array:
        radial, strength = stresses(r)
        return bolt_density / (1 + bolt_density) * (radial + strength)

    edge = np.clip(plastic_radius_m, radius_m, neutral_radius_m)
    radial, strength = stresses(edge)
    own = strength - bolt_density / (1 + bolt_density) * (radial + strength)
    # Ground without cohesion at a wall without pressure has no strength to compare with.
    ratio = np.where(own > 0, strength / np.where(own > 0, own, 1), np.inf)
    beyond = reach_beyond_m(edge, neutral_radius_m, ratio)
    return _force_kn(given, radius_m, edge, beyond, share_m2)


def _force_kn(
    given: Callable[[Array], Array],
    radius_m: Array,
    edge_m: Array,
    beyond_m: Array,
    share_m2: float,
) -> Array:
    """The integral over r from the wall to the edge, by Gauss-Legendre points in fixed order, and
    what lies beyond; 0 where the wall has not yielded."""
    half = (edge_m - radius_m) / 2
    total = np.zeros(np.shape(half))
    for node, weight in zip(NODES, WEIGHTS, strict=True):
        total = total + weight * given(radius_m + half * (1 + node))
    whole = half * total + beyond_m * given(edge_m)
    whole = np.where(edge_m <= radius_m, 0, whole)
    return KN_PER_MN * share_m2 / radius_m * whole
