"""Invented and remembered ground of one section, and its curves."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

import numpy as np

from tunnelcalc.api import GroundCurve
from tunnelcalc.builtin.verification.independent import (
    Ground,
    SofteningGround,
    hoek_brown_strength,
)
from tunnelcalc.ground_reaction.disturbed_ring import DisturbedRingCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants, MohrCoulomb


@dataclass(frozen=True, slots=True)
class Case:
    """Hoek-Brown ground of one section: peak and residual mb, s, a."""

    p0: float
    modulus: float
    nu: float
    sci: float
    peak: tuple[float, float, float]
    residual: tuple[float, float, float]
    dilation: float = 0.0

    def arguments(self) -> dict[str, Any]:
        mb, s, a = self.peak
        values = {
            "in_situ_stress_mpa": self.p0,
            "deformation_modulus_mpa": self.modulus,
            "poisson_ratio": self.nu,
            "dilation_deg": self.dilation,
            "intact_strength_mpa": self.sci,
            "mb": mb,
            "s": s,
            "a": a,
        }
        return {name: np.array([value]) for name, value in values.items()}

    def residue(self) -> HoekBrownConstants:
        return HoekBrownConstants(*(np.array([value]) for value in self.residual))

    def plastic(self) -> GroundCurve:
        return HoekBrownCurve.of_ground(**self.arguments())

    def brittle(self) -> GroundCurve:
        return HoekBrownCurve.of_ground(**self.arguments(), residual=self.residue())

    def softening(self, strain: float, annuli: int = 200) -> GroundCurve:
        mb, s, a = self.residue()
        return SofteningCurve.of_ground(
            **self.arguments(),
            residual_mb=mb,
            residual_s=s,
            residual_a=a,
            critical_shear_strain=np.array([strain]),
            annuli=annuli,
        )

    def softening_apart(self, strain: float) -> SofteningGround:
        return SofteningGround(
            self.p0,
            self.modulus,
            self.nu,
            self.dilation,
            self.sci,
            self.peak,
            self.residual,
            strain,
        )

    def apart(self, residual: bool) -> Ground:
        peak = hoek_brown_strength(self.sci, *self.peak)
        ring = hoek_brown_strength(self.sci, *self.residual) if residual else peak
        return Ground(self.p0, self.modulus, self.nu, self.dilation, peak, ring)


SOFT = Case(3.31, 1380, 0.25, 27.6, (0.5, 0.001, 0.5), (0.1, 0.0, 0.5))
HARD = Case(108, 40000, 0.2, 300, (7.5, 0.1, 0.5), (1.0, 0.01, 0.5))
GENERAL = Case(30, 5500, 0.25, 30, (1.7, 0.0039, 0.55), (0.85, 0.0019, 0.60))
SOFTER = Case(15, 5700, 0.25, 30, (2.0, 0.004, 0.5), (0.6, 0.002, 0.5))
WEAK = Case(7.5, 1377, 0.25, 20, (1.23, 0.000419, 0.5223), (1.23, 0.000419, 0.5223), 10)


def line_curve(dilation: float = 0.0, brittle: bool = False) -> GroundCurve:
    """Brady & Brown's ground: p0 10 MPa, G 600 MPa, phi 45, c 2.414 MPa; residual phi 30."""
    values = {
        "in_situ_stress_mpa": 10.0,
        "cohesion_mpa": 2.414,
        "friction_angle_deg": 45.0,
        "deformation_modulus_mpa": 1500.0,
        "poisson_ratio": 0.25,
        "dilation_deg": dilation,
    }
    residual = MohrCoulomb(np.array([30.0]), np.array([0.0])) if brittle else None
    arrays: dict[str, Any] = {name: np.array([value]) for name, value in values.items()}
    return MohrCoulombCurve.of_ground(**arrays, residual=residual)


def ring_curve(ratio: float) -> GroundCurve:
    values = {
        "ring_ratio": ratio,
        "ring_mb": 0.6,
        "ring_s": 1e-4,
        "ring_a": 0.53,
        "ring_modulus_mpa": 700.0,
    }
    return DisturbedRingCurve.of_ground(
        **WEAK.arguments(), **{name: np.array([value]) for name, value in values.items()}
    )


def wall_value(make: Callable[[], GroundCurve], pressure: float, which: str) -> float:
    curve = make()
    if which == "critical_pressure_mpa":
        return float(curve.critical_pressure_mpa[0])
    return float(getattr(curve.at(np.array([pressure])), which)[0])


def apart_value(ground: Ground | SofteningGround, pressure: float, which: str) -> float:
    state = ground.wall(pressure)
    return float(getattr(state, which))
