"""Writes the schedule and the quantities of a run as tables."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from pathlib import Path

import numpy as np

from tunnelcalc import api

SCHEDULE_HEADER = (
    "from_m",
    "to_m",
    "length_m",
    "support_class",
    "least_factor_of_safety",
    "governing_check",
    "governing_chainage_m",
    "needed_pressure_mpa",
    "ground_units",
    "flags",
)
QUANTITIES_HEADER = ("support_class", "item", "unit", "amount")


class ScheduleTables:
    """`schedule.csv`, a row a zone, and `quantities.csv`, a row a class and item."""

    name = "schedule_tables"

    def write(self, result: api.RunResult, folder: Path) -> Iterable[str]:
        rows = [_row(zone) for zone in result.zones]
        header: tuple[str, ...] = SCHEDULE_HEADER
        if not result.project.notation.is_plain:
            header = _with_written(header, "from_chainage", "to_chainage", "governing_chainage")
            rows = [
                _with_written(row, *_written(result.project, zone))
                for row, zone in zip(rows, result.zones, strict=True)
            ]
        api.write_table(folder / "schedule.csv", header, rows)
        api.write_table(
            folder / "quantities.csv",
            QUANTITIES_HEADER,
            [
                (total.support_class, total.item, total.unit, api.number_text(total.amount))
                for total in result.quantities
            ],
        )
        return ("schedule.csv", "quantities.csv")


def _with_written(cells: tuple[str, ...], start: str, end: str, governs: str) -> tuple[str, ...]:
    """A row with chainages as the project writes them, each behind its metres."""
    after = SCHEDULE_HEADER.index("governing_chainage_m") + 1
    return (*cells[:2], start, end, *cells[2:after], governs, *cells[after:])


def _written(project: api.Project, zone: api.Zone) -> tuple[str, str, str]:
    governs = zone.governing_chainage_m
    notation = project.notation
    start, end = notation.ends(zone.from_m, zone.to_m)
    return start, end, "" if np.isnan(governs) else notation.written(np.array([governs]))[0]


def _row(zone: api.Zone) -> tuple[str, ...]:
    return (
        api.number_text(zone.from_m),
        api.number_text(zone.to_m),
        api.number_text(zone.length_m),
        zone.support_class,
        api.number_text(zone.least_factor_of_safety),
        zone.governing_check,
        api.number_text(zone.governing_chainage_m),
        api.number_text(zone.needed_pressure_mpa),
        ";".join(zone.ground_units),
        ";".join(zone.flags),
    )


@api.hookimpl
def tunnelcalc_register_report_writers(register: Callable[[api.ReportWriter], None]) -> None:
    register(ScheduleTables())
