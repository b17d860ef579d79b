"""The one integral in the closure of a dilating plastic ring, by a fixed quadrature."""

from __future__ import annotations

import numpy as np

from tunnelcalc.arrays import Array

MOST_DECAY = 40.0
"""exp(-40) is below the rounding of a double: the integral ends there however deep the ring."""
SHORT_DECAY = 12.0
"""Up to here 12 points suffice: (K + 1) ln(Rp / R), reached at Rp / R = 20 for psi = 30 deg."""

Rule = tuple[Array, Array]
_SHORT_RULE = np.polynomial.legendre.leggauss(12)
_LONG_RULE = np.polynomial.legendre.leggauss(24)


def ring_integral_mpa(
    exponent: Array,
    yields: Array,
    intact_strength_mpa: Array,
    mb: Array,
    a: Array,
    dilation: Array,
    critical_power: Array,
    brittle: Array,
) -> Array:
    """J / X^(K+1): strength in the ring, weighted with exp(-z), z = (K + 1) ln(Rp / r).

    Parameters
    ----------
    exponent : (n,) (K + 1) ln(Rp / R), depth of the ring. [-]
    yields : (n,) bool, whether there is a ring at all. [-]
    intact_strength_mpa : (n,) sci. [MPa]
    mb, a : (n,) constants of the criterion. [-]
    dilation : (n,) K. [-]
    critical_power : (n,) N_cr^(1-a) at the ring's edge. [-]
    brittle : (n,) bool, whether the ring may be left without any strength at the wall.

    All arguments broadcast together.

    Returns
    -------
    (n,) 1 / (K + 1) times the integral of exp(-z) sci N(z)^a from 0 to `exponent`; 0 where there
    is no ring or no dilation, which never needs it. [MPa]

    Source
    ------
    Gauss-Legendre quadrature with 12 points, 24 in deep rings and in brittle ones; derivation of
    the integral at the head of `hoek_brown`.
    """
    total = np.zeros(np.shape(exponent))
    needed = yields & (dilation != 1)
    short = needed & (exponent <= SHORT_DECAY)
    for integral, rule, chosen in (
        (_by_depth, _SHORT_RULE, short & ~brittle),
        (_by_strength, _LONG_RULE, short & brittle),
        (_by_depth, _LONG_RULE, needed & (exponent > SHORT_DECAY)),
    ):
        if not np.any(chosen):
            continue
        decay = np.minimum(exponent[chosen], MOST_DECAY)
        sci, m, power, slope, critical = (
            np.broadcast_to(values, total.shape)[chosen]
            for values in (intact_strength_mpa, mb, a, dilation, critical_power)
        )
        rate = (1 - power) * m / (slope + 1)
        strength = integral(rule, decay, rate, power / (1 - power), critical)
        total[chosen] = sci * decay * strength / (slope + 1)
    return total


# Points are summed one by one, in fixed order, so that the last bits do not depend on how many
# sections are computed together.


def _by_depth(
    rule: Rule, decay: Array, rate: Array, strength_power: Array, critical: Array
) -> Array:
    """Mean of exp(-z) N^a over z from 0 to `decay`."""
    integral = np.zeros(decay.shape)
    for node, weight in zip(*rule, strict=True):
        z = decay * (0.5 * (1 + node))
        integral += (0.5 * weight) * np.exp(-z) * (critical - rate * z) ** strength_power
    return integral


def _by_strength(
    rule: Rule, decay: Array, rate: Array, strength_power: Array, critical: Array
) -> Array:
    """The same mean, good also where N falls to 0 at the wall.

    N^a is then a broken power of the distance from the wall, which no polynomial follows. Over v,
    the root of N^(1-a) / N_cr^(1-a), it is v^(2a / (1-a)), smooth enough.
    """
    fall = np.minimum(rate * decay / critical, 1)
    at_wall = np.sqrt(1 - fall)
    reach = fall / (1 + at_wall)
    integral = np.zeros(decay.shape)
    for node, weight in zip(*rule, strict=True):
        share = 0.5 * (1 + node)
        v = 1 - reach * share
        z = decay * share * (1 + v) / (1 + at_wall)
        change = weight * v / (1 + at_wall)
        integral += change * np.exp(-z) * (critical * v**2) ** strength_power
    return integral
