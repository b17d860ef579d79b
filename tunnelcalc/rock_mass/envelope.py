"""Strength envelopes as data, and how well a straight line stands for a curved one.

The envelope functions work point by point: an envelope of one ground has (m,) minor stresses and
numbers for its constants. Whatever else numpy can broadcast is allowed too. `line_error` works on
(n,) sections.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array, same_length
from tunnelcalc.rock_mass.hoek_brown import tensile_strength_mpa
from tunnelcalc.rock_mass.mohr_coulomb import (
    slope,
    strength_difference_mpa,
    unconfined_strength_mpa,
)
from tunnelcalc.root_finding import increasing_roots

ROUNDING = 1e-12
"""A minor stress beyond the tip of an envelope by no more than this share lies at the tip. [-]"""


class NormalAndShear(NamedTuple):
    """Normal and shear stress on the plane of failure, each (m,). [MPa]"""

    normal_stress_mpa: Array
    shear_stress_mpa: Array


class LineError(NamedTuple):
    """How far a straight line lies from the criterion, each (n,).

    Above 0 where the line promises more strength than the criterion.
    """

    difference_mpa: Array
    """Largest difference in major stress, from the tensile strength to s3max. [MPa]"""
    minor_stress_mpa: Array
    """Where that is. [MPa]"""
    relative: Array
    """Largest difference over the major stress of the criterion, from 0 to s3max. [-]"""
    relative_minor_stress_mpa: Array
    """Where that is. [MPa]"""


class _Rock(NamedTuple):
    """Intact strength and constants of the criterion, NaN where any is outside its range."""

    sci: Array
    mb: Array
    s: Array
    a: Array

    @classmethod
    def of(cls, sci: Array | float, mb: Array | float, s: Array | float, a: Array | float) -> _Rock:
        columns = np.broadcast_arrays(sci, mb, s, a)
        sci, mb, s, a = columns
        valid = (sci > 0) & (mb > 0) & (s >= 0) & (a > 0) & (a < 1)
        return cls(*(np.where(valid, column, np.nan) for column in columns))

    def number(self, minor_stress_mpa: Array) -> Array:
        """N = mb s3 / sci + s; NaN where it is below 0, beyond the tensile strength. [-]"""
        number = self.mb * minor_stress_mpa / self.sci + self.s
        number = np.where((number < 0) & (number >= -ROUNDING * self.s), 0.0, number)
        return np.where(number >= 0, number, np.nan)


def principal_envelope(
    minor_stress_mpa: Array,
    intact_strength_mpa: Array | float,
    mb: Array | float,
    s: Array | float,
    a: Array | float,
) -> Array:
    """Major stress at failure by the generalised Hoek-Brown criterion.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3, compression positive, from the tensile strength -s sci / mb. [MPa]
    intact_strength_mpa : (m,) or a number, sci, above 0. [MPa]
    mb, s, a : (m,) or numbers, constants of the criterion, mb > 0, s >= 0, 0 < a < 1. [-]

    Returns
    -------
    (m,) s1 = s3 + sci (mb s3 / sci + s)^a. [MPa]  NaN beyond the tensile strength, and
    outside the valid ranges.

    Source
    ------
    Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC, Toronto, the criterion.
    """
    rock = _Rock.of(intact_strength_mpa, mb, s, a)
    return minor_stress_mpa + rock.sci * rock.number(minor_stress_mpa) ** rock.a


def hoek_brown_gradient(
    minor_stress_mpa: Array,
    intact_strength_mpa: Array | float,
    mb: Array | float,
    s: Array | float,
    a: Array | float,
) -> Array:
    """Gain of the major stress at failure for a gain of the minor stress, Hoek-Brown.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3, compression positive, from the tensile strength -s sci / mb. [MPa]
    intact_strength_mpa : (m,) or a number, sci, above 0. [MPa]
    mb, s, a : (m,) or numbers, constants of the criterion, mb > 0, s >= 0, 0 < a < 1. [-]

    Returns
    -------
    (m,) ds1 / ds3 = 1 + a mb (mb s3 / sci + s)^(a - 1). [-]  Infinite at the tensile strength, NaN
    beyond it and outside the valid ranges.

    Source
    ------
    Derivative of the criterion of Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC, Toronto.
    """
    rock = _Rock.of(intact_strength_mpa, mb, s, a)
    with np.errstate(divide="ignore"):  # the tip's gradient is infinite, as said above
        return 1 + rock.a * rock.mb * rock.number(minor_stress_mpa) ** (rock.a - 1)


def straight_envelope(
    minor_stress_mpa: Array, cohesion_mpa: Array | float, friction_angle_deg: Array | float
) -> Array:
    """Major stress at failure by the Mohr-Coulomb criterion; its gradient is the constant `slope`.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3, compression positive, from the tip at -c / tan phi. [MPa]
    cohesion_mpa : (m,) or a number, c, at least 0. [MPa]
    friction_angle_deg : (m,) or a number, phi, 0 <= phi < 90. [deg]

    Returns
    -------
    (m,) s1 = q + k s3. [MPa]  NaN beyond the tip, and outside the valid ranges.

    Limits
    ------
    No tension cut-off: the tip may lie far beyond the tensile strength of the rock mass.

    Source
    ------
    Jaeger, Cook & Zimmerman, Fundamentals of Rock Mechanics, 4th ed. (2007), the Coulomb
    criterion in principal stresses [from memory].
    """
    minor, cohesion, friction = np.broadcast_arrays(
        minor_stress_mpa, cohesion_mpa, friction_angle_deg
    )
    difference = strength_difference_mpa(minor, cohesion, friction)
    strength = unconfined_strength_mpa(cohesion, friction)
    at_tip = (difference < 0) & (difference >= -ROUNDING * strength)
    difference = np.where(at_tip, 0.0, difference)
    return minor + np.where(difference >= 0, difference, np.nan)


def normal_and_shear(
    minor_stress_mpa: Array, major_stress_mpa: Array, gradient: Array
) -> NormalAndShear:
    """Point at which each Mohr circle of an envelope touches the envelope.

    Parameters
    ----------
    minor_stress_mpa : (m,) s3. [MPa]
    major_stress_mpa : (m,) s1 at failure, not below s3. [MPa]
    gradient : (m,) g = ds1 / ds3 of the criterion there, above 0; infinity is allowed. [-]

    Returns
    -------
    Normal stress sn = s3 + (s1 - s3) / (g + 1) and shear stress
    tau = (s1 - s3) sqrt(g) / (g + 1). [MPa]  NaN where s1 < s3 or g is not above 0.

    Source
    ------
    G. Balmer, Proc. ASTM 52 (1952) 1260-1271 [from memory].
    """
    diameter = np.where(major_stress_mpa >= minor_stress_mpa, major_stress_mpa, np.nan)
    diameter = diameter - minor_stress_mpa
    rise = np.where(gradient > 0, gradient, np.nan)
    root = np.sqrt(rise)
    # tau is written so that an infinite gradient gives 0.
    return NormalAndShear(minor_stress_mpa + diameter / (rise + 1), diameter / (root + 1 / root))


def tangent_angle_deg(gradient: Array) -> Array:
    """Friction angle of the straight line that touches the envelope.

    Parameters
    ----------
    gradient : (m,) g = ds1 / ds3 of the criterion, at least 1; infinity is allowed. [-]

    Returns
    -------
    (m,) the angle with sin phi = (g - 1) / (g + 1). [deg]  NaN where g is below 1.

    Source
    ------
    G. Balmer, Proc. ASTM 52 (1952) 1260-1271 [from memory]; of `slope` the inverse.
    """
    root = np.sqrt(np.where(gradient >= 1, gradient, np.nan))
    return 90 - 2 * np.degrees(np.arctan(1 / root))


def line_error(
    intact_strength_mpa: Array,
    mb: Array,
    s: Array,
    a: Array,
    confinement_mpa: Array,
    cohesion_mpa: Array,
    friction_angle_deg: Array,
) -> LineError:
    """Largest difference in major stress between a straight line and the Hoek-Brown criterion.

    The criterion is concave in s3. The line minus the criterion is therefore largest at an end of
    the range and least where the gradients are equal, at N = ((k - 1) / (a mb))^(1 / (a - 1)).
    Their ratio is largest at an end of its range too, and least at one point at most, where
    k s1 = g (q + k s3), that is k sci N - q N^(1 - a) - a mb (q + k s3) = 0. That is convex in s3,
    so that from s3max Newton's steps come down to the root. Nothing else needs to be looked at.

    Parameters
    ----------
    intact_strength_mpa : (n,) sci, above 0. [MPa]
    mb, s, a : (n,) constants of the criterion, mb > 0, s >= 0, 0 < a < 1. [-]
    confinement_mpa : (n,) s3max, upper end of the range, above 0; its lower end is the tensile
        strength. [MPa]
    cohesion_mpa : (n,) c of the line, at least 0. [MPa]
    friction_angle_deg : (n,) phi of the line, 0 <= phi < 90. [deg]

    Returns
    -------
    Differences of the line from the criterion, with their sign: that of the greatest magnitude
    [MPa] over -st <= s3 <= s3max, and that relative to the criterion [-] over 0 <= s3 <= s3max,
    with the places [MPa]. NaN outside the valid ranges; the relative one also where s is 0, since
    the criterion then has no strength at s3 = 0.

    Raises
    ------
    ShapeError : the arrays differ in length.

    Limits
    ------
    The line is taken as straight beyond its own tip.

    Source
    ------
    Comparison of the criterion with the line of Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC,
    Toronto; where the extremes are: derived here.
    """
    same_length(
        intact_strength_mpa=intact_strength_mpa,
        mb=mb,
        s=s,
        a=a,
        confinement_mpa=confinement_mpa,
        cohesion_mpa=cohesion_mpa,
        friction_angle_deg=friction_angle_deg,
    )
    rock = _Rock.of(intact_strength_mpa, mb, s, a)
    line = _Line(
        unconfined_strength_mpa(cohesion_mpa, friction_angle_deg),
        slope(friction_angle_deg),
    )
    top = np.where(confinement_mpa > 0, confinement_mpa, np.nan)
    return LineError(
        *_largest_difference(line, rock, top), *_largest_relative_difference(line, rock, top)
    )


class _Line(NamedTuple):
    """s1 = q + k s3, each (n,)."""

    strength_mpa: Array
    slope: Array


def _largest(*candidates: tuple[Array, Array]) -> tuple[Array, Array]:
    """Value of the greatest magnitude, and its place; NaN where the first value is NaN.

    A NaN among the others is no candidate.
    """
    (value, place), *others = candidates
    for other, at in others:
        larger = np.abs(other) > np.abs(value)
        value, place = np.where(larger, other, value), np.where(larger, at, place)
    return value, np.where(np.isnan(value), np.nan, place)


def _largest_difference(line: _Line, rock: _Rock, top: Array) -> tuple[Array, Array]:
    """Largest difference over -st to s3max, and where it is. [MPa]"""
    sci, mb, s, a = rock
    rise = line.slope - 1
    tip, number_at_top = -tensile_strength_mpa(sci, mb, s), mb * top / sci + s
    # No friction, or an exponent near 1, may put the place of equal gradients at infinity.
    with np.errstate(divide="ignore", over="ignore"):
        number = (rise / (a * mb)) ** (1 / (a - 1))
    number = np.where((number > 0) & (number < number_at_top), number, np.nan)
    between = (number - s) * sci / mb

    def difference(minor: Array, number: Array) -> Array:
        return line.strength_mpa + rise * minor - sci * number**a

    return _largest(
        (difference(top, number_at_top), top),
        (difference(tip, np.zeros_like(number)), tip),
        (difference(between, number), between),
    )


def _largest_relative_difference(line: _Line, rock: _Rock, top: Array) -> tuple[Array, Array]:
    """Largest relative difference over 0 to s3max [-], and where it is. [MPa]"""
    (q, k), (sci, mb, s, a) = line, rock
    s = np.where(s > 0, s, np.nan)

    def relative(minor: Array) -> Array:
        major = minor + sci * (mb * minor / sci + s) ** a
        # A vanishing s may leave nothing to divide by: such a section is told as NaN below.
        with np.errstate(divide="ignore", over="ignore", invalid="ignore"):
            return (q + k * minor) / major - 1

    def turn(minor: Array, of: Array | slice) -> Array:
        number = mb[of] * minor / sci[of] + s[of]
        value = k[of] * sci[of] * number - q[of] * number ** (1 - a[of])
        return value - a[of] * mb[of] * (q[of] + k[of] * minor)

    def turn_and_slope(minor: Array, of: Array) -> tuple[Array, Array]:
        number = mb[of] * minor / sci[of] + s[of]
        gain = k[of] - q[of] / sci[of] * number ** -a[of]
        return turn(minor, of), (1 - a[of]) * mb[of] * gain

    bottom, every = np.zeros_like(top), slice(None)
    bracketed = (turn(bottom, every) < 0) & (turn(top, every) > 0)
    # Elsewhere the least ratio is at an end: a NaN leaves such a section out at once.
    upper = np.where(bracketed, top, np.nan)
    root = increasing_roots(turn_and_slope, bottom, upper, upper)
    value, place = _largest(
        (relative(top), top), (relative(bottom), bottom), (relative(root.value), root.value)
    )
    known = np.isfinite(value) & (root.converged | ~bracketed)
    return np.where(known, value, np.nan), np.where(known, place, np.nan)
