"""Checks of rings of steel: first yield, and the travel of sliding joints."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_steel_sets.girders import LatticeGirders
from tunnelcalc_steel_sets.joints import joints_of
from tunnelcalc_steel_sets.kind import SteelSets, spring_of
from tunnelcalc_steel_sets.lines import travel_lines, yield_lines


class Yield:
    """Pressure on the sets against the pressure at which they begin to yield.

    While joints slide the pressure stands still at the slip pressure, below the capacity: the
    ground can bring the sets to yield only after the travel is used up. For blocked sets the
    capacity is not the one that is often printed: see the head of the module with the formulas.
    """

    name = "yield"
    meaning = "pressure on the sets against the pressure at first yield; statics of the ring"
    applies_to = (SteelSets.name, LatticeGirders.name)
    unit = "MPa"
    carries_load = True

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        return api.Evaluation(sections["element_pressure_mpa"], sections["element_capacity_mpa"])

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        return yield_lines(values)


class Travel:
    """Movement that the wall asks of each sliding joint against its travel.

    The rule fails where the joints are locked: the set that was to yield has become rigid.
    """

    name = "travel"
    meaning = (
        "sliding that the closure asks of each joint against its travel; circumference of the "
        "ring, common practice for yielding sets, no source"
    )
    applies_to = (SteelSets.name,)
    unit = "mm"
    carries_load = False

    def concerns(self, element: api.Element) -> bool:
        return joints_of(element) is not None

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        joints = joints_of(element)
        assert joints is not None
        stiffness, _ = spring_of(sections, element)
        moved = sections["element_moved_mm"] / 1000
        slid = joints.slid_mm(moved, stiffness, sections["radius_m"])
        return api.Evaluation(slid, np.full(sections.count, joints.travel_mm))

    def lines(self, values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
        section = api.one_section(values)
        found = self.evaluate(section, element)
        stiffness, _ = spring_of(section, element)
        return travel_lines(values, element, float(stiffness[0]), float(found.demand[0]))
