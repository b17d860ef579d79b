"""Ground reaction of a circular opening in a ring of disturbed ground, undisturbed mass beyond it.

Both are elastic, perfectly plastic Hoek-Brown ground, the ring no stronger and no stiffer than the
mass. The states of the two zones, and where the ring's plastic part ends, are in `ring_zones`;
that the mass may yield while the ring is still elastic is one of them.

From the edge c of the plastic part inwards the flow rule is that of `flow_rule`, with the ring's
modulus. Movement there is continuous, whatever the stresses do, so that with y = ln(c / R):

    2 G u / R = X^(K+1) (2 G u_c / c + (1 - 2 nu) (p0 - sr_c)) - (1 - 2 nu) (p0 - pi)
                - (K - 1) (1 - nu) J,   X = exp(y)

Slope. The plastic part is a piece of one curve sr(t), d sr / dt = H, t = ln r but for a constant:
from t0 at the wall to t1 = t0 + y. With V = u / r and du/dr + K u / r = f, that is
dV/dt = f - (K + 1) V,

    dV = (f - (K + 1) V) dt0 + X^(K+1) (dVc - (f_c - (K + 1) V_c) dt1)

where V_c changes by the stress at the edge, dt1, and by its place, dt1 - dt0. If all of the ring
has yielded dt1 = dt0; else the condition k T = B at the edge ties the two.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.flow_rule import LARGEST_EXPONENT, ring_exponent
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve, critical_number
from tunnelcalc.ground_reaction.ring_laws import RingZones
from tunnelcalc.ground_reaction.ring_zones import (
    AnyZones,
    drop_beside_yielded_mass,
    elastic_drop,
    surplus_slopes,
)
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants

ROUNDING = 1e-12
"""A ring that is stronger or stiffer than the mass by no more of it is equal to it."""


@dataclass(frozen=True, slots=True)
class RingCurve:
    """Ground reaction curves of n sections with a ring of other ground. All fields are (n,)."""

    zones: AnyZones
    critical_pressure_mpa: Array
    """Support pressure below which the wall begins to yield. [MPa]  The mass beyond the ring may
    have yielded at a higher one."""

    @property
    def in_situ_stress_mpa(self) -> Array:
        """(n,) p0. [MPa]"""
        found: Array = self.zones.mass.in_situ_stress_mpa
        return found

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
        return type(self)(self.zones.take(index), self.critical_pressure_mpa[index])

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic radius, closure and slope of the curve under a support pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.  The plastic ratio is that of the outermost ground that has yielded; where the
        mass has, that lies beyond the ring, though the ring's outer part may still be elastic.
        Where the closure leaves the range of a double it is NaN, never a number.

        Limits
        ------
        As `ground_reaction` in `hoek_brown`; the ring is of one thickness all round. The slope
        has a step, and the plastic ratio may have one, where the mass begins to yield. Closures
        are not above those of ground that is all ring; a soft ring of strongly dilating ground
        may move less than ground that is all mass, since more of its strain is elastic.

        Source
        ------
        Derivations at the heads of this module and of `ring_zones`.
        """
        result = CurvePoint(*(np.full(support_pressure_mpa.shape, np.nan) for _ in range(3)))
        known = ~np.isnan(self.critical_pressure_mpa + support_pressure_mpa)
        layered = known & (self.zones.log_ratio > 0)
        yields = support_pressure_mpa < self.critical_pressure_mpa
        for chosen, state in (
            (known & ~layered, _without_ring),
            (layered & ~yields, _elastic_ring),
            (layered & yields, _yielded_ring),
        ):
            index = np.flatnonzero(chosen)
            if index.size:
                point = state(self.zones.take(index), support_pressure_mpa[index])
                for column, values in zip(result, point, strict=True):
                    column[index] = values
        return result


