"""Share of the final closure at a distance behind the face: Vlachopoulos & Diederichs (2009)."""

from __future__ import annotations

import math


def share_of_closure(distance: float, radius: float, plastic_radius: float) -> float:
    """u / umax at a distance x behind the face, negative ahead of it."""
    at_face = math.exp(-0.15 * plastic_radius / radius) / 3
    if distance < 0:
        return at_face * math.exp(distance / radius)
    # 1 - (1 - u0) exp(-z), with z = 1.5 x / Rp, in a form that keeps the digits of a small share.
    z = 1.5 * distance / plastic_radius
    return at_face - (1 - at_face) * math.expm1(-z)
