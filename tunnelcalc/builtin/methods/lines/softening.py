"""Ground reaction in strain-softening ground, line by line.

The ring has 200 annuli, all computed alike. The sheet shows the first ones and the one that ends at
the wall, with every number that goes into them. Faces are counted from 0, the edge of the ring;
_w stands for the face at the wall, _p for the softening that was predicted for the inner face.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.api import Array, SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines import hoek_brown
from tunnelcalc.builtin.methods.lines.hoek_brown import MOVEMENT
from tunnelcalc.builtin.methods.lines.symbols import arrays, known, row
from tunnelcalc.ground_reaction.flow_rule import dilation_coefficient
from tunnelcalc.ground_reaction.softening import SofteningCurve
from tunnelcalc.ground_reaction.softening_annulus import NEAR, Face, empty_face, fill_face
from tunnelcalc.ground_reaction.softening_workings import Workings, softening_workings

COLUMNS = (*hoek_brown.COLUMNS, *hoek_brown.RESIDUAL_COLUMNS, "critical_shear_strain")
SHOWN = 2
"""Annuli shown from the edge."""

SCHEME = "Lee & Pietruszczak (2008), annuli; closed form of each derived for this program"
LIKE_ABOVE = "computed as those above"

SPACING = "w_o - min(w_o, (w_o + min(g_o*w_o, 1 - x_o))/({left}*(1 + g_o)))"
PREDICTED = "min(x_o + g_o*(w_o - w_i), 1)"
NUMBER = "max((mb - (mb - mb_r)*x_i)*sr_i/sci + s - (s - s_r)*x_i, 1e-300)"
STRENGTH = "sci*N_i^(a + (a_r - a)*x_i)"
THICKNESS = (
    "(sr_o - sr_i)*(N_o/H_o - N_p/H_p)*ln(N_o/N_p)/((ln(N_o/N_p) - ln(H_o/H_p))*(N_o - N_p))"
)
THIN = "(sr_o - sr_i)*(1/H_o + 1/H_p)/2"
SIMPSON = "(Kpsi - 1)*t_i*(q_i*H_o - H_p)/6"
DRIVE = "q_i*(q_i*V_o - (Kpsi - 1)*(sr_o - sr_i) - z_i) + z_i"
STIFFNESS = (
    "1 + kappa*H_p/sci*((a_r - a)*ln(N_p)"
    " - (a + (a_r - a)*x_p)*((mb - mb_r)*sr_i/sci + s - s_r)/N_p)"
)
CORRECTED = "min(1, max(x_o, x_p + (kappa*(V_i - H_p)/sci - x_p)/max(f_i, 1e-200)))"
RATE = (
    "min(1000, 2*w_i*kappa*pcr/sci/max(f_i, 1e-200)*((Kpsi + 1)*V_i/H_p - (Kpsi - 1)"
    " + (a + (a_r - a)*x_p)*(mb - (mb - mb_r)*x_p)*H_p/(sci*N_p)))"
)


@dataclass(frozen=True, slots=True)
class Ring:
    """The ring of one section, and what its lines are written with."""

    work: Working
    curve: SofteningCurve
    faces: Workings
    depth: Array

    @property
    def annuli(self) -> int:
        """Of the whole ring, down to zero stress."""
        return len(self.curve.states.root) - 1

    @property
    def wall(self) -> int:
        """Number of the face at the wall."""
        return len(self.faces.root) - 1

    def index(self, number: int) -> str:
        """The ending of a face's symbols."""
        return "w" if number == self.wall else str(number)

    def strength(self, softening: float, number: int) -> Face:
        """Strength on a face, had it this softening."""
        face = empty_face(1)
        face.softening[:] = softening
        fill_face(face, self.curve.ground, row(float(self.faces.root[number])))
        return face

    def put(
        self,
        symbol: str,
        meaning: str,
        formula: str,
        result: float,
        unit: str = "",
        rename: Mapping[str, str] | None = None,
    ) -> None:
        self.work.add(symbol, meaning, formula, result, unit, rename=rename)


