"""Headers as people write them, the project's aliases, and units that differ."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import all_of, replaced
from unit.inputs.reading import read, told

from tunnelcalc.errors import Problems
from tunnelcalc.inputs.headers import understood
from tunnelcalc.plugin.raw_table import RawTable

UNITS = {"from_m": "m", "to_m": "m", "ground_unit": ""}


def renamed(
    *header: str, aliases: dict[str, str] | None = None, kept: tuple[str, ...] = ()
) -> tuple[tuple[str, ...], list[str]]:
    """The names that a header becomes, and the problems, line by line."""
    columns = tuple([str(number)] for number, _ in enumerate(header))
    table = RawTable("g.csv", header, 1, columns, [2])
    problems = Problems()
    found = understood(table, aliases or {}, UNITS, kept, problems)
    assert len(found.header) == len(found.columns) == len(found.column_numbers)
    for name, column in zip(found.column_numbers, found.columns, strict=True):
        assert column == [str(name - 1)]
    return found.header, "\n".join(str(problem) for problem in problems).splitlines()


UNDERSTOOD = {
    "cover_m": "cover_m",
    "Cover_M": "cover_m",
    "cover (m)": "cover_m",
    "Cover [m]": "cover_m",
    " COVER  (metres) ": "cover_m",
    "cover_m (m)": "cover_m",
    "From (m)": "from_m",
    "To [m]": "to_m",
    "Ground unit": "ground_unit",
    "Intact strength (MPa)": "intact_strength_mpa",
    "Intact\nstrength\n(MPa)": "intact_strength_mpa",
    "intact-strength (N/mm\u00b2)": "intact_strength_mpa",
    "Intact strength (MN/m2)": "intact_strength_mpa",
    "Intact strength (MPa) sd": "intact_strength_mpa_sd",
    "Intact strength sd (MPa)": "intact_strength_mpa_sd",
    "Intact strength mean (MPa)": "intact_strength_mpa_mean",
    "Intact strength tests": "intact_strength_mpa_tests",
    "Unit weight (kN/m\u00b3)": "unit_weight_kn_m3",
    "unit weight [kN/m^3]": "unit_weight_kn_m3",
    "Stress ratio (-)": "stress_ratio",
    "Stress ratio": "stress_ratio",
    "Dilation (\u00b0)": "dilation_deg",
    "RQD (%)": "rqd_pct",
    "Block volume (cm\u00b3)": "block_volume_cm3",
    "Inflow (L/min/10m)": "inflow_l_min_10m",
    "GSI": "gsi",
    "Poisson ratio": "poisson_ratio",
}


@pytest.mark.parametrize(("header", "name"), UNDERSTOOD.items(), ids=map(repr, UNDERSTOOD))
def test_a_header_that_is_not_ambiguous_is_understood(header: str, name: str):
    assert renamed(header) == ((name,), [])


REFUSED = {
    "cover (ft)": (
        "cover_m",
        'states "ft", and cover_m is in m',
        "  allowed: values in m",
        "  fix: convert the values, and write cover_m",
    ),
    "intact strength (GPa)": (
        "intact_strength_mpa",
        'states "GPa", and intact_strength_mpa is in MPa',
        "  allowed: values in MPa",
        "  fix: convert the values, and write intact_strength_mpa",
    ),
    "unit weight (t/m3)": (
        "unit_weight_kn_m3",
        'states "t/m3", and unit_weight_kn_m3 is in kN/m3',
        "  allowed: values in kN/m3",
        "  fix: convert the values, and write unit_weight_kn_m3",
    ),
    "disturbance (%)": (
        "disturbance",
        'states "%", and disturbance is without unit',
        "  allowed: values without unit",
        "  fix: write disturbance, if the values have no unit",
    ),
    "cover ()": (
        "cover_m",
        'states "", and cover_m is in m',
        "  allowed: values in m",
        "  fix: convert the values, and write cover_m",
    ),
    "Cover": (
        "cover_m",
        "states no unit",
        "  allowed: cover_m, in m",
        "  fix: if the values are in m, write cover_m",
    ),
    "From": (
        "from_m",
        "states no unit",
        "  allowed: from_m, in m",
        "  fix: if the values are in m, write from_m",
    ),
}


@pytest.mark.parametrize(("header", "case"), REFUSED.items(), ids=map(repr, REFUSED))
def test_a_unit_that_differs_or_is_not_stated_is_refused(header: str, case: tuple[str, ...]):
    name, message, *rest = case
    assert renamed("gsi", header) == (
        ("gsi", name),
        [f'g.csv:1:2: column "{header}" {message}', *rest],
    )


def test_a_header_that_fits_several_names_is_refused_and_leaves_the_table():
    assert renamed("gsi", "Modulus (MPa)", "mi") == (
        ("gsi", "mi"),
        [
            'g.csv:1:2: column "Modulus (MPa)" may mean several quantities',
            "  allowed: intact_modulus_mpa, rock_mass_modulus_mpa",
            "  fix: write the one that is meant, or name it in the project under ground: aliases",
        ],
    )


@pytest.mark.parametrize(
    "header",
    ["Q'", "remarks", "remarks (m)", "strength (MPa)", "psi", "(m)", "", "()", "_", "((m)"],
)
def test_a_header_that_means_nothing_for_certain_stays_as_it_is(header: str):
    assert renamed(header) == ((header,), [])


def test_a_column_that_the_project_keeps_means_nothing_to_the_program():
    assert renamed("Cover (ft)", kept=("Cover (ft)",)) == (("Cover (ft)",), [])


def test_an_alias_is_taken_with_and_without_its_unit():
    aliases = {"UCS": "intact_strength_mpa", "Depth of rock (m)": "cover_m", "k0": "stress_ratio"}
    assert renamed("UCS", "Depth of  rock (m)", "k0 (-)", aliases=aliases) == (
        ("intact_strength_mpa", "cover_m", "stress_ratio"),
        [],
    )
    assert renamed("UCS (MPa)", aliases=aliases) == (("intact_strength_mpa",), [])


def test_an_alias_does_not_hide_a_unit_that_differs():
    aliases = {"UCS": "intact_strength_mpa", "H (ft)": "cover_m"}
    header, lines = renamed("UCS (kPa)", "H (ft)", aliases=aliases)
    assert header == ("intact_strength_mpa", "cover_m")
    assert lines[::3] == [
        'g.csv:1:1: column "UCS (kPa)" states "kPa", and intact_strength_mpa is in MPa',
        'g.csv:1:2: column "H (ft)" states "ft", and cover_m is in m',
    ]


def with_aliases(text: str):
    return replaced("project.yaml", "  units: units.csv\n", f"  units: units.csv\n{text}")


def test_aliases_hold_for_both_tables(tmp_path: Path):
    project = read(
        tmp_path,
        with_aliases("  aliases: {H: cover_m, UCS: intact_strength_mpa}\n"),
        replaced("ground.csv", "cover_m", "H"),
        replaced("units.csv", "intact_strength_mpa", "UCS"),
    )
    assert set(project.ground["cover_m"]) == {60, 75, 90, 200}
    assert set(project.ground["intact_strength_mpa"]) == {55, 20, 3}


def test_wrong_aliases_are_told(tmp_path: Path):
    aliases = "  aliases: {UCS: intact_strenght_mpa, gsi: mi, x: y, z: [1]}\n"
    assert told(tmp_path, with_aliases(aliases)) == [
        'project.yaml:8:13: key "ground.aliases.UCS" holds "intact_strenght_mpa", which is no '
        "column of a ground or units table",
        'project.yaml:8:39: key "ground.aliases.gsi" is a column of the program\'s own',
        'project.yaml:8:48: key "ground.aliases.x" holds "y", which is no column of a ground or '
        "units table",
        'project.yaml:8:54: key "ground.aliases.z" holds a list',
    ]


def test_two_headers_of_one_meaning_are_told(tmp_path: Path):
    damage = all_of(
        replaced("ground.csv", "block_width_m", "Cover (m)"),
    )
    assert told(tmp_path, damage) == [
        'ground.csv:1:5: column "cover_m" stands twice, first in column 4'
    ]


def test_a_unit_that_differs_is_told_once(tmp_path: Path):
    assert told(tmp_path, replaced("ground.csv", "cover_m", "cover (ft)")) == [
        'ground.csv:1:4: column "cover (ft)" states "ft", and cover_m is in m'
    ]
