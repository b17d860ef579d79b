"""What every registered method, flag, reader and writer says of itself."""

from __future__ import annotations

from itertools import pairwise

import numpy as np
import pytest
from unit.pipeline.projects import random_ground
from unit.plugin.strangers import own_points

from tunnelcalc.pipeline.ground_stages import in_situ_stress_stage, intact_modulus_stage
from tunnelcalc.plugin.registry import load_plugins

REGISTRY = load_plugins(own_points())


def of_sort(sort):
    return [pytest.param(offer.thing, id=offer.name) for offer in REGISTRY.of_sort(sort)]


METHODS = [
    method
    for sort in ("strength", "deformation_modulus", "ground_reaction", "closure_profile")
    for method in of_sort(sort)
]


def only(sections, names):
    """The sections with the named columns alone: a method must not read any other."""
    return sections.only(list(names))


@pytest.fixture(scope="module")
def ground():
    """Ground through every stage before the reaction of the ground."""
    sections = intact_modulus_stage()(in_situ_stress_stage()(random_ground(20, seed=20)))
    for offer in REGISTRY.of_sort("strength"):
        sections = sections.with_columns(offer.thing.compute(sections))
    return sections.with_columns({"deformation_modulus_mpa": np.full(20, 5000.0)})


@pytest.mark.parametrize("method", METHODS)
def test_a_method_says_where_it_comes_from_and_what_it_needs(method):
    assert method.name.isidentifier()
    assert method.source
    assert method.needs
    assert len(set(method.needs)) == len(method.needs)


@pytest.mark.parametrize("method", of_sort("strength"))
def test_a_strength_gives_what_it_promises_from_what_it_needs(method, ground):
    given = method.compute(only(ground, method.needs))
    assert set(given) == set(method.gives)
    assert all(column.shape == (20,) for column in given.values())


@pytest.mark.parametrize("method", of_sort("deformation_modulus"))
def test_a_modulus_is_positive_even_where_the_intact_one_is_not_known(method, ground):
    assert np.any(np.isnan(ground["intact_modulus_mpa"]))
    modulus = method.modulus_mpa(only(ground, method.needs))
    assert modulus.shape == (20,)
    assert np.all(modulus > 0)


@pytest.mark.parametrize("method", of_sort("ground_reaction"))
def test_a_law_of_the_ground_moves_nothing_under_the_in_situ_stress(method, ground):
    curve = method.curve(only(ground, method.needs))
    np.testing.assert_allclose(curve.at(curve.in_situ_stress_mpa).closure_ratio, 0, atol=1e-15)


@pytest.mark.parametrize("method", of_sort("closure_profile"))
def test_a_profile_of_closure_grows_from_the_face_to_the_whole(method, ground):
    sections = ground.with_columns({"plastic_radius_m": 2 * ground["radius_m"]})
    shares = [
        method.share(only(sections, method.needs), np.full(20, distance))
        for distance in (0.0, 1.0, 10.0, 1e6)
    ]
    assert all(np.all((share >= 0) & (share <= 1)) for share in shares)
    assert all(np.all(later > earlier) for earlier, later in pairwise(shares))
    np.testing.assert_allclose(shares[-1], 1, rtol=1e-12)


@pytest.mark.parametrize("flag", of_sort("validity_flag"))
def test_a_flag_says_what_it_means_from_where_and_what_to_do(flag):
    assert flag.name.isidentifier()
    assert all((flag.meaning, flag.threshold, flag.origin, flag.remedy, flag.needs))


def test_a_reader_knows_endings_in_lower_case_with_the_dot():
    for offer in REGISTRY.of_sort("ground_reader"):
        assert offer.thing.suffixes
        assert all(s.startswith(".") and s == s.lower() for s in offer.thing.suffixes)
