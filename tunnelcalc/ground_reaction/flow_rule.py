"""From the strength of a plastic ring to the movement of the wall, whatever the criterion.

Let H be the strength in the ring, st - sr, as the criterion gives it from sr. The flow rule
ep_r + Kpsi ep_th = 0, with elastic strains by Hooke's law from the actual stresses in plane
strain, gives du/dr + Kpsi u / r = f(r), with

    2 G f = (K + 1)(1 - 2 nu)(sr - p0) + (K (1 - nu) - nu) H

Multiplied with r^K and integrated from R to Rp, the term with sr by parts and d sr / d ln r = H:

    2 G u / R = 2 (1 - nu) (p0 - pcr) X^(K+1) - (1 - 2 nu) (p0 - pi) - (K - 1) (1 - nu) J
    X = Rp / R,   J = integral over ln(r / R) of H (r / R)^(K+1)

so that ground without dilation (K = 1) needs no integral at all. Of the ring's outer edge only
two things are used: sr = pcr, and the closure (p0 - pcr) / (2 G) of the elastic ground outside.
Both hold also where the strength drops there, since neither radial stress nor displacement can
jump. Only st does, and it is inside the ring that H counts. So the closure of brittle ground
follows from the peak by pcr alone, and from the residual strength by H.
"""

from __future__ import annotations

from typing import Protocol

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint

LARGEST_EXPONENT = 600.0
"""exp(600) is 1e260: what a larger closure is multiplied with, stresses, stiffness of support,
could leave the range of a double. Such a closure cannot be computed."""


class RingGround(Protocol):
    """What the movement of a yielding wall follows from, beside the strength. All (n,)."""

    @property
    def in_situ_stress_mpa(self) -> Array:
        """p0. [MPa]"""

    @property
    def critical_pressure_mpa(self) -> Array:
        """pcr. [MPa]"""

    @property
    def poisson_ratio(self) -> Array:
        """nu. [-]"""

    @property
    def shear_modulus_mpa(self) -> Array:
        """G. [MPa]"""

    @property
    def dilation(self) -> Array:
        """K of the flow rule. [-]"""


def dilation_coefficient(dilation_deg: Array) -> Array:
    """Slope K of the plastic strains.

    Parameters
    ----------
    dilation_deg : (n,) psi, dilation angle, 0 <= psi < 90. [deg]

    Returns
    -------
    (n,) K = (1 + sin psi) / (1 - sin psi). [-]  1 for no dilation.

    Source
    ------
    Flow rule of a Mohr-Coulomb plastic potential: common practice, no source.
    """
    sine = np.sin(np.radians(dilation_deg))
    return (1 + sine) / (1 - sine)


def ring_exponent(depth: Array, dilation: Array) -> Array:
    """(K + 1) ln(Rp / R), by whose exponential the movement grows from the ring's edge inwards.

    Parameters
    ----------
    depth : (n,) ln(Rp / R). [-]
    dilation : (n,) K. [-]

    Returns
    -------
    (n,) the exponent, NaN above `LARGEST_EXPONENT`. [-]

    Source
    ------
    Derivation at the head of this module.
    """
    exponent = (dilation + 1) * depth
    return np.where(exponent <= LARGEST_EXPONENT, exponent, np.nan)


def state_of_wall(
    ground: RingGround,
    support_pressure_mpa: Array,
    *,
    yields: Array,
    depth: Array,
    exponent: Array,
    weighted_strength_mpa: Array,
    wall_strength_mpa: Array,
) -> CurvePoint:
    """Plastic radius, closure and slope of the curve from the strength in the plastic ring.

    Parameters
    ----------
    ground : stresses, elastic constants and dilation.
    support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]
    yields : (n,) bool, whether there is a ring.
    depth : (n,) ln(Rp / R), 0 where there is no ring. [-]
    exponent : (n,) `ring_exponent` of the depth. [-]
    weighted_strength_mpa : (n,) J / X^(K+1), of any value where K = 1. [MPa]
    wall_strength_mpa : (n,) H at the wall, >= 0. [MPa]

    Returns
    -------
    CurvePoint.  Where the closure leaves the range of a double it is NaN, never a number. At a
    wall without any strength the slope is -infinity.

    Source
    ------
    Derivation at the head of this module.
    """
    p0, nu, dilation = ground.in_situ_stress_mpa, ground.poisson_ratio, ground.dilation
    growth = np.exp(exponent)
    driving = 2 * (1 - nu) * (p0 - ground.critical_pressure_mpa)
    elastic_part = (1 - 2 * nu) * (p0 - support_pressure_mpa)
    dilating = (dilation - 1) * (1 - nu) * weighted_strength_mpa
    plastic_closure = growth * (driving - dilating) - elastic_part
    elastic_closure = p0 - support_pressure_mpa
    double_modulus = 2 * ground.shear_modulus_mpa
    closure = np.where(yields, plastic_closure, elastic_closure) / double_modulus

    # The ring is one curve of ln r: d(u/r) = (f - (K + 1) u/r) d ln r, d sr = H d ln r.
    forcing = (1 + dilation) * (1 - 2 * nu) * (support_pressure_mpa - p0)
    forcing = forcing + (dilation * (1 - nu) - nu) * wall_strength_mpa
    change = forcing / double_modulus - (dilation + 1) * closure
    # A wall without strength may be elastic too, by the strength it had before: not asked here.
    with np.errstate(divide="ignore", invalid="ignore", over="ignore"):
        plastic_slope = change / wall_strength_mpa
    slope = np.where(yields, plastic_slope, -1 / double_modulus)
    plastic_ratio = np.exp(np.where(depth <= LARGEST_EXPONENT, depth, np.nan))
    return CurvePoint(plastic_ratio, closure, slope)
