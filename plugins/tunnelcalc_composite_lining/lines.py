"""The composite lining as lines of a calculation sheet."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Array
from tunnelcalc_composite_lining.composite_section import shares
from tunnelcalc_composite_lining.einstein_schwartz import NO_SLIP
from tunnelcalc_composite_lining.lining import Governing, Lining
from tunnelcalc_composite_lining.rings import (
    RingState,
    act_together,
    larger_swing,
    shared_thrust_mn_per_m,
)

EINSTEIN_SCHWARTZ = "Einstein & Schwartz (1979)"
CARRANZA_TORRES = "Carranza-Torres & Diederichs (2009) [from memory]"
STATICS = "statics"
FROM_RUN = {
    "R": "radius_m",
    "sv'": "effective_vertical_stress_mpa",
    "sh'": "effective_horizontal_stress_mpa",
    "Erm": "deformation_modulus_mpa",
    "nu": "poisson_ratio",
}


def lining_lines(
    values: api.SectionValues, lining: Lining, found: Governing, interface: str
) -> Sequence[api.SheetLine]:
    """Stiffness of the lining, its forces, and the face that is used most."""
    known = {symbol.rstrip("'"): float(values[column]) for symbol, column in FROM_RUN.items()}
    work = api.Working(known, EINSTEIN_SCHWARTZ)
    _add_section(work, lining)
    _add_forces(work, lining, interface)
    state = lining.states[int(found.state[0])]
    _add_ring(work, lining, state, interface)
    _add_stress(work, state, found)
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
    whole = lining.whole
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


def _add_ring(work: api.Working, lining: Lining, state: RingState, interface: str) -> None:
    """Forces of the ring that is used most, from what it carries."""
    own = f"_{state.number + 1}"
    ground, water = _pressures(work, lining, state)
    radius, whole = work.known["R"], lining.whole
    meaning = f"thrust of the ground in {state.part.name}"
    work.add(
        "N_g", meaning, f"{ground}{own}*R", _ground(lining, state)[0] * radius, "MN/m", STATICS
    )
    if any(load.hardens for load in lining.loads):
        meaning = "of it shared with all rings: none, since a ring hardens"
        work.add("N_s", meaning, "", 0.0, "MN/m", CARRANZA_TORRES)
    else:
        count = len(lining.parts)
        strains = [f"p_{number}*R/CA_{number}" for number in range(1, count + 1)]
        least = strains[0] if count == 1 else f"min({', '.join(strains)})"
        shared = shared_thrust_mn_per_m(lining.parts, lining.composites, np.array([radius]))
        value = shared[state.number][0]
        work.add("N_s", "of it shared with all rings", f"CA{own}*{least}", value, "MN/m",
                 CARRANZA_TORRES)  # fmt: skip
    share = "3*iF" if interface != NO_SLIP else "(iC + 3*iF)"
    soft = f"(1 - k)/(1 + k)*(3 - 4*nu)*{share}/(iC + iF)"
    choice = "max" if lining.stress_ratio[0] <= 1 else "min"
    meaning = "swing of thrust over its mean, of a soft lining or of this one, the larger"
    work.add("s", meaning, f"{choice}({soft}, T2/T0)", larger_swing(whole, lining.soft_swing)[0])
    forces = state.forces
    formula = "N_g*T2/T0 + (N_g - min(N_s, N_g))*(s - T2/T0)"
    meaning = "swing of thrust in this ring"
    work.add("T2_r", meaning, formula, forces.thrust_swing_mn_per_m[0], "MN/m")
    split = shares(lining.parts)
    for symbol, letter, of in (("a", "A", split.thrust), ("b", "I", split.moment)):
        meaning = f"share of it in {'thrust' if letter == 'A' else 'moment'} as a composite"
        formula = f"C{letter}{own}/C{letter}"
        work.add(symbol, meaning, formula, of[state.number][0], "", CARRANZA_TORRES)
    pressures = " + ".join(f"p_{number}" for number in range(1, len(lining.parts) + 1))
    bent = "N_g" if state.young or len(lining.parts) == 1 else f"max(N_g, a*({pressures})*R)"
    formula, value = f"{bent}*M2/T0*b/a", forces.moment_swing_mnm_per_m[0]
    work.add("M2_r", "swing of moment in this ring", formula, value, "MN m/m")
    work.add("N_w", "its thrust of water", f"{water}{own}*R", work.known[f"{water}{own}"] * radius,
             "MN/m", STATICS)  # fmt: skip


def _ground(lining: Lining, state: RingState) -> Array:
    load = lining.composites[state.number]
    young = load.young_ground_mpa
    return young if state.young and young is not None else load.ground_mpa


def _pressures(work: api.Working, lining: Lining, state: RingState) -> tuple[str, str]:
    """Puts the pressures on every ring among what is known; symbols of those of this state."""
    for number, load in enumerate(lining.composites, start=1):
        work.known |= {f"p_{number}": load.ground_mpa[0], f"uw_{number}": load.water_mpa[0]}
        _add_sharing(work, lining, number)
        if load.young_ground_mpa is not None and load.young_water_mpa is not None:
            work.known |= {
                f"py_{number}": load.young_ground_mpa[0],
                f"uy_{number}": load.young_water_mpa[0],
            }
    return ("py", "uy") if state.young else ("p", "uw")


def _add_sharing(work: api.Working, lining: Lining, number: int) -> None:
    """Pressures of a ring that shares them with others from the first."""
    own = lining.loads[number - 1]
    others = [n for n, load in enumerate(lining.loads, start=1) if act_together(own, load)[0]]
    if len(others) == 1:
        return
    for n in others:
        carried = lining.loads[n - 1]
        work.known |= {f"pe_{n}": carried.ground_mpa[0], f"ue_{n}": carried.water_mpa[0]}
    stiffness = " + ".join(f"CA_{n}" for n in others)
    found, part = lining.composites[number - 1], lining.parts[number - 1].name
    for symbol, each, of, value in (
        ("p", "pe", "the ground", found.ground_mpa),
        ("uw", "ue", "water", found.water_mpa),
    ):
        together = " + ".join(f"{each}_{n}" for n in others)
        meaning = f"pressure of {of} on {part}, as in a composite of those that act with it"
        formula = f"CA_{number}*({together})/({stiffness})"
        work.add(f"{symbol}_{number}", meaning, formula, value[0], "MPa", CARRANZA_TORRES)


def _add_stress(work: api.Working, state: RingState, found: Governing) -> None:
    angle, forces, own = found.angle_deg, state.forces, f"_{state.number + 1}"
    work.known["theta"] = float(angle[0])
    formula = "N_g + N_w + T2_r*cos(2*radians(theta))"
    meaning = "thrust where the ring is used most, theta from the springline"
    thrust, moment = forces.thrust_mn_per_m(angle)[0], forces.moment_mnm_per_m(angle)[0]
    work.add("N", meaning, formula, thrust, "MN/m", STATICS)
    work.add("M", "moment there", "M2_r*cos(2*radians(theta))", moment, "MN m/m", STATICS)
    work.known["h"] = state.part.depth_m
    sign = "-" if str(found.face[0]).endswith("tension") else ""
    formula = f"max({sign}N/A{own} + abs(M)*h/(2*I{own}), 0)"
    meaning = f"stress of {found.face[0]}"
    work.add("demand", meaning, formula, found.stress_mpa[0], "MPa", CARRANZA_TORRES)
    meaning = "its strength at that age" if state.young else "its strength"
    work.add("capacity", meaning, "", found.strength_mpa[0], "MPa", "project")
