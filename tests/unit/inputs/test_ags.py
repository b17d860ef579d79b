"""AGS 4 files, invented here: statistics by geology code, units, and what is refused."""

from __future__ import annotations

import statistics
import sys
from pathlib import Path

import pytest
from end_to_end.projects import Damage, all_of, content
from end_to_end.projects import replaced as replaced_in
from unit.inputs.reading import read as read_project
from unit.inputs.reading import told as told_of_project

from tunnelcalc.api import RawTable
from tunnelcalc.builtin.ags_reader import AgsReader
from tunnelcalc.errors import InputError

GROUPS = {
    "PROJ": (("PROJ_ID", "PROJ_NAME"), ("", ""), ("ID", "X"), [("X1", "Invented drive")]),
    "LOCA": (("LOCA_ID",), ("",), ("ID",), [("B1",), ("B2",)]),
    "GEOL": (
        ("LOCA_ID", "GEOL_TOP", "GEOL_BASE", "GEOL_DESC", "GEOL_GEOL"),
        ("", "m", "m", "", ""),
        ("ID", "2DP", "2DP", "X", "PA"),
        [
            ("B1", "0.00", "3.00", "Invented soil", ""),
            ("B1", "3.00", "20.00", "Invented sandstone", "SST"),
            ("B1", "20.00", "30.00", "Invented siltstone", "SLT"),
            ("B2", "0.00", "15.00", "Invented sandstone", "SST"),
        ],
    ),
    "CORE": (
        ("LOCA_ID", "CORE_TOP", "CORE_BASE", "CORE_RQD"),
        ("", "m", "m", "%"),
        ("ID", "2DP", "2DP", "0DP"),
        [
            ("B1", "2.00", "4.00", "10"),
            ("B1", "4.00", "6.00", "70"),
            ("B1", "6.00", "8.00", "80"),
            ("B1", "19.00", "21.00", "35"),
            ("B1", "21.00", "23.00", "40"),
            ("B2", "1.00", "15.00", "84"),
            ("B2", "15.00", "16.00", "90"),
            ("B1", "8.00", "9.00", ""),
        ],
    ),
    "RPLT": (
        ("LOCA_ID", "SAMP_TOP", "SPEC_DPTH", "RPLT_PLSI"),
        ("", "m", "m", "MN/m2"),
        ("ID", "2DP", "2DP", "2DP"),
        [("B1", "2.00", "5.00", "2.5"), ("B2", "3.00", "", "3.5"), ("B9", "3.00", "3.00", "9")],
    ),
    "RUCS": (
        ("LOCA_ID", "SAMP_TOP", "SPEC_DPTH", "RUCS_UCS"),
        ("", "m", "m", "MPa"),
        ("ID", "2DP", "2DP", "3SF"),
        [
            ("B1", "3.00", "3.00", "50.5"),
            ("B1", "9.00", "9.10", "61"),
            ("B1", "20.00", "20.00", "12.5"),
        ],
    ),
}


def ags(*without: str) -> str:
    """The file, as its parts are written one below the other."""
    lines = []
    for group, (headings, units, types, rows) in GROUPS.items():
        if group in without:
            continue
        lines.append(("GROUP", group))
        lines.append(("HEADING", *headings))
        lines.append(("UNIT", *units))
        lines.append(("TYPE", *types))
        lines.extend(("DATA", *row) for row in rows)
        lines.append(())
    return "".join(",".join(f'"{cell}"' for cell in line) + "\r\n" for line in lines)


def read(text: str) -> RawTable:
    return AgsReader().read("site.ags", text.encode())


def told(text: str | bytes) -> list[str]:
    with pytest.raises(InputError) as caught:
        AgsReader().read("site.ags", text.encode() if isinstance(text, str) else text)
    return "\n".join(str(problem) for problem in caught.value.problems).splitlines()


def replaced(old: str, new: str) -> str:
    assert ags().count(old) == 1
    return ags().replace(old, new)


def column(table: RawTable, name: str) -> list[str]:
    return list(table.columns[table.header.index(name)])


