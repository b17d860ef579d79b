"""Thrust and moment around the lining of one section, from a check that knows them."""

from __future__ import annotations

from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.element_loads import class_columns, element_water_mpa
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.plugin.contract import LiningCheck
from tunnelcalc.plugin.registry import describe
from tunnelcalc.section_curves import ThrustAndMoment
from tunnelcalc.sections import Sections


def lining_of(
    planned: PlannedClass, found: Evaluated, section: Sections
) -> tuple[tuple[ThrustAndMoment, ...], str]:
    """The forces of the first check that tells them, and why they are not known; nothing and no
    reason where no check looks at a lining."""
    for check in planned.class_checks:
        if not isinstance(check, LiningCheck):
            continue
        rest = found.rest
        water = element_water_mpa(planned, found.responses, section)
        of_class = section.with_columns(
            {
                "support_pressure_mpa": rest.support_pressure_mpa,
                "supported_closure_mm": rest.closure_m * MM_PER_M,
                "supported_plastic_radius_m": rest.plastic_ratio * section["radius_m"],
                **class_columns(planned, found.responses, rest, found.credited_mpa, water),
            }
        )
        members = tuple(item.element for item in planned.elements)
        try:
            return tuple(check.thrust_and_moment(of_class, members)), ""
        except (Exception, SystemExit) as error:  # a stranger's check may raise anything
            return (), describe(error)
    return (), ""
