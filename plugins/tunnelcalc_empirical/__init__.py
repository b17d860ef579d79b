"""Empirical cross-checks of a support class: they never pass it alone."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_empirical.flags import FLAGS
from tunnelcalc_empirical.verification import CHECKS


@api.hookimpl
def tunnelcalc_register_validity_flags(register: Callable[[api.ValidityFlag], None]) -> None:
    for flag in FLAGS:
        register(flag)


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in CHECKS:
        register(check)
