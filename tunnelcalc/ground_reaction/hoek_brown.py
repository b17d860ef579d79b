"""Ground reaction of a circular opening in Hoek-Brown ground, perfectly plastic or brittle.

The plastic ring is exact for any a < 1. With N = mb sr / sci + s, radial equilibrium
d sr / d ln r = sci N^a integrates to N^(1-a) = N_cr^(1-a) + (1 - a) mb ln(r / Rp).

The closure follows from the flow rule and Hooke's law in the ring, integrated by parts:

    2 G u / R = 2 (1 - nu) (p0 - pcr) X^(K+1) - (1 - 2 nu) (p0 - pi) - (K - 1) (1 - nu) J
    X = Rp / R,   J = integral over ln(r / R) of sci N^a (r / R)^(K+1)

This holds for any strength in the ring, brittle ground included: see `flow_rule`. J has a smooth
integrand: with z = (K + 1) ln(Rp / r) it is X^(K+1) / (K + 1) times the integral of
exp(-z) sci N(z)^a.

Brittle ground has pcr from its peak, and all else in the ring, N_cr = mb pcr / sci + s too, from
its residual constants.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import NamedTuple, Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.flow_rule import (
    dilation_coefficient as dilation_coefficient,  # asked for under this name elsewhere too
)
from tunnelcalc.ground_reaction.flow_rule import ring_exponent, state_of_wall
from tunnelcalc.ground_reaction.ring_integral import ring_integral_mpa
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants
from tunnelcalc.root_finding import increasing_roots

ROUNDING = 1e-12
"""Of the peak strength: a residual strength that is above by no more is equal to it."""


class GroundReaction(NamedTuple):
    """Plastic radius and closure under the given support pressures. [m]"""

    plastic_radius_m: Array
    closure_m: Array


def critical_number(
    in_situ_stress_mpa: Array, intact_strength_mpa: Array, mb: Array, s: Array, a: Array
) -> Array:
    """N = mb pcr / sci + s at the pressure where the wall begins to yield.

    Parameters
    ----------
    in_situ_stress_mpa : (n,) p0. [MPa]
    intact_strength_mpa : (n,) sci. [MPa]
    mb, s, a : (n,) constants of the criterion, 0.5 <= a < 1. [-]

    Returns
    -------
    (n,) N_cr. [-]  Equal to s where the ground stays elastic at any support pressure.

    Source
    ------
    Root of 2 (p0 - pcr) = sci (mb pcr / sci + s)^a: elastic hoop stress 2 p0 - pcr at the
    wall meets the criterion. Closed form for a = 0.5: C. Carranza-Torres, C. Fairhurst, Int. J.
    Rock Mech. Min. Sci. 36 (1999) 777-809.
    """
    shape = np.broadcast_shapes(
        *(np.shape(x) for x in (in_situ_stress_mpa, intact_strength_mpa, mb, s, a))
    )
    p0, sci, mb, s, a = (
        np.broadcast_to(x, shape).ravel()
        for x in (in_situ_stress_mpa, intact_strength_mpa, mb, s, a)
    )
    strength = s**a
    stress = 2 * p0 / sci
    # In y = N^a the condition y + 2 (y^(1/a) - s) / mb = 2 p0 / sci is convex, and for a near
    # 0.5 almost a quadratic, whose root is the first estimate.
    constant = stress + 2 * s / mb
    estimate = 2 * constant / (1 + np.sqrt(1 + 8 * constant / mb))
    yields = stress > strength
    lower, upper = np.where(yields, strength, 0), np.where(yields, stress, 0)
    start = np.minimum(np.maximum(estimate, lower), upper)

    def excess(y: Array, index: Array) -> tuple[Array, Array]:
        power = y ** (1 / a[index] - 1)
        value = y + 2 * (y * power - s[index]) / mb[index] - stress[index]
        return value, 1 + 2 * power / (mb[index] * a[index])

    roots = np.full(strength.shape, np.nan)
    plastic = np.flatnonzero(yields)
    found = increasing_roots(
        lambda y, k: excess(y, plastic[k]), lower[plastic], upper[plastic], start[plastic]
    )
    roots[plastic] = np.where(found.converged, found.value ** (1 / a[plastic]), np.nan)
    return np.where(stress <= strength, s, roots).reshape(shape)


@dataclass(frozen=True, slots=True)
class HoekBrownCurve:
    """Ground reaction curves of n sections; what does not change with pressure, computed once.

    All fields are (n,), or broadcast with the pressures that `at` is called with. `mb`, `s` and
    `a` are those of the plastic ring: the residual ones where the ground is brittle.
    """

    in_situ_stress_mpa: Array
    intact_strength_mpa: Array
    mb: Array
    s: Array
    a: Array
    poisson_ratio: Array
    shear_modulus_mpa: Array
    dilation: Array
    critical_pressure_mpa: Array
    critical_power: Array
    """N_cr^(1-a) of the ring"""
    brittle: Array
    """bool, whether the ring has constants of its own"""

    @classmethod
    def of_ground(
        cls,
        *,
        in_situ_stress_mpa: Array,
        intact_strength_mpa: Array,
        mb: Array,
        s: Array,
        a: Array,
        deformation_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
        residual: HoekBrownConstants | None = None,
    ) -> Self:
        """Curves from the ground's properties, all (n,).

        Stresses, strength and modulus in MPa, the rest as named. `residual` holds the constants
        to which ground falls at once where it yields, s >= 0; without it the ground is
        perfectly plastic. A NaN row stays NaN and spoils no other. Where the residual strength
        is above the peak, at any radial stress from 0 to the critical pressure, the row is NaN:
        such ground is not brittle, and the solution does not hold for it.

        Source
        ------
        See the head of this module; critical pressure: `critical_number`. Brittle ground, pcr
        from the peak and the ring wholly residual: E. T. Brown, J. W. Bray, B. Ladanyi, E. Hoek,
        J. Geotech. Eng. 109 (1983) 15-39, whose closures differ: they freeze the elastic strain
        at the ring's edge.
        """
        number = critical_number(in_situ_stress_mpa, intact_strength_mpa, mb, s, a)
        # Rounding may put N_cr an ulp below s just where yielding begins: no negative pressure.
        critical = np.maximum(intact_strength_mpa * (number - s) / mb, 0)
        brittle = np.zeros(np.shape(critical), dtype=bool)
        if residual is not None:
            peak = HoekBrownConstants(mb, s, a)
            falls = _falls(peak, residual, critical / intact_strength_mpa)
            critical = np.where(falls, critical, np.nan)
            mb, s, a = residual
            brittle = (mb != peak.mb) | (s != peak.s) | (a != peak.a)
            number = np.where(brittle, mb * critical / intact_strength_mpa + s, number)
        return cls(
            in_situ_stress_mpa=in_situ_stress_mpa,
            intact_strength_mpa=intact_strength_mpa,
            mb=mb,
            s=s,
            a=a,
            poisson_ratio=poisson_ratio,
            shear_modulus_mpa=deformation_modulus_mpa / (2 * (1 + poisson_ratio)),
            dilation=dilation_coefficient(dilation_deg),
            critical_pressure_mpa=critical,
            critical_power=number ** (1 - a),
            brittle=brittle,
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
        At a yielding wall with s = 0 and no pressure the slope is -infinity, all else finite.

        Source
        ------
        Derivation at the head of this module.
        """
        sci, mb = self.intact_strength_mpa, self.mb
        # Asked this way round, a section with NaN does not pass for elastic.
        yields = ~(support_pressure_mpa >= self.critical_pressure_mpa)
        wall = np.where(yields, support_pressure_mpa, self.critical_pressure_mpa)
        number = mb * wall / sci + self.s
        power = number ** (1 - self.a)
        # Rounding may put the edge of a ring that has just begun to yield inside the wall.
        depth = np.maximum((self.critical_power - power) / ((1 - self.a) * mb), 0)
        depth = np.where(yields, depth, 0)
        exponent = ring_exponent(depth, self.dilation)
        return state_of_wall(
            self,
            support_pressure_mpa,
            yields=yields,
            depth=depth,
            exponent=exponent,
            weighted_strength_mpa=ring_integral_mpa(
                exponent,
                yields,
                sci,
                mb,
                self.a,
                self.dilation,
                self.critical_power,
                self.brittle,
            ),
            wall_strength_mpa=sci * number / np.where(power == 0, 1, power),
        )