def wall_lines(values: SectionValues, pressure_mpa: float, source: str) -> Sequence[SheetLine]:
    """The wall under a pressure."""
    work = Working({**known(values, COLUMNS), "p_i": pressure_mpa}, source)
    curve = SofteningCurve.of_ground(**arrays(values, COLUMNS))  # type: ignore[arg-type]
    hoek_brown.add_stiffness(work, float(curve.double_modulus_mpa[0]) / 2)
    hoek_brown.add_dilation(work, float(dilation_coefficient(row(work.known["psi"]))[0]))
    critical = float(curve.critical_pressure_mpa[0])
    hoek_brown.add_critical_pressure(work, critical)
    point = curve.at(row(pressure_mpa))
    ratio, moved = float(point.plastic_ratio[0]), float(point.closure_ratio[0])
    if pressure_mpa >= critical:
        hoek_brown.add_elastic_wall(work, ratio, moved, {})
        return work.lines
    if not np.isfinite(moved):
        work.add("u_R", hoek_brown.BEYOND, "", moved, "", MOVEMENT)
        return work.lines
    work.source = SCHEME
    faces = softening_workings(curve, 0, pressure_mpa)
    _add_ring(Ring(work, curve, faces, np.cumsum(faces.thickness)))
    work.add("X", "plastic radius over the radius", "exp(y_w)", ratio)
    formula = "((1 - nu)*V_w - (1 - 2*nu)*(p0 - p_i))/(2*G)"
    work.add("u_R", "closure over the radius", formula, moved, "", MOVEMENT)
    return work.lines


def _add_ring(ring: Ring) -> None:
    kappa = float((ring.curve.ground.yielding / ring.curve.ground.holding)[0])
    formula = "(1 + Kpsi)*(1 - nu)*sci/(2*G*eta_c)"
    ring.put("kappa", "rise of softening with movement", formula, kappa)
    _add_edge(ring)
    last = ring.wall - 1
    for number in range(min(SHOWN, last)):
        _add_annulus(ring, number)
    if last > SHOWN:
        _add_face(ring, last)
    _add_annulus(ring, last)


def _add_edge(ring: Ring) -> None:
    """Face 0, just inside the edge."""
    faces, softening = ring.faces, float(ring.faces.softening[0])
    ring.put("w_0", "root of sr over pcr at the edge", "1", float(faces.root[0]))
    ring.put("sr_0", "radial stress", "pcr*w_0^2", float(faces.radial_stress_mpa[0]), "MPa")
    ring.put("V_0", "movement, as a stress", "2*(p0 - pcr)", float(faces.drive_mpa[0]), "MPa")
    ring.put("y_0", "ln(Rp/r)", "0", 0.0)
    if softening == 0:
        ring.put("x_0", "softening: none yet", "0", softening)
    else:
        meaning = "softening: strength falls at once, faster than the ground can follow"
        ring.put("x_0", meaning, "1" if softening == 1 else "", softening)
    _add_strength(ring, 0, softening, "0", "0")
    names = _names(ring, -1) | {"x_p": "x_0", "N_p": "N_0", "H_p": "H_0"}
    _add_rate(ring, 0, softening, names)


def _add_face(ring: Ring, number: int) -> None:
    """A face whose annulus is not shown."""
    faces, softening = ring.faces, float(ring.faces.softening[number])
    for symbol, meaning, value in (
        ("w", "root of sr over pcr", faces.root[number]),
        ("x", "softening", softening),
        ("g", "rate of softening, -dx/dw", faces.rate[number]),
        ("y", "ln(Rp/r)", ring.depth[number]),
        ("V", "movement, as a stress", faces.drive_mpa[number]),
    ):
        unit = "MPa" if symbol == "V" else ""
        told = f"{meaning}; {LIKE_ABOVE}, annulus {number}"
        ring.put(f"{symbol}_{number}", told, "", float(value), unit)
    stress = float(faces.radial_stress_mpa[number])
    ring.put(f"sr_{number}", "radial stress", f"pcr*w_{number}^2", stress, "MPa")
    _add_strength(ring, number, softening, str(number), str(number))


