"""The ring and the hardening laws against values from outside."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import Array, Standing, VerificationCheck
from tunnelcalc_shotcrete import hardening
from tunnelcalc_shotcrete.kind import Shotcrete
from tunnelcalc_shotcrete.ring import Ring

CHANG = "Y. Chang, H. Stille, Shotcrete for Underground Support VI (1993)"
MESCHKE = "G. Meschke, C. Kropik, H. A. Mang, Int. J. Numer. Methods Eng. 39 (1996)"
LAME = "Timoshenko & Goodier, Theory of Elasticity, 3rd ed. (1970), art. 28"
THREE_DIGITS, FOUR_DIGITS = 5.1e-4, 5.1e-5

TABLES: tuple[tuple[str, str, Callable[[Array], Array], float, dict[float, float]], ...] = (
    (
        "strength, Chang & Stille",
        CHANG,
        hardening.chang_stille_strength_ratio,
        THREE_DIGITS,
        {6: 0.156, 12: 0.330, 24: 0.526, 72: 0.783, 168: 0.914, 672: 1.0},
    ),
    (
        "stiffness, Chang & Stille",
        CHANG,
        hardening.chang_stille_modulus_ratio,
        THREE_DIGITS,
        {6: 0.381, 12: 0.540, 24: 0.680, 72: 0.843, 168: 0.924, 672: 1.0},
    ),
    (
        "strength, Meschke, Kropik & Mang",
        MESCHKE,
        hardening.meschke_strength_ratio,
        FOUR_DIGITS,
        {1: 0.0531, 4: 0.1364, 8: 0.2230, 72: 0.8021, 672: 1.0},
    ),
    (
        "stiffness, Meschke, Kropik & Mang",
        MESCHKE,
        hardening.meschke_modulus_ratio,
        FOUR_DIGITS,
        {1: 0.0447, 4: 0.1534, 8: 0.2398, 24: 0.6000, 72: 0.8308, 672: 1.0},
    ),
    (
        "strength, EN 1992-1-1, cement R",
        "EN 1992-1-1:2004, 3.1.2(6)",
        partial(hardening.eurocode_strength_ratio, cement_coefficient=0.20),
        THREE_DIGITS,
        {72: 0.663, 168: 0.819},
    ),
)
"""Shares at ages in hours, from the laws as they are printed, by an independent calculation."""


def verification_checks() -> Iterator[VerificationCheck]:
    """All checks of this plugin."""
    yield from _lame()
    yield from _thin()
    for subject, source, law, tolerance, rows in TABLES:
        for hours, share in rows.items():
            yield VerificationCheck(
                Shotcrete.name,
                f"{subject}: share at {hours:g} h",
                source,
                Standing.INDEPENDENT,
                "",
                tolerance,
                partial(float, share),
                partial(_at_hours, law, hours),
            )


def _lame() -> Iterator[VerificationCheck]:
    """A thick ring by the two constants of Lame's solution from its two ends."""
    for radius, thickness, nu in ((2.5, 0.15, 0.2), (5.2, 0.6, 0.0), (3.0, 1.5, 0.45)):
        ring = Ring(thickness, 15_000.0, nu, 30.0, thin=False)
        subject = f"thick ring, R {radius:g} m, t {thickness:g} m, nu {nu:g}"
        for position, (quantity, unit) in enumerate((("stiffness", "MPa/m"), ("capacity", "MPa"))):
            yield VerificationCheck(
                Shotcrete.name,
                f"{subject}: {quantity}",
                f"linear equations of a cylinder in plane strain; {LAME}",
                Standing.INDEPENDENT,
                unit,
                1e-9,
                partial(_by_linear_equations, radius, ring, position),
                partial(_spring, radius, ring, position),
            )


def _thin() -> Iterator[VerificationCheck]:
    ring = Ring(1e-3, 30_000.0, 0.2, 30.0, thin=True)
    for position, (quantity, unit, formula, tolerance, expected) in enumerate(
        (
            ("stiffness", "MPa/m", "E t / ((1 - nu^2) R^2)", 5e-4, 30.0 / (0.96 * 16)),
            ("capacity", "MPa", "strength t / R", 1e-12, 30.0 * 1e-3 / 4),
        )
    ):
        yield VerificationCheck(
            Shotcrete.name,
            f"thin ring, t 1 mm, R 4 m: {quantity} {formula}",
            "statics of half a ring, plane strain",
            Standing.EXACT,
            unit,
            tolerance,
            partial(float, expected),
            partial(_spring, 4.0, ring, position),
        )


def _by_linear_equations(radius: float, ring: Ring, position: int) -> float:
    """u = a r + b / r, no stress inside, unit pressure outside; stress and movement inward."""
    inner, nu = radius - ring.thickness_m, ring.poisson_ratio
    double_shear = ring.modulus_mpa / (1 + nu)
    of_a = double_shear / (1 - 2 * nu)
    # of_a a - double_shear b / r^2 is the radial stress: 1 at the outer face, 0 at the inner.
    determinant = of_a * double_shear * (1 / radius**2 - 1 / inner**2)
    a = -double_shear / inner**2 / determinant
    b = -of_a / determinant
    if position == 0:
        return 1 / (a * radius + b / radius)
    return ring.strength_mpa / (of_a * a + double_shear * b / inner**2)


def _spring(radius: float, ring: Ring, position: int) -> float:
    return float(ring.spring(np.array([radius]))[position][0])


def _at_hours(law: Callable[[Array], Array], hours: float) -> float:
    return float(law(np.array([hours / hardening.HOURS_PER_DAY]))[0])
