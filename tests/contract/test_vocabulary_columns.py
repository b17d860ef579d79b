"""Every column that is read or written stands in the vocabulary, or is named there as a word."""

from __future__ import annotations

import pytest

from tunnelcalc.builtin.schedule_tables import QUANTITIES_HEADER, SCHEDULE_HEADER
from tunnelcalc.outputs.curve_tables import (
    CLOSURE_PROFILE_HEADER,
    GROUND_REACTION_HEADER,
    STRENGTH_ENVELOPE_HEADER,
    SUPPORT_REACTION_HEADER,
    THRUST_MOMENT_HEADER,
)
from tunnelcalc.outputs.flags_table import FLAGS_HEADER
from tunnelcalc.outputs.tables import CHECK_HEADER, CLASS_HEADER, OPTIONAL_COLUMNS, SECTION_COLUMNS
from tunnelcalc.tune.tables import ADVICE_HEADER, TRADE_OFF_HEADER
from tunnelcalc.vocabulary import GROUND, QUANTITIES, WORDS, Sort

INTERVAL = ("chainage_m", "from_m", "to_m", "ground_unit")
CHOSEN = ("required_class", "scheduled_class", "flags")
OUTPUT = {
    "sections.csv": (*INTERVAL, *SECTION_COLUMNS, *OPTIONAL_COLUMNS, *CHOSEN),
    "classes.csv": CLASS_HEADER,
    "checks.csv": CHECK_HEADER,
    "schedule.csv": SCHEDULE_HEADER,
    "quantities.csv": QUANTITIES_HEADER,
    "flags.csv": FLAGS_HEADER,
    "ground_reaction.csv": GROUND_REACTION_HEADER,
    "closure_profile.csv": CLOSURE_PROFILE_HEADER,
    "support_reaction.csv": SUPPORT_REACTION_HEADER,
    "thrust_moment.csv": THRUST_MOMENT_HEADER,
    "strength_envelope.csv": STRENGTH_ENVELOPE_HEADER,
    "advice.csv": ADVICE_HEADER,
    "trade_off.csv": TRADE_OFF_HEADER,
}
COLUMNS = sorted({name for header in OUTPUT.values() for name in header})

UNITS = {
    "_mpa": "MPa",
    "_gpa": "GPa",
    "_kn_m3": "kN/m3",
    "_kn": "kN",
    "_deg": "deg",
    "_pct": "%",
    "_mm": "mm",
    "_cm3": "cm3",
    "_mn_per_m": "MN/m",
    "_mnm_per_m": "MN m/m",
    "_m": "m",
}
"""The unit at the end of a name."""

GROUND_COLUMNS = {
    "cover_m",
    "unit_weight_kn_m3",
    "vertical_stress_mpa",
    "stress_ratio",
    "intact_strength_mpa",
    "mi",
    "gsi",
    "disturbance",
    "poisson_ratio",
    "dilation_deg",
    "intact_modulus_mpa",
    "modulus_ratio",
    "rock_mass_modulus_mpa",
    "residual_gsi",
    "mb",
    "s",
    "a",
    "friction_angle_deg",
    "cohesion_mpa",
    "residual_mb",
    "residual_s",
    "residual_a",
    "residual_friction_angle_deg",
    "residual_cohesion_mpa",
    "critical_shear_strain",
    "disturbed_thickness_m",
    "rmr89",
    "rmr89_dry",
    "q",
    "q_prime",
    "jcond89",
    "rqd_pct",
    "block_volume_cm3",
    "joint_condition",
    "point_load_mpa",
    "point_load_factor",
    "water_head_m",
    "inflow_l_min_10m",
    "joint_set_count",
    "joint_set_number",
    "joint_roughness_number",
    "excavation_support_ratio",
    "joint_spacing_m",
    "block_width_m",
    "swelling_minerals",
    "excavation",
    "heterogeneous_ground",
    "creeping_ground",
    "site_hazards",
    "neighbour_clear_distance_m",
    "portal_distance_m",
    "boundary_tolerance_m",
    "fault_width_m",
}
"""The names that ground tables share with project files, options and code."""


def unit_in(name: str) -> str | None:
    """The unit that a name ends in; None where it says none."""
    if name == "inflow_l_min_10m":
        return "L/min/10m"
    return next((unit for suffix, unit in UNITS.items() if name.endswith(suffix)), None)


def test_every_output_column_stands_in_the_vocabulary_or_is_named_there():
    assert sorted(set(COLUMNS) - set(QUANTITIES) - set(WORDS)) == []


def test_every_output_column_with_a_unit_is_a_quantity():
    assert [name for name in COLUMNS if unit_in(name) and name not in QUANTITIES] == []


@pytest.mark.parametrize("name", sorted(QUANTITIES))
def test_a_quantity_has_the_unit_that_its_name_says(name):
    quantity = QUANTITIES[name]
    assert quantity.name == name
    assert quantity.unit == (unit_in(name) or "")
    assert quantity.meaning


@pytest.mark.parametrize("name", sorted(GROUND))
def test_a_ground_column_says_what_is_allowed(name):
    quantity = GROUND[name]
    if quantity.sort is Sort.CHOICE:
        assert quantity.choices
    else:
        assert quantity.allowed() != "a number"


def test_ground_columns_are_those_of_the_contract():
    assert set(GROUND) == GROUND_COLUMNS
