"""Checks of the built-in methods against publications, closed forms and scipy."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc.builtin.verification.of_closure_profiles import CLOSURE_PROFILE_CHECKS
from tunnelcalc.builtin.verification.of_envelopes import ENVELOPE_CHECKS
from tunnelcalc.builtin.verification.of_ground_reactions import GROUND_REACTION_CHECKS
from tunnelcalc.builtin.verification.of_hazards import HAZARD_CHECKS
from tunnelcalc.builtin.verification.of_moduli import MODULUS_CHECKS
from tunnelcalc.builtin.verification.of_observations import OBSERVATION_CHECKS
from tunnelcalc.builtin.verification.of_other_laws import SOFTENING_AND_FINITE_STRAIN_CHECKS
from tunnelcalc.builtin.verification.of_strengths import STRENGTH_CHECKS
from tunnelcalc.builtin.verification.of_stresses import STRESS_CHECKS


@api.hookimpl
def tunnelcalc_register_verification_checks(
    register: Callable[[api.VerificationCheck], None],
) -> None:
    for check in (
        *OBSERVATION_CHECKS,
        *STRESS_CHECKS,
        *STRENGTH_CHECKS,
        *ENVELOPE_CHECKS,
        *MODULUS_CHECKS,
        *GROUND_REACTION_CHECKS,
        *SOFTENING_AND_FINITE_STRAIN_CHECKS,
        *CLOSURE_PROFILE_CHECKS,
        *HAZARD_CHECKS,
    ):
        register(check)
