"""Whether a declared water head leaves the ground any effective stress."""

from __future__ import annotations

from collections.abc import Mapping

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.inputs.intervals import Intervals
from tunnelcalc.inputs.merging import Origin
from tunnelcalc.inputs.values import Reader
from tunnelcalc.rock_mass.in_situ_stress import vertical_stress_mpa
from tunnelcalc.rock_mass.water import water_pressure_mpa

WATER_TABLE = "water_table"


def check_water(
    columns: Mapping[str, Array],
    origins: Mapping[str, Array],
    intervals: Intervals,
    rows: Array,
    reader: Reader,
) -> None:
    """Tell heads whose pressure reaches the vertical stress.

    `columns` and `origins` are those of the sections, `rows` the interval of each.
    """
    of_cover = vertical_stress_mpa(
        columns["cover_m"], columns["unit_weight_kn_m3"], columns["radius_m"]
    )
    measured = columns["vertical_stress_mpa"]
    vertical = np.where(np.isnan(measured), of_cover, measured)
    water = water_pressure_mpa(columns["water_head_m"])
    told: set[int] = set()
    for section in np.flatnonzero(water >= vertical).tolist():
        row = int(rows[section])
        if row in told:
            continue
        told.add(row)
        head = columns["water_head_m"][section]
        what = (
            f"is {head:g}: its pressure, {water[section]:.4g} MPa, is not below the vertical "
            f"stress, {vertical[section]:.4g} MPa"
        )
        fix = "correct the head, the cover or the unit weight"
        if origins["water_head_m"][section] == Origin.LEVELS:
            where, context = reader.place(WATER_TABLE), intervals.context(row)
        else:
            of_unit = bool(origins["water_head_m"][section] == Origin.UNIT)
            where, context = intervals.source(row, "water_head_m", of_unit)
        reader.problems.add(
            where,
            what,
            name='"water_head_m"',
            allowed="water pressure below the vertical stress at the axis",
            context=context,
            fix=fix,
        )
