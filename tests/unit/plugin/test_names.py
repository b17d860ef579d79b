"""Names that two plugins claim, and the order in which plugins are loaded."""

from __future__ import annotations

import random

import pytest
from unit.plugin.strangers import (
    CHECKS,
    FLAGS,
    KINDS,
    Check,
    Flag,
    Kind,
    offering,
    own_points,
)

from tunnelcalc.errors import DuplicateNameError
from tunnelcalc.plugin.registry import Offer, PluginSource, Registry, load_plugins


def offer(plugin, name="props", sort="support_kind"):
    return Offer(sort, name, object(), PluginSource(plugin, plugin, "1.0"))


def test_a_name_that_two_plugins_claim_is_used_by_neither_and_both_are_named(site):
    registry = load_plugins(
        [
            *site.plugin("one", **{KINDS: offering(Kind("props"))}),
            *site.plugin("two", **{KINDS: offering(Kind("props"))}),
        ]
    )
    assert registry.find("support_kind", "props") is None
    assert registry.disputed == {("support_kind", "props"): {"one", "two"}}
    (failure,) = registry.failures
    assert "plugins one and two both offer the support_kind 'props'" in failure.cause


def test_a_stranger_cannot_take_over_a_name_of_ours(site):
    stranger = site.plugin("stranger", **{KINDS: offering(Kind("rock_bolts"))})
    registry = load_plugins([*own_points(), *stranger])
    assert registry.find("support_kind", "rock_bolts") is None
    assert registry.disputed == {("support_kind", "rock_bolts"): {"rock_bolts", "stranger"}}


def test_a_third_claimant_of_a_disputed_name_is_named_too(site):
    points = [
        point
        for name in ("one", "two", "zulu")
        for point in site.plugin(name, **{KINDS: offering(Kind("props"))})
    ]
    registry = load_plugins(points)
    assert registry.find("support_kind", "props") is None
    assert registry.disputed[("support_kind", "props")] == {"one", "two", "zulu"}


def test_the_registry_raises_and_names_both_plugins():
    registry = Registry()
    registry.add(offer("one"))
    with pytest.raises(DuplicateNameError, match="plugins one and two both offer"):
        registry.add(offer("two"))


def test_one_name_may_stand_for_things_of_two_sorts():
    registry = Registry()
    registry.add(offer("one", sort="support_kind"))
    registry.add(offer("two", sort="support_check"))
    assert registry.disputed == {}


def test_two_plugins_of_one_name_are_both_refused_and_both_reported(site):
    """A project names plugins by this name: it must not mean one or the other."""
    site.module("first_module", **{KINDS: offering(Kind("props"))})
    site.module("second_module", **{KINDS: offering(Kind("frames"))})
    registry = load_plugins(
        [
            *site.distribution("first-distribution", {"same": "first_module"}),
            *site.distribution("second-distribution", {"same": "second_module"}),
        ]
    )
    assert registry.names("support_kind") == ()
    assert registry.sources == []
    assert [str(failure.source) for failure in registry.failures] == [
        "same (first-distribution 1.0)",
        "same (second-distribution 1.0)",
    ]
    for failure in registry.failures:
        assert "first-distribution" in failure.cause
        assert "second-distribution" in failure.cause


def test_a_plugin_with_the_name_of_one_of_ours_is_reported_beside_it(site):
    stranger = site.plugin("shotcrete", **{FLAGS: offering(Flag("strange"))})
    registry = load_plugins([*own_points(), *stranger])
    failed = sorted(failure.source.distribution for failure in registry.failures)
    assert failed == ["shotcrete-distribution", "tunnelcalc"]
    assert registry.names("support_kind") == (
        "friction_bolts",
        "grouted_rock_bolts",
        "lattice_girders",
        "rock_bolts",
        "steel_sets",
    )


def snapshot(registry):
    """Everything that a lookup can tell."""
    return (
        sorted((o.sort, o.name, str(o.source)) for o in registry.offers.values()),
        {sort: registry.names(sort) for sort in ("support_kind", "support_check")},
        registry.disputed,
        [str(failure) for failure in registry.failures],
        [str(source) for source in registry.sources],
    )


@pytest.mark.parametrize("seed", range(8))
def test_the_order_in_which_plugins_are_found_changes_nothing(site, seed):
    def failing(register):
        raise ValueError("not today")

    site.module("twin_module", **{KINDS: offering(Kind("twin"))})
    points = [
        *own_points(),
        *site.plugin("alpha", **{KINDS: offering(Kind("props")), FLAGS: offering(Flag("a"))}),
        *site.plugin("beta", **{KINDS: offering(Kind("props")), FLAGS: offering(Flag("b"))}),
        *site.plugin("gamma", **{CHECKS: offering(Check("late"), Check("early"))}),
        *site.plugin("delta", **{KINDS: failing}),
        *site.distribution("twin-one", {"twin": "twin_module"}),
        *site.distribution("twin-two", {"twin": "twin_module"}),
    ]
    shuffled = points.copy()
    random.Random(seed).shuffle(shuffled)
    assert snapshot(load_plugins(shuffled)) == snapshot(load_plugins(points))


def test_what_is_offered_is_listed_by_name(site):
    points = site.plugin("props", **{KINDS: offering(Kind("zulu"), Kind("alpha"), Kind("mike"))})
    assert load_plugins(points).names("support_kind") == ("alpha", "mike", "zulu")
