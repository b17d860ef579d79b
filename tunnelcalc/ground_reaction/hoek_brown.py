"""Ground reaction of a circular opening in elastic, perfectly plastic Hoek-Brown ground.

The plastic ring is exact for any a < 1. With N = mb sr / sci + s, radial equilibrium
d sr / d ln r = sci N^a integrates to N^(1-a) = N_cr^(1-a) + (1 - a) mb ln(r / Rp).

The flow rule ep_r + Kpsi ep_th = 0, with elastic strains by Hooke's law from the actual
stresses in plane strain, gives du/dr + Kpsi u / r = f(r). Integrated over the ring, by parts:

    2 G u / R = 2 (1 - nu) (p0 - pcr) X^(K+1) - (1 - 2 nu) (p0 - pi) - (K - 1) (1 - nu) J
    X = Rp / R,   J = integral over ln(r / R) of sci N^a (r / R)^(K+1)

so that ground without dilation (K = 1) needs no integral at all. J has a smooth integrand: with
z = (K + 1) ln(Rp / r) it is X^(K+1) / (K + 1) times the integral of exp(-z) sci N(z)^a.
"""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import NamedTuple, Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.ring_integral import ring_integral_mpa
from tunnelcalc.root_finding import increasing_roots

LARGEST_EXPONENT = 600.0
"""exp(600) is 1e260: what a larger closure is multiplied with, stresses, stiffness of support,
could leave the range of a double. Such a closure cannot be computed."""


class GroundReaction(NamedTuple):
    """Plastic radius and closure under the given support pressures. [m]"""

    plastic_radius_m: Array
    closure_m: Array


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

    All fields are (n,), or broadcast with the pressures that `at` is called with.
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
    """N_cr^(1-a)"""

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
    ) -> Self:
        """Curves from the ground's properties, all (n,).

        Stresses, strength and modulus in MPa, the rest as named. A NaN row stays NaN and
        spoils no other.

        Source
        ------
        See the head of this module; critical pressure: `critical_number`.
        """
        number = critical_number(in_situ_stress_mpa, intact_strength_mpa, mb, s, a)
        # Rounding may put N_cr an ulp below s just where yielding begins: no negative pressure.
        critical = np.maximum(intact_strength_mpa * (number - s) / mb, 0)
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

        Source
        ------
        Derivation at the head of this module.
        """
        p0, nu, dilation = self.in_situ_stress_mpa, self.poisson_ratio, self.dilation
        sci, mb = self.intact_strength_mpa, self.mb
        # Asked this way round, a section with NaN does not pass for elastic.
        yields = ~(support_pressure_mpa >= self.critical_pressure_mpa)
        wall = np.where(yields, support_pressure_mpa, self.critical_pressure_mpa)
        number = mb * wall / sci + self.s
        power = number ** (1 - self.a)
        # Rounding may put the edge of a ring that has just begun to yield inside the wall.
        depth = np.maximum((self.critical_power - power) / ((1 - self.a) * mb), 0)
        depth = np.where(yields, depth, 0)
        exponent = (dilation + 1) * depth
        exponent = np.where(exponent <= LARGEST_EXPONENT, exponent, np.nan)
        growth = np.exp(exponent)

        driving = 2 * (1 - nu) * (p0 - self.critical_pressure_mpa)
        elastic_part = (1 - 2 * nu) * (p0 - support_pressure_mpa)
        integral = ring_integral_mpa(
            exponent, yields, sci, mb, self.a, dilation, self.critical_power
        )
        dilating = (dilation - 1) * (1 - nu) * integral
        plastic_closure = growth * (driving - dilating) - elastic_part
        elastic_closure = p0 - support_pressure_mpa
        double_modulus = 2 * self.shear_modulus_mpa
        closure = np.where(yields, plastic_closure, elastic_closure) / double_modulus

        # The ring is one curve of ln r: d(u/r) = (f - (K + 1) u/r) d ln r, d sr = sci N^a d ln r.
        strength = sci * number / power
        forcing = (1 + dilation) * (1 - 2 * nu) * (support_pressure_mpa - p0)
        forcing = forcing + (dilation * (1 - nu) - nu) * strength
        plastic_slope = (forcing / double_modulus - (dilation + 1) * closure) / strength
        slope = np.where(yields, plastic_slope, -1 / double_modulus)
        plastic_ratio = np.exp(np.where(depth <= LARGEST_EXPONENT, depth, np.nan))
        return CurvePoint(plastic_ratio, closure, slope)


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
