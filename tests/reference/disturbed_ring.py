"""Ground reaction of one section with a weaker, softer ring, by shooting from the interface.

The radial stress at the ring's outer edge is the unknown. The mass beyond answers it with a
movement (`reference.ground_curve`). From there the equations are integrated inwards through the
ring, elastic first and plastic from where the strength is met, and the unknown is bracketed until
the stress at the wall is the support pressure. With y = ln r, compression and inward movement
positive:

    equilibrium     d sr / dy = st - sr
    compatibility   er = du / dr, et = u / r, so that d et / dy = er - et
    elastic         er and st by Hooke's law in plane strain from sr and et
    plastic         st - sr = sci (mb sr / sci + s)^a, (er - er_el) + K (et - et_el) = 0
"""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from functools import cached_property
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

from reference.ground_curve import GroundCurve
from reference.rock_mass import criterion
from reference.samples import RANGES, Columns, curve_columns, random_ground

State = NDArray[np.float64]
TOLERANCE = 1e-12
SHARE_OF_EQUAL_MODULI = 0.4
"""Of random rings: no softer than the mass. Only such a ring may yield all over before the mass
begins to."""


class RingState(NamedTuple):
    """At the wall: outermost yielded radius and closure, both by R. Inside: what has yielded."""

    plastic_ratio: float
    closure_ratio: float
    wall_yields: bool
    front: float
    """ln(c / R) of the edge of the ring's plastic part."""
    ring_wholly: bool
    mass_yields: bool


class Shot(NamedTuple):
    """Stress [MPa] and u / R at the wall; ln(r_d / r) at the edge of the plastic part, or nan."""

    radial: float
    closure: float
    yields_from: float


@dataclass(frozen=True)
class DisturbedRing:
    """Mass and ring, each with its own modulus, of the same p0, sci, nu and dilation."""

    mass: GroundCurve
    ring: GroundCurve
    ratio: float

    @cached_property
    def thickness(self) -> float:
        """ln(r_d / R)"""
        return math.log(self.ratio)

    def at(self, pressure: float) -> RingState:
        """The wall under a support pressure from 0 to p0. Good to about 1e-10."""
        if pressure == self.mass.p0:
            return RingState(1.0, 0.0, False, 0.0, False, False)
        interface = self.interface(pressure)
        shot = self.shot(interface)
        yields = not math.isnan(shot.yields_from)
        wholly = yields and shot.yields_from == 0.0
        front = self.thickness - shot.yields_from if yields else 0.0
        mass_yields = interface < self.mass.critical_pressure
        beyond = self.mass.at(interface)[0] if mass_yields else 1.0
        outermost = self.ratio * beyond if wholly or mass_yields else math.exp(front)
        return RingState(outermost, shot.closure, yields, front, wholly, mass_yields)

    def interface(self, pressure: float) -> float:
        """Radial stress at the ring's outer edge under a support pressure below p0. [MPa]"""
        p0 = self.mass.p0

        def mismatch(interface: float) -> float:
            return self.shot(interface).radial - pressure

        # Stress falls towards the wall, so it is not below the support pressure at the interface.
        return float(brentq(mismatch, pressure, p0, xtol=1e-14 * p0, rtol=1e-14))

    def critical_pressure(self) -> float:
        """Pressure at which the ring just yields at the wall; 0 if it never does."""
        interface = self.interface_at_first_yield()
        return self._elastic_wall(interface)[0] if interface > 0 else 0.0

    def interface_at_first_yield(self) -> float:
        """Radial stress at the interface when the wall just yields; 0 if it never does."""
        p0, ring = self.ring.p0, self.ring

        def spare(interface: float) -> float:
            """Strength less deviator at the wall of a ring kept elastic."""
            radial, hoop_strain = self._elastic_wall(interface)
            return ring.deviator(radial) - (self._hoop(radial, hoop_strain) - radial)

        # The lowest interface stress: that which leaves an elastic wall without any pressure.
        lowest = brentq(lambda x: self._elastic_wall(x)[0], 0, p0, xtol=1e-15 * p0, rtol=1e-14)
        if spare(lowest) >= 0:
            return 0.0
        return float(brentq(spare, lowest, p0, xtol=1e-15 * p0, rtol=1e-14))

    def shot(self, interface: float) -> Shot:
        """From an interface stress inwards to the wall."""
        strain = self.mass.at(interface)[1]
        start = np.array([interface, strain])
        if self._spare(0.0, start) <= 0:
            end = self._integrate(self._plastic_rates, 0.0, start)[1]
            return Shot(float(end[0]), float(end[1]), 0.0)

        def spare(depth: float, state: State) -> float:
            return self._spare(depth, state)

        spare.terminal = True  # type: ignore[attr-defined]
        where, end, met = self._integrate(self._elastic_rates, 0.0, start, spare)
        if not met:
            return Shot(float(end[0]), float(end[1]), math.nan)
        wall = self._integrate(self._plastic_rates, where, end)[1]
        return Shot(float(wall[0]), float(wall[1]), where)

    def _integrate(
        self,
        rates: Callable[[float, State], list[float]],
        depth: float,
        start: State,
        event: Callable[[float, State], float] | None = None,
    ) -> tuple[float, State, bool]:
        """From ln(r_d / r) = depth to the wall or the event: where, the state, whether met."""
        if depth >= self.thickness:
            return depth, start, False
        smallest = 1e-14 * self.mass.p0
        solution = solve_ivp(
            rates,
            (depth, self.thickness),
            start,
            method="DOP853",
            rtol=TOLERANCE,
            atol=[smallest, smallest / self.ring.double_shear_modulus],
            events=event,
        )
        assert solution.status >= 0, solution.message
        return float(solution.t[-1]), solution.y[:, -1], solution.status == 1

    def _elastic_wall(self, interface: float) -> tuple[float, float]:
        start = np.array([interface, self.mass.at(interface)[1]])
        end = self._integrate(self._elastic_rates, 0.0, start)[1]
        return float(end[0]), float(end[1])

    def _hoop(self, radial: float, hoop_strain: float) -> float:
        """Hooke: 2 G et = (1 - nu)(st - p0) - nu (sr - p0)."""
        p0, nu = self.ring.p0, self.ring.nu
        double = self.ring.double_shear_modulus
        return p0 + (double * hoop_strain + nu * (radial - p0)) / (1 - nu)

    def _spare(self, depth: float, state: State) -> float:
        """Strength less deviator, by Hooke's law."""
        radial, hoop_strain = map(float, state)
        number = max(self.ring.mb * radial / self.ring.sci + self.ring.s, 0.0)
        return self.ring.sci * number**self.ring.a - (self._hoop(radial, hoop_strain) - radial)

    def _elastic_rates(self, depth: float, state: State) -> list[float]:
        radial, hoop_strain = map(float, state)
        hoop = self._hoop(radial, hoop_strain)
        return [radial - hoop, hoop_strain - self._elastic_strain(radial, hoop)]

    def _plastic_rates(self, depth: float, state: State) -> list[float]:
        radial, hoop_strain = map(float, state)
        ring = self.ring
        hoop = radial + ring.sci * max(ring.mb * radial / ring.sci + ring.s, 0.0) ** ring.a
        plastic_hoop = hoop_strain - self._elastic_strain(hoop, radial)
        radial_strain = self._elastic_strain(radial, hoop) - ring.dilation * plastic_hoop
        return [radial - hoop, hoop_strain - radial_strain]

    def _elastic_strain(self, along: float, across: float) -> float:
        """Hooke: 2 G e = (1 - nu)(along - p0) - nu (across - p0)."""
        p0, nu = self.ring.p0, self.ring.nu
        change = (1 - nu) * (along - p0) - nu * (across - p0)
        return change / self.ring.double_shear_modulus


