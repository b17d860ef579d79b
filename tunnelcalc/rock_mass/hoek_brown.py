"""Strength of a jointed rock mass by the generalised Hoek-Brown criterion.

Source of all formulas here: E. Hoek, C. Carranza-Torres, B. Corkum, "Hoek-Brown failure
criterion - 2002 edition", NARMS-TAC, Toronto (2002), 267-273; kept unchanged in E. Hoek,
E. T. Brown, J. Rock Mech. Geotech. Eng. 11 (2019) 445-463.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array, same_length


class HoekBrownConstants(NamedTuple):
    """mb, s and a of s1 = s3 + sci (mb s3 / sci + s)^a, each (n,). [-]"""

    mb: Array
    s: Array
    a: Array


class MohrCoulomb(NamedTuple):
    """Friction angle (n,) [deg] and cohesion (n,) [MPa] of a straight strength line."""

    friction_angle_deg: Array
    cohesion_mpa: Array


def hoek_brown_constants(gsi: Array, mi: Array, disturbance: Array) -> HoekBrownConstants:
    """Constants of the criterion from the geological strength index.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    mi : (n,) constant of the intact rock. [-]
    disturbance : (n,) D, 0 <= D <= 1, of the blasted or relaxed zone near the wall. [-]

    Returns
    -------
    mb, s, a. [-]  Intact rock, GSI 100 and D 0, gives mi, 1 and exactly 0.5.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Isotropic, many-jointed rock mass at the scale of the opening.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), eqs. for mb, s and a.
    """
    same_length(gsi=gsi, mi=mi, disturbance=disturbance)
    mb = mi * np.exp((gsi - 100) / (28 - 14 * disturbance))
    s = np.exp((gsi - 100) / (9 - 3 * disturbance))
    a = 0.5 + (np.exp(-gsi / 15) - np.exp(-20 / 3)) / 6
    return HoekBrownConstants(mb, s, a)


def rock_mass_strength_mpa(intact_strength_mpa: Array, s: Array, a: Array) -> Array:
    """Unconfined compressive strength of the rock mass.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock. [MPa]
    s, a : (n,) constants of the criterion. [-]

    Returns
    -------
    (n,) sc = sci s^a. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), the criterion at s3 = 0.
    """
    same_length(intact_strength_mpa=intact_strength_mpa, s=s, a=a)
    return intact_strength_mpa * s**a


def tensile_strength_mpa(intact_strength_mpa: Array, mb: Array, s: Array) -> Array:
    """Tensile strength of the rock mass, as a magnitude.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci. [MPa]
    mb, s : (n,) constants of the criterion, mb > 0. [-]

    Returns
    -------
    (n,) st = s sci / mb, positive. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), the criterion under equal biaxial tension.
    """
    same_length(intact_strength_mpa=intact_strength_mpa, mb=mb, s=s)
    return s * intact_strength_mpa / mb


def global_strength_mpa(intact_strength_mpa: Array, mb: Array, s: Array, a: Array) -> Array:
    """Strength of a large body of rock mass, confined between tension and sci / 4.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci. [MPa]
    mb, s, a : (n,) constants of the criterion. [-]

    Returns
    -------
    (n,) scm. [MPa]  Not the unconfined strength sc, and not the strength in the squeezing
    relation of Hoek & Marinos (2000).

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), rock mass strength for s3max = sci / 4.
    """
    same_length(intact_strength_mpa=intact_strength_mpa, mb=mb, s=s, a=a)
    shape = (mb + 4 * s - a * (mb - 8 * s)) * (mb / 4 + s) ** (a - 1)
    return intact_strength_mpa * shape / (2 * (1 + a) * (2 + a))


def tunnel_confinement_mpa(global_strength_mpa: Array, largest_stress_mpa: Array) -> Array:
    """Upper end of the confining stress over which a straight line stands for the criterion.

    Parameters
    ----------
    global_strength_mpa : (n,) scm. [MPa]
    largest_stress_mpa : (n,) the larger of the vertical and horizontal in-situ stress. [MPa]

    Returns
    -------
    (n,) s3max = scm 0.47 (scm / sv)^-0.94. [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Tunnels whose failed zone does not reach the surface.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), relation for tunnels.
    """
    same_length(global_strength_mpa=global_strength_mpa, largest_stress_mpa=largest_stress_mpa)
    return global_strength_mpa * 0.47 * (global_strength_mpa / largest_stress_mpa) ** -0.94


def equivalent_mohr_coulomb(
    intact_strength_mpa: Array, mb: Array, s: Array, a: Array, confinement_mpa: Array
) -> MohrCoulomb:
    """Straight line that fits the criterion by least squares from tension up to s3max.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci. [MPa]
    mb, s, a : (n,) constants of the criterion. [-]
    confinement_mpa : (n,) s3max, upper end of the range; its lower end is the tensile
        strength. [MPa]

    Returns
    -------
    Friction angle [deg] and cohesion [MPa].

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Near s3max only: at low confinement the line overstates tensile capacity and understates
    friction.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), equivalent friction angle and cohesion.
    """
    same_length(intact_strength_mpa=intact_strength_mpa, mb=mb, s=s, a=a, c=confinement_mpa)
    ratio = confinement_mpa / intact_strength_mpa
    curvature = (s + mb * ratio) ** (a - 1)
    q = 6 * a * mb * curvature
    scale = (1 + a) * (2 + a)
    friction = np.arcsin(q / (2 * scale + q))
    cohesion = intact_strength_mpa * ((1 + 2 * a) * s + (1 - a) * mb * ratio) * curvature
    cohesion = cohesion / (scale * np.sqrt(1 + q / scale))
    return MohrCoulomb(np.degrees(friction), cohesion)
