"""The ring and its checks as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc_shotcrete.early import governing
from tunnelcalc_shotcrete.formulas import MPA_PER_GPA
from tunnelcalc_shotcrete.hardening import (
    HOURS_PER_DAY,
    MESCHKE_JOINT_HOURS,
    MESCHKE_STIFFNESS_JOINT_HOURS,
)
from tunnelcalc_shotcrete.laws import CHANG_STILLE, EUROCODE, HardeningLaw, hardening_law
from tunnelcalc_shotcrete.ring import Ring, ring_of

LAME = "Lame, thick-walled cylinder (Timoshenko & Goodier (1970), art. 28)"
HOEK_BROWN = "Hoek & Brown, Underground Excavations in Rock (1980)"
THIN = "statics of a thin ring in plane strain"
PROJECT = "project"
ALONG = "advance of the face"
EARLY_CHANG = "min(1.105*exp(-0.743*t_a^(-0.70)), 1)"
EARLY_EUROCODE = "min(exp(s_c*(1 - sqrt(28/t_a))), 1)"
MODULUS_CHANG = "min(1.062*exp(-min(0.446*age^(-0.60), 700)), 1)"
MODULUS_EUROCODE = "min(exp(0.3*s_c*(1 - sqrt(28/age))), 1)"
MODULUS_MESCHKE = "min(0.0468*24*age - 0.00211*(24*age)^2, 1)"
MODULUS_MESCHKE_LATER = "min(max(0.0468*8 - 0.00211*8^2, (0.9506 + 32.89/(24*age - 6))^(-0.5)), 1)"
MESCHKE_FIRST_DAY = "0.489*((t_h + 0.12)/24)^0.72453"
MESCHKE_LATER = "min(max(0.489*(24.12/24)^0.72453, 1.027*exp(-17.8/t_h)), 1)"


def reaction_lines(values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
    """Stiffness and capacity of the ring, at 28 days where it hardens."""
    work, ring, radius = _ring(values, element)
    work.known |= {
        "E_gpa": element.number("modulus_gpa"),
        "nu_c": element.number("poisson_ratio"),
        "scc": element.number("strength_mpa"),
    }
    modulus = element.number("modulus_gpa") * MPA_PER_GPA
    work.add("Ec", "Young's modulus", "E_gpa*1000", modulus, "MPa", PROJECT)
    stiffness, capacity = (float(row[0]) for row in ring.spring(radius))
    when = "" if hardening_law(element) is None else ", at 28 days"
    formula, source, most, most_source = ring_formulas(ring)
    work.add("K", f"stiffness of the ring{when}", formula, stiffness, "MPa/m", source)
    work.add("pmax", f"capacity of the ring{when}", most, capacity, "MPa", most_source)
    return work.lines


def lines_at_age(
    values: api.SectionValues, element: api.Element, age_days: float
) -> Sequence[api.SheetLine]:
    """Stiffness of the ring at an age, and the capacity that a load of that age is compared with;
    R, r and t are those of `reaction_lines`."""
    law, ring = hardening_law(element), ring_of(element)
    assert law is not None
    age, radius = np.array([age_days]), float(values["radius_m"])
    known = {
        "R": radius,
        "t": ring.thickness_m,
        "r": radius - ring.thickness_m,
        "nu_c": ring.poisson_ratio,
        "E_28": ring.modulus_mpa,
        "s_c": law.coefficient,
        "age": age_days,
        "t_0": law.first_age_days,
    }
    work = api.Working(known, law.source)
    stiffness, capacity = (float(x[0]) for x in ring.at_age(np.array([radius]), law, age))
    ratio = float(law.modulus_ratio(age)[0])
    hours = age_days * HOURS_PER_DAY
    formula = modulus_formula(law, hours)
    work.add("share_E", "modulus over that at 28 days", formula, ratio)
    modulus = ring.modulus_mpa * ratio
    work.add("Ec", "Young's modulus at that age", "E_28*share_E", modulus, "MPa")
    formula, source, most, most_source = ring_formulas(ring)
    work.add("K", "stiffness of the ring at that age", formula, stiffness, "MPa/m", source)
    compared = float(law.compared_age_days(age)[0])
    meaning = "age of the strength: not less than the first at which the law is trusted"
    work.add("t_a", meaning, "max(age, t_0)", compared, "day")
    _add_strength(work, law, compared, ring.strength_mpa)
    strength = ring.strength_mpa * float(law.compared_strength_ratio(age)[0])
    work.add("scc_a", "strength at that age", "scc*share", strength, "MPa")
    most = most.replace("scc", "scc_a")
    work.add("pmax", "capacity of the ring at that age", most, capacity, "MPa", most_source)
    return work.lines


def modulus_formula(law: HardeningLaw, hours: float) -> str:
    """Share of Young's modulus at `age`."""
    if hours == 0:
        return "0"
    if law.name == CHANG_STILLE:
        return MODULUS_CHANG
    if law.name == EUROCODE:
        return MODULUS_EUROCODE
    return MODULUS_MESCHKE if hours < MESCHKE_STIFFNESS_JOINT_HOURS else MODULUS_MESCHKE_LATER


