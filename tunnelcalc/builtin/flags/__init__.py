"""Flags on validity that come with the distribution, a module a family."""

from __future__ import annotations

from collections.abc import Callable

from tunnelcalc import api
from tunnelcalc.builtin.flags import (
    of_closure,
    of_geometry,
    of_inputs,
    of_rock_mass,
    of_stress,
    of_support,
    of_water,
)

FLAGS: tuple[api.Flag, ...] = (
    *of_geometry.FLAGS,
    *of_stress.FLAGS,
    *of_rock_mass.FLAGS,
    *of_water.FLAGS,
    *of_closure.FLAGS,
    *of_inputs.FLAGS,
    *of_support.FLAGS,
)


@api.hookimpl
def tunnelcalc_register_validity_flags(register: Callable[[api.ValidityFlag], None]) -> None:
    for flag in FLAGS:
        register(flag)
