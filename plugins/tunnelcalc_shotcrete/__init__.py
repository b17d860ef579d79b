"""Shotcrete as a ring closed through the invert: a support kind with its checks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_shotcrete.checks import EarlyStrength, HoopStress, YoungHoopStress
from tunnelcalc_shotcrete.kind import Shotcrete
from tunnelcalc_shotcrete.verification import verification_checks


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(Shotcrete())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(HoopStress())
    register(YoungHoopStress())
    register(EarlyStrength())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in verification_checks():
        register(check)
