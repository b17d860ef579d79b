"""Strain-softening ground of one section, by integrating the governing equations from Rp inwards.

As `reference.ground_curve`, with strength constants that depend on the plastic shear strain

    eta = ep_th - ep_r = (1 + K) (u / r - et_el(sr, sr + H(sr, eta)))

which is a scalar equation for eta at every radius. Its root is followed from eta = 0 at the edge.
Where the root ends, at the critical strain or because strength falls faster than the strain can
follow, the rest of the ring is residual.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import solve_ivp
from scipy.optimize import brentq

State = NDArray[np.float64]
RELATIVE_TOLERANCE = 1e-11


@dataclass(frozen=True)
class SofteningSection:
    """Stresses, strength and modulus in MPa, dilation in degrees."""

    p0: float
    sci: float
    peak: tuple[float, float, float]
    residual: tuple[float, float, float]
    critical_strain: float
    modulus: float
    nu: float
    psi_deg: float

    @property
    def double_shear_modulus(self) -> float:
        return self.modulus / (1 + self.nu)

    @property
    def dilation(self) -> float:
        sine = math.sin(math.radians(self.psi_deg))
        return (1 + sine) / (1 - sine)

    def strength(self, sr: float, strain: float) -> float:
        """st - sr at yield."""
        share = min(strain / self.critical_strain, 1.0)
        mb, s, a = (p + share * (r - p) for p, r in zip(self.peak, self.residual, strict=True))
        return self.sci * (mb * sr / self.sci + s) ** a

    def elastic_hoop(self, sr: float, hoop: float) -> float:
        change = (1 - self.nu) * (hoop - self.p0) - self.nu * (sr - self.p0)
        return change / self.double_shear_modulus

    def elastic_radial(self, sr: float, hoop: float) -> float:
        change = (1 - self.nu) * (sr - self.p0) - self.nu * (hoop - self.p0)
        return change / self.double_shear_modulus

    def surplus(self, strain: float, sr: float, closure: float) -> float:
        """Assumed plastic shear strain less the one that follows; 0 at a root."""
        hoop = sr + self.strength(sr, strain)
        return strain - (1 + self.dilation) * (closure - self.elastic_hoop(sr, hoop))

    def end_of_branch(self, sr: float) -> float:
        """Strain up to which `surplus` rises, at most the critical one."""

        def slope(strain: float) -> float:
            step = 1e-6 * self.critical_strain
            high = min(strain + step, self.critical_strain)
            low = max(strain - step, 0.0)
            rise = self.surplus(high, sr, 0.0) - self.surplus(low, sr, 0.0)
            return rise / (high - low)

        if slope(0.0) <= 0:
            return 0.0
        if slope(self.critical_strain) >= 0:
            return self.critical_strain
        return float(brentq(slope, 0.0, self.critical_strain, xtol=1e-13 * self.critical_strain))

    def strain(self, sr: float, closure: float) -> float:
        """The root, or where there is none the end of its branch."""
        end = self.end_of_branch(sr)
        if self.surplus(0.0, sr, closure) >= 0:
            return 0.0
        if self.surplus(end, sr, closure) <= 0:
            return end
        args = (sr, closure)
        return float(brentq(self.surplus, 0.0, end, args=args, xtol=1e-16, rtol=1e-15))

    def critical_pressure(self) -> float:
        """Where the elastic hoop stress 2 p0 - p meets the peak criterion; 0 if it never does."""

        def excess(p: float) -> float:
            return 2 * (self.p0 - p) - self.strength(p, 0.0)

        if excess(0.0) <= 0:
            return 0.0
        return float(brentq(excess, 0.0, self.p0, xtol=1e-15 * self.p0, rtol=1e-15))

    def at(self, pressure: float) -> tuple[float, float, str]:
        """Rp / R, u / R, and how far the wall has gone: elastic, softening, drop or residual."""
        critical = self.critical_pressure()
        if pressure >= critical:
            return 1.0, (self.p0 - pressure) / self.double_shear_modulus, "elastic"
        state = np.array([0.0, (self.p0 - critical) / self.double_shear_modulus])
        sr, phase = critical, "drop"
        if self.end_of_branch(critical) > 0:

            def left(sr: float, state: State) -> float:
                return self.surplus(self.end_of_branch(sr), sr, state[1])

            left.terminal = True  # type: ignore[attr-defined]
            found = self._integrated(sr, pressure, state, residual=False, event=left)
            if not found.t_events[0].size:
                return math.exp(found.y[0, -1]), float(found.y[1, -1]), "softening"
            sr, state = float(found.t_events[0][0]), found.y_events[0][0]
            ended_early = self.end_of_branch(sr) < self.critical_strain
            phase = "late drop" if ended_early else "residual"
        found = self._integrated(sr, pressure, state, residual=True)
        return math.exp(found.y[0, -1]), float(found.y[1, -1]), phase

    def _integrated(
        self, start: float, end: float, state: State, *, residual: bool, event: Any = None
    ) -> Any:
        def rates(sr: float, state: State) -> list[float]:
            """d ln(Rp / r) / d sr and d(u / r) / d sr."""
            closure = float(state[1])
            strain = self.critical_strain if residual else self.strain(sr, closure)
            deviator = self.strength(sr, strain)
            radial = self.elastic_radial(sr, sr + deviator)
            hoop = self.elastic_hoop(sr, sr + deviator)
            change = radial - closure + self.dilation * (hoop - closure)
            return [-1 / deviator, change / deviator]

        return solve_ivp(
            rates,
            (start, end),
            state,
            method="DOP853",
            rtol=RELATIVE_TOLERANCE,
            atol=[1e-13, 0.0],
            events=event,
        )


def softening_sections(columns: dict[str, NDArray[np.float64]]) -> list[SofteningSection]:
    """Sections one by one from columns named as the arguments of the program's curve."""
    rows = [dict(zip(columns, row, strict=True)) for row in zip(*columns.values(), strict=True)]
    return [
        SofteningSection(
            p0=float(row["in_situ_stress_mpa"]),
            sci=float(row["intact_strength_mpa"]),
            peak=(float(row["mb"]), float(row["s"]), float(row["a"])),
            residual=tuple(float(row[f"residual_{name}"]) for name in ("mb", "s", "a")),
            critical_strain=float(row["critical_shear_strain"]),
            modulus=float(row["deformation_modulus_mpa"]),
            nu=float(row["poisson_ratio"]),
            psi_deg=float(row["dilation_deg"]),
        )
        for row in rows
    ]


