"""The other way to a ground reaction: one section, adaptive integration by scipy.

Nothing here shares a formula with the ground reaction curves: equilibrium and the flow rule are
integrated as differential equations in the radial stress, for any strength of the ring.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import NamedTuple

Strength = Callable[[float], float]
"""Hoop stress less radial stress at failure, as a function of the radial stress. [MPa]"""


class WallState(NamedTuple):
    """Critical pressure [MPa], Rp / R and u / R of the wall."""

    critical_pressure_mpa: float
    plastic_ratio: float
    closure_ratio: float


@dataclass(frozen=True, slots=True)
class Ground:
    """Ground that yields by `peak` and holds `residual` in the ring."""

    in_situ_stress_mpa: float
    deformation_modulus_mpa: float
    poisson_ratio: float
    dilation_deg: float
    peak: Strength
    residual: Strength

    def wall(self, pressure_mpa: float) -> WallState:
        """State of the wall under a pressure below the critical one."""
        from scipy.integrate import solve_ivp
        from scipy.optimize import brentq

        p0, nu = self.in_situ_stress_mpa, self.poisson_ratio
        double_shear = self.deformation_modulus_mpa / (1 + nu)
        sine = math.sin(math.radians(self.dilation_deg))
        flow = (1 + sine) / (1 - sine)
        critical = float(brentq(lambda s: 2 * (p0 - s) - self.peak(s), 0, p0, xtol=1e-15))

        def rates(root: float, state: tuple[float, float]) -> tuple[float, float]:
            # In the root of the stress, so that a strength that vanishes at 0 does no harm.
            radial = root * root
            strength = self.residual(radial)
            hoop = radial + strength
            elastic_radial = ((1 - nu) * (radial - p0) - nu * (hoop - p0)) / double_shear
            elastic_hoop = ((1 - nu) * (hoop - p0) - nu * (radial - p0)) / double_shear
            by_radius = elastic_radial + flow * elastic_hoop - (flow + 1) * state[1]
            step = 2 * root / strength
            return step, by_radius * step

        start, end = math.sqrt(critical), math.sqrt(max(pressure_mpa, 1e-18 * critical))
        found = solve_ivp(
            rates,
            (start, end),
            (0.0, (p0 - critical) / double_shear),
            method="DOP853",
            rtol=1e-12,
            atol=1e-15,
        )
        log_ratio, closure = found.y[:, -1]
        return WallState(critical, math.exp(-float(log_ratio)), float(closure))


def hoek_brown_strength(sci: float, mb: float, s: float, a: float) -> Strength:
    """The generalised criterion."""
    return lambda radial: sci * (mb * radial / sci + s) ** a


def line_strength(cohesion: float, friction_deg: float) -> Strength:
    """The Mohr-Coulomb criterion."""
    sine = math.sin(math.radians(friction_deg))
    cosine = math.cos(math.radians(friction_deg))
    return lambda radial: (2 * sine * radial + 2 * cohesion * cosine) / (1 - sine)


@dataclass(frozen=True, slots=True)
class SofteningGround:
    """Hoek-Brown ground whose constants fall linearly with the plastic shear strain."""

    in_situ_stress_mpa: float
    deformation_modulus_mpa: float
    poisson_ratio: float
    dilation_deg: float
    intact_strength_mpa: float
    peak: tuple[float, float, float]
    residual: tuple[float, float, float]
    critical_shear_strain: float

    def wall(self, pressure_mpa: float) -> WallState:
        """State of the wall under a pressure below the critical one.

        At each radius the plastic shear strain follows from the movement there: it is the root
        of eta = (1 + K) (u / r - elastic hoop strain), where the elastic strain is that of the
        strength that eta leaves.
        """
        from scipy.integrate import solve_ivp
        from scipy.optimize import brentq

        p0, nu = self.in_situ_stress_mpa, self.poisson_ratio
        double_shear = self.deformation_modulus_mpa / (1 + nu)
        sine = math.sin(math.radians(self.dilation_deg))
        flow = (1 + sine) / (1 - sine)
        critical = float(brentq(lambda s: 2 * (p0 - s) - self._strength(s, 0), 0, p0, xtol=1e-15))

        def elastic(radial: float, strength: float) -> tuple[float, float]:
            hoop = radial + strength
            return (
                ((1 - nu) * (radial - p0) - nu * (hoop - p0)) / double_shear,
                ((1 - nu) * (hoop - p0) - nu * (radial - p0)) / double_shear,
            )

        def strength_at(radial: float, closure: float) -> float:
            def excess(eta: float) -> float:
                _, hoop_strain = elastic(radial, self._strength(radial, eta))
                return eta - (1 + flow) * (closure - hoop_strain)

            if excess(0.0) >= 0:
                return self._strength(radial, 0.0)
            most = 1.0
            while excess(most) < 0:
                most *= 2
            return self._strength(radial, float(brentq(excess, 0.0, most, xtol=1e-16)))

        def rates(radial: float, state: tuple[float, float]) -> tuple[float, float]:
            strength = strength_at(radial, state[1])
            radial_strain, hoop_strain = elastic(radial, strength)
            by_radius = radial_strain + flow * hoop_strain - (flow + 1) * state[1]
            return 1 / strength, by_radius / strength

        found = solve_ivp(
            rates,
            (critical, pressure_mpa),
            (0.0, (p0 - critical) / double_shear),
            method="LSODA",
            rtol=1e-9,
            atol=1e-12,
        )
        log_ratio, closure = found.y[:, -1]
        return WallState(critical, math.exp(-float(log_ratio)), float(closure))

    def _strength(self, radial: float, eta: float) -> float:
        share = min(max(eta / self.critical_shear_strain, 0), 1)
        mb, s, a = (
            peak + share * (residual - peak)
            for peak, residual in zip(self.peak, self.residual, strict=True)
        )
        return hoek_brown_strength(self.intact_strength_mpa, mb, s, a)(radial)
