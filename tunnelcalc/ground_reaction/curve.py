"""The ground reaction curve as support and equilibrium see it, whatever the ground's law."""

from __future__ import annotations

from typing import NamedTuple, Protocol, Self

from tunnelcalc.arrays import Array


class CurvePoint(NamedTuple):
    """State of the wall at one support pressure a section, each (n,).

    `plastic_ratio` is Rp / R [-], `closure_ratio` is u / R [-], `slope` is
    d(u / R) / d(pressure), negative [1/MPa].
    """

    plastic_ratio: Array
    closure_ratio: Array
    slope: Array


class GroundCurve(Protocol):
    """Closure and plastic radius as functions of the support pressure, for all sections."""

    @property
    def in_situ_stress_mpa(self) -> Array:
        """(n,) p0, the pressure at which the wall does not move. [MPa]"""

    @property
    def critical_pressure_mpa(self) -> Array:
        """(n,) support pressure below which ground yields; 0 where it never does. [MPa]"""

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """State of the wall under a pressure (n,), 0 <= pressure <= p0. [MPa]"""

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
