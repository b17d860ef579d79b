"""Closure profiles, line by line."""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

from tunnelcalc.api import Array, SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines.symbols import known


class ProfileFormula(NamedTuple):
    """Share of the final closure ahead of the face and behind it."""

    ahead: str
    behind: str


VLACHOPOULOS_DIEDERICHS = ProfileFormula(
    "exp(-0.15*Rp/R)/3*exp(x/R)", "1 - (1 - exp(-0.15*Rp/R)/3)*exp(-1.5*(x/R)/(Rp/R))"
)
PANET = ProfileFormula("", "0.25 + 0.75*(1 - (0.75/(0.75 + x/R))^2)")
PANET_GUENOT = ProfileFormula("", "0.28 + 0.72*(1 - (0.84/(0.84 + x/Rp))^2)")
UNLU_GERCEK = ProfileFormula(
    "(0.22*nu + 0.19)*exp((0.73*nu + 0.81)*x/R)",
    "0.22*nu + 0.19 + (0.81 - 0.22*nu)*(1 - ((0.39*nu + 0.65)/(0.39*nu + 0.65 + x/R))^2)",
)
HOEK = ProfileFormula("(1 + exp(-(x/R)/1.10))^(-1.7)", "(1 + exp(-(x/R)/1.10))^(-1.7)")


def share_line(
    values: SectionValues,
    needs: Sequence[str],
    formula: ProfileFormula,
    distance_m: float,
    result: Array,
    source: str,
) -> Sequence[SheetLine]:
    """Share of the final closure at a distance from the face."""
    work = Working({**known(values, needs), "x": distance_m}, source)
    chosen = formula.ahead if distance_m < 0 else formula.behind
    meaning = "share of the final closure at x behind the face"
    work.add("share", meaning, chosen, float(result[0]))
    return work.lines
