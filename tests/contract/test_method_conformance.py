"""What every registered method, flag, reader and writer says of itself."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
from unit.pipeline.projects import random_ground
from unit.plugin.strangers import own_points

from tunnelcalc.pipeline.dispatch import Chosen
from tunnelcalc.pipeline.disturbed_ring_stage import disturbed_ring_stage
from tunnelcalc.pipeline.ground_stages import (
    in_situ_stress_stage,
    intact_modulus_stage,
    strength_stage,
)
from tunnelcalc.plugin.method_contract import STRENGTH_COLUMNS
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.validity import Level
from tunnelcalc.vocabulary import GROUND, Sort

REGISTRY = load_plugins(own_points())
RING_LAW = "hoek_brown_disturbed_ring"
COUNT = 20
STEPS = ("strength", "deformation_modulus", "ground_reaction", "closure_profile")


def of_sort(sort):
    return [pytest.param(offer.thing, id=offer.name) for offer in REGISTRY.of_sort(sort)]


METHODS = [method for sort in STEPS for method in of_sort(sort)]


def only(sections, names):
    """The sections with the named columns alone: a method must not read any other."""
    return sections.only(list(names))


@pytest.fixture(scope="module")
def stressed():
    """Ground with every column that any method may ask for, through the stages of stress."""
    draw = np.random.default_rng(4)
    entered = {
        "mb": draw.uniform(1, 5, COUNT),
        "s": draw.uniform(0.001, 0.05, COUNT),
        "a": np.full(COUNT, 0.51),
        "friction_angle_deg": draw.uniform(30, 40, COUNT),
        "cohesion_mpa": draw.uniform(0.5, 3, COUNT),
        "residual_mb": draw.uniform(0.2, 0.9, COUNT),
        "residual_s": draw.uniform(1e-5, 1e-4, COUNT),
        "residual_a": np.full(COUNT, 0.53),
        "residual_friction_angle_deg": draw.uniform(20, 29, COUNT),
        "residual_cohesion_mpa": draw.uniform(0, 0.4, COUNT),
        "critical_shear_strain": draw.uniform(0.001, 0.05, COUNT),
        "disturbed_thickness_m": draw.uniform(0, 3, COUNT),
        "rmr89": draw.uniform(55, 90, COUNT),
        "q": draw.uniform(0.5, 50, COUNT),
    }
    sections = random_ground(COUNT, seed=20).with_columns(entered)
    # Its last section is so weak that nothing can be computed.
    sections = sections.with_columns(
        {
            name: np.append(sections[name][:-1], sections[name][0])
            for name in ("gsi", "intact_strength_mpa", "vertical_stress_mpa", "cover_m")
        }
    )
    sections = sections.with_columns({"residual_gsi": 0.5 * sections["gsi"]})
    return intact_modulus_stage()(in_situ_stress_stage("")(sections)).with_columns(
        {"mass_disturbance": sections["disturbance"]}
    )


@pytest.fixture(scope="module")
def ground(stressed):
    """The same through every stage before the reaction of the ground."""
    strength = Chosen("strength", (REGISTRY.method("strength", "hoek_brown_2002"),))
    modulus = Chosen(
        "deformation_modulus", (REGISTRY.method("deformation_modulus", "hoek_diederichs_2006"),)
    )
    sections = stressed.with_columns(
        {
            **{name: stressed[name] for name in STRENGTH_COLUMNS if name in stressed},
            "mass_disturbance": np.zeros(COUNT),
            "deformation_modulus_mpa": np.full(COUNT, 5000.0),
        }
    )
    line = {
        name: sections[name]
        for name in STRENGTH_COLUMNS
        if name.endswith(("_deg", "_mpa")) and name in sections
    }
    sections = strength_stage(strength)(sections).with_columns(line)
    law = Chosen("ground_reaction", (REGISTRY.method("ground_reaction", RING_LAW),))
    return disturbed_ring_stage(strength, modulus, law)(sections)


@pytest.mark.parametrize("method", METHODS)
def test_a_method_says_where_it_comes_from_and_what_it_needs(method):
    assert method.name.isidentifier()
    assert method.source
    assert method.needs
    assert len(set(method.needs)) == len(method.needs)


@pytest.mark.parametrize("method", METHODS)
def test_a_method_requires_numbers_that_a_ground_table_can_give(method):
    of_residual = getattr(method, "requires_of_residual", {})
    for column, limits in {**method.requires, **of_residual}.items():
        assert GROUND[column].sort is Sort.NUMBER
        assert GROUND[column].used
        # A range that is wider than the column's own would promise what no table can hold.
        assert limits.minimum == -np.inf or GROUND[column].limits.contain(np.array(limits.minimum))
        assert limits.maximum == np.inf or GROUND[column].limits.contain(np.array(limits.maximum))


@pytest.mark.parametrize("method", of_sort("strength"))
def test_a_strength_gives_what_it_promises_from_what_it_needs(method, stressed):
    given = method.compute(only(stressed, method.needs))
    assert set(given) == set(method.gives)
    assert set(method.gives) <= set(STRENGTH_COLUMNS)
    assert all(column.shape == (COUNT,) for column in given.values())
    assert all(np.all(np.isfinite(column)) for column in given.values())


@pytest.mark.parametrize("method", of_sort("strength"))
def test_a_strength_that_gives_residual_strength_says_what_it_takes(method):
    gives_residual = any(name.startswith("residual_") for name in method.gives)
    assert bool(method.requires_of_residual) == gives_residual


@pytest.mark.parametrize("method", of_sort("deformation_modulus"))
def test_a_modulus_is_positive_even_where_the_intact_one_is_not_known(method, stressed):
    assert np.any(np.isnan(stressed["intact_modulus_mpa"]))
    within = {
        name: np.linspace(limits.minimum, limits.maximum, COUNT + 2)[1:-1]
        for name, limits in method.requires.items()
        if np.isfinite(limits.minimum) and np.isfinite(limits.maximum)
    }
    modulus = method.modulus_mpa(only(stressed.with_columns(within), method.needs))
    assert modulus.shape == (COUNT,)
    assert np.all(modulus > 0)


@pytest.mark.parametrize("method", of_sort("ground_reaction"))
def test_a_law_of_the_ground_moves_nothing_under_the_in_situ_stress(method, ground):
    curve = method.curve(only(ground, method.needs))
    np.testing.assert_allclose(curve.at(curve.in_situ_stress_mpa).closure_ratio, 0, atol=1e-15)


@pytest.mark.parametrize("method", of_sort("ground_reaction"))
def test_a_law_of_the_ground_closes_more_under_less_pressure(method, ground):
    curve = method.curve(only(ground, method.needs))
    closures = [curve.at(share * curve.in_situ_stress_mpa).closure_ratio for share in (0.9, 0.3, 0)]
    assert all(np.all(more > less) for less, more in pairwise(closures))


@pytest.mark.parametrize("method", of_sort("closure_profile"))
def test_a_profile_of_closure_grows_from_the_face_to_the_whole(method, ground):
    sections = ground.with_columns({"plastic_radius_m": 2 * ground["radius_m"]})
    shares = [
        method.share(only(sections, method.needs), np.full(COUNT, distance))
        for distance in (0.0, 1.0, 10.0, 1e9)
    ]
    assert all(np.all((share >= 0) & (share <= 1)) for share in shares)
    assert all(np.all(later > earlier) for earlier, later in pairwise(shares))
    np.testing.assert_allclose(shares[-1], 1, rtol=1e-12)


@pytest.mark.parametrize("method", of_sort("closure_profile"))
def test_a_profile_says_up_to_which_plastic_radius_it_holds(method):
    follows = "plastic_radius_m" in method.needs
    assert method.largest_plastic_ratio >= 1
    assert (method.largest_plastic_ratio == np.inf) == follows


@pytest.mark.parametrize("flag", of_sort("validity_flag"))
def test_a_flag_says_what_it_means_from_where_and_what_to_do(flag):
    assert flag.name.isidentifier()
    assert all((flag.meaning, flag.quantity, flag.thresholds, flag.remedy))
    assert flag.needs or flag.may_be_missing or flag.applies
    assert all(threshold.origin for threshold in flag.thresholds)
    sides = [(threshold.level, threshold.side) for threshold in flag.thresholds]
    assert len(set(sides)) == len(sides)
    assert {level for level, _ in sides} <= {Level.ADVISORY, Level.OUTSIDE}


def test_a_reader_knows_endings_in_lower_case_with_the_dot():
    for offer in REGISTRY.of_sort("ground_reader"):
        assert offer.thing.suffixes
        assert all(s.startswith(".") and s == s.lower() for s in offer.thing.suffixes)
