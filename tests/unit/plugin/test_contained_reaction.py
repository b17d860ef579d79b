"""Reactions of every form: a fault of a plugin costs its own sections, never the others."""

from __future__ import annotations

import numpy as np
import pytest
from unit.plugin.strangers import Kind

from tunnelcalc import api
from tunnelcalc.plugin.contained_reaction import contained_reaction
from tunnelcalc.sections import Sections

COUNT = 11
BAD = 4
ELEMENT = api.Element("props", "props", 1.0, {"amount_m": 1.0})
TIMES = np.arange(1.0, COUNT + 1)


def sections():
    return Sections({"chainage_m": np.arange(COUNT, dtype=float), "radius_m": TIMES})


def spring(part):
    return api.LinearSpring(part["radius_m"] * 2, part["radius_m"])


def function(part):
    radius = np.array(part["radius_m"])
    return api.PressureOfClosure(lambda moved: (radius * moved, radius), radius)


def ageing(part):
    radius = np.array(part["radius_m"])
    return api.AdvanceIncrements(lambda age: (radius * age, radius), radius)


def ring(part):
    radius = part["radius_m"]
    return api.GroundRing(radius / 2, {"mb": radius * 3}, radius)


MAKERS = [
    pytest.param(spring, api.LinearSpring.form, id="linear-spring"),
    pytest.param(function, api.PressureOfClosure.form, id="pressure-of-closure"),
    pytest.param(ageing, api.AdvanceIncrements.form, id="advance-increments"),
    pytest.param(ring, api.GroundRing.form, id="ground-ring"),
]


def faulty(make):
    """Raises whenever the bad section is among those that are asked for."""

    def reaction(part, element):
        if BAD in part["chainage_m"]:
            raise RuntimeError("cannot say")
        return make(part)

    return reaction


def response(make, form):
    return contained_reaction(Kind(form=form, reaction=make), sections(), ELEMENT)


def probed(reaction):
    """Every array of a reaction, functions at a movement or an age of 2."""
    two = np.full(COUNT, 2.0)
    if isinstance(reaction, api.LinearSpring):
        return [reaction.stiffness_mpa_per_m, reaction.capacity_mpa]
    if isinstance(reaction, api.PressureOfClosure):
        return [*reaction.pressure_and_slope(two), reaction.capacity_mpa]
    if isinstance(reaction, api.AdvanceIncrements):
        return [*reaction.at_age(two), reaction.final_capacity_mpa]
    return [reaction.thickness_m, *reaction.changed.values(), reaction.capacity_mpa]


@pytest.mark.parametrize(("make", "form"), MAKERS)
def test_a_sound_reaction_comes_through_as_it_is(make, form):
    found = response(lambda part, element: make(part), form)
    assert set(found.reason) == {""}
    assert found.capacity_mpa.tolist() == TIMES.tolist()
    for array, expected in zip(probed(found.reaction), probed(make(sections())), strict=True):
        assert array.tolist() == expected.tolist()


@pytest.mark.parametrize(("make", "form"), MAKERS)
def test_a_fault_on_one_section_costs_that_section_alone(make, form):
    found = response(faulty(make), form)
    assert found.reason[BAD] == "RuntimeError: cannot say"
    sound = np.arange(COUNT) != BAD
    assert set(found.reason[sound]) == {""}
    assert np.isnan(found.capacity_mpa[BAD])
    for array, expected in zip(probed(found.reaction), probed(make(sections())), strict=True):
        assert np.isnan(array[BAD])
        assert array[sound].tolist() == expected[sound].tolist()


@pytest.mark.parametrize(("make", "form"), MAKERS)
def test_a_fault_everywhere_leaves_no_number_and_does_not_spread(make, form):
    def always(part, element):
        raise SystemExit("enough")

    found = response(always, form)
    assert set(found.reason) == {"SystemExit: enough"}
    assert np.all(np.isnan(found.capacity_mpa))


@pytest.mark.parametrize("broken", [lambda values: 1 / 0, lambda values: (None, None)])
def test_a_function_that_fails_later_gives_no_number(broken):
    calls = []

    def moody(moved):
        calls.append(moved)
        return broken(moved) if np.any(moved > 1) else (moved, np.ones_like(moved))

    found = response(
        lambda part, element: api.PressureOfClosure(moody, np.ones(part.count)),
        api.PressureOfClosure.form,
    )
    assert set(found.reason) == {""}
    pressure, slope = found.reaction.pressure_and_slope(np.full(COUNT, 2.0))
    assert np.all(np.isnan(pressure))
    assert np.all(np.isnan(slope))


def test_another_form_than_the_announced_one_is_told():
    found = response(lambda part, element: spring(part), api.GroundRing.form)
    assert set(found.reason) == {
        "TypeError: the reaction is a linear_spring, not the ground_ring that was announced"
    }
