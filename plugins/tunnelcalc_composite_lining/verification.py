"""The forces around a lining against an independent solution, and its section by hand.

The ground is an infinite elastic plate by an Airy stress function, phi = (A / r^2 + B) cos 2
theta; the ring a curved beam by the stationary energy. Tension and outward displacement are
positive here.
"""

from __future__ import annotations

from functools import partial
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Standing, VerificationCheck
from tunnelcalc_composite_lining.composite_section import shotcrete_part
from tunnelcalc_composite_lining.einstein_schwartz import (
    LiningForces,
    full_slip_forces,
    no_slip_forces,
    relative_stiffness,
)
from tunnelcalc_composite_lining.interaction import moment_capacity_mnm_per_m

METHOD = "composite_lining"
SOURCE = "ring in an infinite elastic plate; Einstein & Schwartz (1979)"
ONE = np.ones(1)


class Case(NamedTuple):
    """Stress [MPa], its ratio, radius [m], ground, stiffness of the ring [MN/m] [MN m2/m]."""

    vertical: float
    ratio: float
    radius: float
    modulus: float
    nu: float
    axial: float
    bending: float


CASES = (
    Case(3.0, 0.5, 5.0, 1500.0, 0.3, 6000.0, 30.0),
    Case(2.0, 1.5, 3.0, 400.0, 0.2, 900.0, 1.0),
)


def by_linear_equations(case: Case, bonded: bool) -> tuple[float, float]:
    """Swing of thrust [MN/m] and of moment [MN m/m], compression positive."""
    r, axial, bending, nu = case.radius, case.axial, case.bending, case.nu
    double_shear = case.modulus / (1 + nu)
    initial = case.vertical * (1 - case.ratio) / 2
    # Unknowns A, B of the ground; outward W cos 2 theta and tangential V sin 2 theta of the ring.
    radial = [-6 / r**4, -4 / r**2]
    shear = [-6 / r**4, -2 / r**2]
    outward = [2 / r**3 / double_shear, 4 * (1 - nu) / r / double_shear]
    along = [2 / r**3 / double_shear, -2 * (1 - 2 * nu) / r / double_shear]
    ring = [-(axial / r**2 + 9 * bending / r**4), -2 * axial / r**2]
    hoop = [-2 * axial / r**2, -4 * axial / r**2]
    rows = [[*radial, *ring], [*outward, -1.0, 0.0]]
    right = [-initial, 0.0]
    if bonded:
        rows += [[*shear, *hoop], [*along, 0.0, -1.0]]
        right += [initial, 0.0]
    else:
        rows += [[*shear, 0.0, 0.0], [0.0, 0.0, *hoop]]
        right += [initial, 0.0]
    _, _, w, v = np.linalg.solve(np.array(rows), np.array(right))
    moment = 3 * bending * w / r**2
    return float(-(axial * (2 * v + w) / r - moment / r)), float(moment)


def by_formulas(case: Case, bonded: bool) -> LiningForces:
    """The same by the formulas of the plugin."""
    relative = relative_stiffness(
        radius_m=case.radius * ONE,
        ground_modulus_mpa=case.modulus * ONE,
        ground_poisson_ratio=case.nu * ONE,
        axial_stiffness_mn_per_m=case.axial * ONE,
        bending_stiffness_mnm2_per_m=case.bending * ONE,
    )
    solve = no_slip_forces if bonded else full_slip_forces
    return solve(case.vertical * ONE, case.ratio * ONE, case.radius * ONE, case.nu * ONE, relative)


def _expected(case: Case, bonded: bool, moment: bool) -> float:
    return by_linear_equations(case, bonded)[moment]


def _computed(case: Case, bonded: bool, moment: bool) -> float:
    found = by_formulas(case, bonded)
    return float((found.moment_swing_mnm_per_m if moment else found.thrust_swing_mn_per_m)[0])


def _bending_alone() -> float:
    """0.2 m of shotcrete that bears 2 MPa in tension: M = st t^2 / 6."""
    part = shotcrete_part(
        "shotcrete",
        thickness_m=0.2,
        modulus_mpa=20_000.0 * ONE,
        poisson_ratio=0.2,
        compressive_strength_mpa=25.0 * ONE,
        tensile_strength_mpa=2.0 * ONE,
    )
    return float(moment_capacity_mnm_per_m(np.zeros(1), [part], 1.0)[0])


CHECKS = (
    *(
        VerificationCheck(
            METHOD,
            f"k0 {case.ratio:g}, {'no' if bonded else 'full'} slip: swing of "
            f"{'moment' if moment else 'thrust'}",
            SOURCE,
            Standing.INDEPENDENT,
            "MN m/m" if moment else "MN/m",
            1e-10,
            partial(_expected, case, bonded, moment),
            partial(_computed, case, bonded, moment),
        )
        for case in CASES
        for bonded in (True, False)
        for moment in (False, True)
    ),
    VerificationCheck(
        METHOD,
        "0.2 m of shotcrete, tension 2 MPa: moment without thrust, st t^2 / 6",
        "section modulus of a rectangle",
        Standing.EXACT,
        "MN m/m",
        1e-12,
        partial(float, 2 * 0.2**2 / 6),
        _bending_alone,
    ),
)
