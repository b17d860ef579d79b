"""The second run of sections whose in-plane stresses are far from equal."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.dispatch import Chosen, curves
from tunnelcalc.pipeline.ground_stages import unsupported
from tunnelcalc.plugin.contract import GroundReactionMethod
from tunnelcalc.results import STRESS_CASES
from tunnelcalc.sections import Sections

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


def larger_stress(chosen: Chosen[GroundReactionMethod], sections: Sections) -> LargerStress:
    """Those sections that are run a second time, as they stand without support."""
    larger = sections["larger_stress_mpa"]
    positions = np.flatnonzero(~np.isnan(larger))
    part = sections.take(positions).with_columns({"in_situ_stress_mpa": larger[positions]})
    if positions.size:
        part = part.with_columns(unsupported(chosen, part))
    return LargerStress(positions, part, curves(chosen, part))
