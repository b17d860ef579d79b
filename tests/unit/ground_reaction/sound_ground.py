"""Ground for the unit tests: invented values, one section unless a test asks for more."""

import numpy as np

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

WEAK = {
    "in_situ_stress_mpa": 5.0,
    "intact_strength_mpa": 20.0,
    "mb": 0.9,
    "s": 0.0015,
    "a": 0.52,
    "deformation_modulus_mpa": 1500.0,
    "poisson_ratio": 0.3,
    "dilation_deg": 5.0,
}
STRONG = WEAK | {"intact_strength_mpa": 200.0, "mb": 10.0, "s": 0.1, "a": 0.5}
"""Unconfined strength 63 MPa, more than twice the in-situ stress: elastic without support."""

ELASTIC = {
    "in_situ_stress_mpa": 4.0,
    "intact_strength_mpa": 1000.0,
    "mb": 10.0,
    "s": 1.0,
    "a": 0.5,
    "deformation_modulus_mpa": 1250.0,
    "poisson_ratio": 0.25,
}
"""Ground whose wall of 5 m radius closes by 20 mm without support."""


def curve(**values):
    """The curves of `WEAK` ground with some values changed; scalars become one section."""
    ground = WEAK | values
    columns = np.broadcast_arrays(*(np.atleast_1d(np.asarray(v, float)) for v in ground.values()))
    return HoekBrownCurve.of_ground(**dict(zip(ground, columns, strict=True)))