def ring_formulas(ring: Ring) -> tuple[str, str, str, str]:
    """Stiffness and capacity, each with its source."""
    if ring.thin:
        return "Ec*t/((1 - nu_c^2)*R*(R - t/2))", THIN, "scc*t/R", THIN
    formula = "Ec*(R^2 - r^2)/((1 + nu_c)*R*((1 - 2*nu_c)*R^2 + r^2))"
    return formula, LAME, "scc/2*(1 - r^2/R^2)", HOEK_BROWN


def stress_lines(values: api.SectionValues, element: api.Element) -> Sequence[api.SheetLine]:
    """Hoop stress at rest against the strength."""
    work, ring, radius = _ring(values, element)
    _add_stress(work, ring, radius, float(values["element_pressure_mpa"]))
    work.add("capacity", "compressive strength", "", ring.strength_mpa, "MPa", PROJECT)
    return work.lines


def young_stress_lines(
    values: api.SectionValues, element: api.Element, found: api.Evaluation
) -> Sequence[api.SheetLine]:
    """Worst hoop stress along the advance against the strength of that age."""
    work, ring, radius = _ring(values, element)
    law = hardening_law(element)
    assert law is not None
    pressure, age = float(values["worst_pressure_mpa"]), float(values["worst_age_days"])
    distance = float(values["worst_distance_m"])
    work.add("x_w", "distance behind the face, where it is worst", "", distance, "m", ALONG)
    work.add("p", "pressure there, with water: see the steps", "", pressure, "MPa", ALONG)
    early = float(values["early_pressure_mpa"])
    meaning = f"pressure at {law.first_age_words}, with water; younger ages are not compared"
    work.add("p_0", meaning, "", early, "MPa", ALONG)
    _add_stress(work, ring, radius, pressure)
    strength = float(found.capacity[0])
    if np.isnan(age):
        meaning = "compressive strength at 28 days: the ring carries nothing"
        work.add("capacity", meaning, "", strength, "MPa", PROJECT)
        return work.lines
    work.add("age", "age there", "", age, "day", ALONG)
    work.known["t_0"] = law.first_age_days
    compared = float(law.compared_age_days(np.array([age]))[0])
    meaning = "age of the strength: not less than the first at which the law is trusted"
    work.add("t_a", meaning, "max(age, t_0)", compared, "day", law.source)
    _add_strength(work, law, compared, ring.strength_mpa)
    work.add("capacity", "strength at that age", "scc*share", strength, "MPa", law.source)
    return work.lines


def early_lines(element: api.Element) -> Sequence[api.SheetLine]:
    """Strength required at an age against that by the law."""
    law = hardening_law(element)
    assert law is not None
    ordinate, strength = governing(element, law)
    source = "project, after EN 14487-1 or a specification"
    work = api.Working({})
    work.add("t_req", "age, of all that are asked for the worst", "", ordinate.age_h, "h", source)
    work.add("t_a", "age in days", "t_req/24", ordinate.age_days, "day", "definition")
    _add_strength(work, law, ordinate.age_days, element.number("strength_mpa"))
    work.add("demand", "strength required", "", ordinate.required_mpa, "MPa", source)
    work.add("capacity", "strength at that age", "scc*share", strength, "MPa", law.source)
    return work.lines


def _add_strength(
    work: api.Working, law: HardeningLaw, age_days: float, strength_mpa: float
) -> None:
    """The share of the strength at 28 days that the law gives at the age `t_a`."""
    work.known |= {"s_c": law.coefficient}
    work.add("scc", "compressive strength at 28 days", "", strength_mpa, "MPa", PROJECT)
    if law.name == CHANG_STILLE:
        formula = EARLY_CHANG
    elif law.name == EUROCODE:
        formula = EARLY_EUROCODE
    else:
        hours = age_days * HOURS_PER_DAY
        work.add("t_h", "age in hours", "24*t_a", hours, "h", "definition")
        formula = MESCHKE_FIRST_DAY if hours < MESCHKE_JOINT_HOURS else MESCHKE_LATER
    share = float(law.strength_ratio(np.array([age_days]))[0])
    work.add("share", "strength over that at 28 days", formula, share, "", law.source)


def _add_stress(work: api.Working, ring: Ring, radius: api.Array, pressure: float) -> None:
    work.known["p"] = pressure
    stress = float(ring.hoop_stress_mpa(np.array([pressure]), radius)[0])
    if ring.thin:
        work.add("demand", "mean hoop stress", "p*R/t", stress, "MPa", THIN)
        return
    formula = "2*p*R^2/(R^2 - r^2)"
    work.add("demand", "hoop stress at the inner face", formula, stress, "MPa", LAME)


def _ring(values: api.SectionValues, element: api.Element) -> tuple[api.Working, Ring, api.Array]:
    """Lines of the ring's radii, the ring and its outer radius."""
    radius, ring = float(values["radius_m"]), ring_of(element)
    work = api.Working({"R": radius, "t_mm": element.number("thickness_mm")})
    work.add("t", "thickness", "t_mm/1000", ring.thickness_m, "m", PROJECT)
    work.add("r", "inner radius", "R - t", radius - ring.thickness_m, "m", "geometry")
    return work, ring, np.array([radius])
