"""Pass, fail or not evaluated; and what governs. Every answer follows from the definitions."""

import numpy as np
import pytest

from tunnelcalc.support.adequacy import Outcome, class_outcome, load_check, rule_check

NAN, INF = np.nan, np.inf
PASS, FAIL, UNKNOWN = Outcome.PASS, Outcome.FAIL, Outcome.NOT_EVALUATED

LOADS = [
    pytest.param(1.0, 1.5, 1.5, PASS, id="exactly-the-factor-passes"),
    pytest.param(1.0, np.nextafter(1.5, 0), np.nextafter(1.5, 0), FAIL, id="no-tolerance"),
    pytest.param(1.0, 9.0, 9.0, PASS, id="plenty"),
    pytest.param(2.0, 1.0, 0.5, FAIL, id="overloaded"),
    pytest.param(0.0, 1.0, NAN, PASS, id="unloaded-passes-without-a-factor"),
    pytest.param(0.0, 0.0, NAN, PASS, id="unloaded-without-capacity"),
    pytest.param(1.0, 0.0, 0.0, FAIL, id="no-capacity"),
    pytest.param(1e-300, 1e300, NAN, PASS, id="vanishing-load-has-no-factor"),
    pytest.param(-1.0, 1.0, NAN, FAIL, id="negative-demand-is-no-pass"),
    pytest.param(NAN, 1.0, NAN, UNKNOWN, id="unknown-demand"),
    pytest.param(1.0, NAN, NAN, UNKNOWN, id="unknown-capacity"),
    pytest.param(0.0, NAN, NAN, UNKNOWN, id="unloaded-with-unknown-capacity"),
    pytest.param(NAN, NAN, NAN, UNKNOWN, id="nothing-known"),
    pytest.param(INF, 1.0, 0.0, UNKNOWN, id="endless-demand"),
    pytest.param(1.0, INF, NAN, UNKNOWN, id="endless-capacity"),
]


@pytest.mark.parametrize(("demand", "capacity", "factor", "outcome"), LOADS)
def test_load_check(demand, capacity, factor, outcome):
    found = load_check(np.array([demand]), np.array([capacity]), 1.5)
    assert found.outcome[0] == outcome
    np.testing.assert_array_equal(found.factor_of_safety, [factor])


RULES = [
    pytest.param(2.0, 2.0, PASS, id="equal-passes"),
    pytest.param(np.nextafter(2.0, 3), 2.0, FAIL, id="no-tolerance"),
    pytest.param(0.0, 2.0, PASS, id="nothing-needed"),
    pytest.param(NAN, 2.0, UNKNOWN, id="unknown-demand"),
    pytest.param(2.0, NAN, UNKNOWN, id="unknown-capacity"),
]


@pytest.mark.parametrize(("demand", "capacity", "outcome"), RULES)
def test_rule_passes_without_the_projects_factor_and_has_none(demand, capacity, outcome):
    found = rule_check(np.array([demand]), np.array([capacity]))
    assert found.outcome[0] == outcome
    assert np.isnan(found.factor_of_safety[0])


def judged(checks, closure=1.0, limit=1.0):
    """Checks as (factor, outcome, carries load, counts), one section."""
    return class_outcome(
        [np.array([factor]) for factor, *_ in checks],
        [np.array([outcome], dtype=np.int8) for _, outcome, *_ in checks],
        [load for *_, load, _ in checks],
        [np.array([counts]) for *_, counts in checks],
        np.array([closure]),
        limit,
    )


def load(factor, outcome=PASS, *, counts=True):
    return (factor, outcome, True, counts)


def rule(outcome, *, counts=True):
    return (NAN, outcome, False, counts)


CLASSES = [
    pytest.param([load(2.0), load(3.0)], True, 2.0, 0, id="least-factor-governs"),
    pytest.param([load(3.0), load(2.0)], True, 2.0, 1, id="wherever-it-stands"),
    pytest.param([load(2.0), load(2.0)], True, 2.0, 0, id="first-of-equals"),
    pytest.param([load(NAN), load(2.0)], True, 2.0, 1, id="unloaded-element-has-no-say"),
    pytest.param([load(NAN)], True, NAN, 1, id="nothing-loaded-leaves-the-closure"),
    pytest.param([], True, NAN, 0, id="no-checks-leave-the-closure"),
    pytest.param([load(1.2, FAIL), load(3.0)], False, 1.2, 0, id="failed-load"),
    pytest.param([load(1.2, FAIL), rule(FAIL)], False, 1.2, 1, id="failed-rule-before-factor"),
    pytest.param([rule(PASS), rule(FAIL), rule(FAIL)], False, NAN, 1, id="first-failed-rule"),
    pytest.param([load(NAN, UNKNOWN), load(2.0)], False, 2.0, 0, id="unknown-load-never-passes"),
    pytest.param([load(2.0), rule(UNKNOWN)], False, 2.0, 1, id="unknown-rule-never-passes"),
    pytest.param(
        [load(2.0), rule(UNKNOWN, counts=False)], True, 2.0, 0, id="rule-left-out-does-not-count"
    ),
    pytest.param(
        [load(2.0), load(1.2, FAIL, counts=False)],
        True,
        2.0,
        0,
        id="load-that-does-not-count-has-no-part-in-the-factor",
    ),
    pytest.param(
        [load(NAN, UNKNOWN, counts=False), load(2.0)], True, 2.0, 1, id="unknown-load-left-out"
    ),
    pytest.param([load(1.2, FAIL, counts=False)], True, NAN, 1, id="only-what-does-not-count"),
    pytest.param(
        [rule(UNKNOWN), rule(FAIL)], False, NAN, 0, id="unknown-before-failed-if-it-comes-first"
    ),
]


@pytest.mark.parametrize(("checks", "adequate", "factor", "governing"), CLASSES)
def test_class_is_judged_by_its_checks(checks, adequate, factor, governing):
    found = judged(checks)
    assert bool(found.adequate[0]) is adequate
    np.testing.assert_array_equal(found.factor_of_safety, [factor])
    assert found.governing[0] == governing


@pytest.mark.parametrize(
    ("closure", "adequate"),
    [
        pytest.param(1.0, True, id="exactly-the-limit"),
        pytest.param(np.nextafter(1.0, 2), False, id="no-tolerance-above-it"),
        pytest.param(NAN, False, id="no-equilibrium"),
        pytest.param(INF, False, id="endless"),
    ],
)
def test_closure_has_a_limit_without_tolerance(closure, adequate):
    assert bool(judged([load(2.0)], closure).adequate[0]) is adequate


def test_sections_are_judged_each_by_itself():
    factors = [np.array([2.0, NAN, 1.0]), np.array([3.0, 1.7, 4.0])]
    outcomes = [np.array([PASS, UNKNOWN, FAIL]), np.array([PASS, PASS, PASS])]
    found = class_outcome(
        factors, outcomes, [True, True], [np.ones(3, bool)] * 2, np.array([0.5, 0.5, 0.5]), 1.0
    )
    np.testing.assert_array_equal(found.adequate, [True, False, False])
    np.testing.assert_array_equal(found.factor_of_safety, [2.0, 1.7, 1.0])
    np.testing.assert_array_equal(found.governing, [0, 0, 0])


def test_only_a_pass_is_a_pass():
    assert [outcome == PASS for outcome in Outcome] == [True, False, False]
