"""Share of the final closure at a distance behind the face: Vlachopoulos & Diederichs (2009)."""

from __future__ import annotations

import math


def share_of_closure(distance: float, radius: float, plastic_radius: float) -> float:
    """u / umax at a distance x behind the face, negative ahead of it."""
    at_face = math.exp(-0.15 * plastic_radius / radius) / 3
    if distance < 0:
        return at_face * math.exp(distance / radius)
    # x / R over Rp / R
    return 1 - (1 - at_face) * math.exp(-1.5 * distance / plastic_radius)
