"""Quality and strength of the ground estimated from what was observed.

An estimate is given inside the valid range of its relation and is NaN outside it: nothing is
clipped or extrapolated. The ranges stand here by name, so that whoever reads a NaN can say why.
It is NaN as well where it leaves the range of what it estimates: `GSI_RANGE`,
`INTACT_STRENGTH_RANGE_MPA`.
"""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.vocabulary import GROUND, Limits

GSI_RANGE = GROUND["gsi"].limits
"""Geological strength index, given or estimated: 0 < GSI <= 100. [-]"""
INTACT_STRENGTH_RANGE_MPA = GROUND["intact_strength_mpa"].limits
"""Uniaxial compressive strength of intact rock, estimated. [MPa]"""
JCOND89_RANGE = GROUND["jcond89"].limits
"""The rating of joint condition of 1989 runs from 0 to 30. [-]"""
RQD_RANGE_PCT = GROUND["rqd_pct"].limits
"""Rock quality designation. [%]"""
RMR89_DRY_RANGE = Limits(23, 100)
"""Hoek, Kaiser & Bawden (1995): the relation with RMR89 holds from 23, which is GSI 18. [-]"""
Q_PRIME_RANGE = GROUND["q_prime"].limits
"""Q' is above 0; between 0.0076 and 503 it gives an index within `GSI_RANGE`. [-]"""
BLOCK_VOLUME_RANGE_CM3 = GROUND["block_volume_cm3"].limits
"""Block volume, in cubic centimetres and not in cubic metres. [cm3]"""
JOINT_CONDITION_RANGE = GROUND["joint_condition"].limits
"""Joint condition factor Jc. [-]"""
POINT_LOAD_RANGE_MPA = GROUND["point_load_mpa"].limits
"""Point load index Is50. [MPa]"""
POINT_LOAD_FACTOR_RANGE = Limits(0, above=True)
"""Intact strength over point load index: the user's number. [-]"""
RESIDUAL_GSI_RANGE = Limits(0, 74.6, above=True)
"""Peak index from which a residual one follows: beyond 1/0.0134 = 74.6 the curve falls. [-]"""


def _inside(values: Array, limits: Limits) -> Array:
    """The values, with NaN for those outside the limits."""
    return np.where(limits.contain(values), values, np.nan)


def gsi_from_jcond89_and_rqd(jcond89: Array, rqd_pct: Array) -> Array:
    """Geological strength index from the rating of joint condition and the core quality.

    Parameters
    ----------
    jcond89 : (n,) JCond89, rating of joint condition in the rock mass rating of 1989. [-]
    rqd_pct : (n,) RQD, rock quality designation. [%]

    Returns
    -------
    (n,) GSI = 1.5 JCond89 + RQD / 2. [-]  NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `JCOND89_RANGE`, `RQD_RANGE_PCT`. Jointed ground to which the chart of the index applies.

    Source
    ------
    E. Hoek, T. G. Carter, M. S. Diederichs, Quantification of the Geological Strength Index
    chart, 47th US Rock Mechanics Symposium (2013), ARMA 13-672 [from memory].
    """
    same_length(jcond89=jcond89, rqd_pct=rqd_pct)
    quality = 1.5 * _inside(jcond89, JCOND89_RANGE) + _inside(rqd_pct, RQD_RANGE_PCT) / 2
    return _inside(quality, GSI_RANGE)


def gsi_from_rmr89_dry(rmr89_dry: Array) -> Array:
    """Geological strength index from the dry rock mass rating of 1989.

    Parameters
    ----------
    rmr89_dry : (n,) RMR89' with groundwater rating 15 and orientation adjustment 0. [-]

    Returns
    -------
    (n,) GSI = RMR89' - 5. [-]  NaN outside the valid range.

    Limits
    ------
    `RMR89_DRY_RANGE`. A rating with the actual water is another number and must not be used.

    Source
    ------
    E. Hoek, P. K. Kaiser, W. F. Bawden, Support of Underground Excavations in Hard Rock (1995).
    """
    return _inside(_inside(rmr89_dry, RMR89_DRY_RANGE) - 5, GSI_RANGE)


