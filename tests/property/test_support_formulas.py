"""Formulas of the support plugins on random input."""

import numpy as np
from hypothesis import given
from hypothesis import strategies as st
from tunnelcalc_composite_lining.composite_section import (
    shares,
    shotcrete_part,
    steel_part,
)
from tunnelcalc_composite_lining.einstein_schwartz import (
    LiningForces,
    full_slip_forces,
    no_slip_forces,
    relative_stiffness,
)
from tunnelcalc_composite_lining.interaction import (
    interaction_diagram,
    moment_capacity_mnm_per_m,
)
from tunnelcalc_composite_lining.utilisation import utilisation_at, worst_utilisation
from tunnelcalc_empirical.formulas import q_support_pressure_mpa
from tunnelcalc_rock_bolts.capacity import least_limit
from tunnelcalc_rock_bolts.grouted import neutral_radius_m
from tunnelcalc_shotcrete import hardening
from tunnelcalc_steel_sets.lattice import Bar, lattice_girder
from tunnelcalc_steel_sets.sliding import sliding_pressure_and_slope

LAWS = (
    hardening.chang_stille_strength_ratio,
    hardening.chang_stille_modulus_ratio,
    hardening.meschke_strength_ratio,
    hardening.meschke_modulus_ratio,
    lambda age: hardening.eurocode_strength_ratio(age, 0.38),
    lambda age: hardening.eurocode_modulus_ratio(age, 0.20),
)
ANGLES = np.linspace(0, 90, 361)


@st.composite
def sections(draw):
    """One composite section."""
    one = np.ones(1)
    thickness = draw(st.floats(0.05, 0.6))
    concrete = shotcrete_part(
        "shotcrete",
        thickness_m=thickness,
        modulus_mpa=draw(st.floats(500, 40_000)) * one,
        poisson_ratio=0.2,
        compressive_strength_mpa=draw(st.floats(1, 60)) * one,
        tensile_strength_mpa=draw(st.floats(0.1, 6)) * one,
    )
    area, depth = draw(st.floats(1e-3, 2e-2)), draw(st.floats(0.08, 0.34))
    steel = steel_part(
        "steel",
        area_m2=area * one,
        inertia_m4=area * depth**2 * draw(st.floats(0.1, 0.22)) * one,
        depth_m=depth,
        spacing_m=draw(st.floats(0.5, 3)),
        modulus_mpa=210_000 * one,
        poisson_ratio=draw(st.sampled_from([0.0, 0.3])),
        yield_strength_mpa=draw(st.floats(200, 500)) * one,
    )
    return draw(st.sampled_from([(concrete,), (concrete, steel)]))


@st.composite
def ring_forces(draw):
    one = np.ones(1)
    mean = draw(st.floats(-1, 10))
    swing, moment = draw(st.floats(-3, 3)), draw(st.floats(-0.5, 0.5))
    return LiningForces(mean * one, swing * one, moment * one, one)


@given(st.lists(st.floats(3, 400), min_size=2, max_size=30), st.booleans())
def test_shares_of_strength_and_stiffness_never_fall_and_end_at_one(ages, young):
    age = np.sort(np.array(ages))
    if young:
        age = age / 400
    for law in LAWS[: 4 if young else None]:
        share = law(age)
        assert np.all((share >= 0) & (share <= 1))
        assert np.all(np.diff(share) >= -1e-15)


@given(st.lists(st.floats(0, 60) | st.just(np.nan), min_size=1, max_size=20))
def test_an_age_gives_the_same_alone_and_among_others(ages):
    age = np.array(ages)
    for law in LAWS:
        together = law(age)
        alone = np.concatenate([law(age[i : i + 1]) for i in range(age.size)])
        np.testing.assert_array_equal(together, alone)


@given(sections())
def test_shares_sum_to_one(parts):
    found = shares(parts)
    np.testing.assert_allclose(sum(found.thrust), 1, rtol=1e-14)
    np.testing.assert_allclose(sum(found.moment), 1, rtol=1e-14)


