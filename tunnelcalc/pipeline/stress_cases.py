"""The second run of sections whose in-plane stresses are far from equal."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.dispatch import Chosen, curves
from tunnelcalc.pipeline.ground_stages import unsupported
from tunnelcalc.plugin.method_contract import GroundReactionMethod
from tunnelcalc.project import Criteria
from tunnelcalc.results import STRESS_CASES
from tunnelcalc.sections import Sections
from tunnelcalc.support.equilibrium import pressure_at_closure

MEAN, LARGER = (STRESS_CASES.index(name) for name in ("mean", "larger"))


def larger_column(name: str) -> str:
    """The column beside `name` that holds it under the larger stress, NaN where none is run."""
    return f"larger_{name}"


@dataclass(frozen=True, slots=True)
class LargerStress:
    """Sections under the larger in-plane stress, with their positions among all."""

    positions: Array
    sections: Sections
    curve: GroundCurve


def with_limit_pressure(sections: Sections, curve: GroundCurve, criteria: Criteria) -> Sections:
    """Sections with the pressure that the ground alone would need to rest at the closure limit."""
    radius = sections["radius_m"]
    limit = radius * criteria.closure_pct / 100
    return sections.with_columns({"limit_pressure_mpa": pressure_at_closure(curve, radius, limit)})


def larger_stress(
    chosen: Chosen[GroundReactionMethod], sections: Sections, criteria: Criteria
) -> LargerStress:
    """Those sections that are run a second time, as they stand without support."""
    larger = sections["larger_stress_mpa"]
    positions = np.flatnonzero(~np.isnan(larger))
    part = sections.take(positions).with_columns({"in_situ_stress_mpa": larger[positions]})
    curve = curves(chosen, part)
    if positions.size:
        part = part.with_columns(unsupported(chosen, part))
        part = with_limit_pressure(part, curve, criteria)
    return LargerStress(positions, part, curve)
