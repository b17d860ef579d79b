"""Rings that act one after the other, and a ring that hardens, against the sum of their stages.

Independent calculation: in each stage the rings that are there, as stiff as they are then, take a
load of their own. A stage is solved as a curved beam in an infinite elastic plate by linear
equations, brought to its mean thrust, divided by equal strain and equal curvature, and summed. The
rule of the plugin, which knows only what each ring carries in the end, must give the same thrust
and at least the same swing of thrust and moment.
"""

import numpy as np
import pytest
from tunnelcalc_composite_lining.composite_section import Part
from tunnelcalc_composite_lining.lining import lining_of
from tunnelcalc_composite_lining.rings import RingLoad
from tunnelcalc_composite_lining.verification import Case, by_linear_equations

from tunnelcalc.sections import Sections

RADIUS, DEPTH = 5.0, 0.25
CENTRE = RADIUS - DEPTH / 2
ONE = np.ones(1)
GENERATOR_SEED = 7


def stage(ground, axial, bending, thrust, bonded):
    """Swing of thrust and of moment of a lining whose mean thrust is given."""
    vertical, ratio, modulus, nu = ground
    case = Case(vertical, ratio, CENTRE, modulus, nu, axial, bending)
    swing, moment = by_linear_equations(case, bonded)
    # Uniform part: ring T / R = (CA / R2 + CI / R4) u, ground u = (1 + nu) R (p0 - T / R) / E.
    spring = axial / CENTRE**2 + bending / CENTRE**4
    give = (1 + nu) * CENTRE / modulus
    mean = CENTRE * spring * give * vertical * (1 + ratio) / 2 / (1 + spring * give)
    return swing * thrust / mean, moment * thrust / mean


def summed(ground, stages, bonded):
    """Thrust, its swing and the moment of each ring; a stage is a thrust and the axial and bending
    stiffness of each ring then."""
    total = np.zeros((len(stages[0][1]), 3))
    for thrust, axial, bending in stages:
        swing, moment = stage(ground, sum(axial), sum(bending), thrust, bonded)
        for ring, (own_axial, own_bending) in enumerate(zip(axial, bending, strict=True)):
            share, bent = own_axial / sum(axial), own_bending / sum(bending)
            total[ring] += share * thrust, share * swing, bent * moment
    return total


def part(axial, bending):
    """A ring in plane stress with these stiffnesses."""
    modulus = 20_000.0
    return Part("", axial / modulus * ONE, bending / modulus * ONE, DEPTH, modulus * ONE, 0.0,
                25 * ONE, 2 * ONE)  # fmt: skip


def by_rule(ground, axial, bending, thrusts, bonded, hardens=False):
    vertical, ratio, modulus, nu = ground
    sections = Sections(
        {
            "radius_m": RADIUS * ONE,
            "effective_vertical_stress_mpa": vertical * ONE,
            "effective_horizontal_stress_mpa": vertical * ratio * ONE,
            "deformation_modulus_mpa": modulus * ONE,
            "poisson_ratio": nu * ONE,
        }
    )
    parts = tuple(part(*own) for own in zip(axial, bending, strict=True))
    pressures = [thrust / RADIUS * ONE for thrust in thrusts]
    young = (ONE, 0 * ONE, ONE) if hardens else (None, None, None)
    loads = tuple(
        RingLoad(pressure, 0 * ONE, place * ONE, *young) for place, pressure in enumerate(pressures)
    )
    found = lining_of(sections, parts, loads, "no_slip" if bonded else "full_slip")
    states = [state.forces for state in found.states if not state.young]
    return np.array([[force[0] for force in forces[:3]] for forces in states])


def draws(count=40):
    draw = np.random.default_rng(GENERATOR_SEED)
    for _ in range(count):
        ground = (3.0, draw.uniform(0.3, 2.0), 10 ** draw.uniform(2, 4.3), draw.uniform(0.1, 0.4))
        axial = np.array([draw.uniform(1000, 9000), draw.uniform(100, 2000)])
        bending = axial * np.array([0.25**2 / 12, 0.16**2 / 6])
        yield ground, axial, bending, draw


def assert_covers(rule, stages):
    np.testing.assert_allclose(rule[:, 0], stages[:, 0], rtol=1e-12)
    # With full slip the swing of thrust is M2 / R, some thousandths of the mean.
    slack = 1e-3 * stages[:, 0]
    assert np.all(np.abs(rule[:, 1]) >= np.abs(stages[:, 1]) - slack)
    assert np.all(np.abs(rule[:, 2]) >= np.abs(stages[:, 2]) * (1 - 1e-4))


@pytest.mark.parametrize("bonded", [True, False], ids=["no-slip", "full-slip"])
def test_two_rings_that_act_one_after_the_other(bonded):
    for ground, axial, bending, draw in draws():
        before = draw.uniform(0, 1)
        stages = [
            (before, axial * [1, 0], bending * [1, 0]),
            (1 - before, axial, bending),
        ]
        wanted = summed(ground, stages, bonded)
        assert_covers(by_rule(ground, axial, bending, wanted[:, 0], bonded), wanted)


@pytest.mark.parametrize("bonded", [True, False], ids=["no-slip", "full-slip"])
def test_rings_that_are_loaded_together_are_met_exactly(bonded):
    for ground, axial, bending, _ in draws():
        wanted = summed(ground, [(1.0, axial, bending)], bonded)
        rule = by_rule(ground, axial, bending, wanted[:, 0], bonded)
        np.testing.assert_allclose(rule, wanted, rtol=1e-9)


@pytest.mark.parametrize("bonded", [True, False], ids=["no-slip", "full-slip"])
def test_a_hardening_ring_beside_steel(bonded):
    for ground, axial, bending, _ in draws():
        stages = [
            (0.05, axial * [share, 1], bending * [share, 1]) for share in np.linspace(0.05, 1, 20)
        ]
        wanted = summed(ground, stages, bonded)
        rule = by_rule(ground, axial, bending, wanted[:, 0], bonded, hardens=True)
        assert_covers(rule, wanted)


def test_to_divide_the_moment_by_bending_stiffness_alone_is_no_caution():
    """The first ring, with 0.7 of the load from before the second, has more than that share."""
    ground = (3.0, 0.5, 2000.0, 0.25)
    axial, bending = np.array([2000.0, 2000.0]), np.array([10.0, 10.0])
    stages = [(0.7, axial * [1, 0], bending * [1, 0]), (0.3, axial, bending)]
    wanted = summed(ground, stages, False)
    _, moment = stage(ground, sum(axial), sum(bending), 1.0, False)
    assert abs(wanted[0, 2]) > 1.1 * abs(moment) / 2