@dataclass(frozen=True, slots=True)
class DisturbedRingCurve(RingCurve):
    """Ground reaction curves of n sections with a disturbed ring. All fields are (n,)."""

    @classmethod
    def of_ground(
        cls,
        *,
        ring_ratio: Array,
        in_situ_stress_mpa: Array,
        intact_strength_mpa: Array,
        mb: Array,
        s: Array,
        a: Array,
        deformation_modulus_mpa: Array,
        ring_mb: Array,
        ring_s: Array,
        ring_a: Array,
        ring_modulus_mpa: Array,
        poisson_ratio: Array,
        dilation_deg: Array,
    ) -> Self:
        """Curves from the properties of both grounds, all (n,).

        `ring_ratio` is (R + t) / R >= 1 with t the thickness of the ring; those that begin with
        `ring_` belong to the ring, `mb`, `s`, `a` and `deformation_modulus_mpa` to the mass, the
        others to both. Stresses, strength and moduli in MPa.

        A NaN row stays NaN and spoils no other. A row is NaN also where `ring_ratio` is below 1,
        the ring is stiffer than the mass, or stronger at any radial stress from 0 to p0: that
        is no disturbed ring.

        Source
        ------
        See the head of this module. Elastic annulus: G. Lame, thick ring.
        """

        def ground(constants: HoekBrownConstants, modulus: Array) -> HoekBrownCurve:
            return HoekBrownCurve.of_ground(
                in_situ_stress_mpa=in_situ_stress_mpa,
                intact_strength_mpa=intact_strength_mpa,
                mb=constants.mb,
                s=constants.s,
                a=constants.a,
                deformation_modulus_mpa=modulus,
                poisson_ratio=poisson_ratio,
                dilation_deg=dilation_deg,
            )

        mass = ground(HoekBrownConstants(mb, s, a), deformation_modulus_mpa)
        ring = ground(HoekBrownConstants(ring_mb, ring_s, ring_a), ring_modulus_mpa)
        valid = (ring_ratio >= 1) & _weaker(ring, mass) & ~np.isnan(poisson_ratio + dilation_deg)
        valid &= ring_modulus_mpa <= deformation_modulus_mpa * (1 + ROUNDING)
        valid &= ~np.isnan(mass.critical_pressure_mpa + ring.critical_pressure_mpa)
        zones = RingZones(mass, ring, np.log(np.where(valid, ring_ratio, 1)))
        critical = np.where(valid, mass.critical_pressure_mpa, np.nan)
        layered = np.flatnonzero(valid & (ring_ratio > 1))
        critical[layered] = _wall_yields_at(zones.take(layered))
        return cls(zones, critical)


def _weaker(ring: HoekBrownCurve, mass: HoekBrownCurve) -> Array:
    """Whether the ring is nowhere stronger than the mass, for radial stresses from 0 to p0.

    The ratio of the strengths is greatest at an end, or where its logarithm is level: at most one
    place.
    """
    most = mass.in_situ_stress_mpa / mass.intact_strength_mpa
    bend = mass.mb * ring.mb * (ring.a - mass.a)
    level = mass.a * mass.mb * ring.s - ring.a * ring.mb * mass.s
    level = np.where(bend == 0, 0, level / np.where(bend == 0, 1, bend))
    weaker = ~np.isnan(most)
    for confinement in (np.zeros(np.shape(most)), most, np.clip(level, 0, most)):
        lower, upper = ((c.mb * confinement + c.s) ** c.a for c in (ring, mass))
        weaker &= lower <= upper * (1 + ROUNDING)
    return weaker


def _wall_yields_at(zones: RingZones) -> Array:
    """Pressure below which the wall yields.

    Beside an elastic mass the deviator at the wall is 2 h (p0 - pi), so that the condition is
    that of a homogeneous ground of strength / h.
    """
    ring = zones.ring
    drop, _ = elastic_drop(zones, np.ones(zones.log_ratio.shape))
    softness = 1 - ring.shear_modulus_mpa / zones.mass.shear_modulus_mpa
    h = 1 - softness / (2 * (1 - ring.poisson_ratio)) * drop
    sci, mb = ring.intact_strength_mpa / h, ring.mb / h
    number = critical_number(ring.in_situ_stress_mpa, sci, mb, ring.s, ring.a)
    return zones.critical_pressure_mpa(np.maximum(sci * (number - ring.s) / mb, 0))


