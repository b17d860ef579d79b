"""Every method has a check against something outside the program, and all checks agree."""

from __future__ import annotations

import math

import pytest
from unit.plugin.strangers import own_points

from tunnelcalc.inputs.estimates import ESTIMATORS
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.verification import Standing, VerificationCheck, verified

REGISTRY = load_plugins(own_points())
CHECKS = REGISTRY.verification_checks()
STEPS = ("strength", "deformation_modulus", "ground_reaction", "closure_profile")
METHODS = [pytest.param(step, name, id=name) for step in STEPS for name in REGISTRY.names(step)]


@pytest.mark.parametrize(("step", "name"), METHODS)
def test_every_method_has_a_check(step, name):
    assert any(check.method == name for check in CHECKS)


@pytest.mark.parametrize(
    "name",
    [
        *(estimator.name for estimator in ESTIMATORS),
        *("vertical_stress", "effective_stress", "second_stress_case", "water_on_lining"),
        *("shear_strength", "line_error", "crown_dead_weight"),
        *REGISTRY.names("support_kind"),
    ],
)
def test_estimators_stresses_lines_and_support_kinds_have_checks(name):
    assert any(check.method == name for check in CHECKS)


def test_the_order_of_convergence_of_softening_is_observed():
    orders = [check for check in CHECKS if "order of convergence" in check.subject]
    assert {check.method for check in orders} == {"hoek_brown_softening"}
    assert {found.expected for found in verified(orders)} == {2.0}
    # An observed number, not the expected one told again.
    assert all(found.computed != 2.0 for found in verified(orders))


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: check.name)
def test_a_check_agrees_with_a_tolerance_that_says_something(check):
    (found,) = verified([check])
    assert math.isfinite(found.expected)
    assert found.agrees, (found.expected, found.computed, check.tolerance)
    # A tolerance as large as the number itself would let anything pass.
    scale = abs(found.expected) or 1
    assert 0 <= check.tolerance < 0.1 * scale


@pytest.mark.parametrize("check", CHECKS, ids=lambda check: check.name)
def test_a_check_names_its_source_and_what_it_rests_on(check):
    assert check.source
    assert check.subject
    assert isinstance(check.standing, Standing)


def test_a_published_value_is_within_half_of_its_last_digit():
    """0.005 for two digits behind the point, and so on: no tolerance in between."""
    for check in CHECKS:
        if check.standing is Standing.PUBLISHED:
            mantissa = check.tolerance / 10 ** math.floor(math.log10(check.tolerance))
            assert mantissa == pytest.approx(5), check.name


def of(expected, computed, tolerance=1e-3):
    return VerificationCheck(
        "invented", "case", "nobody", Standing.EXACT, "", tolerance,
        lambda: expected, lambda: computed,
    )  # fmt: skip


@pytest.mark.parametrize(
    ("expected", "computed", "agrees"),
    [
        (1.0, 1.0005, True),
        (1.0, 1.0011, False),
        (1.0, 0.9989, False),
        (1.0, math.nan, False),
        (math.nan, 1.0, False),
        (math.inf, math.inf, False),
    ],
)
def test_agreement_is_within_the_tolerance_and_never_of_what_is_no_number(
    expected, computed, agrees
):
    (found,) = verified([of(expected, computed)])
    assert found.agrees is agrees