def random_softening_ground(count: int, seed: int) -> dict[str, NDArray[np.float64]]:
    """Ground whose geological strength index falls, invented; columns as the program's curve."""
    draw = np.random.default_rng(seed)
    peak = draw.uniform(30, 80, count)
    mi = draw.uniform(5, 30, count)
    residual = peak * np.exp(-0.0134 * peak)
    columns = {}
    for name, gsi in (("", peak), ("residual_", residual)):
        columns[f"{name}mb"] = mi * np.exp((gsi - 100) / 28)
        columns[f"{name}s"] = np.exp((gsi - 100) / 9)
        columns[f"{name}a"] = 0.5 + (np.exp(-gsi / 15) - np.exp(-20 / 3)) / 6
    return {
        **columns,
        "in_situ_stress_mpa": np.exp(draw.uniform(np.log(2), np.log(60), count)),
        "intact_strength_mpa": np.exp(draw.uniform(np.log(5), np.log(150), count)),
        "critical_shear_strain": np.exp(draw.uniform(np.log(0.001), np.log(0.1), count)),
        "deformation_modulus_mpa": np.exp(draw.uniform(np.log(300), np.log(40_000), count)),
        "poisson_ratio": draw.uniform(0.15, 0.35, count),
        "dilation_deg": np.where(draw.random(count) < 0.3, 0.0, draw.uniform(0, 15, count)),
    }
