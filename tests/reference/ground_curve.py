"""Ground reaction of one section, by integrating the governing equations from Rp inwards.

In the plastic ring, with inward displacement and compression positive:

    equilibrium     d sr / d ln r = st - sr,   st - sr = sci (mb sr / sci + s)^a
    compatibility   er = du / dr, et = u / r
    flow rule       (er - er_el) + K (et - et_el) = 0
    Hooke           2 G er_el = (1 - nu)(sr - p0) - nu (st - p0), and er with et exchanged

Both are integrated with the radial stress as the running variable, so that the wall, where
sr is the support pressure, is met exactly. The elastic field outside gives the start.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

State = NDArray[np.float64]
RELATIVE_TOLERANCE = 1e-12
TOLERANCE_BETWEEN = 1e-9


@dataclass(frozen=True)
class GroundCurve:
    """One section's ground: stresses, strength and modulus in MPa, angle in degrees.

    Closures are good to about 1e-11 of themselves. A closure beyond the range of a double is NaN.
    """

    p0: float
    sci: float
    mb: float
    s: float
    a: float
    modulus: float
    nu: float
    psi_deg: float = 0.0

    @property
    def double_shear_modulus(self) -> float:
        return self.modulus / (1 + self.nu)

    @property
    def dilation(self) -> float:
        """K of the flow rule."""
        sine = math.sin(math.radians(self.psi_deg))
        return (1 + sine) / (1 - sine)

    def deviator(self, sr: float) -> float:
        return self.sci * (self.mb * sr / self.sci + self.s) ** self.a

    @cached_property
    def critical_pressure(self) -> float:
        """Where the elastic hoop stress 2 p0 - p meets the criterion; 0 for elastic ground."""

        def excess(p: float) -> float:
            return 2 * (self.p0 - p) - self.deviator(p)

        if excess(0.0) <= 0:
            return 0.0
        return brentq(excess, 0, self.p0, xtol=1e-15 * self.p0, rtol=1e-15)

    @cached_property
    def unsupported(self) -> tuple[float, float]:
        """Rp / R and u / R without support."""
        return self.at(0.0)

    def at(self, pressure: float) -> tuple[float, float]:
        """Rp / R and u / R under a support pressure from 0 to p0."""
        if pressure >= self.critical_pressure:
            return 1.0, (self.p0 - pressure) / self.double_shear_modulus
        solution = self._integrated(pressure, RELATIVE_TOLERANCE)
        if not solution.success:
            return math.nan, math.nan
        depth, closure = solution.y[:, -1]
        return math.exp(depth), float(closure)

    def slope(self, pressure: float, closure_ratio: float) -> float:
        """d(u / R) / d(pressure) at a point of the curve. [1/MPa]"""
        if pressure >= self.critical_pressure:
            return -1 / self.double_shear_modulus
        return self._rates(pressure, np.array([0.0, closure_ratio]))[1]

    @cached_property
    def closure_between(self) -> Callable[[float], float]:
        """u / R for any pressure from 0 to p0 by interpolation in one integration, to about 1e-8.

        The ring is one curve: each point of it is the wall for the pressure that equals the
        radial stress there.
        """
        if self.critical_pressure == 0:
            return lambda p: (self.p0 - p) / self.double_shear_modulus
        dense = self._integrated(0.0, TOLERANCE_BETWEEN, dense=True).sol

        def closure(p: float) -> float:
            if p >= self.critical_pressure:
                return (self.p0 - p) / self.double_shear_modulus
            return float(dense(p)[1])

        return closure

    def _rates(self, sr: float, state: State) -> list[float]:
        """d ln(Rp / r) / d sr and d(u / r) / d sr."""
        deviator = self.deviator(sr)
        hoop = sr + deviator
        radial_change, hoop_change = sr - self.p0, hoop - self.p0
        radial_strain = ((1 - self.nu) * radial_change - self.nu * hoop_change) / (
            self.double_shear_modulus
        )
        hoop_strain = ((1 - self.nu) * hoop_change - self.nu * radial_change) / (
            self.double_shear_modulus
        )
        # er - er_el + K (u / r - et_el) = 0 with er = u / r + d(u / r) / d ln r.
        closure = state[1]
        change = radial_strain - closure + self.dilation * (hoop_strain - closure)
        return [-1 / deviator, change / deviator]

    def _integrated(self, pressure: float, tolerance: float, *, dense: bool = False) -> Any:
        start = (self.p0 - self.critical_pressure) / self.double_shear_modulus
        with np.errstate(over="ignore", invalid="ignore"):
            return solve_ivp(
                self._rates,
                (self.critical_pressure, pressure),
                [0.0, start],
                method="DOP853",
                rtol=tolerance,
                atol=[1e-14, 0.0],
                dense_output=dense,
            )


Strength = Callable[[float], float]
POWER = 8
"""With sr = t^8 the running variable t makes the ring smooth even where all strength is lost as
sr goes to 0: d ln r = d sr / (sr^a ...) is finite in t for any a < 7/8."""


@dataclass(frozen=True)
class StrengthCurve(GroundCurve):
    """Ground of any criterion: strength st - sr as a function of sr, before and after it yields.

    Made by `of_strength`; the constants of the other criterion stay NaN.
    """

    peak: Strength = math.nan  # type: ignore[assignment]
    ring: Strength = math.nan  # type: ignore[assignment]

    @classmethod
    def of_strength(
        cls, p0: float, peak: Strength, ring: Strength, modulus: float, nu: float, psi_deg: float
    ) -> StrengthCurve:
        unused = (math.nan,) * 4
        return cls(p0, *unused, modulus, nu, psi_deg, peak, ring)

    def deviator(self, sr: float) -> float:
        return self.ring(sr)

    @cached_property
    def critical_pressure(self) -> float:
        def excess(p: float) -> float:
            return 2 * (self.p0 - p) - self.peak(p)

        if excess(0.0) <= 0:
            return 0.0
        return brentq(excess, 0, self.p0, xtol=1e-15 * self.p0, rtol=1e-15)

    @cached_property
    def closure_between(self) -> Callable[[float], float]:
        if self.critical_pressure == 0:
            return lambda p: (self.p0 - p) / self.double_shear_modulus
        dense = self._integrated(0.0, TOLERANCE_BETWEEN, dense=True).sol

        def closure(p: float) -> float:
            if p >= self.critical_pressure:
                return (self.p0 - p) / self.double_shear_modulus
            return float(dense(p ** (1 / POWER))[1])

        return closure

    def _integrated(self, pressure: float, tolerance: float, *, dense: bool = False) -> Any:
        def rates(t: float, state: State) -> list[float]:
            if t <= 0:
                return [0.0, 0.0]
            return [POWER * t ** (POWER - 1) * rate for rate in self._rates(t**POWER, state)]

        start = (self.p0 - self.critical_pressure) / self.double_shear_modulus
        return solve_ivp(
            rates,
            (self.critical_pressure ** (1 / POWER), pressure ** (1 / POWER)),
            [0.0, start],
            method="DOP853",
            rtol=tolerance,
            atol=[1e-14, 0.0],
            dense_output=dense,
        )


def hoek_brown_strength(sci: float, mb: float, s: float, a: float) -> Strength:
    return lambda sr: sci * (mb * sr / sci + s) ** a


def mohr_coulomb_strength(friction_deg: float, cohesion: float) -> Strength:
    """(s1 - s3) = (s1 + s3) sin phi + 2 c cos phi, solved for s1 - s3."""
    phi = math.radians(friction_deg)
    return lambda sr: 2 * (sr * math.sin(phi) + cohesion * math.cos(phi)) / (1 - math.sin(phi))
