"""Strength and modulus of the ring to which disturbance is confined."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.dispatch import Chosen
from tunnelcalc.pipeline.ground_stages import estimated_modulus_mpa, knows_ring, strengths
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.method_contract import GroundReactionMethod, ModulusMethod, StrengthMethod
from tunnelcalc.sections import Sections

OF_RING = {"ring_mb": "mb", "ring_s": "s", "ring_a": "a"}
"""Columns of the ring, and those of the mass that they stand beside."""


def disturbed_ring_stage(
    strength: Chosen[StrengthMethod],
    modulus: Chosen[ModulusMethod],
    reaction: Chosen[GroundReactionMethod],
) -> Stage:
    """The methods of the project once more, with the disturbance of the ring; NaN where the law
    of the ground knows no ring.

    The modulus of the ring is that of the mass, lowered as the method lowers its own estimate:
    so a measured modulus is lowered too.
    """

    def compute(sections: Sections) -> Mapping[str, Array]:
        disturbed = sections.with_columns({"mass_disturbance": sections["disturbance"]})
        strong = strengths(strength, disturbed)
        undisturbed, lowered = (
            estimated_modulus_mpa(modulus, part) for part in (sections, disturbed)
        )
        share = np.where(np.isnan(lowered / undisturbed), 1.0, lowered / undisturbed)
        ring = {name: strong[of_mass] for name, of_mass in OF_RING.items()}
        ring["ring_modulus_mpa"] = sections["deformation_modulus_mpa"] * share
        known = np.zeros(sections.count, dtype=bool)
        for method, positions in reaction.positions(sections):
            known[positions] = knows_ring(method)
        return {name: np.where(known, column, np.nan) for name, column in ring.items()}

    own = ("disturbance", "deformation_modulus_mpa", *reaction.which)
    needs = (*strength.needs, *modulus.needs, *own)
    return Stage(
        "disturbed_ring",
        "strength and modulus of the disturbed ring, by the same methods",
        tuple(dict.fromkeys(needs)),
        (*OF_RING, "ring_modulus_mpa"),
        compute,
    )
