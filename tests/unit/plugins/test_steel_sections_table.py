"""The table of profiles and the check that its rows must pass."""

import csv
import io

import numpy as np
import pytest
from tunnelcalc_steel_sets.sections_table import (
    COLUMNS,
    DIMENSIONS,
    half_of_last_digit,
    i_section_properties,
    packaged_text,
    read_sections,
    table_faults,
)

ROWS = list(csv.DictReader(io.StringIO(packaged_text())))
HEB_200 = next(row for row in ROWS if row["designation"] == "HEB 200")


def test_every_row_of_the_packaged_table_is_sound_and_marked():
    assert table_faults(ROWS) == []
    assert len(read_sections(packaged_text())) == len(ROWS) == 79
    assert {row["source"] for row in ROWS} == {"EN 10365 nominal, from memory"}


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["designation"])
@pytest.mark.parametrize("column", [c for c in DIMENSIONS if c != "root_radius_mm"])
def test_a_slip_of_five_per_cent_in_a_dimension_is_found(row, column):
    slipped = {**row, column: f"{float(row[column]) * 1.05:.3f}"}
    assert [fault.designation for fault in table_faults([slipped])]


@pytest.mark.parametrize("row", ROWS, ids=lambda row: row["designation"])
def test_a_slip_in_the_root_radius_is_found(row):
    """The smallest step between the radii of the table is 2 mm."""
    slipped = {**row, "root_radius_mm": str(float(row["root_radius_mm"]) + 2)}
    assert table_faults([slipped])


@pytest.mark.parametrize("column", ["area_cm2", "inertia_cm4"])
def test_a_slip_in_the_last_digits_is_found_and_named(column):
    slipped = {**HEB_200, column: {"area_cm2": "78.4", "inertia_cm4": "5698"}[column]}
    (fault,) = table_faults([slipped])
    assert (fault.designation, fault.column) == ("HEB 200", column)
    assert slipped[column] in fault.text


def test_a_section_has_the_digits_of_its_dimensions():
    """HEB 200 by hand without fillets: A = 2 x 200 x 15 + 170 x 9 = 7530 mm2; the fillets add
    (4 - pi) 18^2 = 278.1 mm2."""
    section = read_sections(packaged_text())["HEB 200"]
    assert section.area_mm2 == pytest.approx(7530 + 278.12399, abs=1e-4)
    assert section.height_mm == 200.0


def test_without_fillets_it_is_three_rectangles():
    """h 100, b 60, tw 4, tf 10: A = 1520, I = (60 x 100^3 - 56 x 80^3) / 12."""
    found = i_section_properties(*(np.array([x]) for x in (100.0, 60.0, 4.0, 10.0, 0.0)))
    assert found.area_mm2[0] == 1520.0
    assert found.inertia_mm4[0] == pytest.approx((60e6 - 56 * 512_000) / 12, rel=1e-15)


@pytest.mark.parametrize(
    "dimensions",
    [
        pytest.param((20.0, 60.0, 4.0, 10.0, 2.0), id="no-room-for-the-fillets"),
        pytest.param((100.0, 7.0, 4.0, 10.0, 2.0), id="narrower-than-web-and-fillets"),
        pytest.param((100.0, 60.0, 0.0, 10.0, 2.0), id="no-web"),
        pytest.param((100.0, 60.0, 4.0, np.nan, 2.0), id="nan"),
    ],
)
def test_what_does_not_fit_has_no_properties(dimensions):
    found = i_section_properties(*(np.array([x]) for x in dimensions))
    assert np.isnan(found.area_mm2[0])
    assert np.isnan(found.inertia_mm4[0])


@pytest.mark.parametrize(
    ("printed", "half"),
    [
        ("349.2", 0.05),
        ("171", 0.5),
        ("11260", 5.0),
        ("59200", 5.0),
        ("26.0", 0.05),
        ("112.5", 0.05),
    ],
)
def test_rounding_is_half_of_the_last_digit_that_counts(printed, half):
    assert half_of_last_digit(printed) == pytest.approx(half, rel=1e-15)


@pytest.mark.parametrize("column", COLUMNS[1:])
@pytest.mark.parametrize("text", ["", "x", "nan", "-5", "1e3", "5,5", None])
def test_a_value_that_is_no_plain_positive_number_is_found(column, text):
    (fault,) = table_faults([{**HEB_200, column: text}])
    assert (fault.column, "number" in fault.text) == (column, True)


def test_designations_are_given_once():
    twice = table_faults([HEB_200, HEB_200])
    assert [fault.text for fault in twice] == ["the designation stands in the table twice"]
    (missing,) = table_faults([{**HEB_200, "designation": " "}])
    assert missing.column == "designation"


def test_parts_that_do_not_fit_are_told():
    (fault,) = table_faults([{**HEB_200, "root_radius_mm": "90"}])
    assert "do not fit" in fault.text


def test_a_table_of_the_project_keeps_its_sound_rows():
    """Invented profile of three plates beside a wrong one."""
    text = (
        ",".join(COLUMNS)
        + "\nown 100,100,60,4,10,0,15.2,261.1\nwrong,100,60,4,10,0,15.2,300.0\nshort,100\n"
    )
    sections = read_sections(text)
    assert list(sections) == ["own 100"]
    assert sections["own 100"].source == ""