def test_statistics_stand_by_geology_code():
    """Only what lies wholly in one coded stratum; a depth on a boundary belongs below it."""
    table = read(ags())
    assert column(table, "ground_unit") == ["SLT", "SST"]
    expected = {
        "rqd_pct": ([40], [70, 80, 84]),
        "point_load_mpa": ([], [2.5, 3.5]),
        "intact_strength_mpa": ([12.5], [50.5, 61]),
    }
    for name, of_units in expected.items():
        for row, values in enumerate(of_units):
            count = str(len(values)) if values else ""
            assert column(table, f"{name}_tests")[row] == count
            mean, deviation = (column(table, f"{name}_{word}")[row] for word in ("mean", "sd"))
            assert (mean == "") == (not values)
            assert (deviation == "") == (len(values) < 2)
            if values:
                assert float(mean) == pytest.approx(statistics.mean(values), rel=1e-15)
            if deviation:
                assert float(deviation) == pytest.approx(statistics.stdev(values), rel=1e-15)


def test_the_table_says_what_was_used_and_what_was_left_out():
    notes = read(ags()).notes
    assert notes[:5] == (
        "site.ags: rqd_pct from 4 core runs (CORE), each counted once whatever its length",
        "site.ags: 3 of 7 core runs left out, in no single stratum with a geology code",
        "site.ags: point_load_mpa from 2 point load tests (RPLT)",
        "site.ags: 1 of 3 point load tests left out, in no single stratum with a geology code",
        "site.ags: intact_strength_mpa from 3 uniaxial tests (RUCS)",
    )
    assert notes[5] == "site.ags: groups that are not read: LOCA, PROJ"


def test_breaches_of_the_rules_are_told_and_cost_nothing():
    notes = read(ags()).notes
    assert any(note.startswith("site.ags: breaks AGS Format Rule 14") for note in notes)
    assert read(ags()).columns == read(ags("PROJ")).columns


def test_overlapping_strata_leave_a_test_without_unit():
    text = replaced('"B1","20.00","30.00","Invented silt', '"B1","8.00","30.00","Invented silt')
    assert column(read(text), "intact_strength_mpa_tests") == ["1", "1"]


@pytest.mark.parametrize("unit", ["MPa", "N/mm2"])
def test_units_that_need_no_factor_are_read(unit: str):
    assert read(replaced("MN/m2", unit)).columns == read(ags()).columns


