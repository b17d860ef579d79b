"""Ground and class at rest: the fast way of springs, ageing elements, rings of bolts."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import evaluated, sections_of
from unit.pipeline.projects import BOLTS, SHOTCRETE, element, project, random_ground

from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.pipeline.resting_state import AgeingPath
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.support.advance_step import Ageing

YOUNG = SHOTCRETE | {"hardening": "chang_stille_1993"}
GROUTED = {
    "diameter_mm": 25,
    "length_m": 4.0,
    "spacing_around_m": 1.2,
    "spacing_along_m": 1.2,
    "friction_factor": 0.6,
    "bar_strength_mpa": 500,
    "bar_strength_is": "yield",
    "service_factor": 1,
    "bond_kn_per_m": 150,
    "anchorage_length_m": 1.0,
    "pattern_rules": "none",
}


def test_a_stiffer_or_older_ring_never_lets_the_wall_close_more():
    weak = sections_of(gsi=25.0)
    young = evaluated(weak, {"young": [element("shotcrete", YOUNG)]}, advance_m_per_day=3.0)
    old = evaluated(weak, {"old": [element("shotcrete", SHOTCRETE)]})
    slow = evaluated(weak, {"slow": [element("shotcrete", YOUNG)]}, advance_m_per_day=1e-3)
    closures = [found["class_closure_mm"][0, 0] for found in (young, old, slow)]
    assert closures[0] > closures[1]
    # Advanced infinitely slowly, the ring is as good as hardened from the start; the law of
    # Chang & Stille ends a little above the modulus of 28 days.
    assert closures[2] == pytest.approx(closures[1], rel=5e-3)


@pytest.mark.parametrize("chunk", [2])
def test_ageing_elements_give_the_same_bits_for_any_chunk(chunk):
    ground = random_ground(5, seed=3).take(slice(0, 4))
    classes = {
        "young": [element("shotcrete", YOUNG), element("rock_bolts", BOLTS)],
        "ring": [element("grouted_rock_bolts", GROUTED), element("shotcrete", YOUNG)],
    }
    made = project(classes, ground, advance_m_per_day=2.0)
    registry = load_plugins()
    stages = section_stages(made, registry, plan_classes(made, registry))

    def run(sections):
        for stage in stages:
            sections = stage(sections)
        return sections

    whole = run(made.ground)
    pieces = [run(made.ground.take(slice(i, i + chunk))) for i in range(0, 4, chunk)]
    columns = ("class_closure_mm", "class_support_pressure_mpa", "check_demand")
    columns += ("class_first_failure_closure_mm", "class_full_pressure_mpa")
    for name in (*columns, "class_missing_pressure_mpa"):
        together = np.concatenate([piece[name] for piece in pieces])
        assert together.tobytes() == whole[name].tobytes()


def test_bolts_that_strengthen_the_ground_hold_it_and_carry_nothing_at_the_wall():
    weak = sections_of(gsi=25.0)
    bare = evaluated(weak, {"none": [element("shotcrete", SHOTCRETE)]})
    held = evaluated(
        weak,
        {"held": [element("shotcrete", SHOTCRETE), element("grouted_rock_bolts", GROUTED)]},
    )
    assert held["class_closure_mm"][0, 0] < bare["class_closure_mm"][0, 0]
    assert held["class_support_pressure_mpa"][0, 0] < bare["class_support_pressure_mpa"][0, 0]


def path(trusted_from_days: float) -> AgeingPath:
    """Three sections at four ages: one loaded at once, one later, one that is not known."""
    ages = np.repeat([[0.0], [0.25], [1.0], [28.0]], 3, axis=1)
    pressure = np.array([[0, 0, np.nan], [0.1, 0, np.nan], [0.2, 0.1, 0.3], [0.4, 0.3, 0.4]])
    one = np.ones(3)
    return AgeingPath(ages, ages, ages, pressure, 1 + ages, one, one, 28 * one, trusted_from_days)


def test_what_is_carried_at_the_age_from_which_a_capacity_is_trusted():
    """With water, once there is any load; rounding of an age does not matter."""
    water = np.array([0.05, 0.05, 0.05])
    for days in (0.25, 0.25 * (1 - 1e-12), 0.9):
        np.testing.assert_allclose(path(days).early_pressure_mpa(water), [0.15, 0, np.nan])
    np.testing.assert_allclose(path(3.0).early_pressure_mpa(water), [0.25, 0.15, np.nan])
    assert path(0.0).early_pressure_mpa(water)[:2].tolist() == [0, 0]
    assert path(3.0).hard_at(water)["early_pressure_mpa"].tolist() == [0, 0, 0]


def test_that_age_is_reached_at_a_distance_by_the_rate_of_advance():
    one = Ageing(lambda age: 100 * np.minimum(age, 1), np.array([2.0]), np.array([2.0]), 0.25)
    np.testing.assert_allclose(one.trusted_at_m(np.array([8.0])), [4.0])
    np.testing.assert_allclose(one.trusted_at_m(np.array([np.inf])), [2.0])
    late = Ageing(one.stiffness_at, np.array([2.0]), np.array([9.0]), 0.25)
    np.testing.assert_allclose(late.trusted_at_m(np.array([8.0])), [9.0])
