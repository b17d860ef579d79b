"""Elements that yield, slide or break at rest with the ground, against `scipy.optimize.brentq`.

The other side is scalar and works along the closure, as the wall does: up to each movement at
which an element breaks it asks whether the support carries what the ground needs there, and
brackets the rest in the first stretch in which it does. The ground is integrated (see
`reference.ground_curve`).
"""

from typing import NamedTuple

import numpy as np
import pytest
from reference import share_of_closure
from reference.samples import RANGES, curve_columns, curves, random_ground
from scipy.optimize import brentq

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.support.element_reactions import Brittle, Plateau, SlidingJoint, Spring
from tunnelcalc.support.general_equilibrium import general_equilibrium
from tunnelcalc.support.mobilisation import first_failure

COUNT = 60
KINDS = {
    "yielding": ("plateau", "plateau", "spring"),
    "sliding": ("joint", "plateau"),
    "breaking": ("brittle", "brittle", "plateau"),
    "all": ("brittle", "joint", "plateau", "spring", "brittle"),
}
GROUND = RANGES | {"gsi": (25, 90), "in_situ_stress_mpa": (1, 20), "intact_strength_mpa": (10, 150)}


class Element(NamedTuple):
    """kind, stiffness [MPa/m], capacity and slip load [MPa], travel and installation [m]."""

    kind: str
    stiffness: float
    capacity: float
    slip: float
    travel: float
    installed: float

    def pressure(self, closure, broken):
        moved = closure - self.installed
        if moved <= 0 or broken:
            return 0.0
        elastic = self.stiffness * moved
        if self.kind == "plateau":
            return min(elastic, self.capacity)
        if self.kind == "joint" and elastic > self.slip:
            return max(self.slip, self.stiffness * (moved - self.travel))
        return elastic

    @property
    def breaks_at(self):
        return self.installed + self.capacity / self.stiffness


def at_rest(curve, radius, elements):
    """Closure [m] and pressure [MPa], to about 1e-9."""
    free = curve.unsupported[1] * radius

    def ground(closure):
        def beyond(pressure):
            return curve.closure_between(pressure) * radius - closure

        return 0.0 if beyond(0.0) <= 0 else brentq(beyond, 0.0, curve.p0, xtol=1e-13, rtol=1e-13)

    breaks = sorted(e.breaks_at for e in elements if e.kind == "brittle")
    start = 0.0
    for end in [*(b for b in breaks if b < free), free]:
        # Open at its start: there, an element has just broken.
        whole = [e.kind != "brittle" or e.breaks_at >= end for e in elements]

        def excess(closure, whole=whole):
            parts = (e.pressure(closure, not w) for e, w in zip(elements, whole, strict=True))
            return sum(parts) - ground(closure)

        if excess(end) >= 0:
            closure = brentq(excess, start, end, xtol=1e-15, rtol=1e-13)
            return closure, ground(closure)
        start = end
    return free, 0.0


@pytest.fixture(scope="module", params=KINDS.values(), ids=list(KINDS))
def case(request):
    kinds = request.param
    draw = np.random.default_rng(len(kinds))
    ground = random_ground(COUNT, seed=70 + len(kinds), ranges=GROUND)
    shape = (len(kinds), COUNT)
    stiffness = np.exp(draw.uniform(np.log(5), np.log(2000), shape))
    # Moved to capacity by a share of what is left for it: some hold and some do not.
    part = np.exp(draw.uniform(np.log(0.01), np.log(1.5), shape))
    distance = draw.uniform(0, 2, shape) * ground["radius_m"]
    slip = draw.uniform(0.2, 1.2, shape)
    values, expected = np.empty((4, *shape)), np.empty((2, COUNT))
    for i, curve in enumerate(curves(ground)):
        radius = float(ground["radius_m"][i])
        ratio, closure = curve.unsupported
        for row in range(len(kinds)):
            share = share_of_closure(distance[row, i], radius, ratio * radius)
            left = (1 - share) * closure * radius
            capacity = stiffness[row, i] * part[row, i] * left
            travel = 0.3 * part[row, i] * left
            values[:, row, i] = capacity, capacity * slip[row, i], travel, share * closure * radius
        elements = [
            Element(kind, stiffness[row, i], *values[:, row, i]) for row, kind in enumerate(kinds)
        ]
        expected[:, i] = at_rest(curve, radius, elements)
    reactions = []
    for row, kind in enumerate(kinds):
        capacity, slips, travel, _ = values[:, row]
        own = stiffness[row]
        reactions.append(
            SlidingJoint(own, slips, travel, capacity)
            if kind == "joint"
            else {"plateau": Plateau, "brittle": Brittle, "spring": Spring}[kind](own, capacity)
        )
    ours = HoekBrownCurve.of_ground(**curve_columns(ground))
    arguments = (ours, ground["radius_m"], reactions, values[3])
    return arguments, general_equilibrium(*arguments), expected


def test_every_section_comes_to_rest(case):
    assert case[1].converged.all()


def test_closure_and_pressure_agree(case):
    """Achieved: 2e-10 of the closure without support, 3e-10 of the in-situ stress: what the
    interpolated integration of the other side leaves."""
    (ours, radius, _, _), found, (closure, pressure) = case
    free = ours.at(np.zeros(COUNT)).closure_ratio * radius
    assert np.max(np.abs(found.closure_m - closure) / free) < 1e-9
    error = np.abs(found.support_pressure_mpa - pressure) / ours.in_situ_stress_mpa
    assert error.max() < 1e-9


def test_the_cases_are_not_all_alike(case):
    """Every kind of element is found both within its capacity and beyond."""
    (_, _, reactions, _), found, _ = case
    for row, reaction in enumerate(reactions):
        beyond = found.element_moved_m[row] > reaction.reaches_capacity_m
        assert 3 < beyond.sum() < COUNT - 3


def test_limit_that_is_reached_is_the_first_capacity_passed(case):
    (ours, radius, reactions, installed), found, _ = case
    first = first_failure(ours, radius, reactions, installed, found)
    capacity = np.stack([reaction.reaches_capacity_m for reaction in reactions])
    np.testing.assert_array_equal(first.closure_m, np.min(installed + capacity, axis=0))
    np.testing.assert_array_equal(first.reached, found.closure_m > first.closure_m)
    # Where the wall goes further, the support there gave less than the ground needed, and only
    # there.
    short = first.support_pressure_mpa < first.ground_pressure_mpa
    np.testing.assert_array_equal(first.reached, short)
