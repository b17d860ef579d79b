"""Ground that an element changes in a ring around the opening, as grouted bolts do."""

from __future__ import annotations

from collections.abc import Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.ground_reaction.improved_ring import improved_curve
from tunnelcalc.ground_reaction.later_ring import LaterRingCurve
from tunnelcalc.ground_reaction.mixed import MixedCurve
from tunnelcalc.pipeline.dispatch import Chosen
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.plugin.isolation import NO_REASON
from tunnelcalc.plugin.method_contract import GroundReactionMethod
from tunnelcalc.sections import Sections
from tunnelcalc.support.equilibrium import pressure_at_closure
from tunnelcalc.support.reaction import GroundRing

NOT_DERIVED = "the law of the ground has no solution with a changed ring around the opening"


class CurveOfClass(NamedTuple):
    """The ground as a class finds it, and why it cannot be computed (n,), empty where it can."""

    curve: GroundCurve
    reason: Array


def curve_of_class(
    curve: GroundCurve,
    reaction: Chosen[GroundReactionMethod],
    sections: Sections,
    responses: Sequence[ElementResponse],
    installed_m: Array,
) -> CurveOfClass:
    """The ground with the ring of a class, from the closure at which the ring is installed.

    `installed_m` (e, n) is that closure for each element. A class has at most one ring.
    """
    reason = np.full(sections.count, NO_REASON, dtype=object)
    for response, closure in zip(responses, installed_m, strict=True):
        ring = response.reaction
        if isinstance(ring, GroundRing):
            parts = [
                (
                    improved_curve(
                        method.name,
                        sections.take(positions),
                        ring.thickness_m[positions],
                        {name: values[positions] for name, values in ring.changed.items()},
                    ),
                    positions,
                )
                for method, positions in reaction.positions(sections)
            ]
            improved = MixedCurve.of_parts(parts)
            before = pressure_at_closure(curve, sections["radius_m"], closure)
            reason[np.isnan(improved.critical_pressure_mpa)] = NOT_DERIVED
            curve = LaterRingCurve.of_curves(curve, improved, before)
    return CurveOfClass(curve, reason)
