"""Each hook keeps its name, its signature and its promise, and is used by this distribution."""

from __future__ import annotations

import inspect
from collections.abc import Callable
from typing import get_type_hints

import pytest
from contract.source import ROOT
from unit.plugin.strangers import own_points

from tunnelcalc.builtin import verification
from tunnelcalc.plugin import contract, hooks, method_contract
from tunnelcalc.plugin.registry import OWN_DISTRIBUTION, SORTS, load_plugins
from tunnelcalc.verification import VerificationCheck

HOOKS = {
    name: function
    for name, function in vars(hooks).items()
    if getattr(function, "tunnelcalc_spec", None) is not None
}
OWN = load_plugins(own_points())


def assert_hook(name: str, offered: type, sort: str, *known: str) -> None:
    """The signature is `(register)`, what may be registered is stated, and we use it ourselves."""
    function = HOOKS[name]
    assert list(inspect.signature(function).parameters) == ["register"]
    hints = get_type_hints(function)
    assert hints == {"register": Callable[[offered], None], "return": type(None)}
    assert inspect.getdoc(function)
    assert SORTS[sort] == name
    offers = list(OWN.of_sort(sort))
    assert set(known) <= {offer.name for offer in offers}
    assert {offer.source.distribution for offer in offers} == {OWN_DISTRIBUTION}


def test_tunnelcalc_register_support_kinds():
    assert_hook(
        "tunnelcalc_register_support_kinds",
        contract.SupportKind,
        "support_kind",
        *("rock_bolts", "shotcrete", "steel_sets"),
    )


def test_tunnelcalc_register_support_checks():
    assert_hook(
        "tunnelcalc_register_support_checks",
        contract.SupportCheck,
        "support_check",
        *("tension", "hoop_stress", "yield"),
    )


def test_tunnelcalc_register_class_checks():
    assert_hook(
        "tunnelcalc_register_class_checks",
        contract.ClassCheck,
        "class_check",
        *("crown_dead_weight", "water_on_lining"),
    )


def test_tunnelcalc_register_strengths():
    assert_hook(
        "tunnelcalc_register_strengths",
        method_contract.StrengthMethod,
        "strength",
        "hoek_brown_2002",
    )


def test_tunnelcalc_register_deformation_moduli():
    assert_hook(
        "tunnelcalc_register_deformation_moduli",
        method_contract.ModulusMethod,
        "deformation_modulus",
        "hoek_diederichs_2006",
    )


def test_tunnelcalc_register_ground_reactions():
    assert_hook(
        "tunnelcalc_register_ground_reactions",
        method_contract.GroundReactionMethod,
        "ground_reaction",
        "hoek_brown_perfectly_plastic",
    )


def test_tunnelcalc_register_closure_profiles():
    assert_hook(
        "tunnelcalc_register_closure_profiles",
        method_contract.ClosureProfileMethod,
        "closure_profile",
        "vlachopoulos_diederichs_2009",
    )


def test_tunnelcalc_register_validity_flags():
    assert_hook(
        "tunnelcalc_register_validity_flags",
        contract.ValidityFlag,
        "validity_flag",
        *("shallow_cover", "stress_ratio", "spalling", "disturbance_whole_mass"),
    )


def test_tunnelcalc_register_verification_checks():
    assert_hook(
        "tunnelcalc_register_verification_checks",
        VerificationCheck,
        "verification_check",
        *(check.name for check in verification.STRENGTH_CHECKS),
    )


def test_tunnelcalc_register_ground_readers():
    assert_hook("tunnelcalc_register_ground_readers", contract.GroundReader, "ground_reader", "csv")


def test_tunnelcalc_register_report_writers():
    assert_hook(
        "tunnelcalc_register_report_writers",
        contract.ReportWriter,
        "report_writer",
        "schedule_tables",
    )


def test_tunnelcalc_register_section_figures():
    assert_hook(
        "tunnelcalc_register_section_figures",
        contract.SectionFigure,
        "section_figure",
        *("ground_reaction", "closure_profile", "strength_envelope", "shear_strength"),
    )


def test_tunnelcalc_register_trade_off_figures():
    assert_hook(
        "tunnelcalc_register_trade_off_figures",
        contract.TradeOffFigure,
        "trade_off_figure",
        "trade_off",
    )


@pytest.mark.parametrize("hook", sorted(HOOKS))
def test_every_hook_has_a_test_that_is_named_after_it(hook):
    texts = (path.read_text(encoding="utf-8") for path in (ROOT / "tests").rglob("test_*.py"))
    assert any(f"def test_{hook}(" in text for text in texts)


def test_there_is_a_sort_for_every_hook_and_a_hook_for_every_sort():
    assert sorted(SORTS.values()) == sorted(HOOKS)


def test_every_default_method_is_offered():
    from tunnelcalc.project import DEFAULT_METHODS

    assert all(OWN.find(step, name) is not None for step, name in DEFAULT_METHODS.items())
