"""Cells and columns that a run refuses, with the whole message."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import all_of, replaced
from end_to_end.refusals import Case, assert_refused

CASES: dict[str, Case] = {
    "not-a-number": (
        replaced("ground.csv", "siltstone,75", "siltstone,NaN"),
        'ground.csv:3:4: column "cover_m" holds "NaN", which is not a number',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write a plain number with a decimal point, without unit or thousands separator",
    ),
    "infinite": (
        replaced("ground.csv", "siltstone,75", "siltstone,-inf"),
        'ground.csv:3:4: column "cover_m" holds "-inf", which is not a number',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write a plain number with a decimal point, without unit or thousands separator",
    ),
    "too-large-for-a-double": (
        replaced("ground.csv", "siltstone,75", "siltstone,1e400"),
        'ground.csv:3:4: column "cover_m" holds "1e400", which is out of range',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: correct the value, and check its unit",
    ),
    "decimal-comma": (
        replaced("ground.csv", "siltstone,75", 'siltstone,"75,5"'),
        'ground.csv:3:4: column "cover_m" holds "75,5", which is not a number',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write 75.5, with a decimal point",
    ),
    "thousands-comma": (
        replaced("ground.csv", "siltstone,75", 'siltstone,"1,075"'),
        'ground.csv:3:4: column "cover_m" holds "1,075", which is not a number',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write 1075 or 1.075, whichever is meant",
    ),
    "text-in-a-number": (
        replaced("ground.csv", "siltstone,75", "siltstone,75 m"),
        'ground.csv:3:4: column "cover_m" holds "75 m", which is not a number',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write a plain number with a decimal point, without unit or thousands separator",
    ),
    "negative-cover": (
        replaced("ground.csv", "siltstone,75", "siltstone,-75"),
        'ground.csv:3:4: column "cover_m" holds "-75", which is out of range',
        "  interval 45 to 70 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: correct the value, and check its unit",
    ),
    "gsi-0": (
        replaced("units.csv", "7,35,0,", "7,0,0,"),
        'units.csv:3:6: column "gsi" holds "0", which is out of range',
        '  ground unit "siltstone"; allowed: a number above 0, at most 100',
        "  fix: correct the value, and check its unit",
    ),
    "gsi-above-100": (
        replaced("units.csv", "7,35,0,", "7,100.5,0,"),
        'units.csv:3:6: column "gsi" holds "100.5", which is out of range',
        '  ground unit "siltstone"; allowed: a number above 0, at most 100',
        "  fix: correct the value, and check its unit",
    ),
    "disturbance-above-1": (
        replaced("units.csv", "7,35,0,", "7,35,1.01,"),
        'units.csv:3:7: column "disturbance" holds "1.01", which is out of range',
        '  ground unit "siltstone"; allowed: a number at least 0, at most 1',
        "  fix: correct the value, and check its unit",
    ),
    "poisson-ratio-of-a-liquid": (
        replaced("units.csv", "0,0.28,2", "0,0.5,2"),
        'units.csv:3:8: column "poisson_ratio" holds "0.5", which is out of range',
        '  ground unit "siltstone"; allowed: a number at least 0, below 0.5',
        "  fix: correct the value, and check its unit",
    ),
    "part-of-a-joint-set": (
        all_of(
            replaced("ground.csv", "block_width_m\n", "joint_set_count\n"),
            replaced("ground.csv", "60,1.1\n", "60,3\n"),
            replaced("ground.csv", "75,0.4\n", "75,2.5\n"),
            replaced("ground.csv", "90,1.1\n", "90,2\n"),
        ),
        'ground.csv:3:5: column "joint_set_count" holds "2.5", which is out of range',
        "  interval 45 to 70 m; allowed: a whole number at least 0, at most 20",
        "  fix: correct the value, and check its unit",
    ),
    "word-that-is-no-choice": (
        all_of(
            replaced("ground.csv", "block_width_m\n", "swelling_minerals\n"),
            replaced("ground.csv", "60,1.1\n", "60,None\n"),
            replaced("ground.csv", "75,0.4\n", "75,none\n"),
            replaced("ground.csv", "90,1.1\n", "90,present\n"),
        ),
        'ground.csv:2:5: column "swelling_minerals" holds "None"',
        "  interval 0 to 45 m; allowed: none or present",
        "  fix: write one of the allowed words, or leave the cell empty",
    ),
    "no-stress-here": (
        replaced("ground.csv", "siltstone,75,0.4", "siltstone,,0.4"),
        "ground.csv:3: the in-situ stress has no value here and none for its ground unit",
        (
            '  interval 45 to 70 m, ground unit "siltstone"; allowed: vertical_stress_mpa, '
            "or cover_m with unit_weight_kn_m3"
        ),
        "  fix: fill it in; there is no default",
    ),
    "no-value-of-the-unit": (
        replaced("units.csv", "siltstone,25.5,0.9,20", "siltstone,25.5,0.9,"),
        (
            'ground.csv:3: column "intact_strength_mpa" has no value here and none for its '
            "ground unit"
        ),
        (
            '  interval 45 to 70 m, ground unit "siltstone"; allowed: a number above 0, at '
            "most 1000, in MPa"
        ),
        "  fix: fill it in; there is no default",
    ),
    "both-moduli": (
        all_of(
            replaced("units.csv", "modulus_ratio\n", "modulus_ratio,intact_modulus_mpa\n"),
            replaced("units.csv", "0,275\n", "0,275,\n"),
            replaced("units.csv", "2,350\n", "2,350,7000\n"),
            replaced("units.csv", "0.3,,200\n", "0.3,,,600\n"),
        ),
        'units.csv:3:10: column "modulus_ratio" stands beside intact_modulus_mpa',
        "  allowed: one of the two in a row",
        "  fix: keep the one that was measured",
    ),
    "no-start": (
        replaced("ground.csv", "45,70", "  ,70"),
        'ground.csv:3:1: column "from_m" is empty',
        "  allowed: a chainage",
        "  fix: write the chainage",
    ),
    "column-missing": (
        replaced(
            "units.csv",
            "ground_unit,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,mi,gsi",
            "ground_unit,unit_weight_kn_m3,stress_ratio,intact_strength_mpa,mi,gsi_sd",
        ),
        'ground.csv:1: column "gsi" is missing: neither ground.csv nor units.csv gives it',
        "  allowed: a number above 0, at most 100",
        "  fix: add the column; there is no default",
    ),
    "stress-missing": (
        replaced("units.csv", "unit_weight_kn_m3", "portal_distance_m"),
        "ground.csv:1: the in-situ stress is missing: neither ground.csv nor units.csv gives it",
        "  allowed: vertical_stress_mpa, or cover_m with unit_weight_kn_m3",
        "  fix: add the column; there is no default",
    ),
    "column-misspelt": (
        replaced("ground.csv", "block_width_m", "block_widht_m"),
        'ground.csv:1:5: column "block_widht_m" is unknown',
        '  fix: did you mean "block_width_m"?',
    ),
    "column-unknown": (
        replaced("ground.csv", "block_width_m", "remarks"),
        'ground.csv:1:5: column "remarks" is unknown',
        "  fix: say under ground: aliases what it means, carry it along under other_columns, or "
        "remove it",
    ),
    "column-without-name": (
        replaced("ground.csv", "cover_m,block_width_m", "cover_m,"),
        'ground.csv:1:5: column "" is unknown',
        "  fix: give the column a name, or remove it",
    ),
    "title-above-the-header": (
        replaced(
            "ground.csv",
            "from_m,to_m,ground_unit,cover_m",
            "Invented drive,,,,\nfrom_m,to_m,ground_unit,cover_m",
        ),
        'ground.csv:1: column "from_m" is missing',
        "  allowed: the columns from_m, to_m",
        "  fix: add it",
        'ground.csv:1: column "to_m" is missing',
        "  allowed: the columns from_m, to_m",
        "  fix: add it",
        "ground.csv:1: has 4 columns without a name",
        "  allowed: a name over every column",
        "  fix: begin the table with its header row, without a title above it",
        'ground.csv:1: column "ground_unit" is missing',
        "  fix: add it: the project has a units table",
        'ground.csv:1:1: column "Invented drive" is unknown',
        "  fix: say under ground: aliases what it means, carry it along under other_columns, or "
        "remove it",
    ),
    "column-twice": (
        replaced("ground.csv", "cover_m,block_width_m", "cover_m,cover_m"),
        'ground.csv:1:5: column "cover_m" stands twice, first in column 4',
        "  fix: keep one of the two",
    ),
    "units-without-unit": (
        replaced("units.csv", "ground_unit", "unit"),
        'units.csv:1: column "ground_unit" is missing',
        "  allowed: the columns ground_unit",
        "  fix: add it",
        'units.csv:1:1: column "unit" is unknown',
        "  fix: say under ground: aliases what it means, carry it along under other_columns, or "
        "remove it",
    ),
    "row-with-a-cell-too-many-beside-other-faults": (
        all_of(
            replaced("ground.csv", "0,45,sandstone,60,1.1", "0,45,sandstone,60,1,1"),
            replaced("ground.csv", "70,120,sandstone,90,", "70,120,sandston,90x,"),
        ),
        "ground.csv:2: has 6 cells, the header has 5",
        "  allowed: 5 cells",
        "  fix: write decimal points, not commas, and put text with commas in quotes",
        'ground.csv:4:3: column "ground_unit" holds "sandston", which units.csv does not name',
        "  allowed: gouge, sandstone, siltstone",
        '  fix: did you mean "sandstone"?',
        'ground.csv:4:4: column "cover_m" holds "90x", which is not a number',
        "  interval 70 to 120 m; allowed: a number at least 0, at most 10000, in m",
        "  fix: write a plain number with a decimal point, without unit or thousands separator",
    ),
    "carried-column-that-no-table-has": (
        replaced(
            "project.yaml",
            "  units: units.csv\n",
            "  units: units.csv\n  other_columns: [borehole]\n",
        ),
        'project.yaml:8:3: key "ground.other_columns" names "borehole", a column that no table has',
        "  allowed: from_m, to_m, ground_unit, cover_m, block_width_m, unit_weight_kn_m3, "
        "stress_ratio, intact_strength_mpa, mi, gsi, disturbance, poisson_ratio, dilation_deg, "
        "modulus_ratio",
        "  fix: remove the entry",
    ),
    "unit-with-a-semicolon": (
        replaced("units.csv", "\nsiltstone", "\nsilt;stone"),
        'ground.csv:3:3: column "ground_unit" holds "siltstone", which units.csv does not name',
        "  allowed: gouge, sandstone, silt;stone",
        '  fix: did you mean "silt;stone"?',
        'units.csv:3:1: column "ground_unit" holds "silt;stone", with a semicolon',
        '  ground unit "silt;stone"; allowed: text without a semicolon, which joins units in the '
        "schedule",
        "  fix: give the unit a name without it",
    ),
    "column-of-the-programs-own": (
        replaced(
            "project.yaml",
            "  units: units.csv\n",
            "  units: units.csv\n  other_columns: [radius_m]\n",
        ),
        (
            'project.yaml:8:19: key "ground.other_columns" names "radius_m", a column of '
            "the program's own"
        ),
        "  allowed: names that have no meaning to the program",
        "  fix: remove the entry, or give the column another name",
    ),
}


@pytest.mark.parametrize("case", CASES.values(), ids=CASES.keys())
def test_a_table_with_a_wrong_cell_or_column_is_refused(project: Path, case: Case):
    assert_refused(project, case)
