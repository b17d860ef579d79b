"""Thrust and moment in a composite lining under unequal in-situ stress: a check of a class."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_composite_lining.check import CompositeLining
from tunnelcalc_composite_lining.verification import CHECKS


@api.hookimpl
def tunnelcalc_register_class_checks(register: Callable[[api.ClassCheck], None]) -> None:
    register(CompositeLining())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in CHECKS:
        register(check)
