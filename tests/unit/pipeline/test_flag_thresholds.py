"""The flags of the distribution at their thresholds, on both sides and exactly there."""

from __future__ import annotations

import numpy as np
import pytest

from tunnelcalc.builtin.flags import FLAGS
from tunnelcalc.sections import Sections

BY_NAME = {flag.name: flag for flag in FLAGS}

# R = 5.2 m; spalling with k0 = 1: 3 s1 - s3 = 2 sv, so that sv = 2, sci = 10 gives exactly 0.4;
# with k0 = 0.5: 3 sv - 0.5 sv = 2.5 sv, so that sv = 1.6 gives 0.4; with k0 = 2: 6 sv - sv = 5 sv.
CASES = [
    ("shallow_cover", {"cover_m": 51.9, "radius_m": 5.2}, True),
    ("shallow_cover", {"cover_m": 52.0, "radius_m": 5.2}, False),
    ("shallow_cover", {"cover_m": 52.1, "radius_m": 5.2}, False),
    ("stress_ratio", {"stress_ratio": 0.79}, True),
    ("stress_ratio", {"stress_ratio": 0.8}, False),
    ("stress_ratio", {"stress_ratio": 1.0}, False),
    ("stress_ratio", {"stress_ratio": 1.25}, False),
    ("stress_ratio", {"stress_ratio": 1.26}, True),
    ("spalling", {"vertical_stress_mpa": 2.0, "stress_ratio": 1.0}, False),
    ("spalling", {"vertical_stress_mpa": 2.001, "stress_ratio": 1.0}, True),
    ("spalling", {"vertical_stress_mpa": 1.599, "stress_ratio": 0.5}, False),
    ("spalling", {"vertical_stress_mpa": 1.601, "stress_ratio": 0.5}, True),
    ("spalling", {"vertical_stress_mpa": 0.799, "stress_ratio": 2.0}, False),
    ("spalling", {"vertical_stress_mpa": 0.801, "stress_ratio": 2.0}, True),
    ("disturbance_whole_mass", {"disturbance": 0.0}, False),
    ("disturbance_whole_mass", {"disturbance": 1e-9}, True),
    ("large_closure", {"closure_pct": 10.0}, False),
    ("large_closure", {"closure_pct": np.nextafter(10.0, 11.0)}, True),
    ("beyond_small_strain", {"closure_pct": 100.0}, False),
    ("beyond_small_strain", {"closure_pct": np.nextafter(100.0, 101.0)}, True),
    ("deep_plastic_zone", {"plastic_radius_m": 104.0, "radius_m": 5.2}, False),
    ("deep_plastic_zone", {"plastic_radius_m": 104.1, "radius_m": 5.2}, True),
    ("water_pressure_left_out", {"water_head_m": 0.0}, False),
    ("water_pressure_left_out", {"water_head_m": 0.1}, True),
    ("modulus_capped", {"modulus_capped": True}, True),
    ("modulus_capped", {"modulus_capped": False}, False),
    ("modulus_above_intact", {"modulus_above_intact": True}, True),
    ("modulus_above_intact", {"modulus_above_intact": False}, False),
    ("stress_ratio_assumed", {"stress_ratio_assumed": True}, True),
    ("stress_ratio_assumed", {"stress_ratio_assumed": False}, False),
    ("dilation_assumed", {"dilation_assumed": True}, True),
    ("dilation_assumed", {"dilation_assumed": False}, False),
    ("equivalent_radius", {"equivalent_radius": True}, True),
    ("equivalent_radius", {"equivalent_radius": False}, False),
    ("estimates_differ", {"estimates_differ": True}, True),
    ("estimates_differ", {"estimates_differ": False}, False),
    ("tests_below_confinement", {"tested_confinement_mpa": 2.0, "confinement_mpa": 2.0}, False),
    ("tests_below_confinement", {"tested_confinement_mpa": 2.0, "confinement_mpa": 2.1}, True),
    ("tests_below_confinement", {"tested_confinement_mpa": np.inf, "confinement_mpa": 9.0}, False),
    ("rule_not_applied", {"rule_not_applied": True}, True),
    ("rule_not_applied", {"rule_not_applied": False}, False),
]


def described(case):
    name, values, raised = case
    where = "-".join(f"{key}-{value:g}" for key, value in values.items())
    return f"{name}-{where}-{'raised' if raised else 'clear'}"


@pytest.mark.parametrize(
    ("name", "values", "raised"), [pytest.param(*case, id=described(case)) for case in CASES]
)
def test_a_flag_is_raised_beyond_its_threshold_and_not_at_it(name, values, raised):
    columns = {"intact_strength_mpa": 10.0} | values
    sections = Sections({key: np.array([value]) for key, value in columns.items()})
    assert BY_NAME[name].raised(sections).tolist() == [raised]


def test_every_flag_is_tried_on_both_sides_of_its_threshold():
    for outcome in (True, False):
        assert {name for name, _, raised in CASES if raised is outcome} == set(BY_NAME)


@pytest.mark.parametrize("name", sorted(BY_NAME))
def test_a_flag_reads_no_other_column_than_it_says(name):
    flag = BY_NAME[name]
    sections = Sections({need: np.array([1.0, 2.0]) for need in flag.needs})
    raised = flag.raised(sections)
    assert raised.dtype == bool
    assert raised.shape == (2,)
