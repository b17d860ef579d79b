"""Checks of a support class as a whole."""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Evaluation, Limits, Project, Sections
from tunnelcalc.project import WATERTIGHT
from tunnelcalc.rock_mass.dead_weight import plastic_zone_weight_mpa
from tunnelcalc.vocabulary import UNLIMITED


class CrownDeadWeight:
    """The load of the equilibrium and the weight of loosened ground at the crown, together."""

    name = "crown_dead_weight"
    meaning = (
        "pressure at rest, the water on a watertight lining and the weight of the plastic zone "
        "over the crown against the capacity of all elements, what hardens as at 28 days, not for "
        "its age when the crown loosens: Hoek & Brown (1980), Underground Excavations in Rock"
    )
    unit = "MPa"
    carries_load = True
    by_choice = True
    requires: Mapping[str, Limits] = {"unit_weight_kn_m3": UNLIMITED}

    def concerns(self, project: Project) -> bool:
        return True

    def evaluate(self, sections: Sections, elements: tuple[api.Element, ...]) -> Evaluation:
        weight = plastic_zone_weight_mpa(
            sections["unit_weight_kn_m3"],
            sections["supported_plastic_radius_m"],
            sections["radius_m"],
        )
        unknown = np.isnan(weight)
        return Evaluation(
            sections["support_pressure_mpa"] + weight + sections["lining_water_mpa"],
            sections["class_capacity_mpa"],
            unknown,
            "unit_weight_kn_m3 is not given",
        )

    def lines(
        self, values: api.SectionValues, elements: tuple[api.Element, ...]
    ) -> Sequence[api.SheetLine]:
        found = self.evaluate(api.one_section(values), elements)
        symbols = {
            "gamma": "unit_weight_kn_m3",
            "Rps": "supported_plastic_radius_m",
            "R": "radius_m",
            "p": "support_pressure_mpa",
            "uw": "lining_water_mpa",
            "pmax_class": "class_capacity_mpa",
        }
        work = _working(values, symbols)
        if work.known["gamma"] != work.known["gamma"]:
            return ()
        demand, capacity = float(found.demand[0]), float(found.capacity[0])
        meaning = "pressure at rest, water and weight of the plastic zone over the crown"
        work.add("demand", meaning, "p + uw + gamma*(Rps - R)/1000", demand, "MPa")
        work.add("capacity", "capacity of all elements", "pmax_class", capacity, "MPa")
        return work.lines


class WaterOnLining:
    """The water pressure on a watertight lining, which rings alone can carry."""

    name = "water_on_lining"
    meaning = (
        "water pressure on the watertight lining against the capacity of its rings: statics of a "
        "closed ring, common practice, no source"
    )
    unit = "MPa"
    carries_load = True
    by_choice = False
    requires: Mapping[str, Limits] = {}

    def concerns(self, project: Project) -> bool:
        return project.drainage == WATERTIGHT

    def evaluate(self, sections: Sections, elements: tuple[api.Element, ...]) -> Evaluation:
        return Evaluation(sections["lining_water_mpa"], sections["ring_capacity_mpa"])

    def lines(
        self, values: api.SectionValues, elements: tuple[api.Element, ...]
    ) -> Sequence[api.SheetLine]:
        work = _working(values, {"uw": "lining_water_mpa", "pmax_rings": "ring_capacity_mpa"})
        demand, capacity = work.known["uw"], work.known["pmax_rings"]
        work.add("demand", "water pressure on the lining", "uw", demand, "MPa")
        work.add("capacity", "sum of the rings' capacities", "pmax_rings", capacity, "MPa")
        return work.lines


def _working(values: api.SectionValues, symbols: Mapping[str, str]) -> api.Working:
    known = {symbol: float(values[column]) for symbol, column in symbols.items()}
    return api.Working(known, "Hoek & Brown (1980); statics")


@api.hookimpl
def tunnelcalc_register_class_checks(register: Callable[[api.ClassCheck], None]) -> None:
    register(CrownDeadWeight())
    register(WaterOnLining())
