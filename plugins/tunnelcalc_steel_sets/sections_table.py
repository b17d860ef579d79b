"""Profiles by designation: a table of nominal dimensions, and the check that it must pass.

The packaged table has nominal dimensions of EN 10365 H and I sections, written from memory. A
row is offered only if its area and second moment of area follow from its own dimensions within
the rounding of what is printed: a slip in any of the seven numbers is then very unlikely to pass.
The same check is for a project's own table.
"""

from __future__ import annotations

import csv
import io
import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from importlib import resources
from typing import NamedTuple

import numpy as np

from tunnelcalc.api import Array

PACKAGED_TABLE = "steel_sections.csv"
DIMENSIONS = (
    "height_mm",
    "width_mm",
    "web_thickness_mm",
    "flange_thickness_mm",
    "root_radius_mm",
)
COLUMNS = ("designation", *DIMENSIONS, "area_cm2", "inertia_cm4")
MM2_PER_CM2 = 100.0
MM4_PER_CM4 = 10_000.0
PRINTED_DIGITS = 4
"""Tables print areas and second moments with four significant digits at most: a longer integer,
such as 11260, is rounded in its last digits."""
ROUNDING_OF_DOUBLES = 1e-9


class SectionProperties(NamedTuple):
    """Area (n,) [mm2] and second moment of area about the strong axis (n,) [mm4]."""

    area_mm2: Array
    inertia_mm4: Array


@dataclass(frozen=True, slots=True)
class SteelSection:
    """A profile: dimensions [mm], area [mm2] and second moment of area [mm4] as they follow
    from the dimensions, and where the row comes from."""

    designation: str
    height_mm: float
    width_mm: float
    web_thickness_mm: float
    flange_thickness_mm: float
    root_radius_mm: float
    area_mm2: float
    inertia_mm4: float
    source: str


@dataclass(frozen=True, slots=True)
class SectionFault:
    """Why a row of a table is not offered; `text` is a plain sentence."""

    designation: str
    column: str
    text: str


def i_section_properties(
    height_mm: Array,
    width_mm: Array,
    web_thickness_mm: Array,
    flange_thickness_mm: Array,
    root_radius_mm: Array,
) -> SectionProperties:
    """Area and second moment of area of I and H sections with parallel flanges.

    Parameters
    ----------
    height_mm : (n,) h, over all. [mm]
    width_mm : (n,) b, of the flanges. [mm]
    web_thickness_mm : (n,) tw. [mm]
    flange_thickness_mm : (n,) tf. [mm]
    root_radius_mm : (n,) r, of the four fillets between web and flanges. [mm]

    Returns
    -------
    A = 2 b tf + (h - 2 tf) tw + (4 - pi) r^2 [mm2] and I = (b h^3 - (b - tw)(h - 2 tf)^3) / 12
    + 4 (r^4 (1 - 5 pi / 16) - a c^2 + a (h/2 - tf - c)^2) [mm4], a = (1 - pi / 4) r^2 and
    c = r (10 - 3 pi) / (12 - 3 pi) the area of a fillet and the distance of its centroid from
    the flange.  NaN where the parts do not fit into the outline.

    Source
    ------
    Rectangles, and squares less quarter circles, by the parallel axis theorem.
    """
    clear = height_mm - 2 * flange_thickness_mm
    fits = (clear >= 2 * root_radius_mm) & (width_mm >= web_thickness_mm + 2 * root_radius_mm)
    positive = (web_thickness_mm > 0) & (flange_thickness_mm > 0) & (root_radius_mm >= 0)
    fillet = (1 - math.pi / 4) * root_radius_mm**2
    centroid = root_radius_mm * (10 - 3 * math.pi) / (12 - 3 * math.pi)
    area = 2 * width_mm * flange_thickness_mm + clear * web_thickness_mm + 4 * fillet
    inertia = (width_mm * height_mm**3 - (width_mm - web_thickness_mm) * clear**3) / 12
    own = root_radius_mm**4 * (1 - 5 * math.pi / 16) - fillet * centroid**2
    inertia = inertia + 4 * (own + fillet * (clear / 2 - centroid) ** 2)
    sound = fits & positive
    return SectionProperties(np.where(sound, area, np.nan), np.where(sound, inertia, np.nan))


