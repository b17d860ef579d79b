"""Error of the equivalent straight line, against a search by scipy section by section.

The published example is that of Hoek, Carranza-Torres & Corkum (2002), NARMS-TAC, Toronto, from
memory. Everything else is an independent calculation.
"""

import numpy as np
import pytest
from reference.samples import random_ground
from scipy.optimize import minimize_scalar

from tunnelcalc.rock_mass.envelope import line_error
from tunnelcalc.rock_mass.hoek_brown import (
    equivalent_mohr_coulomb,
    global_strength_mpa,
    hoek_brown_constants,
    tunnel_confinement_mpa,
)

CONSTANTS = ("intact_strength_mpa", "mb", "s", "a")


def searched(function, low, high):
    """Largest magnitude of a function of the minor stress, by a fine net and a search from it."""
    net = low + (high - low) * np.linspace(0, 1, 301) ** 2
    values = [abs(function(x)) for x in net]
    best = int(np.argmax(values))
    around = net[max(best - 1, 0)], net[min(best + 1, 300)]
    inner = minimize_scalar(
        lambda x: -abs(function(x)), bounds=around, method="bounded", options={"xatol": 1e-9 * high}
    )
    return max(values[best], -inner.fun)


@pytest.fixture(scope="module")
def ground():
    found = random_ground(200, seed=1997)
    columns = [found[name] for name in CONSTANTS]
    whole = global_strength_mpa(*columns)
    found["confinement_mpa"] = tunnel_confinement_mpa(whole, found["in_situ_stress_mpa"])
    return found


def lines(ground):
    """Equivalent lines, and others that lie far off, in every direction."""
    columns = [ground[name] for name in (*CONSTANTS, "confinement_mpa")]
    fit = equivalent_mohr_coulomb(*columns)
    phi, c = fit.friction_angle_deg, fit.cohesion_mpa
    for name, friction, cohesion in (
        ("equivalent", phi, c),
        ("steeper", np.minimum(phi * 1.3, 85), c * 0.5),
        ("flatter", phi * 0.5, c * 1.5),
        ("level", phi * 0, c),
        ("below", phi * 0.9, c * 0.1),
    ):
        yield pytest.param(columns, cohesion, friction, id=name)


@pytest.mark.parametrize("which", ["equivalent", "steeper", "flatter", "level", "below"])
def test_largest_errors_are_those_of_a_search(ground, which):
    columns, cohesion, friction = next(p.values for p in lines(ground) if p.id == which)
    found = line_error(*columns, cohesion, friction)
    for row in range(200):
        sci, mb, s, a, top, c, phi = (float(v[row]) for v in (*columns, cohesion, friction))
        sine = np.sin(np.radians(phi))
        k, q = (1 + sine) / (1 - sine), 2 * c * np.cos(np.radians(phi)) / (1 - sine)

        tip = -s * sci / mb

        def criterion(w, sci=sci, mb=mb, a=a, tip=tip):
            """By the distance from the tip, where rounding of mb s3 / sci + s would tell."""
            return tip + w + sci * (mb * w / sci) ** a

        def difference(w, q=q, k=k, criterion=criterion, tip=tip):
            return q + k * (tip + w) - criterion(w)

        def relative(w, difference=difference, criterion=criterion):
            return difference(w) / criterion(w)

        greatest, scale = searched(difference, 0.0, top - tip), criterion(top - tip)
        assert abs(found.difference_mpa[row]) == pytest.approx(greatest, abs=1e-11 * scale)
        greatest = searched(relative, -tip, top - tip)
        assert abs(found.relative[row]) == pytest.approx(greatest, rel=1e-8)
        # The places are where the errors are, with their sign.
        at, beside = (
            float(column[row]) - tip
            for column in (found.minor_stress_mpa, found.relative_minor_stress_mpa)
        )
        assert difference(at) == pytest.approx(found.difference_mpa[row], abs=1e-11 * scale)
        assert relative(beside) == pytest.approx(found.relative[row], rel=1e-9)


def test_the_search_meets_errors_of_every_kind(ground):
    """At the tension end, between the ends, and at s3max; above and below the criterion."""
    kinds = set()
    for columns, cohesion, friction in (p.values for p in lines(ground)):
        found = line_error(*columns, cohesion, friction)
        top = columns[4]
        at = np.where(found.minor_stress_mpa == top, 2, np.where(found.minor_stress_mpa < 0, 0, 1))
        kinds |= set(zip(at.tolist(), (found.difference_mpa > 0).tolist(), strict=True))
    assert {(0, True), (1, False), (2, True), (2, False)} <= kinds


def test_error_of_the_published_example():
    """sci 50, mi 10, GSI 45, 100 m deep: the line at no confinement is 2 c cos phi / (1 - sin phi)
    = 2.974 MPa with 47.16 degrees and 0.5834 MPa, against sci s^a = 2.243 MPa."""
    one = [np.array([v]) for v in (45.0, 10.0, 0.0)]
    mb, s, a = hoek_brown_constants(*one)
    sci = np.array([50.0])
    top = tunnel_confinement_mpa(global_strength_mpa(sci, mb, s, a), np.array([2.7]))
    fit = equivalent_mohr_coulomb(sci, mb, s, a, top)
    found = line_error(sci, mb, s, a, top, fit.cohesion_mpa, fit.friction_angle_deg)
    assert round(float(fit.friction_angle_deg[0]), 2) == 47.16
    assert found.relative_minor_stress_mpa[0] == 0
    assert found.relative[0] == pytest.approx(2.974 / 2.243 - 1, abs=1e-3)
    # The line is too strong in tension: at -st = -0.0791 MPa, where the criterion has s1 = s3.
    assert found.minor_stress_mpa[0] == pytest.approx(-0.0791, abs=1e-4)
    assert found.difference_mpa[0] == pytest.approx(2.974 - 5.500 * 0.0791, abs=3e-3)
