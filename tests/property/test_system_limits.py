"""What holds for the limits of every class with an element that hardens."""

from __future__ import annotations

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from property.test_support_of_any_reaction import GROUND, SMALL, SMALL_STRAIN, stiffness_at
from reference.samples import curve_columns, random_ground

from tunnelcalc.ground_reaction.closure_profile import vlachopoulos_diederichs_2009
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.pipeline.element_loads import given_at_limit_mpa, missing_pressure_mpa
from tunnelcalc.support.advance import Begins, advance
from tunnelcalc.support.advance_step import Ageing, Constant
from tunnelcalc.support.element_reactions import Plateau, Spring
from tunnelcalc.support.equilibrium import pressure_at_closure
from tunnelcalc.support.followed import Followed
from tunnelcalc.support.general_equilibrium import GeneralEquilibrium
from tunnelcalc.support.mobilisation import first_failure, full_mobilisation
from tunnelcalc.support.pressure_table import pressure_table

COUNT = 40
SHARES = np.linspace(0.05, 1.3, 20)
"""Closure limits, of the closure without support."""


@given(st.integers(0, 10_000), st.sampled_from([Spring, Plateau]), st.floats(0.2, 20))
@settings(max_examples=10, deadline=None)
def test_limits_come_in_order_and_less_is_missing_at_a_wider_limit(seed, kind, rate):
    columns = random_ground(COUNT, seed=seed, ranges=GROUND)
    curve = HoekBrownCurve.of_ground(**curve_columns(columns))
    free = curve.at(np.zeros(COUNT))
    sane = np.flatnonzero(free.closure_ratio < SMALL_STRAIN)
    curve, radius = curve.take(sane), columns["radius_m"][sane]
    reach, free = free.plastic_ratio[sane] * radius, free.closure_ratio[sane] * radius
    draw = np.random.default_rng(seed)

    def full(value):
        return np.full(sane.size, float(value))

    def share(distance):
        return vlachopoulos_diederichs_2009(distance, radius, reach)

    other = kind(draw.uniform(1, 100, sane.size), draw.uniform(0.01, 1, sane.size))
    elements = [
        Ageing(stiffness_at, full(1), full(2)),
        Constant(other, draw.uniform(0, 3, sane.size)),
    ]
    table = pressure_table(curve, radius, share(full(0)) * free)
    found = advance(curve, radius, table, share, elements, full(rate), Begins.WALL, 24)
    assert found.converged.all()
    capacity = found.element_pressure_mpa[0, -1] * draw.uniform(0.3, 2, sane.size) + 1e-6
    history = capacity * np.stack(
        [np.minimum(1, 0.1 + 0.9 * age / 28) for age in found.age_days[0]]
    )
    begins = found.begins_at_m
    parts = [
        Followed.of_history(
            found.closure_m - begins[0],
            found.element_pressure_mpa[0],
            history,
            full(300),
            capacity,
        ),
        other,
    ]
    closure = found.closure_m[-1]
    rest = GeneralEquilibrium(
        found.support_pressure_mpa,
        closure,
        found.plastic_ratio,
        found.element_pressure_mpa[:, -1],
        np.zeros((2, sane.size), dtype=np.int8),
        closure - begins,
        found.converged,
    )
    first = first_failure(curve, radius, parts, begins, rest)
    most = full_mobilisation(curve, radius, parts, begins, rest)
    assert np.all(np.isfinite(first.closure_m))
    assert np.all(first.closure_m <= most.closure_m * (1 + SMALL))
    assert np.all(first.support_pressure_mpa <= most.support_pressure_mpa * (1 + SMALL))
    credited = np.stack([capacity, other.capacity_mpa])
    missing = []
    for of_free in SHARES:
        limit = of_free * free
        given = given_at_limit_mpa(parts, credited, begins, limit, 1.5)
        missing.append(missing_pressure_mpa(pressure_at_closure(curve, radius, limit), given))
    slack = SMALL * curve.in_situ_stress_mpa
    assert np.all(np.diff(np.stack(missing), axis=0) <= slack)
    assert np.any(missing[0] > 0)
    assert np.all(missing[-1] == 0)
