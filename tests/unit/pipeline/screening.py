"""Flags put to made sections."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from unit.pipeline.projects import along

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.flags_stage import FLAG_LEVEL, flags_stage
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.plugin.flag import Condition, Flag
from tunnelcalc.sections import Sections
from tunnelcalc.validity import FlagSettings, Level, Side, Threshold

ADVISORY_ABOVE_1 = Threshold(Level.ADVISORY, Side.ABOVE, 1, "invented")
OUTSIDE_ABOVE_2 = Threshold(Level.OUTSIDE, Side.ABOVE, 2, "another invention")


def columns_of(values: Mapping[str, Sequence[object]]) -> dict[str, Array]:
    """Arrays; texts as the ground has them."""
    return {
        name: np.array(column, dtype=object if any(isinstance(v, str) for v in column) else None)
        for name, column in values.items()
    }


def screened(
    flags: Sequence[ValidityFlag],
    values: Mapping[str, Sequence[object]],
    settings: FlagSettings | None = None,
    incidents: Incidents | None = None,
) -> Sections:
    """Sections of 10 m that meet, screened for flags."""
    count = len(next(iter(values.values())))
    sections = Sections(along([10.0] * count) | columns_of(values))
    stage = flags_stage(
        flags,
        FlagSettings() if settings is None else settings,
        Incidents() if incidents is None else incidents,
    )
    return stage(sections)


def levels_of(flag: ValidityFlag, values: Mapping[str, Sequence[object]]) -> Array:
    """(n,) levels of one flag."""
    return screened([flag], values)[FLAG_LEVEL][:, 0]


def of_column(
    name: str,
    column: str,
    *thresholds: Threshold,
    needs: Sequence[str] = (),
    applies: Condition | None = None,
    outside_applies: Condition | None = None,
) -> Flag:
    """An invented flag on a column as it stands."""
    return Flag(
        name,
        "invented meaning",
        "invented remedy",
        f"value of {column}",
        "m",
        thresholds or (ADVISORY_ABOVE_1, OUTSIDE_ABOVE_2),
        (column, *needs),
        lambda sections: sections[column],
        applies=applies,
        outside_applies=outside_applies,
    )