REFUSED = {
    "unit": (
        replaced('"m","m","MPa"', '"m","m","kPa"'),
        [
            'site.ags:46: RUCS heading RUCS_UCS has the unit "kPa"',
            "  allowed: MPa or MN/m2 or N/mm2",
            "  fix: have the file written in this unit: values are not converted",
        ],
    ),
    "unit-of-depth": (
        replaced('"UNIT","","m","m","",""', '"UNIT","","ft","m","",""'),
        [
            'site.ags:16: GEOL heading GEOL_TOP has the unit "ft"',
            "  allowed: m",
            "  fix: have the file written in this unit: values are not converted",
        ],
    ),
    "no-unit": (
        replaced('"m","m","%"', '"m","m",""'),
        [
            "site.ags:25: CORE heading CORE_RQD has no unit",
            "  allowed: %",
            "  fix: have the file written in this unit: values are not converted",
        ],
    ),
    "no-number": (
        replaced('"70"', '"<70"'),
        [
            'site.ags:28: CORE heading CORE_RQD holds "<70", which is not a number',
            "  allowed: a number at least 0, at most 100, in %",
            "  fix: write a plain number with a decimal point, without unit or thousands separator",
        ],
    ),
    "out-of-range": (
        replaced('"84"', '"184"'),
        [
            'site.ags:32: CORE heading CORE_RQD holds "184", which is out of range',
            "  allowed: a number at least 0, at most 100, in %",
            "  fix: correct the value, and check its unit",
        ],
    ),
    "no-strata": (
        ags("GEOL"),
        [
            "site.ags: has no group GEOL",
            "  allowed: strata with depths and geology codes",
            "  fix: have the file written with the group GEOL and geology codes",
        ],
    ),
    "no-codes": (
        replaced("GEOL_GEOL", "GEOL_LEG"),
        [
            "site.ags:15: lacks GEOL GEOL_GEOL",
            "  allowed: strata with depths and geology codes",
            "  fix: have the file written with the group GEOL and geology codes",
        ],
    ),
    "no-tests": (
        ags("CORE", "RPLT", "RUCS"),
        [
            "site.ags: has no core run, point load or uniaxial test in a stratum with a geology "
            "code",
            "  allowed: values of CORE_RQD, RPLT_PLSI or RUCS_UCS",
            "  fix: have the file written with these groups, or enter the values in a units table",
        ],
    ),
    "row-too-short": (
        replaced('"B1","4.00","6.00","70"', '"B1","4.00","6.00"'),
        [
            "site.ags:28: is not AGS 4 data: Line 28 does not have the same number of entries as "
            "the HEADING row in CORE.",
            "  allowed: GROUP, HEADING, UNIT, TYPE and DATA rows, with quoted values",
            "  fix: have the file checked and written again by whoever made it",
        ],
    ),
    "no-ags": (
        "from_m,to_m\n0,1\n",
        [
            "site.ags: has no group GEOL",
            "  allowed: strata with depths and geology codes",
            "  fix: have the file written with the group GEOL and geology codes",
        ],
    ),
    "data-before-heading": (
        '"GROUP","GEOL"\r\n"DATA","B1"\r\n',
        [
            "site.ags: is not AGS 4 data: KeyError: 'GEOL'",
            "  allowed: GROUP, HEADING, UNIT, TYPE and DATA rows, with quoted values",
            "  fix: have the file checked and written again by whoever made it",
        ],
    ),
}


@pytest.mark.parametrize(("text", "lines"), REFUSED.values(), ids=REFUSED.keys())
def test_what_cannot_be_used_is_refused(text: str, lines: list[str]):
    assert told(text) == lines


def test_text_that_is_not_utf_8_is_refused():
    assert told(ags().replace("soil", "soil \u00b1").encode("cp1252"))[0] == (
        "site.ags:18: is not UTF-8 text: byte 0xb1 cannot be read"
    )


def test_a_file_that_is_too_large_is_refused():
    assert told(bytes(40_000_000))[0] == "site.ags: has 40 MB"


def test_without_the_library_the_remedy_is_told(monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setitem(sys.modules, "python_ags4", None)
    assert told(ags()) == [
        "site.ags: needs the library python-ags4, which is not installed",
        "  fix: install python-ags4, or tunnelcalc with its extra ags",
    ]


def test_nothing_is_printed(capfd: pytest.CaptureFixture[str]):
    told(REFUSED["row-too-short"][0])
    read(ags())
    assert capfd.readouterr() == ("", "")


GROUND = """\
from_m,to_m,ground_unit,cover_m,unit_weight_kn_m3,mi,gsi,disturbance,poisson_ratio
0,40,SST,60,25,17,62,0,0.25
40,80,SLT,75,25.5,7,35,0,0.28
"""


def with_ags_units(values: str) -> Damage:
    return all_of(
        content("ground.csv", GROUND.encode()),
        content("site.ags", ags().encode()),
        replaced_in("project.yaml", "units: units.csv", f"units: site.ags\n{values}"),
    )


def test_a_project_says_how_values_follow_from_the_statistics(tmp_path: Path):
    project = read_project(tmp_path, with_ags_units("  values: probable"))
    by_unit = dict(
        zip(project.ground["ground_unit"], project.ground["intact_strength_mpa"], strict=True)
    )
    assert by_unit == {"SST": 55.75, "SLT": 12.5}


def test_the_mean_is_not_taken_as_the_value_unasked(tmp_path: Path):
    told_here = told_of_project(tmp_path, with_ags_units(""))
    assert told_here
    assert all("intact_strength_mpa" in line for line in told_here)
