"""Ground laws of the tests' own, in closed form: what the solvers may assume of no law."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.ground_reaction.curve import CurvePoint


@dataclass(frozen=True)
class VerticalAtZero:
    """u / R = most (1 - sqrt(p / p0)): the slope at zero pressure is minus infinity."""

    in_situ_stress_mpa: np.ndarray
    most: np.ndarray

    @property
    def critical_pressure_mpa(self):
        return self.in_situ_stress_mpa

    def at(self, pressure):
        root = np.sqrt(pressure / self.in_situ_stress_mpa)
        with np.errstate(divide="ignore"):
            slope = -self.most / (2 * root * self.in_situ_stress_mpa)
        return CurvePoint(np.ones_like(pressure), self.most * (1 - root), slope)

    def take(self, index):
        return VerticalAtZero(self.in_situ_stress_mpa[index], self.most[index])


@dataclass(frozen=True)
class Kinked:
    """Closure in three straight lines of pressure, steep, flat and steep again: not convex.

    With p0 = 4: u / R is 0.010 at 0, 0.006 at 1, 0.005 at 3 and 0 at 4 MPa.
    """

    in_situ_stress_mpa: np.ndarray

    @property
    def critical_pressure_mpa(self):
        return np.full_like(self.in_situ_stress_mpa, 3.0)

    def at(self, pressure):
        known = np.where(np.isnan(pressure), 0, pressure)
        closure = np.interp(known, [0, 1, 3, 4], [0.010, 0.006, 0.005, 0])
        slope = np.where(known < 1, -0.004, np.where(known < 3, -0.0005, -0.005))
        closure = np.where(np.isnan(pressure), np.nan, closure)
        return CurvePoint(np.ones_like(pressure), closure, slope)

    def take(self, index):
        return Kinked(self.in_situ_stress_mpa[index])
