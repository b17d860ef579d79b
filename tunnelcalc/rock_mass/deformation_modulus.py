"""Deformation modulus of a jointed rock mass, by several published relations.

The sources print some of these in GPa; here all are in MPa. A relation with a rating is NaN
outside the range in which it holds: nothing is extrapolated. The ranges stand here by name, so
that whoever reads a NaN can say why. None of these relations but one knows the modulus of the
intact rock: whoever knows it should compare, since an estimate can exceed it.
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.vocabulary import GROUND, Limits

MPA_PER_GPA = 1000.0
ROOT_ENDS_MPA = 100.0
"""Intact strength above which the relation of 2002 has no root of it any more. [MPa]"""
INTACT_STRENGTH_RANGE_MPA = GROUND["intact_strength_mpa"].limits
"""Uniaxial compressive strength of intact rock. [MPa]"""
SERAFIM_PEREIRA_RMR89 = Limits(0, 50)
"""Rating up to which the relation of Serafim & Pereira is used. [-]"""
BIENIAWSKI_RMR89 = Limits(50, 100, above=True)
"""Rating above which the relation of Bieniawski is used: at 50 it gives no modulus at all. [-]"""
BARTON_Q = Limits(0.001, 1000)
"""The scale of Q: N. Barton, R. Lien, J. Lunde, Rock Mech. 6 (1974) 189-236 [from memory]. [-]"""


def hoek_diederichs_simplified_mpa(gsi: Array, disturbance: Array) -> Array:
    """Modulus from the quality of the rock mass alone.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    disturbance : (n,) D, 0 <= D <= 1. [-]

    Returns
    -------
    (n,) Erm = 1e5 (1 - D/2) / (1 + exp((75 + 25 D - GSI) / 11)). [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Knows nothing of the stiffness of the intact rock: use the form with the intact modulus
    wherever that is known. In weak rock this form can exceed the intact modulus.

    Source
    ------
    E. Hoek, M. S. Diederichs, Int. J. Rock Mech. Min. Sci. 43 (2006) 203-215, simplified
    equation.
    """
    same_length(gsi=gsi, disturbance=disturbance)
    return 1e5 * (1 - disturbance / 2) / (1 + np.exp((75 + 25 * disturbance - gsi) / 11))


def hoek_diederichs_with_intact_modulus_mpa(
    gsi: Array, disturbance: Array, intact_modulus_mpa: Array
) -> Array:
    """Modulus as a share of the modulus of the intact rock.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    disturbance : (n,) D, 0 <= D <= 1. [-]
    intact_modulus_mpa : (n,) Ei, measured or modulus ratio times intact strength. [MPa]

    Returns
    -------
    (n,) Erm = Ei (0.02 + (1 - D/2) / (1 + exp((60 + 15 D - GSI) / 11))). [MPa]

    Raises
    ------
    ShapeError : the arrays differ in length.

    Source
    ------
    E. Hoek, M. S. Diederichs, Int. J. Rock Mech. Min. Sci. 43 (2006) 203-215, detailed equation.
    """
    same_length(gsi=gsi, disturbance=disturbance, intact_modulus_mpa=intact_modulus_mpa)
    share = (1 - disturbance / 2) / (1 + np.exp((60 + 15 * disturbance - gsi) / 11))
    return intact_modulus_mpa * (0.02 + share)


def hoek_2002_mpa(gsi: Array, disturbance: Array, intact_strength_mpa: Array) -> Array:
    """Modulus from the quality of the rock mass and the strength of the intact rock.

    Parameters
    ----------
    gsi : (n,) geological strength index, 0 < GSI <= 100. [-]
    disturbance : (n,) D, 0 <= D <= 1. [-]
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock. [MPa]

    Returns
    -------
    (n,) Erm = 1000 (1 - D/2) sqrt(sci / 100) 10^((GSI - 10) / 40), the root being 1 for sci above
    100. [MPa]  NaN where sci is outside its range.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `INTACT_STRENGTH_RANGE_MPA`. In good rock the relation exceeds the modulus of most intact
    rocks: 178 GPa at GSI 100.

    Source
    ------
    E. Hoek, C. Carranza-Torres, B. Corkum, NARMS-TAC, Toronto (2002), 267-273, deformation
    modulus [from memory]. With D = 0 it is the relation of E. Hoek, E. T. Brown, Int. J. Rock
    Mech. Min. Sci. 34 (1997) 1165-1186.
    """
    same_length(gsi=gsi, disturbance=disturbance, intact_strength_mpa=intact_strength_mpa)
    inside = INTACT_STRENGTH_RANGE_MPA.contain(intact_strength_mpa)
    strength = np.where(inside, np.minimum(intact_strength_mpa, ROOT_ENDS_MPA), np.nan)
    root = np.sqrt(strength / ROOT_ENDS_MPA)
    return MPA_PER_GPA * (1 - disturbance / 2) * root * 10 ** ((gsi - 10) / 40)


def serafim_pereira_1983_mpa(rmr89: Array) -> Array:
    """Modulus from the rock mass rating of fair and poorer rock.

    Parameters
    ----------
    rmr89 : (n,) RMR89 with the rating of the actual water. [-]

    Returns
    -------
    (n,) Erm = 1000 10^((RMR - 10) / 40). [MPa]  NaN outside the valid range.

    Limits
    ------
    `SERAFIM_PEREIRA_RMR89`. Knows nothing of the intact rock: in weak rock it can exceed the
    intact modulus. It does not join the relation of Bieniawski at 50: 10 GPa here, 0 there.

    Source
    ------
    J. L. Serafim, J. P. Pereira, Int. Symp. Eng. Geol. Underground Constr., Lisbon (1983)
    [from memory].
    """
    rating = np.where(SERAFIM_PEREIRA_RMR89.contain(rmr89), rmr89, np.nan)
    return MPA_PER_GPA * 10 ** ((rating - 10) / 40)


def bieniawski_1978_mpa(rmr89: Array) -> Array:
    """Modulus from the rock mass rating of good rock.

    Parameters
    ----------
    rmr89 : (n,) RMR89 with the rating of the actual water. [-]

    Returns
    -------
    (n,) Erm = 1000 (2 RMR - 100). [MPa]  NaN outside the valid range.

    Limits
    ------
    `BIENIAWSKI_RMR89`. Near 50 the line falls to 0, far below what is measured: from about 55
    it is of use. Knows nothing of the intact rock.

    Source
    ------
    Z. T. Bieniawski, Int. J. Rock Mech. Min. Sci. 15 (1978) 237-247 [from memory].
    """
    rating = np.where(BIENIAWSKI_RMR89.contain(rmr89), rmr89, np.nan)
    return MPA_PER_GPA * (2 * rating - 100)


def barton_2002_mpa(q: Array, intact_strength_mpa: Array) -> Array:
    """Modulus from the rock mass quality Q, scaled by the strength of the intact rock.

    Parameters
    ----------
    q : (n,) the full Q, with its factors of water and stress; never Q'. [-]
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock. [MPa]

    Returns
    -------
    (n,) Erm = 10000 (Q sci / 100)^(1/3). [MPa]  NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `BARTON_Q`, `INTACT_STRENGTH_RANGE_MPA`.

    Source
    ------
    N. Barton, Int. J. Rock Mech. Min. Sci. 39 (2002) 185-216.
    """
    same_length(q=q, intact_strength_mpa=intact_strength_mpa)
    inside = BARTON_Q.contain(q) & INTACT_STRENGTH_RANGE_MPA.contain(intact_strength_mpa)
    return 10 * MPA_PER_GPA * np.cbrt(np.where(inside, q * intact_strength_mpa / 100, np.nan))
