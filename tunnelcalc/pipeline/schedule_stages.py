"""Stages over the whole alignment: zoning, and flags on validity."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from functools import partial

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.plugin.contract import ValidityFlag
from tunnelcalc.plugin.isolation import NO_REASON, contained
from tunnelcalc.project import ScheduleRules
from tunnelcalc.schedule.zoning import zone_classes
from tunnelcalc.sections import Sections


def zoning_stage(rules: ScheduleRules) -> Stage:
    """From the required class of each section to zones that can be built."""

    def compute(sections: Sections) -> Mapping[str, Array]:
        zoning = zone_classes(
            sections["required_class"],
            sections["class_adequate"],
            sections["from_m"],
            sections["to_m"],
            carry_m=rules.carry_m,
            minimum_zone_m=rules.minimum_zone_m,
        )
        return {
            "scheduled_class": zoning.scheduled,
            "rule_not_applied": zoning.rule_not_applied,
        }

    return Stage(
        "zoning",
        "heavier class carried into lighter ground, then short zones merged, until nothing changes",
        ("required_class", "class_adequate", "from_m", "to_m"),
        ("scheduled_class", "rule_not_applied"),
        compute,
        whole_alignment=True,
    )


def flags_stage(flags: Sequence[ValidityFlag], incidents: Incidents) -> Stage:
    """Which flags are raised, and which could not be assessed; (n, f) each.

    A flag that fails is an incident, and not assessed where it fails.
    """

    def compute(sections: Sections) -> Mapping[str, Array]:
        raised = np.zeros((sections.count, len(flags)), dtype=bool)
        unknown = np.zeros_like(raised)
        for number, flag in enumerate(flags):
            for need in flag.needs:
                unknown[:, number] |= _missing(sections[need])
            found = contained(partial(_raised, flag), sections, ("raised",))
            for reason in dict.fromkeys(found.reason[found.reason != NO_REASON].tolist()):
                failed = found.reason == reason
                incidents.add(f"flag {flag.name}", reason, sections["chainage_m"][failed])
                unknown[:, number] |= failed
            raised[:, number] = (found.values[0] == 1) & ~unknown[:, number]
        return {"flag_raised": raised, "flag_not_assessed": unknown}

    return Stage(
        "flags",
        "where the method reaches its limits: " + ", ".join(flag.name for flag in flags),
        tuple(dict.fromkeys(("chainage_m", *(need for flag in flags for need in flag.needs)))),
        ("flag_raised", "flag_not_assessed"),
        compute,
        whole_alignment=True,
    )


def _raised(flag: ValidityFlag, sections: Sections) -> tuple[Array]:
    return (flag.raised(sections),)


def _missing(column: Array) -> Array:
    """Where a column (n,) has no value: NaN, or an empty text."""
    return column == "" if column.dtype == object else np.isnan(column)
