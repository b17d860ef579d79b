"""A support class on one section: state at rest, checks, adequacy."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from reference.closure_profile import share_of_closure
from reference.elements import REACTIONS, Check, checks
from reference.equilibrium import Spring, State, state_at_rest
from reference.ground_curve import GroundCurve
from reference.grounds import Row, number

RINGS = ("shotcrete", "steel_sets")
"""What water presses on, where the lining is watertight."""

ClassResults = tuple[dict[str, float | str], list[dict[str, float | str]]]
"""The row of `classes.csv` and the rows of `checks.csv` of one class."""


@dataclass(frozen=True)
class Unsupported:
    """A section under one stress case."""

    case: str
    curve: GroundCurve
    radius: float


def class_results(
    row: Row,
    entry: Mapping[str, Any],
    project: Mapping[str, Any],
    ground: Unsupported,
    section: Mapping[str, Any],
) -> ClassResults:
    """The class under one stress case."""
    radius = ground.radius
    springs = [_spring(element, entry, ground) for element in entry["elements"]]
    rest = state_at_rest(ground.curve, radius, springs)
    criteria = project["criteria"]
    watertight = project["ground"].get("drainage") == "watertight"
    water = float(section["water_pressure_mpa"]) if watertight else 0.0
    found = _element_checks(row, entry, rest, radius, water)
    found += _class_checks(row, entry, rest, radius, water if watertight else None)
    required = float(criteria["factor_of_safety"])
    own = {"support_class": entry["name"], "stress_case": ground.case}
    lines = [{**own, "element": label, **_outcome(check, required)} for label, check in found]
    out = [_is_left_out(line, rest, criteria) for line in lines]
    counted = [line for line, left_out in zip(lines, out, strict=True) if not left_out]
    factors = [line["factor_of_safety"] for line in counted]
    least = min((factor for factor in factors if not math.isnan(factor)), default=math.nan)
    closure_pct = rest.closure / radius * 100
    passed = all(line["outcome"] == "pass" for line in counted)
    return {
        **own,
        "installation_closure_mm": min((s.installed for s in springs), default=math.nan) * 1000,
        "support_pressure_mpa": rest.pressure,
        "supported_closure_mm": rest.closure * 1000,
        "supported_closure_pct": closure_pct,
        "supported_plastic_radius_m": rest.plastic_ratio * radius,
        "factor_of_safety": least,
        "governing_check": _governing(counted, least),
        "adequate": "yes" if passed and closure_pct <= float(criteria["closure_pct"]) else "no",
    }, lines


def _spring(element: Mapping[str, Any], entry: Mapping[str, Any], ground: Unsupported) -> Spring:
    distance = element.get("installed_at_m", entry.get("installed_at_m"))
    plastic_ratio, closure_ratio = ground.curve.unsupported
    radius = ground.radius
    share = share_of_closure(float(distance), radius, plastic_ratio * radius)
    stiffness = REACTIONS[element["kind"]](element, radius).stiffness
    return Spring(stiffness, share * closure_ratio * radius)


def _element_checks(
    row: Row, entry: Mapping[str, Any], rest: State, radius: float, water: float
) -> list[tuple[str, Check]]:
    """Checks with the label of their element; rings share the water by stiffness."""
    found = []
    count: Counter[str] = Counter()
    rings = [
        REACTIONS[e["kind"]](e, radius).stiffness if e["kind"] in RINGS else 0.0
        for e in entry["elements"]
    ]
    for element, pressure, ring in zip(entry["elements"], rest.shares, rings, strict=True):
        kind = element["kind"]
        count[kind] += 1
        label = kind if count[kind] == 1 else f"{kind}_{count[kind]}"
        of_water = water * ring / sum(rings) if ring else 0.0
        width = number(row, "block_width_m")
        plastic_radius = rest.plastic_ratio * radius
        for check in checks(element, radius, pressure + of_water, plastic_radius, width):
            found.append((label, _unless_unknown(check, rest)))
    return found


def _class_checks(
    row: Row, entry: Mapping[str, Any], rest: State, radius: float, water: float | None
) -> list[tuple[str, Check]]:
    """Weight of the plastic zone over the crown; water on a watertight lining."""
    capacity = dict.fromkeys(("all", "rings"), 0.0)
    for element in entry["elements"]:
        own = REACTIONS[element["kind"]](element, radius).capacity
        capacity["all"] += own
        capacity["rings"] += own if element["kind"] in RINGS else 0.0
    gamma = number(row, "unit_weight_kn_m3")
    thickness = (rest.plastic_ratio - 1) * radius
    weight = math.nan if gamma is None else gamma * thickness / 1000
    load = rest.pressure + weight + (water or 0.0)
    found = [Check("crown_dead_weight", "MPa", load, capacity["all"], True)]
    if water is not None:
        found.append(Check("water_on_lining", "MPa", water, capacity["rings"], True))
    return [("class", _unless_unknown(check, rest)) for check in found]


def _unless_unknown(check: Check, rest: State) -> Check:
    """Without a state at rest nothing can be checked, rules included."""
    if math.isnan(rest.pressure):
        return check._replace(demand=math.nan, capacity=math.nan)
    return check


def _outcome(check: Check, required: float) -> dict[str, Any]:
    demand, capacity = check.demand, check.capacity
    missing = math.isnan(demand) or math.isnan(capacity)
    factor = capacity / demand if check.carries_load and demand > 0 else math.nan
    as_load, as_rule = demand == 0 or factor >= required, demand <= capacity
    passed = as_load if check.carries_load else as_rule
    return {
        "check": check.name,
        "demand": math.nan if missing else demand,
        "capacity": math.nan if missing else capacity,
        "unit": check.unit,
        "factor_of_safety": factor,
        "outcome": "not_evaluated" if missing else "pass" if passed else "fail",
    }


def _is_left_out(line: Mapping[str, Any], rest: State, criteria: Mapping[str, Any]) -> bool:
    """A rule that lacks an optional input does not count against the class, nor does the weight
    at the crown unless the project says so."""
    if line["check"] == "crown_dead_weight":
        return criteria.get("crown_dead_weight") not in (True, "yes")
    is_rule = line["check"].startswith("pattern_")
    return is_rule and line["outcome"] == "not_evaluated" and not math.isnan(rest.pressure)


def _governing(counted: Sequence[Mapping[str, Any]], least: float) -> str:
    """The first rule that fails or check that cannot be made; the least factor; the closure."""
    for line in counted:
        missing = line["outcome"] == "not_evaluated"
        rule_fails = line["outcome"] == "fail" and line["unit"] == "m"  # rules compare lengths
        if missing or rule_fails:
            return f"{line['element']}:{line['check']}"
    for line in counted:
        if line["factor_of_safety"] == least:
            return f"{line['element']}:{line['check']}"
    return "closure"
