"""The section of a ring of support: what a lining of several rings is put together from."""

from __future__ import annotations

import math
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class RingSection:
    """What of a ring stands in a metre of tunnel, at its final strength.

    Area [m2/m], second moment of area [m4/m], depth [m], Young's modulus [MPa], Poisson ratio [-]
    (0 for bars apart), compressive and tensile strength [MPa], both as magnitudes; the tensile
    one is NaN where it is for the project to say. `acts_alone` says why the ring does not bear
    together with the others all around the opening; empty where it does.
    """

    area_m2_per_m: float = math.nan
    inertia_m4_per_m: float = math.nan
    depth_m: float = math.nan
    modulus_mpa: float = math.nan
    poisson_ratio: float = math.nan
    compressive_strength_mpa: float = math.nan
    tensile_strength_mpa: float = math.nan
    acts_alone: str = ""
