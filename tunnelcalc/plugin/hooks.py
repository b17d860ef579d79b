"""Hook specifications: how a plugin offers something to a run.

Each hook is called once, after loading and before any file is read, with a function
`register`. Call it once for each thing offered. The order of plugins never changes a result:
what is registered is sorted by name. Two things of one sort under one name raise
`DuplicateNameError`, which names both plugins. A plugin may leave out hooks that it does not
use. All hooks: since 0.1.
"""

from __future__ import annotations

from collections.abc import Callable

import pluggy

from tunnelcalc.plugin.contract import (
    ClassCheck,
    GroundReader,
    ReportWriter,
    SectionFigure,
    SupportCheck,
    SupportKind,
    TradeOffFigure,
    ValidityFlag,
)
from tunnelcalc.plugin.method_contract import (
    ClosureProfileMethod,
    GroundReactionMethod,
    ModulusMethod,
    StrengthMethod,
)
from tunnelcalc.verification import VerificationCheck

ENTRY_POINT_GROUP = "tunnelcalc"
"""Distributions name their plugin modules under this entry-point group."""

hookspec = pluggy.HookspecMarker("tunnelcalc")
hookimpl = pluggy.HookimplMarker("tunnelcalc")


@hookspec
def tunnelcalc_register_support_kinds(register: Callable[[SupportKind], None]) -> None:
    """Offer kinds of support element, the words for `kind:` in a project."""


@hookspec
def tunnelcalc_register_support_checks(register: Callable[[SupportCheck], None]) -> None:
    """Offer checks of support elements.

    A check runs for the kinds that its own plugin offers, and for other kinds where the
    project names the plugin under `plugins:`.
    """


@hookspec
def tunnelcalc_register_class_checks(register: Callable[[ClassCheck], None]) -> None:
    """Offer checks of a support class as a whole.

    The checks of this distribution always run; those of another run where the project names the
    plugin under `plugins:`.
    """


@hookspec
def tunnelcalc_register_strengths(register: Callable[[StrengthMethod], None]) -> None:
    """Offer strength criteria, named under `methods: strength`."""


@hookspec
def tunnelcalc_register_deformation_moduli(register: Callable[[ModulusMethod], None]) -> None:
    """Offer estimates of the modulus, named under `methods: deformation_modulus`."""


@hookspec
def tunnelcalc_register_ground_reactions(
    register: Callable[[GroundReactionMethod], None],
) -> None:
    """Offer laws of the ground, named under `methods: ground_reaction`."""


@hookspec
def tunnelcalc_register_closure_profiles(
    register: Callable[[ClosureProfileMethod], None],
) -> None:
    """Offer profiles of closure along the drive, named under `methods: closure_profile`."""


@hookspec
def tunnelcalc_register_validity_flags(register: Callable[[ValidityFlag], None]) -> None:
    """Offer flags on validity.

    The flags of this distribution always run; those of another run where the project names the
    plugin under `plugins:`.
    """


@hookspec
def tunnelcalc_register_verification_checks(
    register: Callable[[VerificationCheck], None],
) -> None:
    """Offer checks of methods against publications or independent solutions.

    `tunnelcalc verification` computes all that are installed.
    """


@hookspec
def tunnelcalc_register_ground_readers(register: Callable[[GroundReader], None]) -> None:
    """Offer file formats for ground and units tables, chosen by the file's ending."""


@hookspec
def tunnelcalc_register_report_writers(register: Callable[[ReportWriter], None]) -> None:
    """Offer writers of files about a finished run.

    The writers of this distribution always run; those of another run where the project names
    the plugin under `plugins:`.
    """


@hookspec
def tunnelcalc_register_section_figures(register: Callable[[SectionFigure], None]) -> None:
    """Offer figures of the curves of one section, for `tunnelcalc curves`.

    The figures of this distribution are always drawn; those of another where the project names
    the plugin under `plugins:`.
    """


@hookspec
def tunnelcalc_register_trade_off_figures(register: Callable[[TradeOffFigure], None]) -> None:
    """Offer figures of what a parameter of a class does, for `tunnelcalc tune`.

    The figures of this distribution are always drawn; those of another where the project names
    the plugin under `plugins:`.
    """
