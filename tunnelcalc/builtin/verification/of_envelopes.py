"""Strength as normal against shear stress, and the error of the straight line.

The other way to a curved envelope takes no gradient: under a normal stress, the shear strength is
what the highest of all circles of Mohr reaches, found by a search.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from functools import partial

import numpy as np

from tunnelcalc.api import Array, Standing, VerificationCheck
from tunnelcalc.builtin.verification.independent import hoek_brown_strength
from tunnelcalc.builtin.verification.tables import number
from tunnelcalc.rock_mass import envelope
from tunnelcalc.rock_mass.hoek_brown import equivalent_mohr_coulomb
from tunnelcalc.rock_mass.mohr_coulomb import slope

EXACT, APART = Standing.EXACT, Standing.INDEPENDENT
BALMER = "Balmer (1952), Proc. ASTM 52, 1260-1271: envelope of the circles of Mohr"
NET = 400_001
"""Points of the dense search: the largest difference is missed by less than 1e-8 of itself."""


@dataclass(frozen=True, slots=True)
class Rock:
    """Strength of one rock mass, and the confinement to which its line is fitted. [MPa]"""

    name: str
    sci: float
    mb: float
    s: float
    a: float
    confinement: float

    @property
    def constants(self) -> tuple[float, float, float, float]:
        return self.sci, self.mb, self.s, self.a


ROCKS = (
    # Of Hoek, Carranza-Torres & Corkum (2002), worked example of a tunnel, from memory.
    Rock("sci 50 MPa, mb 1.4026, s 0.002218, a 0.5081", 50, 1.4026, 0.002218, 0.5081, 1.3525),
    # Invented.
    Rock("sci 8 MPa, mb 0.6, s 0.0002, a 0.54", 8, 0.6, 0.0002, 0.54, 1.2),
)


def _straight(cohesion: float, friction: float, minor: float) -> tuple[float, float]:
    """Normal and shear stress by the construction, for a straight criterion."""
    major = number(envelope.straight_envelope, minor, cohesion, friction)
    gradient = slope(np.array([friction]))
    point = envelope.normal_and_shear(np.array([minor]), np.array([major]), gradient)
    return float(point.normal_stress_mpa[0]), float(point.shear_stress_mpa[0])


def _on_line(cohesion: float, friction: float, minor: float) -> float:
    normal, _ = _straight(cohesion, friction, minor)
    return cohesion + normal * math.tan(math.radians(friction))


def _shear_on_line(cohesion: float, friction: float, minor: float) -> float:
    return _straight(cohesion, friction, minor)[1]


def _constructed(rock: Rock, minor: float) -> tuple[float, float, float]:
    """Normal and shear stress, and slope of the tangent, by the construction."""
    given = [np.array([value]) for value in (minor, *rock.constants)]
    gradient = envelope.hoek_brown_gradient(*given)
    point = envelope.normal_and_shear(given[0], envelope.principal_envelope(*given), gradient)
    angle = math.radians(float(envelope.tangent_angle_deg(gradient)[0]))
    return float(point.normal_stress_mpa[0]), float(point.shear_stress_mpa[0]), math.tan(angle)


def _highest_circle(rock: Rock, normal: float) -> float:
    """Shear stress that the highest circle reaches above a normal stress. [MPa]"""
    from scipy.optimize import minimize_scalar

    strength = hoek_brown_strength(*rock.constants)

    def below(minor: float) -> float:
        radius = strength(minor) / 2
        return (normal - minor - radius) ** 2 - radius**2

    tip = -rock.s * rock.sci / rock.mb
    found = minimize_scalar(below, bounds=(tip, normal), method="bounded", options={"xatol": 1e-10})
    return math.sqrt(-float(found.fun))


def _by_circles(rock: Rock, minor: float) -> float:
    return _highest_circle(rock, _constructed(rock, minor)[0])


def _tangent_by_difference(rock: Rock, minor: float) -> float:
    """Central difference of the highest circles, of fourth order."""
    normal = _constructed(rock, minor)[0]
    step = 2e-3 * normal
    total = 0.0
    for weight, shift in ((8, 1), (-8, -1), (-1, 2), (1, -2)):
        total += weight * _highest_circle(rock, normal + shift * step)
    return total / (12 * step)


def _constructed_part(rock: Rock, minor: float, which: int) -> float:
    return _constructed(rock, minor)[which]


def _balmer() -> Iterator[VerificationCheck]:
    for cohesion, friction, minor in ((0.58, 47.16, 1.0), (0.2, 24.0, 3.0)):
        yield VerificationCheck(
            "shear_strength",
            f"c {cohesion:g} MPa, phi {friction:g} deg, s3 {minor:g} MPa: tau = c + sn tan phi",
            f"{BALMER}; the line is its own envelope",
            EXACT,
            "MPa",
            1e-12,
            partial(_on_line, cohesion, friction, minor),
            partial(_shear_on_line, cohesion, friction, minor),
        )
    for rock in ROCKS:
        yield VerificationCheck(
            "shear_strength",
            f"{rock.name}, s3 0.5 MPa: tau",
            f"{BALMER}; by a search for the highest circle",
            APART,
            "MPa",
            1e-10,
            partial(_by_circles, rock, 0.5),
            partial(_constructed_part, rock, 0.5, 1),
        )
        yield VerificationCheck(
            "shear_strength",
            f"{rock.name}, s3 0.5 MPa: tan of the tangent",
            f"{BALMER}; by numerical derivative of the highest circles",
            APART,
            "",
            1e-8,
            partial(_tangent_by_difference, rock, 0.5),
            partial(_constructed_part, rock, 0.5, 2),
        )


def _line(rock: Rock, share_of_cohesion: float) -> tuple[float, float]:
    """Cohesion [MPa] and friction [deg] of the equivalent line, or of one beside it."""
    given = (np.array([value]) for value in (*rock.constants, rock.confinement))
    friction, cohesion = equivalent_mohr_coulomb(*given)
    return share_of_cohesion * float(cohesion[0]), float(friction[0])


def _searched(rock: Rock, share_of_cohesion: float, relative: bool) -> float:
    """The difference of greatest magnitude, with its sign, on a dense net."""
    cohesion, friction = _line(rock, share_of_cohesion)
    sine, cosine = math.sin(math.radians(friction)), math.cos(math.radians(friction))
    low = 0.0 if relative else -rock.s * rock.sci / rock.mb
    minor: Array = low + (rock.confinement - low) * np.linspace(0, 1, NET) ** 2
    under_root = np.maximum(rock.mb * minor / rock.sci + rock.s, 0)
    criterion = minor + rock.sci * under_root**rock.a
    line = (2 * cohesion * cosine + (1 + sine) * minor) / (1 - sine)
    differences = line / criterion - 1 if relative else line - criterion
    return float(differences[np.argmax(np.abs(differences))])


def _error(rock: Rock, share_of_cohesion: float, which: str) -> float:
    cohesion, friction = _line(rock, share_of_cohesion)
    values = (*rock.constants, rock.confinement, cohesion, friction)
    return float(getattr(envelope.line_error(*(np.array([v]) for v in values)), which)[0])


def _line_errors() -> Iterator[VerificationCheck]:
    # The equivalent line errs most at an end of its range, one with less cohesion in between.
    for rock, share, line in (
        (ROCKS[0], 1.0, "equivalent line"),
        (ROCKS[1], 1.0, "equivalent line"),
        (ROCKS[0], 0.1, "line of a tenth of its cohesion"),
    ):
        for which, unit, what in (
            ("difference_mpa", "MPa", "largest error"),
            ("relative", "", "largest relative error"),
        ):
            yield VerificationCheck(
                "line_error",
                f"{rock.name}, {line} up to {rock.confinement:g} MPa: {what}",
                "criterion and line in principal stresses; dense search",
                APART,
                unit,
                1e-8,
                partial(_searched, rock, share, which == "relative"),
                partial(_error, rock, share, which),
            )


ENVELOPE_CHECKS = (*_balmer(), *_line_errors())
