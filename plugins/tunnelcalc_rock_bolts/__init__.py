"""Rock bolts, end-anchored and ungrouted: a support kind with its checks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_rock_bolts.checks import LengthBeyondPlasticZone, Tension
from tunnelcalc_rock_bolts.kind import RockBolts
from tunnelcalc_rock_bolts.pattern import PATTERN_RULES


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(RockBolts())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(Tension())
    register(LengthBeyondPlasticZone())
    for rule in PATTERN_RULES:
        register(rule)
