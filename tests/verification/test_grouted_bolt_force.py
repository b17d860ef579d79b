"""Force in fully grouted bolts against equilibrium of ground and bolts, integrated by scipy.

The other side knows no improved strength. It integrates radial equilibrium of the ground with its
own strength and with a shear from the bolts, and the axial force of the bolts along with it:

    d sr / d ln r = H(sr) + b,   dT / dr = (SL ST r / R) b / r

with b = beta st for Mohr-Coulomb ground (pi d lambda st on the surface of each bolt, spread over
the bolt's share), Indraratna & Kaiser (1990) [from memory].
"""

import math

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from tunnelcalc_rock_bolts.grouted import bolt_density, neutral_radius_m
from tunnelcalc_rock_bolts.grouted_force import (
    HoekBrownGround,
    MohrCoulombGround,
    force_in_hoek_brown_kn,
    force_in_mohr_coulomb_kn,
)

ONE = np.ones(1)
RADIUS, DIAMETER_MM, FRICTION_FACTOR, AROUND, ALONG = 5.0, 25.0, 0.6, 1.2, 1.5
BETA = bolt_density(
    RADIUS * ONE,
    diameter_mm=DIAMETER_MM,
    friction_factor=FRICTION_FACTOR,
    spacing_around_m=AROUND,
    spacing_along_m=ALONG,
)
PRESSURES = [0.0, 0.05, 0.5]
LENGTHS = [2.0, 4.0, 8.0]


def force_by_integration(strength, given_mpa, shear_kn_per_m, pressure, length):
    """T at the neutral point, from the wall outwards. [kN]"""
    neutral = length / math.log(1 + length / RADIUS)

    def rates(r, state):
        radial, _ = state
        return [
            (strength(radial) + given_mpa(radial, r)) / r,
            shear_kn_per_m(radial, r),
        ]

    found = solve_ivp(rates, (RADIUS, neutral), [pressure, 0.0], rtol=1e-11, atol=1e-12)
    assert found.success
    return float(found.y[1, -1])


@pytest.mark.parametrize("pressure", PRESSURES)
@pytest.mark.parametrize("length", LENGTHS)
def test_in_mohr_coulomb_ground_the_force_is_the_shear_on_the_bolt(pressure, length):
    friction, cohesion = 28.0, 0.15
    sine = math.sin(math.radians(friction))
    passive = (1 + sine) / (1 - sine)

    def hoop(radial):
        return passive * radial + 2 * cohesion * math.sqrt(passive)

    def shear(radial, r):
        """pi d lambda st. [kN/m]"""
        return math.pi * DIAMETER_MM / 1e3 * FRICTION_FACTOR * hoop(radial) * 1e3

    def given(radial, r):
        """The same on the bolt's share of a cylinder of radius r, times r. [MPa]"""
        return shear(radial, r) / 1e3 / (AROUND * ALONG * r / RADIUS) * r

    wanted = force_by_integration(lambda x: hoop(x) - x, given, shear, pressure, length)
    found = force_in_mohr_coulomb_kn(
        MohrCoulombGround(friction * ONE, cohesion * ONE),
        BETA,
        RADIUS * ONE,
        20 * ONE,
        neutral_radius_m(RADIUS * ONE, length),
        pressure * ONE,
        AROUND * ALONG,
    )
    assert found[0] == pytest.approx(wanted, rel=1e-8)


@pytest.mark.parametrize("pressure", PRESSURES)
@pytest.mark.parametrize("length", LENGTHS)
def test_in_hoek_brown_ground_the_force_gives_the_strength_that_is_credited(pressure, length):
    sci, mb, s, a = 15.0, 0.8, 1e-3, 0.52

    def strength(radial):
        return sci * (mb * radial / sci + s) ** a

    def given(radial, r):
        return ((1 + BETA[0]) ** a - 1) * strength(radial)

    def shear(radial, r):
        return 1e3 * AROUND * ALONG / RADIUS * given(radial, r)

    wanted = force_by_integration(strength, given, shear, pressure, length)
    found = force_in_hoek_brown_kn(
        HoekBrownGround(*(x * ONE for x in (sci, mb, s, a))),
        BETA,
        RADIUS * ONE,
        20 * ONE,
        neutral_radius_m(RADIUS * ONE, length),
        pressure * ONE,
        AROUND * ALONG,
    )
    assert found[0] == pytest.approx(wanted, rel=1e-8)


def test_where_part_of_the_ring_has_yielded_the_force_is_not_understated():
    """Beyond the yielded part, to c, the deviator is H*(c) (c / r)^2 (elastic ground): bolts give
    what is above the ground's own strength, and nothing once it is below."""
    sci, mb, s, a, pressure, edge = 15.0, 0.8, 1e-3, 0.52, 0.05, 5.4
    factor = (1 + BETA[0]) ** a

    def strength(radial):
        return sci * (mb * radial / sci + s) ** a

    inner = solve_ivp(
        lambda r, y: [factor * strength(y[0]) / r, (factor - 1) * strength(y[0])],
        (RADIUS, edge),
        [pressure, 0.0],
        rtol=1e-11,
        atol=1e-12,
    ).y[:, -1]
    at_edge = factor * strength(inner[0])

    def beyond(r, y):
        share = (edge / r) ** 2
        radial = inner[0] + at_edge / 2 * (1 - share)
        return [max(at_edge * share - strength(radial), 0.0)]

    outer = solve_ivp(beyond, (edge, 8.0), [0.0], rtol=1e-9, atol=1e-12, max_step=0.01).y[0, -1]
    wanted = 1e3 * AROUND * ALONG / RADIUS * (inner[1] + outer)
    found = force_in_hoek_brown_kn(
        HoekBrownGround(*(x * ONE for x in (sci, mb, s, a))),
        BETA,
        RADIUS * ONE,
        edge * ONE,
        neutral_radius_m(RADIUS * ONE, 6.0),
        pressure * ONE,
        AROUND * ALONG,
    )[0]
    assert wanted < found < 1.2 * wanted
    assert outer > 0.02 * inner[1]


def test_a_wall_that_has_not_yielded_loads_no_bolt_and_rows_stay_alone():
    ground = HoekBrownGround(*(x * np.ones(3) for x in (15.0, 0.8, 1e-3, 0.52)))
    plastic = np.array([5.0, np.nan, 6.0])
    places = (np.full(3, 6.0), np.full(3, 0.1), 1.8)
    found = force_in_hoek_brown_kn(ground, np.full(3, 0.15), np.full(3, 5.0), plastic, *places)
    assert found[0] == 0
    assert found[2] > 0
