"""Ground with a ring of other strength from the beginning, as bolts make it, line by line."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.api import GroundRing, Sections, SectionValues, SheetLine
from tunnelcalc.builtin.methods.lines import disturbed_ring, finite_strain, mohr_coulomb
from tunnelcalc.builtin.methods.lines.ring_laws import HoekBrownRing, MohrCoulombRing
from tunnelcalc.builtin.methods.lines.symbols import arrays, number
from tunnelcalc.calculation.symbols import SYMBOLS
from tunnelcalc.ground_reaction.improved_ring import (
    FINITE_STRAIN,
    MOHR_COULOMB_LAWS,
    ImprovedRingCurve,
    improved_curve,
)


def wall_lines(
    law: str, values: SectionValues, ring: GroundRing, pressure_mpa: float, source: str
) -> Sequence[SheetLine]:
    """The wall under a pressure, in ground of a law with the ring; _d belongs to the ring."""
    names = [name for name, value in values.items() if not isinstance(value, str)]
    sections = Sections(arrays(values, names))
    curve = improved_curve(law, sections, ring.thickness_m, ring.changed)
    if law.endswith(FINITE_STRAIN):
        inner = wall_lines(law.removesuffix(FINITE_STRAIN), values, ring, pressure_mpa, source)
        return finite_strain.corrected(inner, curve, pressure_mpa)
    if not isinstance(curve, ImprovedRingCurve):
        return mohr_coulomb.elastic_lines(values, pressure_mpa, source)
    of_ring = {
        "E_d": number(values, "deformation_modulus_mpa"),
        "t_d": float(ring.thickness_m[0]),
        "a_d": number(values, "a"),
        **{f"{SYMBOLS[name]}_d": float(column[0]) for name, column in ring.changed.items()},
    }
    written = MohrCoulombRing() if law in MOHR_COULOMB_LAWS else HoekBrownRing()
    return disturbed_ring.layered_lines(written, values, of_ring, pressure_mpa, source, curve)
