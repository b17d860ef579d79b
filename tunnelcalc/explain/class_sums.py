"""Lines of a class as a whole: water on its rings, the sum of its capacities."""

from __future__ import annotations

from tunnelcalc.calculation.working import Working
from tunnelcalc.outputs.cells import number_text
from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.element_loads import (
    class_capacities,
    element_water_mpa,
    rings_under_water,
    water_goes_by_stiffness,
)
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import AdvanceIncrements, LinearSpring, PressureOfClosure

DEFINITION = "definition"
CREDITED = (
    "the least limit of its load checks at rest, the load at which it first gives way, and "
    "nothing of bolts that change the ground"
)
WATER = (
    "water presses on the rings of a watertight lining, which share it by stiffness, or by "
    "capacity where one of them hardens; sliding rings bear none"
)


def share_formula(response: ElementResponse, own: str) -> str:
    """How the pressure on an element follows from the closure at rest; empty where only the
    element's own law says."""
    reaction = response.reaction
    if not isinstance(reaction, LinearSpring):
        return ""
    spring = f"K{own}*max(us - u_i{own}, 0)/1000"
    if reaction.beyond == "yields":
        return f"min({spring}, pmax{own})"
    return spring if reaction.beyond == "not_declared" else ""


def manner(found: Evaluated, position: int) -> str:
    """How an element reacts, in words."""
    reaction = found.responses[position].reaction
    if isinstance(reaction, LinearSpring):
        return {"yields": "yields", "breaks": "breaks"}.get(reaction.beyond, "is a spring")
    if isinstance(reaction, PressureOfClosure):
        moved = float(found.rest.element_moved_m[position, 0]) * MM_PER_M
        return f"has been moved by {number_text(moved)} mm"
    if isinstance(reaction, AdvanceIncrements):
        return "hardens while the face moves on: the sum of K(age) dw over its steps"
    return "changes the ground and carries nothing at the wall"


def add_water(work: Working, planned: PlannedClass, found: Evaluated, sections: Sections) -> None:
    """The water pressure on the rings of a watertight lining, shared out by stiffness.

    The stiffness of element number k is known as `K_k`, its pressure without water as `p_k`.
    """
    pressure = float(sections["lining_water_mpa"][0])
    rings = [position + 1 for position in rings_under_water(planned, found.responses)]
    weight = "K" if water_goes_by_stiffness(planned, found.responses) else "pmax"
    if not pressure or not rings:
        return
    work.known["uw"] = pressure
    water = element_water_mpa(planned, found.responses, sections)
    together = " + ".join(f"{weight}_{number}" for number in rings)
    for number in rings:
        work.known[f"pmax_{number}"] = float(found.responses[number - 1].capacity_mpa[0])
        own, label = float(water[number - 1, 0]), planned.elements[number - 1].element.label
        formula = f"uw*{weight}_{number}/({together})"
        meaning = f"share of the water pressure on {label}"
        work.add(f"w_{number}", meaning, formula, own, "MPa", WATER)
        whole = own + float(found.rest.element_pressure_mpa[number - 1, 0])
        formula = f"p_{number} + w_{number}"
        work.add(f"p_{number}_w", f"pressure on {label}, with water", formula, whole, "MPa", WATER)


def add_capacities(work: Working, planned: PlannedClass, found: Evaluated) -> None:
    """The sum of the capacities, of which checks of the class make use."""
    under_water = rings_under_water(planned, found.responses)
    for symbol, column, meaning in (
        ("pmax_class", "class_capacity_mpa", "capacity of all elements"),
        ("pmax_rings", "ring_capacity_mpa", "capacity of the rings that bear water"),
    ):
        terms = []
        for position in range(len(planned.elements)):
            if symbol == "pmax_class" or position in under_water:
                terms.append(_credited(work, planned, found, position))
        whole = float(class_capacities(planned, found.responses, found.credited_mpa)[column][0])
        work.add(symbol, meaning, " + ".join(terms) or "0", whole, "MPa", DEFINITION)


def _credited(work: Working, planned: PlannedClass, found: Evaluated, position: int) -> str:
    """The symbol of an element's capacity that counts in the sum; a line says where it is less
    than that of its reaction."""
    whole, symbol = f"pmax_{position + 1}", f"pmax_{position + 1}_c"
    nominal = float(found.responses[position].capacity_mpa[0])
    credited = float(found.credited_mpa[position, 0])
    work.known[whole] = nominal
    if credited == nominal:
        return whole
    if symbol not in work.known:
        label = planned.elements[position].element.label
        meaning = f"capacity of {label} that counts: {CREDITED}"
        work.add(symbol, meaning, "", credited, "MPa", DEFINITION)
    return symbol