def _add_strength(ring: Ring, number: int, softening: float, softened: str, ending: str) -> Face:
    """N and H on a face, by the softening x with the index `softened`."""
    face = ring.strength(softening, number)
    names = {
        "x_i": f"x_{softened}",
        "sr_i": f"sr_{ring.index(number)}",
        "N_i": f"N_{ending}",
        "H_i": f"H_{ending}",
    }
    intact = float(ring.curve.intact_strength_mpa[0])
    strength = float(face.strength[0]) * intact
    ring.put("N_i", "mb sr/sci + s", NUMBER, float(face.number[0]), rename=names)
    ring.put("H_i", "strength", STRENGTH, strength, "MPa", names)
    return face


def _names(ring: Ring, number: int) -> dict[str, str]:
    """Symbols of the annulus inside face `number`."""
    inner = ring.index(number + 1)
    names = {f"{name}_o": f"{name}_{number}" for name in ("w", "x", "g", "sr", "N", "H", "V", "y")}
    inside = ("w", "x", "g", "sr", "t", "q", "z", "V", "y", "f")
    names |= {f"{name}_i": f"{name}_{inner}" for name in inside}
    return names | {f"{name}_p": f"{name}_{inner}p" for name in ("x", "N", "H")}


def _add_annulus(ring: Ring, number: int) -> None:
    """From face `number` to the next."""
    faces, names, inner = ring.faces, _names(ring, number), number + 1
    at_wall = inner == ring.wall
    formula = "sqrt(p_i/pcr)" if at_wall else SPACING.format(left=ring.annuli - number)
    meaning = f"root of sr over pcr inside annulus {inner}"
    ring.put("w_i", meaning, formula, float(faces.root[inner]), rename=names)
    stress = float(faces.radial_stress_mpa[inner])
    ring.put("sr_i", "radial stress", "pcr*w_i^2", stress, "MPa", names)
    predicted = float(faces.predicted_softening[inner])
    ring.put("x_p", "softening, predicted", PREDICTED, predicted, rename=names)
    ending = f"{ring.index(inner)}p"
    softened = _add_strength(ring, inner, predicted, ending, ending)
    outer = ring.strength(float(faces.softening[number]), number)
    thin = not float(outer.log_number[0] - softened.log_number[0]) > NEAR
    thickness = float(faces.thickness[inner])
    formula = THIN if thin else THICKNESS
    ring.put("t_i", "thickness, ln(r1/r2)", formula, thickness, rename=names)
    growing, dilating = float(ring.curve.ground.growing[0]), float(ring.curve.ground.dilating[0])
    growth = float(np.exp(growing * thickness * 0.5))
    ring.put("q_i", "growth over half of it", "exp((Kpsi + 1)*t_i/2)", growth, rename=names)
    intact = float(ring.curve.intact_strength_mpa[0])
    fall = growth * float(outer.strength[0]) - float(softened.strength[0])
    simpson = dilating * thickness * intact * fall / 6
    ring.put("z_i", "part of Simpson's rule", SIMPSON, simpson, "MPa", names)
    drive = float(faces.drive_mpa[inner])
    ring.put("V_i", "movement, as a stress", DRIVE, drive, "MPa", names)
    ring.put("y_i", "ln(Rp/r)", "y_o + t_i", float(ring.depth[inner]), rename=names)
    if at_wall:
        return  # softening of the wall itself changes only the slope of the curve there
    softening = float(faces.softening[inner])
    _add_rate(ring, inner, softening, names)
    ring.put("x_i", "softening, after one Newton step", CORRECTED, softening, rename=names)
    _add_strength(ring, inner, softening, str(inner), str(inner))


def _add_rate(ring: Ring, number: int, softening: float, names: Mapping[str, str]) -> None:
    """What the next face is predicted from."""
    ground = ring.curve.ground
    face = ring.strength(float(ring.faces.predicted_softening[number]), number)
    power = ground.power + ground.power_rise * face.softening
    change = ground.power_rise * face.log_number - power * face.fall / face.number
    stiffness = 1 + ground.yielding / ground.holding * face.strength * change
    meaning = "1 + kappa times the change of strength with softening"
    ring.put("f_i", meaning, STIFFNESS, float(stiffness[0]), rename=names)
    formula = "0" if softening >= 1 else RATE
    rate = float(ring.faces.rate[number])
    ring.put("g_i", "rate of softening, -dx/dw", formula, rate, rename=names)
