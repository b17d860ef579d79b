"""Softening, the disturbed ring and finite strain against limits and independent solutions."""

from __future__ import annotations

import math
from collections.abc import Callable, Iterator
from functools import partial

import numpy as np

from tunnelcalc.api import GroundCurve, Standing, VerificationCheck
from tunnelcalc.builtin.verification.grounds import (
    GENERAL,
    SOFTER,
    WEAK,
    Case,
    apart_value,
    line_curve,
    ring_curve,
    wall_value,
)
from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.finite_strain import FiniteStrainCurve

APART = Standing.INDEPENDENT
SOFTENING = "inputs from memory: after Lee & Pietruszczak (2008), softening ground"


def _limits() -> Iterator[VerificationCheck]:
    softening, ring = "hoek_brown_softening", "hoek_brown_disturbed_ring"
    for strain, other, make in (
        (1e9, "perfectly plastic", SOFTER.plastic),
        (1e-9, "brittle", SOFTER.brittle),
    ):
        yield VerificationCheck(
            softening,
            f"critical strain {strain:g}: u / R is the {other} one",
            f"limit of the law; {SOFTENING}",
            APART,
            "",
            1e-5,
            partial(wall_value, make, 0.5, "closure_ratio"),
            partial(wall_value, partial(SOFTER.softening, strain), 0.5, "closure_ratio"),
        )
    for ratio, constants, modulus in (
        (1.0, WEAK.peak, WEAK.modulus),
        (1e6, (0.6, 1e-4, 0.53), 700),
    ):
        alone = Case(WEAK.p0, modulus, WEAK.nu, WEAK.sci, constants, constants, WEAK.dilation)
        yield VerificationCheck(
            ring,
            f"ring to {ratio:g} R: u / R of uniform ground",
            "limit of the law; Lame; invented ground",
            APART,
            "",
            1e-9,
            partial(wall_value, alone.plastic, 0.3, "closure_ratio"),
            partial(wall_value, partial(ring_curve, ratio), 0.3, "closure_ratio"),
        )


def _softening() -> Iterator[VerificationCheck]:
    # 200 annuli leave a relative error of about 1e-5.
    for strain, pressure in ((0.01, 0.5), (0.003, 2.0)):
        make = partial(SOFTER.softening, strain)
        ground = SOFTER.softening_apart(strain)
        for quantity, tolerance in (("plastic_ratio", 2e-5), ("closure_ratio", 2e-7)):
            yield VerificationCheck(
                "hoek_brown_softening",
                f"critical strain {strain:g}, pi {pressure:g} MPa: {quantity}",
                f"equilibrium and flow rule; {SOFTENING}",
                APART,
                "",
                tolerance,
                partial(apart_value, ground, pressure, quantity),
                partial(wall_value, make, pressure, quantity),
            )


def _order(strain: float, pressure: float) -> float:
    """Observed order of convergence: halving the annuli's thickness divides what is still missing
    by 2^order, so that two successive changes of the result have that ratio.

    Holds where softening is gradual. Close to a sudden drop annuli cannot be thin enough, and the
    small errors that are left fall more slowly.
    """
    coarse, middle, fine = (
        wall_value(partial(SOFTER.softening, strain, annuli), pressure, "closure_ratio")
        for annuli in (50, 100, 200)
    )
    return math.log2((middle - coarse) / (fine - middle))


def _convergence() -> Iterator[VerificationCheck]:
    for strain, pressure in ((0.01, 0.5), (0.05, 0.5)):
        yield VerificationCheck(
            "hoek_brown_softening",
            f"critical strain {strain:g}, pi {pressure:g} MPa: order of convergence of u / R, "
            "50, 100, 200 annuli",
            f"error of second order in the thickness of the annuli; {SOFTENING}",
            APART,
            "",
            0.15,
            2.0,
            partial(_order, strain, pressure),
        )


TABLE = (
    # dilation, small-strain u / R, finite-strain u / R
    (0, 0.10, 0.0871),
    (0, 0.50, 0.2929),
    (15, 0.20, 0.1478),
    (30, 1.00, 0.3313),
)
"""From logarithmic strains with r^K dr conserved, worked apart."""


def _finite_strain() -> Iterator[VerificationCheck]:
    source = "Vrakas & Anagnostou (2014), Int. J. Numer. Anal. Methods Geomech. 38, 1131-1148"
    for dilation, small, finite in TABLE:
        yield VerificationCheck(
            "hoek_brown_perfectly_plastic_finite_strain",
            f"psi {dilation} deg, small-strain u / R {small:g}",
            source,
            APART,
            "",
            5e-5,
            finite,
            partial(_of_small_strain, dilation, small),
        )
    for law, make in (
        ("hoek_brown_brittle", GENERAL.brittle),
        ("hoek_brown_softening", partial(SOFTER.softening, 0.01)),
        ("hoek_brown_disturbed_ring", partial(ring_curve, 1.3)),
        ("mohr_coulomb_perfectly_plastic", partial(line_curve, 10.0)),
        ("mohr_coulomb_brittle", partial(line_curve, 10.0, True)),
    ):
        yield VerificationCheck(
            f"{law}_finite_strain",
            "psi 10 deg, pi 0.4 MPa: u / R of conserved r^K dr",
            source,
            APART,
            "",
            1e-9,
            partial(_conserved, make, 0.4),
            partial(wall_value, partial(_finite_curve, make), 0.4, "closure_ratio"),
        )


def _of_small_strain(dilation: float, closure_ratio: float) -> float:
    """The correction of a wall that moves by a given share of the radius."""
    elastic = ElasticCurve.of_ground(
        in_situ_stress_mpa=np.array([1.0]),
        deformation_modulus_mpa=np.array([1.25 / closure_ratio]),
        poisson_ratio=np.array([0.25]),
    )
    curve = FiniteStrainCurve.of_curve(elastic, np.array([float(dilation)]))
    return float(curve.at(np.array([0.0])).closure_ratio[0])


def _finite_curve(make: Callable[[], GroundCurve]) -> GroundCurve:
    return FiniteStrainCurve.of_curve(make(), np.array([10.0]))


def _conserved(make: Callable[[], GroundCurve], pressure: float) -> float:
    """u / R such that r^K dr is conserved while the wall moves from R to a.

    The integral of r^K dr between a and R, over a^(K+1), is the small-strain u / R: plastic rings
    are alike in the deformed state, so that a takes the place of R.
    """
    from scipy.integrate import quad
    from scipy.optimize import brentq

    sine = math.sin(math.radians(10))
    k = (1 + sine) / (1 - sine)
    small = wall_value(make, pressure, "closure_ratio")

    def area(inner: float, outer: float) -> float:
        return float(quad(lambda r: r**k, inner, outer, epsabs=0, epsrel=1e-13)[0])

    def excess(closure: float) -> float:
        wall = 1 - closure
        return area(wall, 1.0) / wall ** (k + 1) - small

    return float(brentq(excess, 0, 1 - 1e-9, xtol=1e-15))


SOFTENING_AND_FINITE_STRAIN_CHECKS = (
    *_limits(),
    *_softening(),
    *_convergence(),
    *_finite_strain(),
)
