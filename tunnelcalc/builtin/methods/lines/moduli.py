"""Formulas of the deformation modulus."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.api import Array, SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines.symbols import known, number

DETAILED = "Ei*(0.02 + (1 - D/2)/(1 + exp((60 + 15*D - GSI)/11)))"
SIMPLIFIED = "1e5*(1 - D/2)/(1 + exp((75 + 25*D - GSI)/11))"
OF_2002 = "1000*(1 - D/2)*sqrt(min(sci, 100)/100)*10^((GSI - 10)/40)"
SERAFIM_PEREIRA = "1000*10^((RMR - 10)/40)"
BIENIAWSKI = "1000*(2*RMR - 100)"
BARTON = "1000*10*(Q*sci/100)^(1/3)"


def best_of_2006(values: SectionValues) -> str:
    """The form with the intact modulus where that is known."""
    intact = number(values, "intact_modulus_mpa")
    return DETAILED if intact == intact else SIMPLIFIED


def modulus_line(
    values: SectionValues, needs: Sequence[str], formula: str, result: Array, source: str
) -> Sequence[SheetLine]:
    """The estimate of a relation."""
    work = Working(known(values, needs), source)
    work.add("E_est", "estimated deformation modulus", formula, float(result[0]), "MPa")
    return work.lines
