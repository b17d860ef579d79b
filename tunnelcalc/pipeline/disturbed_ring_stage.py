"""Strength and modulus of the ring to which disturbance is confined."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.dispatch import Chosen
from tunnelcalc.pipeline.ground_stages import estimated_modulus_mpa, strengths
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.contract import ModulusMethod, StrengthMethod
from tunnelcalc.sections import Sections

OF_RING = {"ring_mb": "mb", "ring_s": "s", "ring_a": "a"}
"""Columns of the ring, and those of the mass that they stand beside."""


def disturbed_ring_stage(strength: Chosen[StrengthMethod], modulus: Chosen[ModulusMethod]) -> Stage:
    """The methods of the project once more, with the disturbance of the ring.

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
        return ring | {"ring_modulus_mpa": sections["deformation_modulus_mpa"] * share}

    needs = (*strength.needs, *modulus.needs, "disturbance", "deformation_modulus_mpa")
    return Stage(
        "disturbed_ring",
        "strength and modulus of the disturbed ring, by the same methods",
        tuple(dict.fromkeys(needs)),
        (*OF_RING, "ring_modulus_mpa"),
        compute,
    )
