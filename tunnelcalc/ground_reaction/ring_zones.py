"""A ring of other ground around an opening, and the mass beyond it.

Compression and inward movement are positive; G and nu as usual, the index d for the ring and u
for the mass. D = p0 - sr at the ring's outer edge r_d, and V(D) = u / r there, which is the
ground reaction curve of the mass for an opening of radius r_d, yielded or not.

Ring elastic from c to r_d, where c is the wall or the edge of the ring's plastic part. Lame's
solution with the movement V(D) and the stress p0 - D at r_d, in k = (c / r_d)^2:

    B = (2 Gd V(D) + (1 - 2 nu) D) / (2 (1 - nu))     half of st - sr at r_d, in the ring
    T = B / k = Q - D + B,   Q = p0 - sr at c         half of st - sr at c
    u / c = (Q - D) / (2 Gd) + V(D)

With an elastic mass 2 Gd V = m D, m = Gd / Gu, so B = (1 - w) D with w = (1 - m) / (2 (1 - nu)).
In the annulus st - sr grows and sr falls towards c: it yields at c first, and a plastic part
grows outwards from the wall. B is smaller than D, half of what the mass has to carry at r_d: so
the mass may yield before the ring does, though it is the stronger of the two. Then V is that of a
yielded mass and all else stays. Axial stress lies between the other two in all cases.

In the plastic part N = mb sr / sci + s has N^(1-a) = N_wall^(1-a) + (1 - a) mb y, y = ln(r / R),
as in `hoek_brown`. At its edge T = sci N^a / 2, which gives D = p0 - sr - T (1 - k) and leaves one
equation, k T = B(D): its left side grows with y, D falls, and so there is one root at most. None
in the ring means that all of it has yielded; k = 1 and D then follow without any root.

All this holds for a ring of any strength, stronger than the mass too, and for any strength H(sr)
that grows with sr. What only a ring that is no stronger than the mass has are two bounds: its
wall yields, and its plastic part ends, no later than in ground that is all ring. Beside a
stronger ring the mass yields first and leaves the ring with more than that.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Generic, NamedTuple, Self, TypeVar

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.root_finding import increasing_roots

Ground = TypeVar("Ground", HoekBrownCurve, MohrCoulombCurve)
AnyZones = Any
"""`Zones` of either law."""


class Edge(NamedTuple):
    """Stresses where ring ground just yields, and those at the interface that go with it.

    `change` is the derivative of `half_strength` by the radial stress, times the strength: by
    ln r along the plastic part.
    """

    radial_mpa: Array
    half_strength: Array
    change: Array
    relief: Array
    """k, (c / r_d)^2"""
    drop_mpa: Array
    """D"""


class Interface(NamedTuple):
    """B and its derivative by D, and the state of the mass."""

    half_deviator: Array
    change: Array
    mass: CurvePoint


@dataclass(frozen=True, slots=True)
class Zones(Generic[Ground]):
    """Two grounds of one law and the ring's outer radius. All (n,).

    `place` is what a law follows its plastic part by: N^(1-a), or the radial stress.
    """

    mass: Ground
    ring: Ground
    log_ratio: Array
    """ln(r_d / R), >= 0"""

    def take(self, index: Array) -> Self:
        """The zones of the sections at `index`."""
        return type(self)(self.mass.take(index), self.ring.take(index), self.log_ratio[index])

    def interface(self, drop_mpa: Array) -> Interface:
        """What the mass answers to a drop D, and half the deviator of an elastic ring there."""
        nu, double = self.ring.poisson_ratio, 2 * self.ring.shear_modulus_mpa
        mass = self.mass.at(self.mass.in_situ_stress_mpa - drop_mpa)
        deviator = (double * mass.closure_ratio + (1 - 2 * nu) * drop_mpa) / (2 * (1 - nu))
        change = ((1 - 2 * nu) - double * mass.slope) / (2 * (1 - nu))
        return Interface(deviator, change, mass)

    def wall_place(self, support_pressure_mpa: Array) -> Array:
        """Place of ring ground that has yielded at the wall."""
        raise NotImplementedError

    def place_at(self, wall_place: Array, depth: Array) -> Array:
        """Place at y = ln(r / R) in the plastic part."""
        raise NotImplementedError

    def edge(self, place: Array, depth: Array) -> Edge:
        """The edge of the plastic part, from its place and y = ln(c / R)."""
        raise NotImplementedError

    def strength_mpa(self, place: Array) -> Array:
        """st - sr of yielded ring ground."""
        raise NotImplementedError

    def weighted_strength_mpa(
        self, exponent: Array, wall_place: Array, edge_place: Array, depth: Array
    ) -> Array:
        """J / X^(K+1) of the plastic part: see `hoek_brown`."""
        raise NotImplementedError

    def highest_critical_mpa(self) -> Array:
        """A pressure at which the wall does not yield."""
        return self.ring.in_situ_stress_mpa

    def deepest(self, wall_place: Array) -> Array:
        """A depth y that the plastic part does not pass."""
        return self.log_ratio

    def surplus(self, edge: Edge) -> tuple[Array, Interface]:
        """k T - B(D), which is positive where ring ground beyond the edge is still elastic."""
        found = self.interface(edge.drop_mpa)
        surplus = edge.relief * edge.half_strength - found.half_deviator
        # A mass whose movement is beyond the range of a double moves much more than the ring.
        return np.where(np.isnan(surplus), -np.inf, surplus), found

    def critical_pressure_mpa(self, begin: Array) -> Array:
        """Pressure at which the wall begins to yield, from that beside an elastic mass."""
        p0, critical = self.ring.in_situ_stress_mpa, np.array(begin)
        nowhere = np.zeros(np.shape(begin))
        edge = self.edge(self.wall_place(begin), nowhere)
        # Where the wall does not yield even without support, D is that of the elastic ring.
        unsupported, _ = elastic_drop(self, p0)
        drop = np.where(begin > 0, edge.drop_mpa, unsupported)
        open_ = np.flatnonzero(p0 - drop < self.mass.critical_pressure_mpa)
        zones = self.take(open_)

        def surplus(shifted: Array, index: Array) -> tuple[Array, Array]:
            chosen = zones.take(index)
            place = chosen.wall_place(shifted - chosen.ring.in_situ_stress_mpa)
            at = chosen.edge(place, nowhere[: index.size])
            value, found = chosen.surplus(at)
            rate = at.change / np.where(at.half_strength == 0, 1, 2 * at.half_strength)
            slope = rate * at.relief + found.change * (1 + rate * (1 - at.relief))
            return value, np.where(np.isfinite(value), slope, 1)

        # Roots are found to a relative 1e-12 of the unknown: p0 is added, so that rounding of
        # stresses beside a small unknown is not taken for lack of convergence.
        low, high = p0[open_] + begin[open_], p0[open_] + self.highest_critical_mpa()[open_]
        needed = surplus(low, np.arange(open_.size))[0] < 0
        index = np.flatnonzero(needed)
        found = increasing_roots(
            lambda x, k: surplus(x, index[k]), low[index], high[index], low[index]
        )
        roots = np.where(found.converged, found.value - p0[open_][index], np.nan)
        critical[open_[index]] = np.maximum(roots, 0)
        return critical

    def front(self, wall_place: Array) -> tuple[Array, Array]:
        """y at the edge of the plastic part of a ring that has yielded at the wall, and whether
        all of the ring has yielded (bool)."""
        alone = self.deepest(wall_place)
        wholly = np.zeros(wall_place.shape, dtype=bool)
        reached = np.flatnonzero(self.log_ratio <= alone)
        inside = self.take(reached)
        at_interface = inside.place_at(wall_place[reached], inside.log_ratio)
        wholly[reached] = inside.surplus(inside.edge(at_interface, inside.log_ratio))[0] <= 0

        depth = np.where(wholly, self.log_ratio, np.nan)
        partly = np.flatnonzero(~wholly)
        zones, start = self.take(partly), wall_place[partly]

        def surplus(shifted: Array, index: Array) -> tuple[Array, Array]:
            chosen, y = zones.take(index), shifted - 1
            at = chosen.edge(chosen.place_at(start[index], y), y)
            value, found = chosen.surplus(at)
            slope, _ = surplus_slopes(at, found)
            return value, np.where(np.isfinite(value), slope, 1)

        # Shifted by 1 for the same reason as the pressure above.
        high = 1 + np.minimum(alone[partly], zones.log_ratio)
        found = increasing_roots(surplus, np.ones(partly.size), high, high)
        depth[partly] = np.where(found.converged, found.value - 1, np.nan)
        return depth, wholly


def surplus_slopes(edge: Edge, found: Interface) -> tuple[Array, Array]:
    """Derivatives of k T - B(D) by ln r of the edge of the plastic part.

    Parameters
    ----------
    edge : stresses at the edge.
    found : what the mass answers to them.

    Returns
    -------
    (n,) derivative along the plastic part, where stress and place change together, never
    negative, and (n,) by place alone at a fixed stress. [MPa]

    Source
    ------
    Derivation at the head of this module. Beside a mass that moves much both terms of the first
    are far greater than their sum, which is therefore written out.
    """
    twice, k = 2 * edge.half_strength, edge.relief
    both = k * (edge.change + twice) + found.change * (1 - k) * (twice + edge.change)
    return both, k * twice * (1 - found.change)


def elastic_drop(zones: AnyZones, relief_mpa: Array) -> tuple[Array, Array]:
    """Drop of the radial stress at the interface of an elastic ring and an elastic mass.

    Parameters
    ----------
    zones : the two grounds.
    relief_mpa : (n,) Q = p0 - pi, >= 0. [MPa]

    Returns
    -------
    (n,) D [MPa], and (n,) k at the wall [-].

    Source
    ------
    G. Lame, thick ring; derivation at the head of this module.
    """
    ring, mass = zones.ring, zones.mass
    softness = 1 - ring.shear_modulus_mpa / mass.shear_modulus_mpa
    share = 1 - softness / (2 * (1 - ring.poisson_ratio))
    k = np.exp(-2 * zones.log_ratio)
    return relief_mpa * k / (k + share * (1 - k)), k


def drop_beside_yielded_mass(zones: AnyZones, relief_mpa: Array) -> Array:
    """Drop of the radial stress at the interface of an elastic ring and a mass that has yielded.

    Parameters
    ----------
    zones : the two grounds.
    relief_mpa : (n,) Q = p0 - pi, >= 0. [MPa]

    Returns
    -------
    (n,) D, root of k D + (1 - k) B(D) = k Q, NaN where it was not found. [MPa]

    Source
    ------
    Derivation at the head of this module.
    """
    p0, k = zones.ring.in_situ_stress_mpa, np.exp(-2 * zones.log_ratio)

    def excess(shifted: Array, index: Array) -> tuple[Array, Array]:
        drop, part = shifted - p0[index], k[index]
        found = zones.take(index).interface(drop)
        value = part * (drop - relief_mpa[index]) + (1 - part) * found.half_deviator
        value = np.where(np.isnan(value), np.inf, value)
        return value, np.where(np.isfinite(value), part + (1 - part) * found.change, 1)

    low = p0 + np.maximum(p0 - zones.mass.critical_pressure_mpa, 0)
    high = np.maximum(p0 + relief_mpa, low)
    found = increasing_roots(excess, low, high, low)
    return np.where(found.converged, found.value - p0, np.nan)