@given(sections(), ring_forces(), st.floats(1, 3))
def test_no_angle_is_used_more_than_the_worst(parts, forces, factor):
    worst = worst_utilisation(forces, parts, factor)
    around = utilisation_at(forces, parts, factor, ANGLES)
    highest = worst.utilisation[0]
    assert around.shape == ANGLES.shape
    assert around.max() <= highest * (1 + 1e-12)
    at = utilisation_at(forces, parts, factor, worst.angle_deg)[0]
    np.testing.assert_allclose(at, highest, rtol=1e-12)


@given(sections(), ring_forces(), st.floats(1, 3))
def test_utilisation_is_one_on_the_interaction_diagram(parts, forces, factor):
    """At a corner of the diagram exactly one; the diagram is the boundary of what is borne."""
    diagram = interaction_diagram(parts, factor)
    one = np.ones(1)
    for thrust, moment in zip(diagram.thrust_mn_per_m[0], diagram.moment_mnm_per_m[0], strict=True):
        corner = LiningForces(thrust * one, 0 * one, moment * one, one)
        used = worst_utilisation(corner, parts, factor).utilisation[0]
        np.testing.assert_allclose(used, 1, rtol=1e-9)


@given(sections(), st.floats(1, 3), st.floats(0, 1))
def test_the_diagram_is_straight_between_its_corners(parts, factor, share):
    diagram = interaction_diagram(parts, factor)
    thrust, moment = diagram.thrust_mn_per_m[0], diagram.moment_mnm_per_m[0]
    at = thrust[:-1] + share * np.diff(thrust)
    found = moment_capacity_mnm_per_m(at[np.newaxis, :], parts, factor)[0]
    between = moment[:-1] + share * np.diff(moment)
    # At the very ends rounding may leave no room at all.
    reach = 1e-9 * (thrust[-1] - thrust[0])
    inside = (at > thrust[0] + reach) & (at < thrust[-1] - reach)
    np.testing.assert_allclose(found[inside], between[inside], rtol=1e-9, atol=1e-12)


@given(
    st.floats(0.3, 3),
    st.floats(0, 0.45),
    st.floats(1e-3, 1e3),
    st.floats(1e-2, 1e5),
)
def test_forces_go_with_stress_and_turn_with_the_stress_ratio(ratio, nu, thrust, bending):
    """Twice the stress, twice the forces; horizontal for vertical turns the ring by a right
    angle."""
    one = np.ones(1)
    relative = relative_stiffness(
        radius_m=4 * one,
        ground_modulus_mpa=1000 * one,
        ground_poisson_ratio=nu * one,
        axial_stiffness_mn_per_m=4000 / ((1 - nu**2) * thrust) * one,
        bending_stiffness_mnm2_per_m=64_000 / ((1 - nu**2) * bending) * one,
    )
    np.testing.assert_allclose(relative, [[1 / thrust], [1 / bending]], rtol=1e-13)
    for solve in (full_slip_forces, no_slip_forces):
        found = solve(2 * one, ratio * one, 4 * one, nu * one, relative)
        double = solve(4 * one, ratio * one, 4 * one, nu * one, relative)
        turned = solve(2 * ratio * one, 1 / ratio * one, 4 * one, nu * one, relative)
        np.testing.assert_allclose(double[:3], 2 * np.array(found[:3]), rtol=1e-12)
        np.testing.assert_allclose(turned[0], found[0], rtol=1e-12)
        np.testing.assert_allclose(turned[1], -found[1], rtol=1e-9, atol=1e-12)
        np.testing.assert_allclose(turned[2], -found[2], rtol=1e-9, atol=1e-12)


