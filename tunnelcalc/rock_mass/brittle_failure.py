"""Brittle failure of massive rock at the wall of a tunnel."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array, same_length

SPALLING_SCATTER = 0.1
"""The fit of the failed radius over the tunnel's holds within this, up and down. [-]"""


def _above_zero(values: Array) -> Array:
    """The values, with NaN for those that are not above 0."""
    return np.where(values > 0, values, np.nan)


def spalling_depth_m(
    largest_wall_stress_mpa: Array, intact_strength_mpa: Array, radius_m: Array
) -> Array:
    """Depth to which massive rock spalls, behind the wall.

    Parameters
    ----------
    largest_wall_stress_mpa : (n,) smax = 3 s1 - s3 of the in-plane in-situ stresses. [MPa]
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock, above 0. [MPa]
    radius_m : (n,) R of the tunnel. [m]

    Returns
    -------
    (n,) the larger of 0 and rf - R, with rf/R = 0.49 + 1.25 smax / sci. [m]  It is 0 up to
    smax / sci = 0.408. NaN where the intact strength is not above 0.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Massive to moderately jointed brittle rock only; mean of a fit that scatters by
    `SPALLING_SCATTER` R. No support, tunnels of about circular shape.

    Source
    ------
    C. D. Martin, P. K. Kaiser, D. R. McCreath, Can. Geotech. J. 36 (1999) 136-151 [from memory].
    """
    same_length(
        largest_wall_stress_mpa=largest_wall_stress_mpa,
        intact_strength_mpa=intact_strength_mpa,
        radius_m=radius_m,
    )
    share = largest_wall_stress_mpa / _above_zero(intact_strength_mpa)
    # 0.51 = 1 - 0.49: the fit less the radius itself, so that 0.408 gives 0 exactly.
    return np.maximum(0.0, 1.25 * share - 0.51) * radius_m


def burst_ratio(intact_strength_mpa: Array, major_stress_mpa: Array) -> Array:
    """Intact strength over the major in-situ stress.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci, uniaxial compressive strength of intact rock. [MPa]
    major_stress_mpa : (n,) s1, largest in-situ stress, above 0. [MPa]

    Returns
    -------
    (n,) sci / s1. [-]  The lower, the more the rock tends to spall and burst. NaN where the stress
    is not above 0.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    Massive brittle rock only.

    Source
    ------
    N. Barton, R. Lien, J. Lunde, Rock Mech. 6 (1974) 189-236: the ratio by which the stress
    reduction factor of competent rock is chosen [from memory].
    """
    same_length(intact_strength_mpa=intact_strength_mpa, major_stress_mpa=major_stress_mpa)
    return intact_strength_mpa / _above_zero(major_stress_mpa)
