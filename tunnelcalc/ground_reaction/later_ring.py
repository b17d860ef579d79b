"""Ground whose ring is strengthened when the wall has moved already.

The strength of the ring counts only for what moves afterwards:

    u(p) = u_i + u*(p) - u*(p_i)   for p < p_i

where p_i is the pressure at which the ground without the ring has moved by u_i, and u* is the
curve with the ring from the beginning. Ground that gains strength is elastic at first, yields again
as the pressure falls, and joins u* once all of the ring has: its closure lies between u* and this
sum. u* by itself forgets what had moved, and is up to several times too small where the ring comes
late; the sum is on the safe side, by up to 27 % in ground unloaded step by step (independent
calculation).
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Self

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import CurvePoint, GroundCurve


@dataclass(frozen=True, slots=True)
class LaterRingCurve:
    """Curves of n sections whose ring is strengthened when the wall has moved already.

    `before` is without the ring, `improved` with it from the beginning; `installation_pressure_mpa`
    (n,) is the pressure at which `before` has moved as far as the wall had at installation. [MPa]
    """

    before: GroundCurve
    improved: GroundCurve
    installation_pressure_mpa: Array
    installed: CurvePoint
    """State of `before` at installation."""
    credit: Array
    """(n,) what `improved` has moved less by then. [-]"""

    @classmethod
    def of_curves(
        cls, before: GroundCurve, improved: GroundCurve, installation_pressure_mpa: Array
    ) -> Self:
        """The curves; all three of the same n sections.

        Source
        ------
        See the head of this module.
        """
        installed = before.at(installation_pressure_mpa)
        credit = installed.closure_ratio - improved.at(installation_pressure_mpa).closure_ratio
        return cls(before, improved, installation_pressure_mpa, installed, credit)

    @property
    def in_situ_stress_mpa(self) -> Array:
        """(n,) p0. [MPa]"""
        return self.before.in_situ_stress_mpa

    @property
    def critical_pressure_mpa(self) -> Array:
        """(n,) support pressure below which the wall begins to yield. [MPa]"""
        yielded_before = self.installation_pressure_mpa < self.before.critical_pressure_mpa
        own = np.minimum(self.improved.critical_pressure_mpa, self.installation_pressure_mpa)
        return np.where(yielded_before, self.before.critical_pressure_mpa, own)

    def take(self, index: Array) -> Self:
        """The curves of the sections at `index`."""
        return type(self)(
            self.before.take(index),
            self.improved.take(index),
            self.installation_pressure_mpa[index],
            CurvePoint(*(column[index] for column in self.installed)),
            self.credit[index],
        )

    def at(self, support_pressure_mpa: Array) -> CurvePoint:
        """Plastic radius, closure and slope of the curve under a support pressure.

        Parameters
        ----------
        support_pressure_mpa : (n,) pi, 0 <= pi <= p0. [MPa]

        Returns
        -------
        CurvePoint.  Ground that had yielded at installation counts as yielded.

        Limits
        ------
        On the safe side: the ring moves on as if it yielded at once. Its closure is never below
        that with the ring from the beginning.

        Source
        ------
        Derivation at the head of this module.
        """
        before, after = self.before.at(support_pressure_mpa), self.improved.at(support_pressure_mpa)
        later = support_pressure_mpa < self.installation_pressure_mpa
        deepest = np.maximum(after.plastic_ratio, self.installed.plastic_ratio)
        found = CurvePoint(deepest, after.closure_ratio + self.credit, after.slope)
        known = ~np.isnan(self.credit + support_pressure_mpa)
        return CurvePoint(
            *(
                np.where(known, np.where(later, b, a), np.nan)
                for a, b in zip(before, found, strict=True)
            )
        )