@given(st.lists(st.floats(-0.1, 0.5), min_size=2, max_size=30), st.floats(0, 0.3))
def test_a_sliding_ring_never_pushes_less_for_more_closure(closures, travel):
    closure = np.sort(np.array(closures))
    found = sliding_pressure_and_slope(
        closure,
        stiffness_mpa_per_m=np.full(closure.size, 15.0),
        slip_pressure_mpa=np.full(closure.size, 0.2),
        slip_closure_m=travel,
    )
    assert np.all(np.diff(found.pressure_mpa) >= 0)
    assert np.all(found.pressure_mpa >= 0)
    assert np.all(found.pressure_mpa <= 15.0 * np.maximum(closure, 0))


@given(st.lists(st.tuples(*[st.floats(1, 1000)] * 3), min_size=1, max_size=10), st.floats(0.1, 1))
def test_the_named_limit_is_the_least(rows, factor):
    names = ("bar_yield", "plate", "bond")
    limits = {
        name: np.array(column) for name, column in zip(names, zip(*rows, strict=True), strict=True)
    }
    found = least_limit(limits, factor)
    for row, name in enumerate(found.governing):
        assert limits[name][row] == min(rows[row])
        assert found.capacity_kn[row] == factor * min(rows[row])


@given(st.floats(1, 10), st.floats(0.5, 12))
def test_the_neutral_point_lies_in_the_inner_half_of_the_bolt(radius, length):
    found = neutral_radius_m(np.array([radius]), length)[0]
    assert radius < found < radius + length / 2


@given(st.lists(st.tuples(st.floats(5, 40), st.floats(0, 300)), min_size=1, max_size=6))
def test_a_girder_has_at_most_all_its_area_at_its_faces(bars):
    found = lattice_girder([Bar(*bar) for bar in bars])
    assert 0 < found.inertia_mm4 <= found.area_mm2 * found.depth_mm**2 / 4 * (1 + 1e-12)


@given(st.floats(1e-3, 999), st.floats(0.5, 20), st.floats(0.5, 5))
def test_better_rock_needs_no_more_pressure(q, joint_number, joint_roughness):
    pair = np.array([q, q * 1.001])
    found = q_support_pressure_mpa(pair, np.full(2, joint_number), np.full(2, joint_roughness))
    assert found[1] < found[0]


@given(
    st.lists(
        st.tuples(st.floats(0.3, 3), st.floats(1e-9, 30_000) | st.sampled_from([0.0, np.nan])),
        max_size=8,
    ),
    st.sampled_from([full_slip_forces, no_slip_forces]),
)
def test_a_lining_is_the_same_alone_and_among_others(rows, solve):
    """To the last bit, with a NaN or a lining that is not yet stiff beside it."""
    columns = np.array([(0.5, 10_000.0), *rows])

    def solved(ratio, modulus):
        one = np.ones_like(ratio)
        ring = shotcrete_part(
            "shotcrete",
            thickness_m=0.25,
            modulus_mpa=modulus,
            poisson_ratio=0.2,
            compressive_strength_mpa=20 * one,
            tensile_strength_mpa=2 * one,
        )
        relative = relative_stiffness(
            radius_m=5 * one,
            ground_modulus_mpa=800 * one,
            ground_poisson_ratio=0.3 * one,
            axial_stiffness_mn_per_m=ring.axial_stiffness_mn_per_m,
            bending_stiffness_mnm2_per_m=ring.bending_stiffness_mnm2_per_m,
        )
        forces = solve(3 * one, ratio, 5 * one, 0.3 * one, relative)
        return worst_utilisation(forces, [ring], 1.5)

    together = solved(*columns.T)
    lost = np.isnan(columns[:, 1]) | (columns[:, 1] == 0)
    np.testing.assert_array_equal(np.isnan(together.utilisation), lost)
    for row in range(len(columns)):
        alone = solved(*columns[row : row + 1].T)
        for one, many in zip(alone, together, strict=True):
            np.testing.assert_array_equal(one, many[row : row + 1])
