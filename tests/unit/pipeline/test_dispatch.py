"""The methods of one step: which sections each computes, down to none at all."""

from __future__ import annotations

import numpy as np
from unit.pipeline.grounds import evaluated, sections_of

from tunnelcalc.pipeline.dispatch import Chosen, closure_share, curves
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import MethodChoice

REGISTRY = load_plugins()
LAWS = ("hoek_brown_perfectly_plastic", "elastic")
PROFILES = ("vlachopoulos_diederichs_2009", "panet_1995")


def chosen(step, *names):
    return Chosen(step, tuple(REGISTRY.method(step, name) for name in names))


def choice(*names):
    return MethodChoice(names, {"x": names[-1]})


def both(numbers):
    """Sections of which each is of the law and the profile with its number."""
    ground = sections_of(
        len(numbers), ground_reaction_method=numbers, closure_profile_method=numbers
    )
    methods = {"ground_reaction": choice(*LAWS), "closure_profile": choice(*PROFILES)}
    return evaluated(ground, methods=methods)


def test_several_methods_read_the_column_that_says_whose_a_section_is():
    assert "ground_reaction_method" in chosen("ground_reaction", *LAWS).needs
    assert chosen("ground_reaction", LAWS[0]).which == ()


def test_each_section_is_computed_by_its_own():
    found = both([0, 1, 1, 0])
    plastic = found["plastic_radius_m"]
    assert np.all(plastic[[0, 3]] > 4)
    assert np.all(plastic[[1, 2]] == 4)
    shares = closure_share(chosen("closure_profile", *PROFILES), found, np.full(4, 2.0))
    # Panet (1995): 0.25 + 0.75 (1 - (0.75 / (0.75 + x / R))^2).
    np.testing.assert_allclose(shares[[1, 2]], 0.25 + 0.75 * (1 - (0.75 / 1.25) ** 2), rtol=1e-12)
    assert np.all(shares[[0, 3]] != shares[1])


def test_a_method_that_no_section_is_of_is_not_asked():
    one, two = both([0, 0]), both([1, 1])
    assert np.all(one["plastic_radius_m"] > 4)
    assert np.all(two["plastic_radius_m"] == 4)


def test_no_section_at_all_has_no_curve_and_no_share():
    """As where no section of a chunk has stresses far from equal."""
    nothing = both([0, 1]).take(slice(0, 0))
    law, profile = chosen("ground_reaction", *LAWS), chosen("closure_profile", *PROFILES)
    assert curves(law, nothing).in_situ_stress_mpa.shape == (0,)
    assert closure_share(profile, nothing, np.empty(0)).shape == (0,)


def test_a_profile_holds_up_to_the_plastic_radius_that_it_names():
    assert both([0, 1])["profile_plastic_limit"].tolist() == [np.inf, 2.0]
