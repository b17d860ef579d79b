"""The plastic part of a ring of other ground, law by law: see `ring_zones`.

Mohr-Coulomb ring, H = (k - 1) sr + q, with the radial stress as the place in the plastic part and
y = ln(r / R):

    sr(y) = pi + H_i (exp((k - 1) y) - 1) / (k - 1),   J as in `mohr_coulomb`
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.ground_reaction.ring_integral import ring_integral_mpa
from tunnelcalc.ground_reaction.ring_zones import Edge, Zones

LARGEST_GROWTH = 300.0
"""Of (k - 1) y: stresses above p0 times exp of it are never a solution."""


@dataclass(frozen=True, slots=True)
class StrongRingZones(Zones[HoekBrownCurve]):
    """Hoek-Brown ground with a ring of any strength; place is N^(1-a)."""

    def edge(self, place: Array, depth: Array) -> Edge:
        """The edge of the plastic part, from N^(1-a) there and y = ln(c / R)."""
        ring = self.ring
        number = place ** (1 / (1 - ring.a))
        radial = ring.intact_strength_mpa * (number - ring.s) / ring.mb
        half = 0.5 * ring.intact_strength_mpa * number**ring.a
        relief = np.exp(2 * (depth - self.log_ratio))
        drop = ring.in_situ_stress_mpa - radial - half * (1 - relief)
        change = ring.a * ring.mb * half / np.where(place == 0, 1, place)
        return Edge(radial, half, change, relief, drop)

    def wall_place(self, support_pressure_mpa: Array) -> Array:
        """N^(1-a) of ring ground that has yielded at the wall."""
        ring = self.ring
        number = ring.mb * support_pressure_mpa / ring.intact_strength_mpa + ring.s
        return number ** (1 - ring.a)

    def place_at(self, wall_place: Array, depth: Array) -> Array:
        """N^(1-a) at a depth in the plastic part."""
        return wall_place + (1 - self.ring.a) * self.ring.mb * depth

    def strength_mpa(self, place: Array) -> Array:
        """sci N^a."""
        a = self.ring.a
        return self.ring.intact_strength_mpa * (place ** (a / (1 - a)))

    def weighted_strength_mpa(
        self, exponent: Array, wall_place: Array, edge_place: Array, depth: Array
    ) -> Array:
        """By quadrature."""
        ring = self.ring
        return ring_integral_mpa(
            exponent,
            np.ones(exponent.shape, dtype=bool),
            ring.intact_strength_mpa,
            ring.mb,
            ring.a,
            ring.dilation,
            edge_place,
            ring.s == 0,
        )


@dataclass(frozen=True, slots=True)
class RingZones(StrongRingZones):
    """The same with a ring that is no stronger than the mass, and its bounds."""

    def highest_critical_mpa(self) -> Array:
        """Critical pressure of ground that is all ring."""
        return self.ring.critical_pressure_mpa

    def deepest(self, wall_place: Array) -> Array:
        """The plastic part is never deeper than without a mass beyond that is stiffer."""
        ring = self.ring
        return np.maximum((ring.critical_power - wall_place) / ((1 - ring.a) * ring.mb), 0)


@dataclass(frozen=True, slots=True)
class MohrCoulombZones(Zones[MohrCoulombCurve]):
    """Mohr-Coulomb ground with a ring of any strength; place is the radial stress."""

    def wall_place(self, support_pressure_mpa: Array) -> Array:
        """The support pressure."""
        return support_pressure_mpa

    def place_at(self, wall_place: Array, depth: Array) -> Array:
        """Radial stress at a depth in the plastic part."""
        slope = self.ring.friction_slope
        growth = np.minimum(slope * depth, LARGEST_GROWTH)
        sloping = growth > 0
        rate = np.where(sloping, np.expm1(growth) / np.where(sloping, slope, 1), depth)
        return wall_place + self.strength_mpa(wall_place) * rate

    def edge(self, place: Array, depth: Array) -> Edge:
        """The edge of the plastic part, from the radial stress there and y = ln(c / R)."""
        half = 0.5 * self.strength_mpa(place)
        relief = np.exp(2 * (depth - self.log_ratio))
        drop = self.ring.in_situ_stress_mpa - place - half * (1 - relief)
        return Edge(place, half, self.ring.friction_slope * half, relief, drop)

    def strength_mpa(self, place: Array) -> Array:
        """H, never negative: a pressure may be rounded to just below 0."""
        strength = self.ring.friction_slope * place + self.ring.unconfined_strength_mpa
        return np.maximum(strength, 0)

    def weighted_strength_mpa(
        self, exponent: Array, wall_place: Array, edge_place: Array, depth: Array
    ) -> Array:
        """In closed form."""
        rate = self.ring.friction_slope + 1 + self.ring.dilation
        return -self.strength_mpa(edge_place) * np.expm1(-rate * depth) / rate
