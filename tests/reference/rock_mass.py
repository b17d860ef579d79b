"""Strength and stiffness of the rock mass, one section at a time.

Hoek, Carranza-Torres & Corkum (2002) for the criterion; the straight line is found by least
squares with numerical quadrature, not by the published closed forms. Hoek & Diederichs (2006) for
the modulus.
"""

from __future__ import annotations

import math
from typing import NamedTuple

from scipy.integrate import quad


class Criterion(NamedTuple):
    """s1 = s3 + sci (mb s3 / sci + s)^a. [MPa]"""

    sci: float
    mb: float
    s: float
    a: float

    def deviator(self, s3: float) -> float:
        """s1 - s3 at yield. [MPa]"""
        return self.sci * (self.mb * s3 / self.sci + self.s) ** self.a

    @property
    def tensile_strength(self) -> float:
        """Magnitude of s3 where the criterion ends. [MPa]"""
        return self.s * self.sci / self.mb


class Line(NamedTuple):
    """s1 = intercept + slope s3. [MPa, -]"""

    intercept: float
    slope: float

    @property
    def friction_angle_deg(self) -> float:
        return math.degrees(math.asin((self.slope - 1) / (self.slope + 1)))

    @property
    def cohesion(self) -> float:
        return self.intercept / (2 * math.sqrt(self.slope))


def criterion(sci: float, mi: float, gsi: float, disturbance: float) -> Criterion:
    mb = mi * math.exp((gsi - 100) / (28 - 14 * disturbance))
    s = math.exp((gsi - 100) / (9 - 3 * disturbance))
    a = 1 / 2 + (math.exp(-gsi / 15) - math.exp(-20 / 3)) / 6
    return Criterion(sci, mb, s, a)


def fitted_line(rock: Criterion, upper: float) -> Line:
    """Least-squares line over -st < s3 < upper, by quadrature.

    With w running from 0 to 1 over the range, the line c0 + b w that is nearest to y(w) has
    b = 12 (I1 - I0 / 2) and c0 = I0 - b / 2, where I0 and I1 are the integrals of y and y w.
    w = v^2 makes the integrand smooth where the criterion starts.
    """
    reach = upper + rock.tensile_strength

    def y(v: float) -> float:
        return rock.sci * (rock.mb * reach * v * v / rock.sci) ** rock.a

    zeroth = quad(lambda v: y(v) * 2 * v, 0, 1, epsabs=0, epsrel=1e-12)[0]
    first = quad(lambda v: y(v) * 2 * v**3, 0, 1, epsabs=0, epsrel=1e-12)[0]
    rise = 12 * (first - zeroth / 2)
    at_start = zeroth - rise / 2
    return Line(at_start + rise * rock.tensile_strength / reach, 1 + rise / reach)


def global_strength(rock: Criterion) -> float:
    """Intercept of the line fitted up to s3 = sci / 4. [MPa]"""
    return fitted_line(rock, rock.sci / 4).intercept


def tunnel_line(rock: Criterion, largest_stress: float) -> Line:
    """Line fitted over the confinement around a tunnel."""
    whole = global_strength(rock)
    return fitted_line(rock, whole * 0.47 * (whole / largest_stress) ** -0.94)


def deformation_modulus(gsi: float, disturbance: float, intact_modulus: float | None) -> float:
    """With the intact modulus where it is known, and never above it. [MPa]"""
    relief = 1 - disturbance / 2
    if intact_modulus is None:
        return 100_000 * relief / (1 + math.exp((75 + 25 * disturbance - gsi) / 11))
    share = 0.02 + relief / (1 + math.exp((60 + 15 * disturbance - gsi) / 11))
    return min(intact_modulus * share, intact_modulus)
