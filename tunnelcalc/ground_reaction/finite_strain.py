"""A ground reaction curve of small strains, corrected for strains that are not small.

With logarithmic strains and a negligible elastic strain in the ring, the flow rule keeps
r^K dr of every ring of ground while it moves from r0 to r:

    r^K dr = r0^K dr0,   so that   Rp^(K+1) - a^(K+1) = Rp0^(K+1) - R^(K+1),   a = R - u

The stresses depend on r / Rp in the deformed ground alone, so that X = Rp / a is the Rp / R of
small strains. The ring's edge moves by e Rp, e << 1: Rp0^(K+1) = Rp^(K+1) (1 + (K + 1) e). Small
strains give u_ss / R = e X^(K+1). Put in, with a^(K+1) taken out:

    (R / a)^(K+1) = 1 + (K + 1) u_ss / R
    u_fs / R = 1 - (1 + (K + 1) u_ss / R)^(-1 / (K + 1))
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve
from tunnelcalc.ground_reaction.flow_rule import dilation_coefficient

LARGEST_RATIO = float(np.nextafter(1, 0))
"""An opening never closes wholly: a closure that would round to R is rounded down."""


@dataclass(frozen=True, slots=True)
class FiniteStrainCurve:
    """Ground reaction curves of n sections, closures corrected for finite strain.

    `inner` holds the curves of small strains, `dilation` (n,) the K of the flow rule.
    """

    inner: GroundCurve
    dilation: Array

    @classmethod
    def of_curve(cls, inner: GroundCurve, dilation_deg: Array) -> Self:
        """The corrected curves.

        Parameters
        ----------
        inner : curves of n sections by small strains.
        dilation_deg : (n,) psi, 0 <= psi < 90, the one that `inner` was computed with. [deg]

        Raises
        ------
        ShapeError : the curves and the angles differ in number.
        """
        same_length(curve=inner.in_situ_stress_mpa, dilation_deg=dilation_deg)
        return cls(inner, dilation_coefficient(dilation_deg))

    @property
    def in_situ_stress_mpa(self) -> Array:
        """(n,) p0 of the inner curve. [MPa]"""
        return self.inner.in_situ_stress_mpa

    @property
    def critical_pressure_mpa(self) -> Array:
        """(n,) pcr of the inner curve. [MPa]"""
        return self.inner.critical_pressure_mpa

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
        return type(self)(self.inner.take(index), self.dilation[index])

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic ratio, closure and slope of the corrected curve under a support pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.  The closure ratio is always below 1; NaN where that of the inner curve is.
        The plastic ratio is that of the inner curve. Strictly it is Rp / (R - u), the ratio to
        the deformed wall. It is kept as Rp / R, which is on the safe side: the plastic zone is
        taken deeper by R / (R - u) than it is.

        Limits
        ------
        Elastic strain in the ring is neglected in the correction, not in the inner closure.
        Against a full integration of logarithmic strains the closure is mostly too small, by
        at most 0.7 K e of itself, e = (p0 - pcr) / (2 G) the strain at the ring's edge
        (independent calculation over random ground): within 0.3 % where K e < 0.004, several
        per cent in soft ground under high stress. The inner curve must be one of small strains.

        Source
        ------
        A. Vrakas, G. Anagnostou, Int. J. Numer. Anal. Methods Geomech. 38 (2014) 1131-1148;
        formula from memory, derived again at the head of this module.
        """
        point = self.inner.at(support_pressure_mpa)
        order = self.dilation + 1
        growth = order * point.closure_ratio
        growth = np.where(growth > -1, growth, np.nan)  # only far above the in-situ stress
        strain = np.log1p(growth) / order  # ln(R / a): keeps the digits of a tiny closure
        closure = np.minimum(-np.expm1(-strain), LARGEST_RATIO)
        # d u_fs / d u_ss = (1 + growth)^(-1 - 1 / (K + 1)), in two steps: in one it could
        # underflow to 0 where a huge slope brings the product back into range.
        slope = point.slope / (1 + growth) * np.exp(-strain)
        return CurvePoint(point.plastic_ratio, closure, slope)
