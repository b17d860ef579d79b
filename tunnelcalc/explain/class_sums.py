"""Lines of a class as a whole: water on its rings, the sum of its capacities."""

from __future__ import annotations

from tunnelcalc.calculation.working import Working
from tunnelcalc.pipeline.class_evaluation import Evaluated, class_capacities, element_water_mpa
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.sections import Sections

DEFINITION = "definition"
WATER = "water presses on the rings of a watertight lining, which share it by stiffness"


def add_water(work: Working, planned: PlannedClass, found: Evaluated, sections: Sections) -> None:
    """The water pressure on the rings of a watertight lining, shared out by stiffness.

    The stiffness of element number k is known as `K_k`, its pressure without water as `p_k`.
    """
    pressure = float(sections["lining_water_mpa"][0])
    rings = [k + 1 for k, item in enumerate(planned.elements) if item.is_ring]
    if not pressure or not rings:
        return
    work.known["uw"] = pressure
    water = element_water_mpa(planned, found.springs, sections)
    together = " + ".join(f"K_{number}" for number in rings)
    for number in rings:
        own, label = float(water[number - 1, 0]), planned.elements[number - 1].element.label
        formula = f"uw*K_{number}/({together})"
        meaning = f"share of the water pressure on {label}"
        work.add(f"w_{number}", meaning, formula, own, "MPa", WATER)
        whole = own + float(found.rest.element_pressure_mpa[number - 1, 0])
        formula = f"p_{number} + w_{number}"
        work.add(f"p_{number}_w", f"pressure on {label}, with water", formula, whole, "MPa", WATER)


def add_capacities(work: Working, planned: PlannedClass, found: Evaluated) -> None:
    """The sum of the capacities, of which checks of the class make use."""
    for symbol, column, meaning in (
        ("pmax_class", "class_capacity_mpa", "capacity of all elements"),
        ("pmax_rings", "ring_capacity_mpa", "capacity of the rings"),
    ):
        terms = []
        for position, item in enumerate(planned.elements):
            if symbol == "pmax_class" or item.is_ring:
                terms.append(f"pmax_{position + 1}")
                work.known[terms[-1]] = float(found.springs[position].values[1, 0])
        whole = float(class_capacities(planned, found.springs, 1)[column][0])
        work.add(symbol, meaning, " + ".join(terms) or "0", whole, "MPa", DEFINITION)