def _falls(peak: HoekBrownConstants, residual: HoekBrownConstants, confinement: Array) -> Array:
    """Whether the residual strength is nowhere above the peak, for sr / sci from 0 to a value.

    The ratio of the two strengths is greatest at an end, or where its logarithm a_r ln N_r -
    a ln N is level: at most one place.
    """
    level = peak.a * peak.mb * residual.s - residual.a * residual.mb * peak.s
    bend = peak.mb * residual.mb * (residual.a - peak.a)
    level = np.where(bend == 0, 0, level / np.where(bend == 0, 1, bend))
    falls = ~np.isnan(confinement)
    for sr in (np.zeros(np.shape(confinement)), confinement, np.clip(level, 0, confinement)):
        strength, highest = ((c.mb * sr + c.s) ** c.a for c in (residual, peak))
        falls &= strength <= highest * (1 + ROUNDING)
    return falls


def ground_reaction(
    support_pressure_mpa: Array,
    *,
    radius_m: Array,
    in_situ_stress_mpa: Array,
    intact_strength_mpa: Array,
    mb: Array,
    s: Array,
    a: Array,
    deformation_modulus_mpa: Array,
    poisson_ratio: Array,
    dilation_deg: Array,
) -> GroundReaction:
    """Plastic radius and closure of a circular opening under uniform support pressure.

    Parameters
    ----------
    support_pressure_mpa : pi, 0 <= pi <= p0. [MPa]
    radius_m : R. [m]
    in_situ_stress_mpa : p0, hydrostatic far-field stress. [MPa]
    intact_strength_mpa : sci. [MPa]
    mb, s, a : constants of the criterion, 0.5 <= a < 1. [-]
    deformation_modulus_mpa : E of the rock mass. [MPa]
    poisson_ratio : nu, 0 <= nu < 0.5. [-]
    dilation_deg : psi, constant over the plastic ring. [deg]

    All arguments broadcast together: sections (n,), or sections (n, 1) with pressures (m,).

    Returns
    -------
    Plastic radius, R where the wall does not yield, and inward closure, in the broadcast
    shape. [m]  A NaN row stays NaN and spoils no other.

    Raises
    ------
    ValueError : shapes do not broadcast, or a pressure lies outside 0 to p0.

    Limits
    ------
    Hydrostatic stress, deep circular opening, plane strain, small strain, no gravity in the
    plastic ring, time-independent ground.

    Source
    ------
    Stresses: C. Carranza-Torres, Int. J. Rock Mech. Min. Sci. 41 (2004), generalised criterion;
    closure: derivation at the head of this module, which for a = 0.5 agrees with
    C. Carranza-Torres, C. Fairhurst, Int. J. Rock Mech. Min. Sci. 36 (1999) 777-809.
    """
    p0 = np.asarray(in_situ_stress_mpa, float)
    pressure = np.asarray(support_pressure_mpa, float)
    if np.any((pressure < 0) | (pressure > p0)):
        raise ValueError("support_pressure_mpa must lie between 0 and in_situ_stress_mpa")
    curve = HoekBrownCurve.of_ground(
        in_situ_stress_mpa=p0,
        intact_strength_mpa=np.asarray(intact_strength_mpa, float),
        mb=np.asarray(mb, float),
        s=np.asarray(s, float),
        a=np.asarray(a, float),
        deformation_modulus_mpa=np.asarray(deformation_modulus_mpa, float),
        poisson_ratio=np.asarray(poisson_ratio, float),
        dilation_deg=np.asarray(dilation_deg, float),
    )
    point = curve.at(pressure)
    return GroundReaction(point.plastic_ratio * radius_m, point.closure_ratio * radius_m)
