"""Ground reaction of a circular opening in ground that never yields."""

from __future__ import annotations

from dataclasses import dataclass, fields
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint


@dataclass(frozen=True, slots=True)
class ElasticCurve:
    """Ground reaction curves of n sections, u / R = (p0 - pi) / (2 G). All fields are (n,)."""

    in_situ_stress_mpa: Array
    shear_modulus_mpa: Array
    critical_pressure_mpa: Array

    @classmethod
    def of_ground(
        cls, *, in_situ_stress_mpa: Array, deformation_modulus_mpa: Array, poisson_ratio: Array
    ) -> Self:
        """Curves from the ground's properties, all (n,).

        Stress and modulus in MPa. A NaN row stays NaN and spoils no other.

        Source
        ------
        G. Kirsch, Z. VDI 42 (1898) 797-807, for equal stresses all round.
        """
        shear_modulus = deformation_modulus_mpa / (2 * (1 + poisson_ratio))
        known = ~np.isnan(in_situ_stress_mpa + shear_modulus)
        return cls(in_situ_stress_mpa, shear_modulus, np.where(known, 0.0, np.nan))

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
        return type(self)(
            **{field.name: getattr(self, field.name)[index] for field in fields(self)}
        )

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic radius, which is that of the opening, closure and slope under a pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.

        Source
        ------
        See `of_ground`.
        """
        double_modulus = 2 * self.shear_modulus_mpa
        closure = (self.in_situ_stress_mpa - support_pressure_mpa) / double_modulus
        plastic_ratio = np.where(np.isnan(closure), np.nan, 1.0)
        slope = np.where(np.isnan(closure), np.nan, -1 / double_modulus)
        return CurvePoint(plastic_ratio, closure, slope)
