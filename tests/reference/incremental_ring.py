"""Ground unloaded step by step, whose ring is strengthened on the way: finite elements in one line.

Axisymmetric, plane strain, Mohr-Coulomb with a constant dilation; linear elements between circles,
elastic ground beyond the outermost. Every step keeps the stresses and movements of the one before:
nothing is known of curves. Compression and inward movement are positive, the wall's radius is 1.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.linalg import solve_banded

Array = NDArray[np.float64]
OUTERMOST = 40.0
MOST_ITERATIONS = 60


def line(friction_deg: float, cohesion_mpa: float) -> tuple[float, float]:
    """k and q of st = k sr + q."""
    sine = math.sin(math.radians(friction_deg))
    cosine = math.cos(math.radians(friction_deg))
    return (1 + sine) / (1 - sine), 2 * cohesion_mpa * cosine / (1 - sine)


@dataclass(frozen=True)
class Ground:
    """Elastic constants, p0, dilation; friction and cohesion of the mass and of the ring."""

    p0: float
    modulus: float
    nu: float
    psi_deg: float
    mass: tuple[float, float]
    ring: tuple[float, float]
    ring_ratio: float

    def closures(self, pressures: Array, strengthened_below: float, elements: int = 400) -> Array:
        """u / R at falling pressures; the ring gains its strength below a pressure."""
        inner = elements * 2 // 5
        edge = math.log(self.ring_ratio)
        grades = np.concatenate(
            [
                np.linspace(0, edge, inner + 1),
                np.linspace(edge, math.log(OUTERMOST), elements - inner + 1)[1:],
            ]
        )
        r = np.exp(grades)
        h, middle = np.diff(r), (r[1:] + r[:-1]) / 2
        # Strain [radial, tangential] by the movement of an element's two circles.
        strain = np.array([[-1 / h, 1 / h], [0.5 / middle, 0.5 / middle]])
        strengths = np.array([line(*self.mass)] * elements).T
        stress, moved = np.full((2, elements), self.p0), np.zeros(elements + 1)
        found = []
        for pressure in pressures:
            if pressure < strengthened_below:
                inside = middle < self.ring_ratio
                strengths[:, inside] = np.array([line(*self.ring)]).T
            stress, moved = self._step(pressure, r, strain, middle * h, strengths, stress, moved)
            found.append(moved[0])
        return np.array(found)

    def _step(
        self,
        pressure: float,
        r: Array,
        strain: Array,
        weight: Array,
        strengths: Array,
        stress: Array,
        moved: Array,
    ) -> tuple[Array, Array]:
        double_shear = self.modulus / (1 + self.nu)
        step = np.zeros_like(moved)
        for _ in range(MOST_ITERATIONS):
            change = strain[:, 0] * step[:-1] + strain[:, 1] * step[1:]
            now, tangent = self._returned(stress, change, strengths)
            force = np.zeros_like(moved)
            for component in (0, 1):
                force[:-1] -= now[component] * strain[component, 0] * weight
                force[1:] -= now[component] * strain[component, 1] * weight
            force[0] -= pressure * r[0]
            # Elastic ground beyond: u = (p0 - sr) r / (2 G).
            force[-1] += self.p0 * r[-1] - double_shear * (moved + step)[-1]
            if np.max(np.abs(force)) < 1e-11 * self.p0:
                return now, moved + step
            step = step + solve_banded((1, 1), self._bands(strain, tangent, weight), force)
        raise AssertionError("no equilibrium")

    def _returned(self, stress: Array, change: Array, strengths: Array) -> tuple[Array, Array]:
        """Stresses after a change of strain, and their derivatives by it (2, 2, n)."""
        factor = self.modulus / ((1 + self.nu) * (1 - 2 * self.nu))
        elastic = factor * np.array([[1 - self.nu, self.nu], [self.nu, 1 - self.nu]])
        sine = math.sin(math.radians(self.psi_deg))
        flow = elastic @ np.array([-(1 + sine) / (1 - sine), 1.0])
        slope, unconfined = strengths
        trial = stress + elastic @ change
        excess = trial[1] - slope * trial[0] - unconfined
        plastic = excess > 0
        rates = -slope * elastic[0][:, None] + elastic[1][:, None]
        down = -slope * flow[0] + flow[1]
        now = trial - flow[:, None] * np.where(plastic, excess / down, 0)
        lost = flow[:, None, None] * rates[None] / down
        return now, elastic[:, :, None] - np.where(plastic, lost, 0)

    def _bands(self, strain: Array, tangent: Array, weight: Array) -> Array:
        bands = np.zeros((3, weight.size + 1))
        for i in (0, 1):
            for j in (0, 1):
                entry = weight * sum(
                    strain[a, i] * tangent[a, b] * strain[b, j] for a in (0, 1) for b in (0, 1)
                )
                if i == j:
                    bands[1, i : weight.size + i] += entry
                elif i == 0:
                    bands[0, 1:] += entry
                else:
                    bands[2, :-1] += entry
        bands[1, -1] += self.modulus / (1 + self.nu)
        return bands
