"""End-anchored bolts by hand."""

import math

import pytest
from tunnelcalc_rock_bolts.formulas import (
    capacity_pressure_mpa,
    end_anchored_stiffness_mpa_per_m,
)

BOLT = {
    "spacing_around_m": 2.0,
    "spacing_along_m": 1.5,
    "free_length_m": 4.0,
    "diameter_mm": 25.0,
    "steel_modulus_gpa": 200.0,
    "anchor_deformation_m_per_mn": 0.04,
}


def test_one_meganewton_stretches_bar_and_anchor():
    """Bar: 1 MN x 4 m over 200 000 MPa x 490.87 mm2 = 40.74 mm; anchor: 40 mm. Spread over 3 m2,
    1 MN is 1/3 MPa: K = (1/3) / 0.08074."""
    area = math.pi * 0.0125**2
    stretch = 1 * 4 / (200_000 * area) + 0.04
    assert stretch == pytest.approx(0.08074, abs=5e-6)
    found = end_anchored_stiffness_mpa_per_m(**BOLT)
    assert found == pytest.approx(1 / 3 / stretch, rel=1e-14)


def test_rigid_anchor_leaves_the_bar_alone():
    found = end_anchored_stiffness_mpa_per_m(**BOLT | {"anchor_deformation_m_per_mn": 0.0})
    bar = 200_000 * math.pi * 0.0125**2 / 4.0
    assert found == pytest.approx(bar / 3.0, rel=1e-14)


def test_bar_of_no_length_leaves_the_anchor_alone():
    found = end_anchored_stiffness_mpa_per_m(**BOLT | {"free_length_m": 0.0})
    assert found == pytest.approx(1 / (3.0 * 0.04), rel=1e-14)


def test_half_the_spacing_each_way_is_four_times_as_stiff():
    close = BOLT | {"spacing_around_m": 1.0, "spacing_along_m": 0.75}
    ratio = end_anchored_stiffness_mpa_per_m(**close) / end_anchored_stiffness_mpa_per_m(**BOLT)
    assert ratio == pytest.approx(4, rel=1e-14)


def test_capacity_of_200_kn_on_4_square_metres():
    found = capacity_pressure_mpa(capacity_kn=200, spacing_around_m=2, spacing_along_m=2)
    assert found == pytest.approx(0.05, rel=1e-15)