def random_rings(count: int, seed: int) -> Columns:
    """(count,) columns that a curve with a disturbed ring follows from, beside nothing else.

    Disturbance goes with a softer ring, by any share: thin and thick rings of all kinds.
    """
    moderate = {"gsi": (15, 85), "dilation_deg": (0, 40), "in_situ_stress_mpa": (1, 40)}
    ground = random_ground(count, seed, {**RANGES, **moderate})
    draw = np.random.default_rng(seed + 1)
    of_ring = {f"ring_{name}": ground[name] for name in ("mb", "s", "a")}
    rows = (ground[name].tolist() for name in ("intact_strength_mpa", "mi", "gsi"))
    rocks = [criterion(*row, 0.0) for row in zip(*rows, strict=True)]
    sound = {name: np.array([getattr(rock, name) for rock in rocks]) for name in ("mb", "s", "a")}
    share = np.exp(draw.uniform(np.log(0.03), 0, count))
    share = np.where(draw.random(count) < SHARE_OF_EQUAL_MODULI, 1, share)
    thickness = np.exp(draw.uniform(np.log(0.01), np.log(2), count))
    return {
        **curve_columns(ground),
        **of_ring,
        **sound,
        "ring_modulus_mpa": ground["deformation_modulus_mpa"] * share,
        "ring_ratio": 1 + thickness,
    }


def rings(columns: Columns) -> Iterator[DisturbedRing]:
    """The slow curve of each section."""
    names = list(columns)
    for row in zip(*(columns[name].tolist() for name in names), strict=True):
        v = dict(zip(names, row, strict=True))
        shared = (v["poisson_ratio"], v["dilation_deg"])
        p0, sci = v["in_situ_stress_mpa"], v["intact_strength_mpa"]
        modulus, softer = v["deformation_modulus_mpa"], v["ring_modulus_mpa"]
        mass = GroundCurve(p0, sci, v["mb"], v["s"], v["a"], modulus, *shared)
        ring = GroundCurve(p0, sci, v["ring_mb"], v["ring_s"], v["ring_a"], softer, *shared)
        yield DisturbedRing(mass, ring, v["ring_ratio"])
