"""The methods by name that come with the distribution, offered through the hooks."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc.builtin.methods.moduli import MODULI
from tunnelcalc.builtin.methods.profiles import PROFILES
from tunnelcalc.builtin.methods.reactions import REACTIONS
from tunnelcalc.builtin.methods.strengths import STRENGTHS


@api.hookimpl
def tunnelcalc_register_strengths(register: Callable[[api.StrengthMethod], None]) -> None:
    for method in STRENGTHS:
        register(method)


@api.hookimpl
def tunnelcalc_register_deformation_moduli(
    register: Callable[[api.ModulusMethod], None],
) -> None:
    for method in MODULI:
        register(method)


@api.hookimpl
def tunnelcalc_register_ground_reactions(
    register: Callable[[api.GroundReactionMethod], None],
) -> None:
    for method in REACTIONS:
        register(method)


@api.hookimpl
def tunnelcalc_register_closure_profiles(
    register: Callable[[api.ClosureProfileMethod], None],
) -> None:
    for method in PROFILES:
        register(method)
