"""Rock bolts, end-anchored and ungrouted: a support kind with its checks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_rock_bolts.checks import LengthBeyondPlasticZone, Tension
from tunnelcalc_rock_bolts.kind import RockBolts
from tunnelcalc_rock_bolts.pattern import PATTERN_RULES
from tunnelcalc_rock_bolts.verification import BOLT_CHECKS


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(RockBolts())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(Tension())
    register(LengthBeyondPlasticZone())
    for rule in PATTERN_RULES:
        register(rule)


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in BOLT_CHECKS:
        register(check)
