"""Thrust and moment around a closed lining where the in-situ stresses are unequal.

Theta is measured from the springline; thrust is positive in compression, a moment that puts the
rock-side face in tension is positive. Both are a mean and a swing: T0 + T2 cos 2 theta and
M2 cos 2 theta. R is the lining's centreline, stiffnesses are those of a metre of tunnel:
CA = E A / (1 - nu^2) and CI = E I / (1 - nu^2), summed over the parts of a composite section.

The published solution has a0, a2, b2 and beta of C and F. Written in 1 / C and 1 / F, and with
the differences 1 - a0, 1 - 2 a2 and so on carried out by hand, it is the same, but loses no digits
for a soft lining and needs no exception for one that is not there yet.

It loads the lining with the whole in-situ stress. `scaled_to_thrust` brings it to the thrust of
the equilibrium, by one factor for thrust and moment.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array

FULL_SLIP, NO_SLIP = "full_slip", "no_slip"
LARGEST_SCALE = 1e12
"""A lining that the whole in-situ stress gives a smaller part of its thrust is none."""


class LiningForces(NamedTuple):
    """T0 and T2 (n,) [MN/m], M2 (n,) [MN m/m], and the factor (n,) that the whole in-situ stress
    was multiplied with [-]."""

    mean_thrust_mn_per_m: Array
    thrust_swing_mn_per_m: Array
    moment_swing_mnm_per_m: Array
    scale: Array

    def thrust_mn_per_m(self, angle_deg: Array) -> Array:
        """Thrust at an angle from the springline [deg]. [MN/m]"""
        return self.mean_thrust_mn_per_m + self.thrust_swing_mn_per_m * _cosine(angle_deg)

    def moment_mnm_per_m(self, angle_deg: Array) -> Array:
        """Moment at an angle from the springline [deg]. [MN m/m]"""
        return self.moment_swing_mnm_per_m * _cosine(angle_deg)


class RelativeStiffness(NamedTuple):
    """Stiffness (n,) of the lining over that of the ground, in thrust and in bending: 1 / C and
    1 / F of the published solution. [-]  0 where there is no lining."""

    thrust: Array
    bending: Array


def relative_stiffness(
    *,
    radius_m: Array,
    ground_modulus_mpa: Array,
    ground_poisson_ratio: Array,
    axial_stiffness_mn_per_m: Array,
    bending_stiffness_mnm2_per_m: Array,
) -> RelativeStiffness:
    """Stiffness of the lining relative to that of the ground.

    Parameters
    ----------
    radius_m : (n,) R, centreline of the lining. [m]
    ground_modulus_mpa : (n,) E of the ground, above 0. [MPa]
    ground_poisson_ratio : (n,) nu of the ground, 0 <= nu < 0.5. [-]
    axial_stiffness_mn_per_m : (n,) CA of the lining in plane strain. [MN/m]
    bending_stiffness_mnm2_per_m : (n,) CI of the lining. [MN m2/m]

    Returns
    -------
    1 / C = CA (1 - nu^2) / (E R) and 1 / F = CI (1 - nu^2) / (E R^3). [-]

    Source
    ------
    H. H. Einstein, C. W. Schwartz, J. Geotech. Eng. Div. ASCE 105 (1979) 499-518 [from memory].
    """
    ground = ground_modulus_mpa * radius_m / (1 - ground_poisson_ratio**2)
    return RelativeStiffness(
        axial_stiffness_mn_per_m / ground, bending_stiffness_mnm2_per_m / (ground * radius_m**2)
    )


def full_slip_forces(
    vertical_stress_mpa: Array,
    stress_ratio: Array,
    radius_m: Array,
    ground_poisson_ratio: Array,
    stiffness: RelativeStiffness,
) -> LiningForces:
    """Thrust and moment under the whole in-situ stress, ground and lining slipping freely.

    Parameters
    ----------
    vertical_stress_mpa : (n,) P. [MPa]
    stress_ratio : (n,) K, horizontal over vertical in-situ stress in the section. [-]
    radius_m : (n,) R, centreline of the lining. [m]
    ground_poisson_ratio : (n,) nu, 0 <= nu < 0.5. [-]
    stiffness : of the lining, relative to the ground.

    Returns
    -------
    Mean and swing of thrust [MN/m], swing of moment [MN m/m], factor 1 [-].

    Limits
    ------
    Elastic ground and lining, deep circular tunnel, closed ring placed before the ground moves.

    Source
    ------
    H. H. Einstein, C. W. Schwartz, J. Geotech. Eng. Div. ASCE 105 (1979) 499-518 [from memory],
    full slip.
    """
    nu, f = ground_poisson_ratio, stiffness.bending
    swing = vertical_stress_mpa * radius_m * (1 - stress_ratio) / 2
    swing = swing * 6 * f * (3 - 4 * nu) / (2 * (1 - nu) + 6 * f * (5 - 6 * nu))
    mean = _mean_thrust(vertical_stress_mpa, stress_ratio, radius_m, nu, stiffness)
    return LiningForces(mean, swing, swing * radius_m, np.ones_like(mean))


def no_slip_forces(
    vertical_stress_mpa: Array,
    stress_ratio: Array,
    radius_m: Array,
    ground_poisson_ratio: Array,
    stiffness: RelativeStiffness,
) -> LiningForces:
    """Thrust and moment under the whole in-situ stress, lining bonded to the ground.

    Parameters
    ----------
    vertical_stress_mpa : (n,) P. [MPa]
    stress_ratio : (n,) K, horizontal over vertical in-situ stress in the section. [-]
    radius_m : (n,) R, centreline of the lining. [m]
    ground_poisson_ratio : (n,) nu, 0 <= nu < 0.5. [-]
    stiffness : of the lining, relative to the ground.

    Returns
    -------
    Mean and swing of thrust [MN/m], swing of moment [MN m/m], factor 1 [-].

    Limits
    ------
    Elastic ground and lining, deep circular tunnel, closed ring placed before the ground moves.

    Source
    ------
    H. H. Einstein, C. W. Schwartz, J. Geotech. Eng. Div. ASCE 105 (1979) 499-518 [from memory],
    no slip.
    """
    nu, (c, f) = ground_poisson_ratio, stiffness
    give = (1 - nu) ** 2 + (1 - nu) * (c * (3 - 2 * nu) + 3 * f * (5 - 6 * nu))
    give = give + 12 * c * f * (3 - 4 * nu)
    unequal = vertical_stress_mpa * radius_m * (1 - stress_ratio) / 2 * (3 - 4 * nu) / give
    mean = _mean_thrust(vertical_stress_mpa, stress_ratio, radius_m, nu, stiffness)
    return LiningForces(
        mean,
        unequal * ((1 - nu) * (c + 3 * f) + 12 * c * f),
        unequal * radius_m * 3 * f * (1 - nu + 2 * c),
        np.ones_like(mean),
    )


def scaled_to_thrust(forces: LiningForces, mean_thrust_mn_per_m: Array) -> LiningForces:
    """Thrust and moment brought to the mean thrust of the equilibrium, by one factor.

    Parameters
    ----------
    forces : under the whole in-situ stress.
    mean_thrust_mn_per_m : (n,) in the lining at equilibrium: pressure times the radius of the
        face that it acts on. [MN/m]

    Returns
    -------
    Thrust [MN/m] and moment [MN m/m] times one factor, which is reported with them [-].  NaN
    where the lining has no thrust to be scaled.

    Limits
    ------
    The ground has moved before the lining was there, so that a part of the in-situ stress never
    reaches it. That the unequal part falls in the same proportion as the mean is an assumption.

    Source
    ------
    Common practice, no source; statics of the mean thrust.
    """
    mean = forces.mean_thrust_mn_per_m
    scalable = (mean > 0) & (mean * LARGEST_SCALE >= mean_thrust_mn_per_m)
    scale = np.where(scalable, mean_thrust_mn_per_m, np.nan) / np.where(scalable, mean, 1)
    return LiningForces(
        mean * scale,
        forces.thrust_swing_mn_per_m * scale,
        forces.moment_swing_mnm_per_m * scale,
        forces.scale * scale,
    )


def swing_of_soft_lining(
    interface: str,
    stress_ratio: Array,
    ground_poisson_ratio: Array,
    stiffness: RelativeStiffness,
) -> Array:
    """Swing of thrust over its mean in a lining that is soft beside the ground.

    Parameters
    ----------
    interface : `full_slip` or `no_slip`.
    stress_ratio : (n,) K, horizontal over vertical in-situ stress in the section. [-]
    ground_poisson_ratio : (n,) nu, 0 <= nu < 0.5. [-]
    stiffness : of the lining, relative to the ground; its two parts keep their relation.

    Returns
    -------
    (n,) limit of T2 / T0 for a stiffness towards 0. [-]

    Source
    ------
    H. H. Einstein, C. W. Schwartz (1979) [from memory]: `full_slip_forces` and `no_slip_forces`.
    """
    (c, f), nu = stiffness, ground_poisson_ratio
    stiff = c + f > 0
    own = 3 * f if interface == FULL_SLIP else c + 3 * f
    share = np.where(stiff, own, np.nan) / np.where(stiff, c + f, 1)
    return (1 - stress_ratio) / (1 + stress_ratio) * (3 - 4 * nu) * share


def shear_swing_mn_per_m(forces: LiningForces, radius_m: Array) -> Array:
    """Largest shear force in the lining, midway between crown and springline.

    Parameters
    ----------
    forces : of the lining.
    radius_m : (n,) R, centreline. [m]

    Returns
    -------
    (n,) 2 |M2| / R, of Q = 2 |M2| sin 2 theta / R. [MN/m]

    Source
    ------
    Equilibrium of moments of a ring element, dM / ds = Q.
    """
    return 2 * np.abs(forces.moment_swing_mnm_per_m) / radius_m


def _mean_thrust(
    vertical: Array, ratio: Array, radius: Array, nu: Array, stiffness: RelativeStiffness
) -> Array:
    both = stiffness.thrust + stiffness.bending
    return vertical * radius * (1 + ratio) / 2 * both / (both + 1 - nu)


def _cosine(angle_deg: Array) -> Array:
    return np.cos(2 * np.radians(angle_deg))