def gsi_from_q_prime(q_prime: Array) -> Array:
    """Geological strength index from the rock mass quality without water and stress.

    Parameters
    ----------
    q_prime : (n,) Q' = RQD / Jn Jr / Ja, never the full Q. [-]

    Returns
    -------
    (n,) GSI = 9 ln Q' + 44. [-]  NaN outside the valid range.

    Limits
    ------
    `Q_PRIME_RANGE`, and an estimate within `GSI_RANGE`.

    Source
    ------
    E. Hoek, P. K. Kaiser, W. F. Bawden, Support of Underground Excavations in Hard Rock (1995).
    """
    return _inside(9 * np.log(_inside(q_prime, Q_PRIME_RANGE)) + 44, GSI_RANGE)


def gsi_from_block_volume(block_volume_cm3: Array, joint_condition: Array) -> Array:
    """Geological strength index from the size of the blocks and the condition of the joints.

    Parameters
    ----------
    block_volume_cm3 : (n,) Vb, mean volume of a block. [cm3]
    joint_condition : (n,) Jc, waviness times smoothness over alteration. [-]

    Returns
    -------
    (n,) GSI = (26.5 + 8.79 ln Jc + 0.9 ln Vb) / (1 + 0.0151 ln Jc - 0.0253 ln Vb). [-]  NaN
    outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `BLOCK_VOLUME_RANGE_CM3`, `JOINT_CONDITION_RANGE`, and an estimate within `GSI_RANGE`. Beyond
    the pole of the equation, where its denominator is not above 0, the estimate is NaN too. The
    edges of the chart behind the equation are not checked.

    Source
    ------
    M. Cai, P. K. Kaiser, Geotech. Geol. Eng. 24 (2006) 1089-1102, equation for the chart of Cai
    et al., Int. J. Rock Mech. Min. Sci. 41 (2004) 3-19 [from memory].
    """
    same_length(block_volume_cm3=block_volume_cm3, joint_condition=joint_condition)
    volume = np.log(_inside(block_volume_cm3, BLOCK_VOLUME_RANGE_CM3))
    condition = np.log(_inside(joint_condition, JOINT_CONDITION_RANGE))
    below = 1 + 0.0151 * condition - 0.0253 * volume
    below = np.where(below > 0, below, np.nan)
    return _inside((26.5 + 8.79 * condition + 0.9 * volume) / below, GSI_RANGE)


def intact_strength_from_point_load_mpa(point_load_mpa: Array, point_load_factor: Array) -> Array:
    """Uniaxial compressive strength of the intact rock from the point load index.

    Parameters
    ----------
    point_load_mpa : (n,) Is50, for a core of 50 mm. [MPa]
    point_load_factor : (n,) k, calibrated by the user for the rock; there is no default. [-]

    Returns
    -------
    (n,) sci = k Is50. [MPa]  NaN outside the valid ranges.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    `POINT_LOAD_RANGE_MPA`, `POINT_LOAD_FACTOR_RANGE`, and an estimate within
    `INTACT_STRENGTH_RANGE_MPA`. For hard rock k is 20 to 25, for weak rock lower: common
    practice, no source.

    Source
    ------
    Definition of k. Its value is the user's.
    """
    same_length(point_load_mpa=point_load_mpa, point_load_factor=point_load_factor)
    index = _inside(point_load_mpa, POINT_LOAD_RANGE_MPA)
    factor = _inside(point_load_factor, POINT_LOAD_FACTOR_RANGE)
    return _inside(factor * index, INTACT_STRENGTH_RANGE_MPA)


def residual_gsi(gsi: Array) -> Array:
    """Geological strength index of the ground after failure.

    Parameters
    ----------
    gsi : (n,) GSI before failure. [-]

    Returns
    -------
    (n,) GSIr = GSI exp(-0.0134 GSI). [-]  NaN outside the valid range.

    Limits
    ------
    `RESIDUAL_GSI_RANGE`: above it the curve would give better ground a lower residual index.

    Source
    ------
    M. Cai, P. K. Kaiser, Y. Tasaka, M. Minami, Int. J. Rock Mech. Min. Sci. 44 (2007) 247-265
    [from memory].
    """
    peak = _inside(gsi, RESIDUAL_GSI_RANGE)
    return peak * np.exp(-0.0134 * peak)
