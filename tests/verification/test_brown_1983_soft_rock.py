"""The soft rock of Hoek & Brown (1980), reused by Brown, Bray, Ladanyi & Hoek (1983), J. Geotech.
Eng. 109, 15-39; here perfectly plastic: the residual constants equal those of the peak.

Inputs from memory. The results are independent calculations, not published: Brown et al. compute
brittle ground, and freeze the elastic strain at the edge of the plastic zone.
"""

import numpy as np
import pytest

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve, ground_reaction

SOFT_ROCK = {
    "in_situ_stress_mpa": 3.31,
    "intact_strength_mpa": 27.6,
    "mb": 0.5,
    "s": 0.001,
    "a": 0.5,
    "deformation_modulus_mpa": 1380.0,
    "poisson_ratio": 0.25,
    "dilation_deg": 0.0,
}
RADIUS_M = 5.35


def test_critical_pressure():
    curve = HoekBrownCurve.of_ground(**{k: np.array([v]) for k, v in SOFT_ROCK.items()})
    assert f"{curve.critical_pressure_mpa[0]:.4f}" == "1.2159"


@pytest.mark.parametrize(
    ("pressure", "plastic_ratio", "closure_mm"),
    [
        pytest.param(0.0, "1.6169", "31.77", id="unsupported"),
        pytest.param(0.1, "1.4842", "25.76", id="0.1-MPa"),
        pytest.param(0.3, "1.3313", "19.68", id="0.3-MPa"),
    ],
)
def test_plastic_radius_and_closure(pressure, plastic_ratio, closure_mm):
    found = ground_reaction(np.array(pressure), radius_m=np.array(RADIUS_M), **SOFT_ROCK)
    assert f"{found.plastic_radius_m / RADIUS_M:.4f}" == plastic_ratio
    assert f"{found.closure_m * 1000:.2f}" == closure_mm
