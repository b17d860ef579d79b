"""Each conformance test fails on a plugin with the fault that it looks for, and only then."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from unit.plugin.strangers import Check, Kind, own_points, spring

from tunnelcalc import api, testing
from tunnelcalc.plugin.registry import Offer, PluginSource, Registry, load_plugins
from tunnelcalc.testing.elements import MOST_WORDS, combinations, elements_of, option_sets

OWN = load_plugins(own_points())
SOURCE = PluginSource("props", "props", "1.0")
SOUND = Kind(amounts=lambda sections, element: [api.Amount("props", "no", np.ones(sections.count))])


def evaluate(sections):
    return api.Evaluation(sections["element_pressure_mpa"], sections["element_capacity_mpa"])


def offers(kind=SOUND, *checks):
    registry = Registry(dict(OWN.offers))
    registry.sources.append(SOURCE)
    registry.add(Offer("support_kind", kind.name, kind, SOURCE))
    for check in checks or (Check(evaluate=evaluate),):
        registry.add(Offer("support_check", check.name, check, SOURCE))
    return testing.Offers(registry, frozenset({"props"}))


def suite(of, kind=SOUND, *checks):
    made = of()
    made.offers = offers(kind, *checks)
    return made


def element_of(kind):
    return elements_of(kind, 2.0)[0]


def kind_with(**changes):
    """The sound kind, but for these attributes."""
    made = Kind(amounts=SOUND._amounts)
    for name, value in changes.items():
        setattr(made, name, value)
    return made


def reacting(reaction, form=api.LinearSpring.form):
    return kind_with(_reaction=reaction, form=form)


def function_of_closure(function):
    return reacting(
        lambda sections, element: api.PressureOfClosure(function, np.ones(sections.count)),
        api.PressureOfClosure.form,
    )


def ageing(at_age):
    return reacting(
        lambda sections, element: api.AdvanceIncrements(at_age, np.ones(sections.count)),
        api.AdvanceIncrements.form,
    )


def told_by_length(sections, element):
    return api.LinearSpring(np.full(4, 100.0), np.ones(4))


def told_by_all(sections, element):
    mean = np.full(sections.count, sections["radius_m"].mean())
    return api.LinearSpring(mean, np.ones(sections.count))


def writes(sections, element):
    element.values["amount_m"] = 1.0
    return spring()(sections, element)


class Counting:
    """Another number each time."""

    def __init__(self):
        self.calls = 0

    def __call__(self, sections, element):
        self.calls += 1
        return spring(100.0 + self.calls)(sections, element)


NAME = api.Parameter("amount", "invented", "m", api.Limits(0, 10))
ENDLESS = api.Parameter("amount_m", "invented", "m")
ONE_WORD = api.Parameter("sort", "invented", choices=("a",))
WORDS = api.Parameter("sort", "invented", choices=("a", "b"))
SILENT = api.Parameter("amount_m", "", "m", api.Limits(0, 10))
OF_NUMBER = replace(NAME, name="other_m", only_if=("sort", ("c",)))

FROM_TABLE = api.WordTable("name", (NAME.name,), lambda values: ())
"""States a number that is asked for beside any word."""
KIND_TESTS = [name for name in dir(testing.KindConformance) if name.startswith("test_")]
BY_PARAMETER = {
    "test_a_parameter_is_a_choice_or_a_number_with_unit_and_range",
    "test_a_condition_names_a_choice_of_the_same_kind",
    "test_a_table_of_words_states_numbers_of_the_same_kind",
}
BY_KIND = {
    "test_a_kind_says_what_it_is_and_names_each_parameter_once",
    "test_whatever_is_chosen_has_values_that_fit",
}


def run(made, test, kind):
    function = getattr(made, test)
    if test in BY_KIND:
        function(kind)
    elif test in BY_PARAMETER:
        for parameter in kind.parameters:
            function(kind, parameter)
    else:
        function(kind, element_of(kind))


@pytest.mark.parametrize("test", KIND_TESTS)
def test_a_sound_kind_passes(test):
    run(suite(testing.KindConformance), test, SOUND)


@pytest.mark.parametrize(
    ("test", "kind"),
    [
        pytest.param(test, kind, id=f"{test.removeprefix('test_')}-{number}")
        for test, kinds in {
            "test_a_kind_says_what_it_is_and_names_each_parameter_once": (
                kind_with(meaning=""),
                kind_with(parameters=(replace(NAME, name="kind"),)),
                kind_with(parameters=(NAME, NAME)),
                kind_with(is_ring="perhaps"),
            ),
            "test_whatever_is_chosen_has_values_that_fit": (
                kind_with(misfits=lambda element, radius: [api.Misfit("amount_m", "is", "no")]),
            ),
            "test_a_parameter_is_a_choice_or_a_number_with_unit_and_range": (
                kind_with(parameters=(NAME,)),
                kind_with(parameters=(ENDLESS,)),
                kind_with(parameters=(ONE_WORD,)),
                kind_with(parameters=(SILENT,)),
                kind_with(parameters=(replace(WORDS, default="c"),)),
            ),
            "test_a_condition_names_a_choice_of_the_same_kind": (
                kind_with(parameters=(WORDS, OF_NUMBER)),
                kind_with(parameters=(WORDS, replace(OF_NUMBER, only_if=("sort", "a")))),
            ),
            "test_a_table_of_words_states_numbers_of_the_same_kind": (
                kind_with(parameters=(replace(WORDS, words_from=FROM_TABLE), NAME)),
                kind_with(
                    parameters=(replace(WORDS, words_from=replace(FROM_TABLE, states=())), NAME)
                ),
            ),
            "test_an_element_reacts_in_the_form_that_is_announced": (
                kind_with(form="magic"),
                kind_with(form=api.GroundRing.form),
                reacting(
                    lambda sections, element: api.GroundRing(
                        np.ones(sections.count), {"gsi": np.ones(sections.count)}, np.ones(4)
                    ),
                    api.GroundRing.form,
                ),
                reacting(
                    lambda sections, element: replace(spring()(sections, element), acts_from_m=-1.0)
                ),
            ),
            "test_a_reaction_is_one_finite_number_a_section_and_never_pulls": (
                reacting(spring(stiffness_mpa_per_m=0.0)),
                reacting(spring(capacity_mpa=-1.0)),
                reacting(spring(capacity_mpa=np.inf)),
                reacting(lambda sections, element: api.LinearSpring(100.0, 1.0)),
                ageing(lambda age: (age - 1.0, np.ones_like(age))),
            ),
            "test_a_reaction_never_falls_with_closure_or_age": (
                function_of_closure(lambda u: (np.sin(5 * u), 5 * np.cos(5 * u))),
                ageing(lambda age: (np.ones_like(age), 1 / (1 + age))),
                ageing(lambda age: (1 / (1 + age), np.ones_like(age))),
            ),
            "test_without_closure_there_is_no_pressure": (
                function_of_closure(lambda u: (u + 0.1, np.ones_like(u))),
            ),
            "test_the_slope_is_that_of_the_pressure": (
                function_of_closure(lambda u: (2 * u, np.ones_like(u))),
            ),
            "test_a_reaction_is_the_same_each_time_and_section_by_section": (
                reacting(told_by_length),
                reacting(told_by_all),
                reacting(Counting()),
            ),
            "test_a_kind_leaves_what_it_is_given_as_it_was": (reacting(writes),),
            "test_amounts_are_finite_with_item_and_unit": (
                Kind(),
                Kind(amounts=lambda s, e: [api.Amount("props", "", np.ones(s.count))]),
                Kind(amounts=lambda s, e: [api.Amount("props", "no", -np.ones(s.count))]),
            ),
            "test_a_greater_modulus_never_makes_a_softer_spring": (
                kind_with(
                    parameters=(
                        api.Parameter("modulus_gpa", "invented", "GPa", api.Limits(1, 100)),
                    ),
                    _reaction=lambda s, e: spring(100 / e.number("modulus_gpa"))(s, e),
                ),
            ),
        }.items()
        for number, kind in enumerate(kinds)
    ],
)
def test_a_fault_of_a_kind_is_found(test, kind):
    with pytest.raises((AssertionError, ValueError)):
        run(suite(testing.KindConformance, kind), test, kind)


def test_a_kind_without_load_check_is_found():
    made = suite(testing.KindConformance, SOUND, Check(carries_load=False))
    with pytest.raises(AssertionError):
        made.test_an_element_has_a_load_check(SOUND, element_of(SOUND))


CHECK_TESTS = [
    name
    for name in dir(testing.CheckConformance)
    if name.startswith("test_") and name != "test_a_check_is_tried_on_some_element"
]


def run_check(made, test, check):
    arguments = (check,) if test == "test_a_check_says_what_it_compares_and_for_which_kinds" else (
        check, element_of(SOUND),
    )  # fmt: skip
    getattr(made, test)(*arguments)


@pytest.mark.parametrize("test", CHECK_TESTS)
def test_a_sound_check_passes(test):
    check = Check(evaluate=evaluate)
    made = suite(testing.CheckConformance, SOUND, check)
    run_check(made, test, check)
    made.test_a_check_is_tried_on_some_element(check)


def twice(sections):
    return api.Evaluation(2 * sections["element_pressure_mpa"], sections["element_capacity_mpa"])


def preloaded(sections):
    return api.Evaluation(
        0.1 + 0.9 * sections["element_pressure_mpa"], sections["element_capacity_mpa"]
    )


def relieved(sections):
    return api.Evaluation(1 - sections["element_pressure_mpa"], sections["element_capacity_mpa"])


def negative(sections):
    return api.Evaluation(-sections["element_pressure_mpa"], sections["element_capacity_mpa"])


def leaves_out(sections):
    found = evaluate(sections)
    return replace(found, left_out=np.ones(sections.count, dtype=bool))


def by_mean(sections):
    mean = np.full(sections.count, sections["radius_m"].mean())
    return api.Evaluation(mean, mean)


@pytest.mark.parametrize(
    ("test", "function"),
    [
        ("test_demand_and_capacity_are_one_number_a_section", negative),
        ("test_demand_and_capacity_are_one_number_a_section", leaves_out),
        ("test_a_check_gives_the_same_each_time_and_section_by_section", by_mean),
        ("test_an_element_without_pressure_has_no_load", preloaded),
        ("test_more_pressure_is_never_less_used", relieved),
        (
            "test_at_the_capacity_of_the_reaction_the_governing_load_check_is_just_met",
            twice,
        ),
    ],
)
def test_a_fault_of_a_check_is_found(test, function):
    check = Check(evaluate=function)
    with pytest.raises(AssertionError):
        run_check(suite(testing.CheckConformance, SOUND, check), test, check)


def test_a_check_of_a_kind_that_nobody_offers_is_found():
    check = Check(applies_to=("tents",), evaluate=evaluate)
    made = suite(testing.CheckConformance, SOUND, check)
    with pytest.raises(AssertionError):
        made.test_a_check_says_what_it_compares_and_for_which_kinds(check)
    with pytest.raises(AssertionError):
        made.test_a_check_is_tried_on_some_element(check)


def choice(name, count, only_if=None):
    words = tuple(f"{name}{number}" for number in range(count))
    return api.Parameter(name, "invented", choices=words, only_if=only_if)


def test_every_pair_of_words_stands_together_somewhere():
    parameters = (choice("a", 3), choice("b", 4), choice("c", 2))
    found = combinations(kind_with(parameters=parameters))
    assert len(found) < 3 * 4 * 2
    for one, other in (("a", "b"), ("a", "c"), ("b", "c")):
        pairs = {(words[one], words[other]) for words in found}
        sizes = {name: len(p.choices) for name, p in zip("abc", parameters, strict=True)}
        assert len(pairs) == sizes[one] * sizes[other]


def test_a_choice_that_hangs_on_another_is_made_only_there():
    parameters = (choice("b", 2, ("a", ("a1",))), choice("a", 2))
    found = combinations(kind_with(parameters=parameters))
    assert {tuple(sorted(words.items())) for words in found} == {
        (("a", "a0"),),
        (("a", "a1"), ("b", "b0")),
        (("a", "a1"), ("b", "b1")),
    }


def test_of_very_many_words_a_few_are_taken():
    (first, *_, last) = found = combinations(kind_with(parameters=(choice("a", 50),)))
    assert len(found) < MOST_WORDS
    assert {first["a"], last["a"]} == {"a0", "a49"}


def test_a_kind_without_choices_has_one_combination():
    assert combinations(SOUND) == [{}]


def test_options_of_a_class_check_have_every_word_and_a_number():
    options = (choice("a", 2), api.Parameter("b_m", "invented", "m", api.Limits(0, 10)))
    assert option_sets(options) == [{"a": "a0", "b_m": 5.0}, {"a": "a1", "b_m": 5.0}]


def test_a_distribution_that_is_not_there_is_told():
    with pytest.raises(AssertionError, match="is not installed"):
        testing.offers_of("no-such-distribution")
