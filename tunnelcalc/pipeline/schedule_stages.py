"""The stage over the whole alignment that makes zones."""

from __future__ import annotations

from collections.abc import Mapping

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.stage import Stage
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
