"""The ends of every range that a ground value may have, and what lies just beyond them."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import UNITS, Damage, content
from unit.inputs.reading import read, told

RANGES = [
    ("unit_weight_kn_m3", ["5", "60"], ["4.9999", "60.0001"]),
    ("stress_ratio", ["1e-6", "10"], ["0", "10.0001"]),
    ("intact_strength_mpa", ["1e-6", "1000"], ["0", "1000.1"]),
    ("mi", ["1e-6", "60"], ["0", "60.001"]),
    ("gsi", ["1e-6", "100"], ["0", "100.0001"]),
    ("disturbance", ["0", "1"], ["-0.0001", "1.0001"]),
    ("poisson_ratio", ["0", "0.49999"], ["-0.0001", "0.5"]),
    ("dilation_deg", ["0", "60"], ["-0.0001", "60.0001"]),
    ("modulus_ratio", ["1e-6", "10000"], ["0", "10000.1"]),
    ("cover_m", ["0", "10000"], ["-0.001", "10000.1"]),
    ("vertical_stress_mpa", ["1e-6", "500"], ["0", "500.1"]),
    ("intact_modulus_mpa", ["1e-6", "1e6"], ["0", "1000001"]),
    ("rock_mass_modulus_mpa", ["1e-6", "1e6"], ["0", "1000001"]),
    ("residual_gsi", ["1e-6", "100"], ["0", "100.1"]),
    ("mb", ["1e-6", "60"], ["0", "60.1"]),
    ("s", ["0", "1"], ["-0.1", "1.001"]),
    ("a", ["0.5", "0.9999"], ["0.4999", "1"]),
    ("friction_angle_deg", ["0", "80"], ["-0.1", "80.1"]),
    ("cohesion_mpa", ["0", "500"], ["-0.1", "500.1"]),
    ("critical_shear_strain", ["1e-9", "1"], ["0", "1.001"]),
    ("disturbed_thickness_m", ["0.01", "100"], ["0", "-0.1", "100.1"]),
    ("rmr89", ["0", "100"], ["-1", "100.1"]),
    ("rqd_pct", ["0", "100"], ["-1", "101"]),
    ("jcond89", ["0", "30"], ["-1", "31"]),
    ("joint_set_count", ["0", "20"], ["2.5", "21"]),
    ("q", ["1e-9", "1e9"], ["0", "-1"]),
    ("water_head_m", ["0", "1e9"], ["-0.1"]),
    ("block_width_m", ["1e-9", "1e9"], ["0"]),
    ("gsi_sd", ["0", "1e9"], ["-0.1"]),
]
OVERRIDDEN = {"cover_m", "block_width_m"}
"""The small project's ground table gives these itself."""


def of_siltstone(column: str, cell: str) -> Damage:
    """One value of the second unit; columns that the table lacks are added."""
    table = [line.split(",") for line in UNITS.splitlines()]
    if column not in table[0]:
        table = [[*line, column if number == 0 else ""] for number, line in enumerate(table)]
    if column == "intact_modulus_mpa":
        table[2][table[0].index("modulus_ratio")] = ""
    if column == "residual_gsi":
        table[2][table[0].index("gsi")] = "100"  # the residual one is not above it
    table[2][table[0].index(column)] = cell
    return content("units.csv", "\n".join(",".join(line) for line in table).encode())


@pytest.mark.parametrize(
    ("column", "cell"),
    [(column, cell) for column, inside, _ in RANGES for cell in inside if column not in OVERRIDDEN],
)
def test_the_ends_of_a_range_are_accepted(tmp_path: Path, column: str, cell: str):
    project = read(tmp_path, of_siltstone(column, cell))
    values = project.ground[column][project.ground["ground_unit"] == "siltstone"]
    assert set(values.tolist()) == {float(cell)}


@pytest.mark.parametrize(
    ("column", "cell"), [(column, cell) for column, _, outside in RANGES for cell in outside]
)
def test_what_lies_beyond_a_range_is_refused(tmp_path: Path, column: str, cell: str):
    (first,) = told(tmp_path, of_siltstone(column, cell))
    assert first.startswith("units.csv:3:")
    assert first.endswith(f'column "{column}" holds "{cell}", which is out of range')
