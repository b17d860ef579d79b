"""Rock bolts, end-anchored, by friction, fully grouted: kinds of support with their checks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_rock_bolts.checks import (
    PARTS,
    LengthBeyondPlasticZone,
    Tension,
    UsualBoltDensity,
)
from tunnelcalc_rock_bolts.friction import FrictionBolts
from tunnelcalc_rock_bolts.grouted_kind import GroutedRockBolts
from tunnelcalc_rock_bolts.kind import RockBolts
from tunnelcalc_rock_bolts.pattern import PATTERN_RULES
from tunnelcalc_rock_bolts.verification import CHECKS


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    for kind in (RockBolts(), FrictionBolts(), GroutedRockBolts()):
        register(kind)


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(Tension())
    for part in PARTS:
        register(part)
    register(LengthBeyondPlasticZone())
    for rule in PATTERN_RULES:
        register(rule)
    register(UsualBoltDensity())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in CHECKS:
        register(check)
