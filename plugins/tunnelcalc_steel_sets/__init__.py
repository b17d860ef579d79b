"""Steel sets, embedded or blocked: a support kind with its check."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_steel_sets.kind import SteelSets, Yield
from tunnelcalc_steel_sets.verification import SET_CHECKS


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(SteelSets())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(Yield())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in SET_CHECKS:
        register(check)
