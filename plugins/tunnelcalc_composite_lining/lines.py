"""The composite lining as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc import api
from tunnelcalc_composite_lining.composite_section import shares
from tunnelcalc_composite_lining.interaction import faces
from tunnelcalc_composite_lining.lining import NO_SLIP, Governing, Lining

EINSTEIN_SCHWARTZ = "Einstein & Schwartz (1979)"
CARRANZA_TORRES = "Carranza-Torres & Diederichs (2009) [from memory]"
STATICS = "statics"
FROM_RUN = {
    "R": "radius_m",
    "sv'": "effective_vertical_stress_mpa",
    "sh'": "effective_horizontal_stress_mpa",
    "Erm": "deformation_modulus_mpa",
    "nu": "poisson_ratio",
    "p_rings": "ring_pressure_mpa",
    "uw": "lining_water_mpa",
}


def lining_lines(
    values: api.SectionValues, lining: Lining, found: Governing, interface: str
) -> Sequence[api.SheetLine]:
    """Stiffness of the lining, its forces, and the face that is used most."""
    known = {symbol.rstrip("'"): float(values[column]) for symbol, column in FROM_RUN.items()}
    work = api.Working(known, EINSTEIN_SCHWARTZ)
    _add_section(work, lining)
    _add_forces(work, lining, interface)
    _add_stress(work, lining, found)
    return work.lines


def _add_section(work: api.Working, lining: Lining) -> None:
    axial: list[str] = []
    bending: list[str] = []
    for number, part in enumerate(lining.parts, start=1):
        own = f"_{number}"
        work.known |= {
            f"E{own}": float(part.modulus_mpa[0]),
            f"A{own}": float(part.area_m2_per_m[0]),
            f"I{own}": float(part.inertia_m4_per_m[0]),
            f"nu{own}": part.poisson_ratio,
        }
        for symbol, letter, unit, value, terms in (
            ("CA", "A", "MN/m", part.axial_stiffness_mn_per_m, axial),
            ("CI", "I", "MN m2/m", part.bending_stiffness_mnm2_per_m, bending),
        ):
            meaning = f"{'axial' if letter == 'A' else 'bending'} stiffness of {part.name}"
            formula = f"E{own}*{letter}{own}/(1 - nu{own}^2)"
            work.add(f"{symbol}{own}", meaning, formula, value[0], unit, CARRANZA_TORRES)
            terms.append(f"{symbol}{own}")
    section = lining.section
    both = (
        ("CA", "axial stiffness of the lining", axial, section.axial_stiffness_mn_per_m, "MN/m"),
        ("CI", "its bending stiffness", bending, section.bending_stiffness_mnm2_per_m, "MN m2/m"),
    )
    for symbol, meaning, terms, value, unit in both:
        work.add(symbol, meaning, " + ".join(terms), value[0], unit, CARRANZA_TORRES)
    work.known["depth"] = max(part.depth_m for part in lining.parts)
    meaning = "radius of the lining's centreline"
    work.add("Rc", meaning, "R - depth/2", lining.centreline_m[0], "m", "geometry")


def _add_forces(work: api.Working, lining: Lining, interface: str) -> None:
    whole, rest = lining.whole, lining.at_rest
    work.add("k", "horizontal over vertical stress", "sh/sv", lining.stress_ratio[0], "", STATICS)
    meaning = "stiffness of the lining relative to the ground, "
    formula = "CA*(1 - nu^2)/(Erm*Rc)"
    work.add("iC", f"{meaning}in thrust", formula, lining.stiffness.thrust[0])
    formula = "CI*(1 - nu^2)/(Erm*Rc^3)"
    work.add("iF", f"{meaning}in bending", formula, lining.stiffness.bending[0])
    formula = "sv*Rc*(1 + k)/2*(iC + iF)/(iC + iF + 1 - nu)"
    meaning = "mean thrust under the whole stress"
    work.add("T0", meaning, formula, whole.mean_thrust_mn_per_m[0], "MN/m")
    if interface == NO_SLIP:
        give = "(1 - nu)^2 + (1 - nu)*(iC*(3 - 2*nu) + 3*iF*(5 - 6*nu)) + 12*iC*iF*(3 - 4*nu)"
        head = f"sv*Rc*(1 - k)/2*(3 - 4*nu)/({give})"
        thrust = f"{head}*((1 - nu)*(iC + 3*iF) + 12*iC*iF)"
        moment = f"{head}*Rc*3*iF*(1 - nu + 2*iC)"
    else:
        thrust = "sv*Rc*(1 - k)/2*6*iF*(3 - 4*nu)/(2*(1 - nu) + 6*iF*(5 - 6*nu))"
        moment = "T2*Rc"
    work.add("T2", "swing of thrust, no slip" if interface == NO_SLIP else "swing, full slip",
             thrust, whole.thrust_swing_mn_per_m[0], "MN/m")  # fmt: skip
    work.add("M2", "swing of moment", moment, whole.moment_swing_mnm_per_m[0], "MN m/m")
    formula = "max(p_rings - uw, 0)*R/T0"
    meaning = "share of the whole stress that is there at rest"
    work.add("f", meaning, formula, rest.scale[0], "", STATICS)


def _add_stress(work: api.Working, lining: Lining, found: Governing) -> None:
    angle, rest = found.angle_deg, lining.at_rest
    work.known["theta"] = float(angle[0])
    formula = "f*T0 + uw*R + f*T2*cos(2*radians(theta))"
    meaning = "thrust where the lining is used most, theta from the springline"
    thrust, moment = rest.thrust_mn_per_m(angle)[0], rest.moment_mnm_per_m(angle)[0]
    work.add("N", meaning, formula, thrust, "MN/m", STATICS)
    work.add("M", "moment there", "f*M2*cos(2*radians(theta))", moment, "MN m/m", STATICS)
    split = shares(lining.parts)
    limits = faces(lining.parts, 1.0)
    number = [face.label for face in limits].index(found.face[0])
    part, sign = lining.parts[number // 2], "-" if number % 2 else ""
    work.known["h"] = part.depth_m
    own = f"_{number // 2 + 1}"
    work.add("a", f"share of {part.name} in the thrust", f"CA{own}/CA",
             split.thrust[number // 2][0], "", CARRANZA_TORRES)  # fmt: skip
    work.add("b", "its share in the moment", f"CI{own}/CI",
             split.moment[number // 2][0], "", CARRANZA_TORRES)  # fmt: skip
    formula = f"max({sign}a*N/A{own} + b*abs(M)*h/(2*I{own}), 0)"
    meaning = f"stress of {found.face[0]}"
    work.add("demand", meaning, formula, found.stress_mpa[0], "MPa", CARRANZA_TORRES)
    work.add("capacity", "its strength", "", found.strength_mpa[0], "MPa", "project")
