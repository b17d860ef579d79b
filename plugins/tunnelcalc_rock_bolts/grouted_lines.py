"""Fully grouted bolts as lines of a calculation sheet."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from tunnelcalc import api
from tunnelcalc_rock_bolts.grouted import (
    improved_hoek_brown,
    improved_mohr_coulomb,
    neutral_radius_m,
)
from tunnelcalc_rock_bolts.grouted_demand import density
from tunnelcalc_rock_bolts.parts import bar_kn

INDRARATNA_KAISER = "Indraratna & Kaiser (1990) [from memory]"
OSGOUI_ORESTE = "scaling linear in beta: Osgoui & Oreste (2010) [from memory]"
EQUILIBRIUM = "equilibrium of bolted ground with the strength credited to it"
PROJECT = "project"


def ring_lines(
    values: api.SectionValues, element: api.Element, beta: float, ring: api.GroundRing
) -> Sequence[api.SheetLine]:
    """Thickness and strength of the bolted ring."""
    work = api.Working(
        {"ba": element.number("spacing_around_m"), "bl": element.number("spacing_along_m")}
    )
    add_density(work, values, element, beta)
    _add_neutral(work, values, element)
    thickness = float(ring.thickness_m[0])
    work.add("t", "thickness of the stronger ring", "rho - R", thickness, "m", INDRARATNA_KAISER)
    changed = {name: float(column[0]) for name, column in ring.changed.items()}
    for name in ("mb", "s"):
        if name in changed and not math.isnan(changed[name]):
            work.known[name] = float(values[name])
            meaning = f"{name} of the bolted ground"
            work.add(f"{name}_b", meaning, f"(1 + beta)*{name}", changed[name], "", OSGOUI_ORESTE)
    friction = changed.get("friction_angle_deg", math.nan)
    if not math.isnan(friction):
        _add_line(work, values, friction, changed["cohesion_mpa"])
    bar = bar_kn(element)
    work.known |= {
        "sf": element.number("service_factor"),
        "d_mm": element.number("diameter_mm"),
        "s_bar": element.number("bar_strength_mpa"),
    }
    formula = "sf*s_bar*pi*d_mm^2/4/1000"
    work.add("bar", "limit of the bar", formula, bar, "kN", PROJECT)
    meaning = "pressure that stands for the bolts in sums"
    capacity = float(ring.capacity_mpa[0])
    work.add("pmax", meaning, "bar/1000/(ba*bl)", capacity, "MPa", PROJECT)
    return work.lines


def add_density(
    work: api.Working,
    values: api.SectionValues,
    element: api.Element,
    beta: float,
    symbol: str = "beta",
) -> None:
    """beta."""
    work.known |= {
        "R": float(values["radius_m"]),
        "d_mm": element.number("diameter_mm"),
        "lambda_b": element.number("friction_factor"),
    }
    formula = "pi*d_mm/1000*lambda_b*R/(ba*bl)"
    work.add(symbol, "bolt density", formula, beta, "1", INDRARATNA_KAISER)


def add_force(
    work: api.Working,
    values: api.SectionValues,
    element: api.Element,
    forces_kn: Mapping[str, float],
    demand_kn: float,
) -> None:
    """Greatest force in a bolt: the integral of what the bolts give."""
    section = api.one_section(values)
    _add_neutral(work, values, element)
    names = {"Rps": "supported_plastic_radius_m", "pi_w": "support_pressure_mpa"}
    work.known |= {symbol: float(values[name]) for symbol, name in names.items()}
    if not work.known["Rps"] > work.known["R"]:
        work.add("demand", "force in a bolt; the wall has not yielded", "", 0.0, "kN", EQUILIBRIUM)
        return
    beta = float(density(section, element)[0])
    add_density(work, values, element, beta)
    told = []
    for law, add in (("hoek_brown", _add_hoek_brown), ("mohr_coulomb", _add_mohr_coulomb)):
        if not math.isnan(forces_kn.get(law, math.nan)):
            add(work, values, forces_kn[law])
            told.append("T_hb" if law == "hoek_brown" else "T_mc")
    formula = f"max({', '.join(told)})" if len(told) > 1 else "".join(told)
    work.add("demand", "force at the neutral point", formula, demand_kn, "kN", EQUILIBRIUM)


def _add_neutral(work: api.Working, values: api.SectionValues, element: api.Element) -> None:
    radius = float(values["radius_m"])
    work.known |= {"R": radius, "L": element.number("length_m")}
    rho = float(neutral_radius_m(api.one_section(values)["radius_m"], work.known["L"])[0])
    work.add("rho", "radius of the neutral point", "L/ln(1 + L/R)", rho, "m", INDRARATNA_KAISER)


def _add_hoek_brown(work: api.Working, values: api.SectionValues, force_kn: float) -> None:
    names = {"sci": "intact_strength_mpa", "mb": "mb", "s": "s", "a": "a"}
    work.known |= {symbol: float(values[name]) for symbol, name in names.items()}
    known = work.known
    section = api.one_section(values)
    mb, s = improved_hoek_brown(section["mb"], section["s"], known["beta"] + 0 * section["s"])
    work.add("mb_b", "mb of the bolted ground", "(1 + beta)*mb", mb[0], "", OSGOUI_ORESTE)
    work.add("s_b", "s of the bolted ground", "(1 + beta)*s", s[0], "", OSGOUI_ORESTE)
    power = "((mb_b*pi_w/sci + s_b)^(1 - a) + (1 - a)*mb_b*ln({r}/R))"
    given = f"sci*{power}^(a/(1 - a))*(1 - (1 + beta)^(-a))"
    ratio = (1 + known["beta"]) ** known["a"]
    _add_reach(work, "(1 + beta)^a", ratio)
    meaning = "force by Hoek-Brown strength"
    work.add("T_hb", meaning, _integral(given), force_kn, "kN", EQUILIBRIUM)


def _add_reach(work: api.Working, ratio_formula: str, ratio: float) -> None:
    """Edge of the yielded part, and the length beyond it over which bolts are needed."""
    known = work.known
    edge = min(known["Rps"], known["rho"])
    meaning = "edge of the yielded part of the ring"
    work.add("r_c", meaning, "min(Rps, rho)", edge, "m", EQUILIBRIUM)
    meaning = "bolted over own strength at the edge"
    work.add("n_H", meaning, ratio_formula, ratio, "", EQUILIBRIUM)
    width = edge * (math.sqrt(ratio) - 1)
    work.add(
        "W", "ground beyond it that needs bolts", "r_c*(sqrt(n_H) - 1)", width, "m", EQUILIBRIUM
    )
    there = min(width, known["rho"] - edge)
    meaning = "of it within the ring"
    work.add("w", meaning, "min(W, rho - r_c)", there, "m", EQUILIBRIUM)


def _integral(given: str) -> str:
    """Force from what the bolts give at r, with the chord beyond the edge."""
    beyond = f"w*(1 - w/(2*W))*{given.format(r='r_c')}"
    return f"1000*ba*bl/R*(integral(r, R, r_c, {given.format(r='r')}) + {beyond})"


def _add_mohr_coulomb(work: api.Working, values: api.SectionValues, force_kn: float) -> None:
    section = api.one_section(values)
    beta = work.known["beta"]
    improved = improved_mohr_coulomb(
        section["friction_angle_deg"], section["cohesion_mpa"], beta + 0 * section["cohesion_mpa"]
    )
    friction, cohesion = (float(column[0]) for column in improved)
    _add_line(work, values, friction, cohesion)
    sine = math.sin(math.radians(friction))
    slope = 2 * sine / (1 - sine)
    formula = "2*sin(radians(phi_b))/(1 - sin(radians(phi_b)))"
    work.add("k_b", "slope of the bolted strength", formula, slope, "", INDRARATNA_KAISER)
    unconfined = 2 * cohesion * math.cos(math.radians(friction)) / (1 - sine)
    formula = "2*c_b*cos(radians(phi_b))/(1 - sin(radians(phi_b)))"
    work.add("q_b", "unconfined bolted strength", formula, unconfined, "MPa", INDRARATNA_KAISER)
    known = work.known
    at_wall = slope * known["pi_w"] + unconfined
    work.add("H_w", "bolted strength at the wall", "k_b*pi_w + q_b", at_wall, "MPa", EQUILIBRIUM)
    edge = min(known["Rps"], known["rho"])
    growth = (edge / known["R"]) ** slope
    radial = known["pi_w"] + at_wall * (growth - 1) / slope
    growth_text = "(min(Rps, rho)/R)^k_b"
    formula = f"pi_w + H_w*({growth_text} - 1)/k_b"
    work.add("sr_e", "radial stress at its edge", formula, radial, "MPa", EQUILIBRIUM)
    strength = at_wall * growth
    work.add("H_e", "strength there", f"H_w*{growth_text}", strength, "MPa", EQUILIBRIUM)
    own = strength - beta / (1 + beta) * (radial + strength)
    ratio = strength / own if own > 0 else math.inf
    formula = "H_e/(H_e - beta/(1 + beta)*(sr_e + H_e))" if own > 0 else ""
    _add_reach(work, formula, ratio)
    radial_text = "pi_w + H_w*(({r}/R)^k_b - 1)/k_b"
    given = f"beta/(1 + beta)*({radial_text} + H_w*({{r}}/R)^k_b)"
    meaning = "force by Mohr-Coulomb strength"
    work.add("T_mc", meaning, _integral(given), force_kn, "kN", EQUILIBRIUM)


def _add_line(
    work: api.Working, values: api.SectionValues, friction_deg: float, cohesion_mpa: float
) -> None:
    """Friction and cohesion of the bolted ground."""
    work.known |= {
        "phi": float(values["friction_angle_deg"]),
        "c": float(values["cohesion_mpa"]),
    }
    sine = math.sin(math.radians(work.known["phi"]))
    slope = (1 + work.known["beta"]) * (1 + sine) / (1 - sine)
    formula = "(1 + beta)*(1 + sin(radians(phi)))/(1 - sin(radians(phi)))"
    work.add("m_b", "slope of the bolted ground", formula, slope, "", INDRARATNA_KAISER)
    formula = "degrees(asin((m_b - 1)/(m_b + 1)))"
    meaning = "friction angle of the bolted ground"
    work.add("phi_b", meaning, formula, friction_deg, "deg", INDRARATNA_KAISER)
    meaning = "cohesion of the bolted ground"
    work.add("c_b", meaning, "c*sqrt(1 + beta)", cohesion_mpa, "MPa", INDRARATNA_KAISER)
