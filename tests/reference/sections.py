"""Everything that a run writes about one section, found the slow way."""

from __future__ import annotations

import math
from collections import Counter
from collections.abc import Mapping, Sequence
from typing import Any, NamedTuple

from reference import rock_mass
from reference.closure_profile import share_of_closure
from reference.elements import REACTIONS, Check, checks
from reference.equilibrium import Spring, State, pressure_at_closure, state_at_rest
from reference.ground_curve import GroundCurve

Row = Mapping[str, Any]
DEFAULT_METHODS = {
    "strength": "hoek_brown_2002",
    "deformation_modulus": "hoek_diederichs_2006",
    "ground_reaction": "hoek_brown_perfectly_plastic",
    "closure_profile": "vlachopoulos_diederichs_2009",
}


class SectionResults(NamedTuple):
    """Rows as the tables of a run hold them, by column name; numbers as float, NaN where empty.

    section : the computed columns of `sections.csv`, `radius_m` to `required_class`, and
        `needed_pressure_mpa`, NaN unless no class is adequate. Not `scheduled_class`, which
        depends on the neighbours, and not `flags`.
    classes : a row a class, as in `classes.csv`, without `chainage_m`.
    checks : a row a check, as in `checks.csv`, without `chainage_m` and `reason`.
    """

    section: dict[str, float | str]
    classes: list[dict[str, float | str]]
    checks: list[dict[str, float | str]]


def section_results(row: Row, project: Mapping[str, Any]) -> SectionResults:
    """Results of one section from its ground and the project.

    Parameters
    ----------
    row : ground values by column name, as a row of the ground table or of `sections.csv`: numbers
        or their text; a column that is absent, empty or NaN is not known. Other columns are
        ignored, so that a row of `sections.csv` may be passed as it is. `radius_m` of the row
        goes before that of the project.
    project : what `project.yaml` holds, loaded. `opening`, `support_classes` and `criteria` are
        read; `methods` must be the defaults.

    Returns
    -------
    SectionResults. Stresses and closures agree with a correct run to about 1e-9 of themselves;
    the program's own quadrature errs by up to 2e-9 where the plastic radius is below 20 R.
    Pressures of elements that are installed so late that next to no closure is left carry the
    rounding of that closure. A closure beyond the range of a double is NaN, and so is what
    follows from it.
    """
    if {**DEFAULT_METHODS, **(project.get("methods") or {})} != DEFAULT_METHODS:
        raise NotImplementedError("only the default methods are known here")
    radius = _number(row, "radius_m")
    radius = float(project["opening"]["radius_m"]) if radius is None else radius
    section, curve = _ground(row, radius)
    found = [
        _class_results(row, entry, project, section, curve, radius)
        for entry in project["support_classes"]
    ]
    adequate = [str(one["support_class"]) for one, _ in found if one["adequate"] == "yes"]
    limit = float(project["criteria"]["closure_pct"]) / 100 * radius
    section["required_class"] = adequate[0] if adequate else "none_adequate"
    section["needed_pressure_mpa"] = (
        math.nan if adequate else pressure_at_closure(curve, radius, limit)
    )
    return SectionResults(
        section, [one for one, _ in found], [line for _, lines in found for line in lines]
    )


def _number(row: Row, name: str) -> float | None:
    """The value of a column, or None where it is absent, empty or NaN."""
    value = row.get(name)
    if value is None or (isinstance(value, str) and not value.strip()):
        return None
    number = float(value)
    return None if math.isnan(number) else number


def _needed(row: Row, name: str) -> float:
    value = _number(row, name)
    if value is None:
        raise KeyError(f"the section has no {name}")
    return value


def _vertical_stress(row: Row, radius: float) -> float:
    measured = _number(row, "vertical_stress_mpa")
    if measured is not None:
        return measured
    depth = _needed(row, "cover_m") + radius
    return _needed(row, "unit_weight_kn_m3") * depth / 1000


def _intact_modulus(row: Row) -> float | None:
    given, ratio = _number(row, "intact_modulus_mpa"), _number(row, "modulus_ratio")
    if given is None and ratio is not None:
        return ratio * _needed(row, "intact_strength_mpa")
    return given


