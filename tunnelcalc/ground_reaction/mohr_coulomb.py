"""Ground reaction of a circular opening in Mohr-Coulomb ground, perfectly plastic or brittle.

The strength H(sr) = (k - 1) sr + q, k = (1 + sin phi) / (1 - sin phi), q = 2 c cos phi / (1 - sin
phi), makes everything a closed form. With pcr from the peak and k, q of the ring, radial
equilibrium d sr / d ln r = H gives

    H = H_i (r / R)^(k-1),   ln(Rp / R) = ln(H_cr / H_i) / (k - 1),   (pcr - pi) / q for phi = 0
    J = integral over ln(r / R) of H (r / R)^(K+1) = H_i (X^(k+K) - 1) / (k + K)

The closure follows from J as derived in `flow_rule`, for brittle ground as well. Nothing divides
by k - 1: with x = (k - 1)(pcr - pi) / H_i, the logarithm of H_cr / H_i is log1p(x).
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.flow_rule import (
    dilation_coefficient,
    ring_exponent,
    state_of_wall,
)
from tunnelcalc.rock_mass.hoek_brown import MohrCoulomb

NO_FRICTION = 1e-20
"""Below, log1p(x) / x is 1 to all digits of a double."""
ROUNDING = 1e-12
"""Of the peak strength: a residual strength that is above by no more is equal to it."""


@dataclass(frozen=True, slots=True)
class MohrCoulombCurve:
    """Ground reaction curves of n sections; what does not change with pressure, computed once.

    All fields are (n,), or broadcast with the pressures that `at` is called with.
    """

    in_situ_stress_mpa: Array
    poisson_ratio: Array
    shear_modulus_mpa: Array
    dilation: Array
    critical_pressure_mpa: Array
    friction_slope: Array
    """k - 1 in the ring"""
    unconfined_strength_mpa: Array
    """q in the ring"""

    @classmethod
    def of_ground(
        cls,
        *,
        in_situ_stress_mpa: Array,
        cohesion_mpa: Array,
        friction_angle_deg: Array,
        deformation_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
        residual: MohrCoulomb | None = None,
    ) -> Self:
        """Curves from the ground's properties, all (n,).

        Stresses and modulus in MPa, angles in degrees; friction from 0 to below 90 degrees,
        cohesion from 0. `residual` is the strength to which ground falls at once where it
        yields; without it the ground is perfectly plastic. A NaN row stays NaN and spoils no
        other. Where the residual strength is above the peak, at any radial stress from 0 to the
        critical pressure, the row is NaN: such ground is not brittle, and the solution does not
        hold for it.

        Source
        ------
        Perfectly plastic without dilation: M. E. Duncan Fama, Comprehensive Rock Engineering 2
        (1993), ch. 5. Critical pressure: elastic hoop stress 2 p0 - pcr at the wall meets the
        peak strength. Brittle, and with dilation: see the head of this module.
        """
        slope, strength = _strength_line(friction_angle_deg, cohesion_mpa)
        critical = np.maximum((2 * in_situ_stress_mpa - strength) / (2 + slope), 0)
        if residual is not None:
            peak_slope, peak_strength = slope, strength
            slope, strength = _strength_line(residual.friction_angle_deg, residual.cohesion_mpa)
            at_edge = peak_slope * critical + peak_strength
            falls = strength <= peak_strength * (1 + ROUNDING)
            falls &= slope * critical + strength <= at_edge * (1 + ROUNDING)
            critical = np.where(falls, critical, np.nan)
        return cls(
            in_situ_stress_mpa=in_situ_stress_mpa,
            poisson_ratio=poisson_ratio,
            shear_modulus_mpa=deformation_modulus_mpa / (2 * (1 + poisson_ratio)),
            dilation=dilation_coefficient(dilation_deg),
            critical_pressure_mpa=critical,
            friction_slope=slope,
            unconfined_strength_mpa=strength,
        )

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
        return type(self)(
            **{field.name: getattr(self, field.name)[index] for field in fields(self)}
        )

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic radius, closure and slope of the curve under a support pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.  Where the closure leaves the range of a double it is NaN, never a number.
        A yielding wall without cohesion and without pressure has no strength, and no ring comes
        to rest around it: plastic ratio infinite, closure and slope NaN.

        Source
        ------
        Derivation at the head of this module.
        """
        slope, critical = self.friction_slope, self.critical_pressure_mpa
        # Asked this way round, a section with NaN does not pass for elastic.
        yields = ~(support_pressure_mpa >= critical)
        wall = np.where(yields, support_pressure_mpa, critical)
        at_wall = slope * wall + self.unconfined_strength_mpa
        at_edge = slope * critical + self.unconfined_strength_mpa
        strengthless = at_wall == 0
        at_wall = np.where(strengthless, 1, at_wall)
        # Under a pressure at the very end of the range of a double the strength leaves it: NaN.
        with np.errstate(over="ignore", invalid="ignore"):
            frictionless_depth = (critical - wall) / at_wall
            excess = slope * frictionless_depth
            share = np.log1p(excess) / np.where(excess > NO_FRICTION, excess, 1)
        share = np.where(excess <= NO_FRICTION, 1, share)
        endless = yields & strengthless & ~np.isnan(critical)
        depth = np.where(yields, frictionless_depth * share, 0)
        depth = np.where(endless, np.nan, depth)

        rate = slope + 1 + self.dilation
        point = state_of_wall(
            self,
            support_pressure_mpa,
            yields=yields,
            depth=depth,
            exponent=ring_exponent(depth, self.dilation),
            weighted_strength_mpa=-at_edge * np.expm1(-rate * depth) / rate,
            wall_strength_mpa=at_wall,
        )
        return point._replace(plastic_ratio=np.where(endless, np.inf, point.plastic_ratio))


def _strength_line(friction_angle_deg: Array, cohesion_mpa: Array) -> tuple[Array, Array]:
    """k - 1, which keeps its digits where friction is slight [-], and q [MPa]."""
    sine, cosine = (f(np.radians(friction_angle_deg)) for f in (np.sin, np.cos))
    return 2 * sine / (1 - sine), 2 * cohesion_mpa * cosine / (1 - sine)
