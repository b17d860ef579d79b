"""The correction of a closure for finite strain."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from tunnelcalc.api import SheetLine
from tunnelcalc.builtin.methods.lines.symbols import row
from tunnelcalc.ground_reaction.curve import GroundCurve

CLOSURE, SMALL = "u_R", "u_ss"
CORRECTION = "Vrakas & Anagnostou (2014), Int. J. Numer. Anal. Methods Geomech. 38, 1131-1148"


def corrected(
    lines: Sequence[SheetLine], curve: GroundCurve, pressure_mpa: float
) -> Sequence[SheetLine]:
    """Lines of a law of small strains, its closure corrected; `curve` is the corrected one."""
    inner = [replace(line, symbol=SMALL) if line.symbol == CLOSURE else line for line in lines]
    values = {line.symbol: line.result for line in inner}
    moved = float(curve.at(row(pressure_mpa)).closure_ratio[0])
    put_in = {name: values[name] for name in ("Kpsi", SMALL)}
    formula = "1 - (1 + (Kpsi + 1)*u_ss)^(-1/(Kpsi + 1))" if moved == moved else ""
    meaning = "closure over the radius, corrected for finite strain"
    return [*inner, SheetLine(CLOSURE, meaning, formula, put_in, moved, "", CORRECTION)]
