"""Ground reaction in Mohr-Coulomb ground, perfectly plastic or brittle, and in elastic ground."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc.api import SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines.hoek_brown import (
    ELASTIC_COLUMNS,
    FLOW_COLUMNS,
    MOVEMENT,
    add_dilation,
    add_elastic_wall,
    add_stiffness,
)
from tunnelcalc.builtin.methods.lines.symbols import arrays, known, row
from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.rock_mass.hoek_brown import MohrCoulomb

COLUMNS = (*FLOW_COLUMNS, "friction_angle_deg", "cohesion_mpa")
RESIDUAL_COLUMNS = ("residual_friction_angle_deg", "residual_cohesion_mpa")
RESIDUAL_NAMES = {"phi": "phi_r", "c": "c_r", "k1": "k1_r", "q": "q_r"}

CRITERION = "Mohr-Coulomb criterion, st = sr + (k - 1) sr + q"
CRITICAL = "elastic hoop stress 2 p0 - pcr at the wall meets the criterion"
EQUILIBRIUM = "equilibrium of the plastic ring: Duncan Fama (1993)"
ENDLESS = "no ring comes to rest around a wall without any strength: not computed"

SLOPE = "2*sin(radians(phi))/(1 - sin(radians(phi)))"
STRENGTH = "2*c*cos(radians(phi))/(1 - sin(radians(phi)))"
RING_INTEGRAL = "(k1*p_i + q)*(X^(k1 + 1 + Kpsi) - 1)/(k1 + 1 + Kpsi)"
CLOSURE = (
    "(2*(1 - nu)*(p0 - pcr)*X^(Kpsi + 1) - (1 - 2*nu)*(p0 - p_i)"
    f" - (Kpsi - 1)*(1 - nu)*{RING_INTEGRAL})/(2*G)"
)


def curve_of(values: SectionValues, brittle: bool) -> MohrCoulombCurve:
    """The curve of one section, as the run made it."""
    residual = MohrCoulomb(*arrays(values, RESIDUAL_COLUMNS).values()) if brittle else None
    return MohrCoulombCurve.of_ground(**arrays(values, COLUMNS), residual=residual)


def wall_lines(
    values: SectionValues, pressure_mpa: float, source: str, *, brittle: bool = False
) -> Sequence[SheetLine]:
    """The wall under a pressure."""
    columns = (*COLUMNS, *RESIDUAL_COLUMNS) if brittle else COLUMNS
    work = Working({**known(values, columns), "p_i": pressure_mpa}, source)
    curve, peak = curve_of(values, brittle), curve_of(values, False)
    add_stiffness(work, float(curve.shear_modulus_mpa[0]))
    add_dilation(work, float(curve.dilation[0]))
    add_strength(work, peak, {})
    critical = float(curve.critical_pressure_mpa[0])
    add_critical_pressure(work, critical, {})
    if brittle:
        add_strength(work, curve, RESIDUAL_NAMES)
    add_wall(work, curve, pressure_mpa, RESIDUAL_NAMES if brittle else {})
    return work.lines


def elastic_lines(values: SectionValues, pressure_mpa: float, source: str) -> Sequence[SheetLine]:
    """The wall of ground that never yields."""
    work = Working({**known(values, ELASTIC_COLUMNS), "p_i": pressure_mpa}, source)
    curve = ElasticCurve.of_ground(**arrays(values, ELASTIC_COLUMNS))
    point = curve.at(row(pressure_mpa))
    add_stiffness(work, float(curve.shear_modulus_mpa[0]))
    add_elastic_wall(work, float(point.plastic_ratio[0]), float(point.closure_ratio[0]), {})
    return work.lines


def add_critical_pressure(work: Working, critical_mpa: float, names: Mapping[str, str]) -> None:
    """The pressure below which the wall yields."""
    formula, meaning = "max((2*p0 - q)/(2 + k1), 0)", "pressure below which the wall yields"
    work.add("pcr", meaning, formula, critical_mpa, "MPa", CRITICAL, names)


def add_strength(work: Working, curve: MohrCoulombCurve, names: Mapping[str, str]) -> None:
    """Slope and unconfined strength."""
    slope, strength = float(curve.friction_slope[0]), float(curve.unconfined_strength_mpa[0])
    work.add("k1", "slope of the strength, k - 1", SLOPE, slope, "", CRITERION, names)
    work.add("q", "unconfined strength", STRENGTH, strength, "MPa", CRITERION, names)


def add_wall(
    work: Working, curve: MohrCoulombCurve, pressure_mpa: float, names: Mapping[str, str]
) -> None:
    """Plastic ratio and closure of a wall under a pressure `p_i`; `names` as in `hoek_brown`."""
    point = curve.at(row(pressure_mpa))
    ratio, moved = float(point.plastic_ratio[0]), float(point.closure_ratio[0])
    if pressure_mpa >= float(curve.critical_pressure_mpa[0]):
        add_elastic_wall(work, ratio, moved, names)
        return
    if not np.isfinite(ratio) or not np.isfinite(moved):
        work.add("X", ENDLESS, "", ratio, "", EQUILIBRIUM, names)
        work.add("u_R", "closure over the radius: not computed", "", moved, "", MOVEMENT, names)
        return
    frictionless = float(curve.friction_slope[0]) == 0
    formula = "((k1*pcr + q)/(k1*p_i + q))^(1/k1)"
    formula = "exp((pcr - p_i)/q)" if frictionless else formula
    work.add("X", "plastic radius over the radius", formula, ratio, "", EQUILIBRIUM, names)
    work.add("u_R", "closure over the radius", CLOSURE, moved, "", MOVEMENT, names)