def half_of_last_digit(printed: str) -> float:
    """Largest rounding error of a number as it is printed.

    Parameters
    ----------
    printed : a plain decimal number, such as 349.2 or 11260. No exponent.

    Returns
    -------
    Half of the last printed decimal, or of the fourth significant digit where more are printed,
    in the unit of the number. [-]

    Source
    ------
    Rounding to the nearest; four digits: common practice, no source.
    """
    decimals = len(printed.partition(".")[2])
    value = abs(float(printed))
    digits = math.floor(math.log10(value)) + 1 if value > 0 else 1
    return 0.5 * 10.0 ** max(-decimals, digits - PRINTED_DIGITS)


def table_faults(rows: Sequence[Mapping[str, str]]) -> list[SectionFault]:
    """What is wrong with the rows of a table: they are not to be offered.

    Parameters
    ----------
    rows : texts by the names in `COLUMNS`, as printed: the number of decimals counts.

    Returns
    -------
    Faults, in the order of the rows: an empty or twice used designation, a value missing or not
    a positive number, parts that do not fit, an area or second moment of area that does not
    follow from the dimensions within rounding.

    Source
    ------
    `i_section_properties` and `half_of_last_digit`.
    """
    seen: set[str] = set()
    faults: list[SectionFault] = []
    for row in rows:
        name = _designation(row)
        if not name or name in seen:
            why = "is missing" if not name else "stands in the table twice"
            faults.append(SectionFault(name, "designation", f"the designation {why}"))
        seen.add(name)
        faults.extend(_row_faults(name, row))
    return faults


def read_sections(text: str) -> dict[str, SteelSection]:
    """Sections of a table in CSV that pass the check, by designation.

    Parameters
    ----------
    text : CSV with a header that has the names in `COLUMNS`, and perhaps `source`.

    Returns
    -------
    Sections with area and second moment of area computed from the dimensions, which have more
    digits than the printed ones.  Rows with a fault are left out: ask `table_faults` for them.

    Source
    ------
    See `i_section_properties`.
    """
    rows = list(csv.DictReader(io.StringIO(text)))
    faulty = {fault.designation for fault in table_faults(rows)}
    sound = [row for row in rows if _designation(row) not in faulty]
    sections = (_section(row) for row in sound)
    return {section.designation: section for section in sections}


def packaged_text() -> str:
    """The packaged table as CSV text.

    Returns
    -------
    The file's text; every row says in its column `source` that it is from memory.

    Source
    ------
    EN 10365, nominal dimensions of H and I sections [from memory].
    """
    folder = resources.files(__package__)
    return folder.joinpath(PACKAGED_TABLE).read_text(encoding="utf-8")


def _designation(row: Mapping[str, str]) -> str:
    return (row.get("designation") or "").strip()


def _row_faults(name: str, row: Mapping[str, str]) -> list[SectionFault]:
    unread = [column for column in COLUMNS[1:] if not _is_number(row.get(column), column)]
    if unread:
        return [SectionFault(name, c, f"{c} is not a plain positive number") for c in unread]
    found = _computed(row)
    if math.isnan(float(found.area_mm2)):
        why = "web, flanges and root radius do not fit into height and width"
        return [SectionFault(name, "height_mm", why)]
    pairs = (
        ("area_cm2", float(found.area_mm2) / MM2_PER_CM2),
        ("inertia_cm4", float(found.inertia_mm4) / MM4_PER_CM4),
    )
    return [
        SectionFault(
            name, column, f"{column} is {row[column]}, but the dimensions give {value:.6g}"
        )
        for column, value in pairs
        if abs(float(row[column]) - value)
        > half_of_last_digit(row[column].strip()) + ROUNDING_OF_DOUBLES * value
    ]


def _is_number(text: str | None, column: str) -> bool:
    plain = (text or "").strip()
    if not plain.isascii() or not plain.replace(".", "", 1).isdigit():
        return False
    return float(plain) > 0 or column == "root_radius_mm"


def _computed(row: Mapping[str, str]) -> SectionProperties:
    return i_section_properties(*(np.asarray(float(row[name])) for name in DIMENSIONS))


def _section(row: Mapping[str, str]) -> SteelSection:
    found = _computed(row)
    return SteelSection(
        designation=_designation(row),
        **{name: float(row[name]) for name in DIMENSIONS},
        area_mm2=float(found.area_mm2),
        inertia_mm4=float(found.inertia_mm4),
        source=(row.get("source") or "").strip(),
    )
