"""Block of a sheet on the limits of a class: first failure, full mobilisation, what is missing."""

from __future__ import annotations

import math

from tunnelcalc.calculation.formula import renamed
from tunnelcalc.calculation.line import SheetBlock
from tunnelcalc.calculation.working import Working
from tunnelcalc.explain.class_sums import DEFINITION, share_formula
from tunnelcalc.pipeline.class_evaluation import Evaluated
from tunnelcalc.pipeline.ground_stages import MM_PER_M
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.project import Criteria
from tunnelcalc.support.reaction import AdvanceIncrements, GroundRing

NEVER = "no element ever reaches its limit"
YOUNG = (
    "an element that hardens is followed along the advance, against its capacity of the same age; "
    "beyond the state at rest it is hard. What is missing at the closure limit is the pressure to "
    "be added before the face moves on from where the closure passes the limit"
)
IN_THE_GROUND = (
    "bolts that change the ground are at their limit at the closure at which the first of their "
    "load checks is, along the line of the ground with them, on which p_lim lies too"
)


def limits_block(
    planned: PlannedClass, found: Evaluated, criteria: Criteria, radius_m: float, title: str
) -> SheetBlock:
    """The numbers of `classes.csv` on the limits of a class, and how the last follows."""
    row = found.row
    known = {"R": radius_m, "limit": criteria.closure_pct, "FS_req": criteria.factor_of_safety}
    work = Working(known, DEFINITION)
    for symbol, meaning, value, unit in (
        ("u_f", "closure when a first element is at its limit", row.first_failure_closure_mm, "mm"),
        ("p_f", "pressure of all elements there", row.first_failure_pressure_mpa, "MPa"),
        ("u_full", "closure at full mobilisation", row.full_closure_mm, "mm"),
        ("p_full", "greatest pressure of the class", row.full_pressure_mpa, "MPa"),
    ):
        if math.isfinite(value[0]):
            work.add(symbol, meaning, "", float(value[0]), unit)
    notes = [] if work.lines else [NEVER]
    reactions = [response.reaction for response in found.responses]
    if any(isinstance(reaction, AdvanceIncrements) for reaction in reactions):
        notes.append(YOUNG)
    if any(isinstance(reaction, GroundRing) for reaction in reactions):
        notes.append(IN_THE_GROUND)
    missing = float(row.missing_pressure_mpa[0])
    if math.isfinite(missing):
        _add_missing(work, planned, found, missing)
    name = planned.support_class.name
    return SheetBlock(f"Class {name}: limits{title}", tuple(work.lines), tuple(notes))


def _add_missing(work: Working, planned: PlannedClass, found: Evaluated, missing: float) -> None:
    limit_mm = work.known["R"] * work.known["limit"] / 100 * MM_PER_M
    work.add("u_lim", "closure at the limit", "1000*R*limit/100", limit_mm, "mm")
    needed = float(found.needed_mpa[0])
    work.add("p_lim", "pressure under which the ground rests there", "", needed, "MPa")
    terms = []
    for position, (item, response) in enumerate(
        zip(planned.elements, found.responses, strict=True)
    ):
        own = f"_{position + 1}"
        work.known |= {
            f"K{own}": float(response.stiffness_mpa_per_m[0]),
            f"u_i{own}": float(found.acting_m[position, 0]) * MM_PER_M,
            f"pmax{own}": float(response.capacity_mpa[0]),
            f"pmax{own}_c": float(found.credited_mpa[position, 0]),
        }
        given = float(found.given_mpa[position, 0])
        meaning = f"what {item.element.label} gives there, at most its capacity over the factor"
        work.add(f"g{own}", meaning, _given_formula(response, own), given, "MPa")
        terms.append(f"g{own}")
    formula = f"max(p_lim - ({' + '.join(terms) or '0'}), 0)"
    work.add("missing", "pressure missing at the closure limit", formula, missing, "MPa")


def _given_formula(response: ElementResponse, own: str) -> str:
    """Of a spring; empty where only the element's own law says."""
    share = share_formula(response, own)
    return f"min({renamed(share, {'us': 'u_lim'})}, pmax{own}_c/FS_req)" if share else ""