def _without_ring(zones: AnyZones, pressure: Array) -> CurvePoint:
    """A ring without thickness: the mass alone."""
    return zones.mass.at(pressure)


def _elastic_ring(zones: AnyZones, pressure: Array) -> CurvePoint:
    """The wall of a ring that has not yielded, around a mass that may have."""
    p0, double = zones.ring.in_situ_stress_mpa, 2 * zones.ring.shear_modulus_mpa
    released = p0 - pressure
    drop, k = elastic_drop(zones, released)
    yielded = p0 - drop < zones.mass.critical_pressure_mpa
    beyond = np.flatnonzero(yielded)
    drop[beyond] = drop_beside_yielded_mass(zones.take(beyond), released[beyond])
    interface = zones.interface(drop)
    mass = interface.mass
    share = k / (k + interface.change * (1 - k))
    closure = (released - drop) / double + mass.closure_ratio
    slope = mass.slope * share - (1 - share) / double
    outermost = np.where(yielded, np.exp(zones.log_ratio) * mass.plastic_ratio, 1)
    return CurvePoint(np.where(np.isnan(closure), np.nan, outermost), closure, slope)


def _yielded_ring(zones: AnyZones, pressure: Array) -> CurvePoint:
    """The wall of a ring that has yielded there, or all over, around a mass that may have."""
    ring = zones.ring
    p0, nu, dilation = ring.in_situ_stress_mpa, ring.poisson_ratio, ring.dilation
    double = 2 * ring.shear_modulus_mpa
    place = zones.wall_place(pressure)
    depth, wholly = zones.front(place)
    edge_place = zones.place_at(place, depth)
    edge = zones.edge(edge_place, depth)
    interface = zones.interface(edge.drop_mpa)
    mass = interface.mass
    yielded = p0 - edge.drop_mpa < zones.mass.critical_pressure_mpa
    in_mass = np.log(mass.plastic_ratio)
    in_range = (dilation + 1) * (depth + in_mass) <= LARGEST_EXPONENT
    exponent = np.where(in_range, ring_exponent(depth, dilation), np.nan)
    growth = np.exp(exponent)

    at_edge = edge.half_strength * (1 - edge.relief) / double + mass.closure_ratio
    weighted = zones.weighted_strength_mpa(exponent, place, edge_place, depth)
    driving = double * at_edge + (1 - 2 * nu) * (p0 - edge.radial_mpa)
    dilating = (dilation - 1) * (1 - nu) * weighted
    closure = growth * (driving - dilating) - (1 - 2 * nu) * (p0 - pressure)
    closure = closure / double

    def forcing(radial: Array, strength: Array) -> Array:
        by_stress = (1 + dilation) * (1 - 2 * nu) * (radial - p0)
        return (by_stress + (dilation * (1 - nu) - nu) * strength) / double

    both, by_place = surplus_slopes(edge, interface)
    moves = np.where(wholly, 1, by_place / np.where(wholly, 1, both))
    give = edge.change * (1 - edge.relief)
    edge_by_stress = give / double + mass.slope * (2 * edge.half_strength + give)
    edge_by_place = -2 * edge.relief * edge.half_strength * (1 / double + mass.slope)
    at_front = forcing(edge.radial_mpa, 2 * edge.half_strength) - (dilation + 1) * at_edge
    strength = zones.strength_mpa(place)
    change = forcing(pressure, strength) - (dilation + 1) * closure
    change = change + growth * (moves * (edge_by_stress - at_front) + (moves - 1) * edge_by_place)
    with np.errstate(divide="ignore"):
        slope = change / strength
    outermost = np.where(wholly | yielded, zones.log_ratio + in_mass, depth)
    outermost = np.where(outermost <= LARGEST_EXPONENT, outermost, np.nan)
    return CurvePoint(np.where(np.isnan(closure), np.nan, np.exp(outermost)), closure, slope)