def _ground(row: Row, radius: float) -> tuple[dict[str, float | str], GroundCurve]:
    """The computed columns of `sections.csv`, and the curve for what follows."""
    vertical = _vertical_stress(row, radius)
    ratio = 1.0 if (given := _number(row, "stress_ratio")) is None else given
    gsi, disturbance = _needed(row, "gsi"), _needed(row, "disturbance")
    sci = _needed(row, "intact_strength_mpa")
    rock = rock_mass.criterion(sci, _needed(row, "mi"), gsi, disturbance)
    line = rock_mass.tunnel_line(rock, max(vertical, ratio * vertical))
    modulus = _number(row, "rock_mass_modulus_mpa")
    if modulus is None:
        modulus = rock_mass.deformation_modulus(gsi, disturbance, _intact_modulus(row))
    curve = GroundCurve(
        p0=(vertical + ratio * vertical) / 2,
        **rock._asdict(),
        modulus=modulus,
        nu=_needed(row, "poisson_ratio"),
        psi_deg=_number(row, "dilation_deg") or 0.0,
    )
    plastic_ratio, closure_ratio = curve.unsupported
    return {
        "radius_m": radius,
        "in_situ_stress_mpa": curve.p0,
        "mb": rock.mb,
        "s": rock.s,
        "a": rock.a,
        "rock_mass_strength_mpa": rock.deviator(0.0),
        "tensile_strength_mpa": rock.tensile_strength,
        "global_strength_mpa": rock_mass.global_strength(rock),
        "friction_angle_deg": line.friction_angle_deg,
        "cohesion_mpa": line.cohesion,
        "deformation_modulus_mpa": modulus,
        "critical_pressure_mpa": curve.critical_pressure,
        "plastic_radius_m": plastic_ratio * radius,
        "closure_mm": closure_ratio * radius * 1000,
        "closure_pct": closure_ratio * 100,
    }, curve


def _class_results(
    row: Row,
    entry: Mapping[str, Any],
    project: Mapping[str, Any],
    section: Mapping[str, Any],
    curve: GroundCurve,
    radius: float,
) -> tuple[dict[str, float | str], list[dict[str, float | str]]]:
    """The row of `classes.csv` and the rows of `checks.csv` of one class."""
    elements = entry["elements"]
    springs = [_spring(element, entry, section, radius) for element in elements]
    rest = state_at_rest(curve, radius, springs)
    criteria = project["criteria"]
    lines = _check_lines(row, entry, rest, radius, float(criteria["factor_of_safety"]))
    closure_pct = rest.closure / radius * 100
    factors = [line["factor_of_safety"] for line in lines]
    least = min((factor for factor in factors if not math.isnan(factor)), default=math.nan)
    left_out = [_is_left_out(line, rest) for line in lines]
    passed = all(
        out or line["outcome"] == "pass" for line, out in zip(lines, left_out, strict=True)
    )
    enough = passed and closure_pct <= float(criteria["closure_pct"])
    return {
        "support_class": entry["name"],
        "installation_closure_mm": min((s.installed for s in springs), default=math.nan) * 1000,
        "support_pressure_mpa": rest.pressure,
        "supported_closure_mm": rest.closure * 1000,
        "supported_closure_pct": closure_pct,
        "supported_plastic_radius_m": rest.plastic_ratio * radius,
        "factor_of_safety": least,
        "governing_check": _governing(lines, left_out, least),
        "adequate": "yes" if enough else "no",
    }, lines


def _spring(
    element: Mapping[str, Any], entry: Mapping[str, Any], section: Mapping[str, Any], radius: float
) -> Spring:
    distance = element.get("installed_at_m", entry.get("installed_at_m"))
    share = share_of_closure(float(distance), radius, section["plastic_radius_m"])
    stiffness = REACTIONS[element["kind"]](element, radius).stiffness
    return Spring(stiffness, share * section["closure_mm"] / 1000)


def _check_lines(
    row: Row, entry: Mapping[str, Any], rest: State, radius: float, required: float
) -> list[dict[str, Any]]:
    lines = []
    count: Counter[str] = Counter()
    for element, pressure in zip(entry["elements"], rest.shares, strict=True):
        kind = element["kind"]
        count[kind] += 1
        label = kind if count[kind] == 1 else f"{kind}_{count[kind]}"
        plastic_radius = rest.plastic_ratio * radius
        width = _number(row, "block_width_m")
        for check in checks(element, radius, pressure, plastic_radius, width):
            if math.isnan(rest.pressure):  # nothing can be checked, rules included
                check = check._replace(demand=math.nan, capacity=math.nan)
            outcome = _outcome(check, required)
            lines.append({"support_class": entry["name"], "element": label, **outcome})
    return lines


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


def _is_left_out(line: Mapping[str, Any], rest: State) -> bool:
    """A rule that lacks an optional input does not count against the class."""
    is_rule = line["check"].startswith("pattern_")
    return is_rule and line["outcome"] == "not_evaluated" and not math.isnan(rest.pressure)


def _governing(lines: Sequence[Mapping[str, Any]], left_out: Sequence[bool], least: float) -> str:
    """The first rule that fails or check that cannot be made; the least factor; the closure."""
    for line, out in zip(lines, left_out, strict=True):
        missing = line["outcome"] == "not_evaluated" and not out
        rule_fails = line["outcome"] == "fail" and line["unit"] == "m"  # rules compare lengths
        if missing or rule_fails:
            return f"{line['element']}:{line['check']}"
    for line in lines:
        if line["factor_of_safety"] == least:
            return f"{line['element']}:{line['check']}"
    return "closure"
