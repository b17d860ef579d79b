"""Steel sets, embedded or blocked, and lattice girders: support kinds with their checks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc_steel_sets.checks import Travel, Yield
from tunnelcalc_steel_sets.girders import LatticeGirders
from tunnelcalc_steel_sets.kind import SteelSets
from tunnelcalc_steel_sets.verification import verification_checks


@api.hookimpl
def tunnelcalc_register_support_kinds(register: Callable[[api.SupportKind], None]) -> None:
    register(SteelSets())
    register(LatticeGirders())


@api.hookimpl
def tunnelcalc_register_support_checks(register: Callable[[api.SupportCheck], None]) -> None:
    register(Yield())
    register(Travel())


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in verification_checks():
        register(check)
