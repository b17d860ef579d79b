"""Hardening laws at tabulated ages.

Chang & Stille (1993); Meschke, Kropik & Mang (1996); EN 1992-1-1. The laws are from memory, the
numbers an independent calculation.
"""

import numpy as np
from tunnelcalc_shotcrete.hardening import (
    EUROCODE_COEFFICIENTS,
    chang_stille_modulus_ratio,
    chang_stille_strength_ratio,
    eurocode_strength_ratio,
    meschke_modulus_ratio,
    meschke_strength_ratio,
)

DIGITS = 5.1e-4
FOUR_DIGITS = 5.1e-5


def test_chang_and_stille():
    """The fit gives 1.028 at 28 days; it is capped at 1."""
    age = np.array([0.25, 0.5, 1, 3, 7, 28])
    strength = [0.156, 0.330, 0.526, 0.783, 0.914, 1.0]
    modulus = [0.381, 0.540, 0.680, 0.843, 0.924, 1.0]
    np.testing.assert_allclose(chang_stille_strength_ratio(age), strength, atol=DIGITS)
    np.testing.assert_allclose(chang_stille_modulus_ratio(age), modulus, atol=DIGITS)


def test_meschke_kropik_and_mang():
    """At 24 h the second branch gives 0.4892 where the first has reached 0.4908, which holds."""
    age = np.array([1, 4, 8, 24, 72, 672]) / 24
    strength = [0.0531, 0.1364, 0.2230, 0.4908, 0.8021, 1.0]
    modulus = [0.0447, 0.1534, 0.2398, 0.6000, 0.8308, 1.0000]
    np.testing.assert_allclose(meschke_strength_ratio(age), strength, atol=FOUR_DIGITS)
    np.testing.assert_allclose(meschke_modulus_ratio(age), modulus, atol=FOUR_DIGITS)


def test_concrete_code():
    found = eurocode_strength_ratio(np.array([3.0, 7.0]), EUROCODE_COEFFICIENTS["R"])
    np.testing.assert_allclose(found, [0.663, 0.819], atol=DIGITS)
