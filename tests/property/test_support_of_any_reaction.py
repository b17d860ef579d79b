"""What holds for every ground and elements of any reaction, at rest and along the advance."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from reference.samples import RANGES, curve_columns, random_ground

from tunnelcalc.ground_reaction.closure_profile import vlachopoulos_diederichs_2009
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.support.advance import Begins, advance
from tunnelcalc.support.advance_step import Ageing, Constant
from tunnelcalc.support.element_reactions import Brittle, Plateau, SlidingJoint, Spring
from tunnelcalc.support.equilibrium import equilibrium
from tunnelcalc.support.general_equilibrium import general_equilibrium
from tunnelcalc.support.mobilisation import first_failure, full_mobilisation
from tunnelcalc.support.pressure_table import pressure_table

COUNT = 300
SMALL = 1e-9
LARGEST = 1e6
"""Closure in radii up to which doubles always tell where elements with kinks come to rest."""
SMALL_STRAIN = 1.0
"""The same for the steps of the advance."""
TABLE = 2e-5
"""What the table of the ground may leave of the closure between the last two states."""
GROUND = RANGES | {
    "gsi": (20, 100),
    "in_situ_stress_mpa": (0.5, 30),
    "intact_strength_mpa": (5, 250),
}


def ground_of(seed, count=COUNT):
    """Curves, radius, Rp and closure without support."""
    columns = random_ground(count, seed=seed, ranges=GROUND)
    curve = HoekBrownCurve.of_ground(**curve_columns(columns))
    free = curve.at(np.zeros(count))
    radius = columns["radius_m"]
    return curve, radius, free.plastic_ratio * radius, free.closure_ratio * radius


def support_of(draw, free, names):
    """Elements of the kinds named, and the closures at which they are installed."""
    count = free.size
    reactions, installed = [], draw.uniform(0, 1.1, (len(names), count)) * free
    for row, name in enumerate(names):
        stiffness = np.exp(draw.uniform(0, np.log(5000), count))
        left = np.maximum(free - installed[row], 0.05 * free)
        capacity = stiffness * left * draw.uniform(0.01, 1.2, count)
        if name is SlidingJoint:
            slip = capacity * draw.uniform(0.1, 1.1, count)
            travel = left * draw.uniform(0, 0.5, count)
            reactions.append(SlidingJoint(stiffness, slip, travel, capacity))
        else:
            reactions.append(name(stiffness, capacity))
    return reactions, installed


def changed(reaction, field, factor):
    return replace(reaction, **{field: getattr(reaction, field) * factor})


kinds = st.lists(st.sampled_from([Spring, Plateau, SlidingJoint, Brittle]), min_size=1, max_size=4)
soft_kinds = st.lists(st.sampled_from([Spring, Plateau, SlidingJoint]), min_size=1, max_size=4)
seeds = st.integers(0, 10_000)


def compared(seed, names, field, factor):
    """Closure and pressure before and after a field of the first element is multiplied."""
    curve, radius, _, free = ground_of(seed, 60)
    reactions, installed = support_of(np.random.default_rng(seed), free, names)
    before = general_equilibrium(curve, radius, reactions, installed)
    more = [changed(reactions[0], field, factor), *reactions[1:]]
    after = general_equilibrium(curve, radius, more, installed)
    sane = free < LARGEST * radius
    assert before.converged[sane].all()
    assert after.converged[sane].all()
    slack = SMALL * curve.in_situ_stress_mpa
    both = before.converged & after.converged
    assert np.all((after.closure_m <= before.closure_m * (1 + SMALL))[both])
    assert np.all((after.support_pressure_mpa >= before.support_pressure_mpa - slack)[both])


@given(seeds, soft_kinds, st.floats(1, 100))
@settings(max_examples=40, deadline=None)
def test_stiffer_elements_never_raise_the_closure(seed, names, factor):
    compared(seed, names, "stiffness_mpa_per_m", factor)


@given(seeds, kinds, st.floats(1, 3))
@settings(max_examples=40, deadline=None)
def test_more_capacity_never_lowers_the_pressure(seed, names, factor):
    compared(seed, names, "capacity_mpa", factor)


@given(seeds, soft_kinds, st.floats(1, 3))
@settings(max_examples=20, deadline=None)
def test_a_higher_slip_load_never_lowers_the_pressure(seed, names, factor):
    compared(seed, [SlidingJoint, *names], "slip_mpa", factor)


@given(seeds, st.integers(1, 4))
@settings(max_examples=30, deadline=None)
def test_springs_rest_where_the_solver_of_springs_says(seed, number):
    curve, radius, _, free = ground_of(seed, 60)
    reactions, installed = support_of(np.random.default_rng(seed), free, [Spring] * number)
    stiffness = np.stack([reaction.stiffness_mpa_per_m for reaction in reactions])
    expected = equilibrium(curve, radius, stiffness, installed)
    found = general_equilibrium(curve, radius, reactions, installed)
    np.testing.assert_array_equal(found.converged, expected.converged)
    np.testing.assert_allclose(found.closure_m, expected.closure_m, rtol=1e-11)
    error = np.abs(found.element_pressure_mpa - expected.element_pressure_mpa)
    assert np.all(error <= 1e-10 * expected.support_pressure_mpa + 1e-12 * curve.in_situ_stress_mpa)


@given(seeds, kinds)
@settings(max_examples=40, deadline=None)
def test_ground_and_elements_agree_at_rest_and_states_say_what_happened(seed, names):
    curve, radius, _, free = ground_of(seed, 60)
    reactions, installed = support_of(np.random.default_rng(seed), free, names)
    found = general_equilibrium(curve, radius, reactions, installed)
    sane = free < LARGEST * radius
    assert found.converged[sane].all()
    closure = curve.at(found.support_pressure_mpa).closure_ratio * radius
    np.testing.assert_allclose(closure[sane], found.closure_m[sane], rtol=1e-8)
    full = full_mobilisation(curve, radius, reactions, installed, found)
    first = first_failure(curve, radius, reactions, installed, found)
    assert np.all((first.closure_m <= full.closure_m * (1 + SMALL))[found.converged])
    if Spring not in names and SlidingJoint not in names:
        most = full.support_pressure_mpa * (1 + SMALL)
        assert np.all((found.support_pressure_mpa <= most)[found.converged])


def stiffness_at(age):
    return 300 * np.exp(-0.446 * np.maximum(age, 1e-6) ** -0.6)


def along(rows, seed=5, factor=1.0, begins=Begins.WALL):
    """Support followed along the advance, on the sections `rows`."""
    curve, radius, reach, free = ground_of(seed)
    draw = np.random.default_rng(seed)
    stiffness, capacity = draw.uniform(1, 100, COUNT), draw.uniform(0.01, 1, COUNT)
    curve, radius, reach, free = curve.take(rows), radius[rows], reach[rows], free[rows]
    stiffness, capacity = stiffness[rows], capacity[rows]

    def share(distance):
        return vlachopoulos_diederichs_2009(distance, radius, reach)

    def full(value):
        return np.full(rows.size, float(value))

    elements = [
        Ageing(lambda age: factor * stiffness_at(age), full(1), full(2)),
        Constant(Plateau(stiffness, capacity), draw.uniform(0, 3, COUNT)[rows]),
    ]
    table = pressure_table(curve, radius, share(full(0)) * free)
    found = advance(curve, radius, table, share, elements, full(3), begins, 24)
    return found, free, share


EVERY = np.arange(COUNT)


@pytest.fixture(scope="module")
def sane():
    """Sections whose closure without support is not beyond all measure."""
    _, radius, _, free = ground_of(5)
    return np.flatnonzero(free < SMALL_STRAIN * radius)


@pytest.mark.parametrize("begins", Begins)
def test_wall_closes_and_the_ring_is_loaded_as_the_face_moves_on(sane, begins):
    found, free, share = along(sane, begins=begins)
    assert found.converged.all()
    assert np.all(np.diff(found.closure_m, axis=0) >= -TABLE * free)
    unsupported = free * np.stack([share(x) for x in found.distance_m])
    assert np.all(found.closure_m <= unsupported + TABLE * free)
    assert np.all(np.diff(found.element_pressure_mpa[:, :-1], axis=1) >= 0)


def test_stiffer_ring_never_raises_the_closure_at_any_distance(sane):
    softer, free, _ = along(sane, factor=1.0)
    stiffer, _, _ = along(sane, factor=3.0)
    assert np.all(stiffer.closure_m <= softer.closure_m + TABLE * free)


def test_elements_counted_from_the_supported_wall_never_let_it_close_further(sane):
    wall, free, _ = along(sane, begins=Begins.WALL)
    unsupported, _, _ = along(sane, begins=Begins.UNSUPPORTED)
    assert np.all(wall.closure_m <= unsupported.closure_m + TABLE * free)


def everything(rows):
    """(k, n) every number of both solvers for the sections `rows`."""
    curve, radius, _, free = ground_of(8)
    names = [Spring, Plateau, SlidingJoint, Brittle, Brittle]
    reactions, installed = support_of(np.random.default_rng(8), free, names)
    curve, radius, installed = curve.take(rows), radius[rows], installed[:, rows]
    reactions = [reaction.take(rows) for reaction in reactions]
    rest = general_equilibrium(curve, radius, reactions, installed)
    first = first_failure(curve, radius, reactions, installed, rest)
    full = full_mobilisation(curve, radius, reactions, installed, rest)
    found = along(rows)[0]
    parts = [*rest, *first, *full, *found]
    return np.vstack([part.reshape(-1, rows.size).astype(float) for part in parts])


@pytest.fixture(scope="module")
def together():
    return everything(EVERY)


@pytest.mark.parametrize("size", [1, 7, 100])
def test_results_are_the_same_bits_in_chunks_of_any_size(together, size):
    pieces = [np.arange(k, min(k + size, COUNT)) for k in range(0, COUNT, size)][:25]
    in_chunks = np.hstack([everything(rows) for rows in pieces])
    assert in_chunks.tobytes() == together[:, : in_chunks.shape[1]].tobytes()


def test_results_are_the_same_bits_in_any_order(together):
    order = np.random.default_rng(1).permutation(COUNT)
    assert everything(order).tobytes() == together[:, order].tobytes()
