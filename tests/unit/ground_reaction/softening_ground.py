"""Strain-softening ground for the unit tests: invented values, one section unless asked."""

import numpy as np

from tunnelcalc.ground_reaction.softening import SofteningCurve

SOFTENING = {
    "in_situ_stress_mpa": 8.0,
    "intact_strength_mpa": 30.0,
    "mb": 1.8,
    "s": 0.004,
    "a": 0.506,
    "residual_mb": 0.8,
    "residual_s": 0.0006,
    "residual_a": 0.53,
    "critical_shear_strain": 0.006,
    "deformation_modulus_mpa": 4000.0,
    "poisson_ratio": 0.27,
    "dilation_deg": 6.0,
}
PEAK_ONLY = [n for n in SOFTENING if not n.startswith(("residual", "critical"))]


def columns(**changed):
    """(n,) columns of `SOFTENING` with some values changed; scalars become one section."""
    ground = SOFTENING | changed
    values = np.broadcast_arrays(*(np.atleast_1d(np.asarray(v, float)) for v in ground.values()))
    return {name: np.array(value) for name, value in zip(ground, values, strict=True)}


def softening(annuli=200, **changed):
    """The curves of `columns`."""
    return SofteningCurve.of_ground(**columns(**changed), annuli=annuli)
