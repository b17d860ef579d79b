"""Ground reaction in Hoek-Brown ground, perfectly plastic or brittle, line by line."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc.api import SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines.symbols import arrays, known, row
from tunnelcalc.ground_reaction.curve import CurvePoint
from tunnelcalc.ground_reaction.flow_rule import ring_exponent
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.ring_integral import ring_integral_mpa
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants

Names = Mapping[str, str]

ELASTIC_COLUMNS = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio")
FLOW_COLUMNS = (*ELASTIC_COLUMNS, "dilation_deg")
COLUMNS = (*FLOW_COLUMNS, "intact_strength_mpa", "mb", "s", "a")
RESIDUAL_COLUMNS = ("residual_mb", "residual_s", "residual_a")
RESIDUAL_NAMES: Names = {"mb": "mb_r", "s": "s_r", "a": "a_r"}

FLOW_RULE = "flow rule of a Mohr-Coulomb plastic potential: common practice, no source"
LAME = "G. Lame; G. Kirsch, Z. VDI 42 (1898) 797-807"
CRITICAL = (
    "elastic hoop stress 2 p0 - pcr at the wall meets the criterion: C. Carranza-Torres, "
    "C. Fairhurst, Int. J. Rock Mech. Min. Sci. 36 (1999) 777-809"
)
EQUILIBRIUM = (
    "equilibrium of the plastic ring: C. Carranza-Torres, Int. J. Rock Mech. Min. Sci. 41 (2004)"
)
MOVEMENT = "flow rule and Hooke's law in the ring, integrated by parts"
BEYOND = "too deep a ring: the closure leaves the range of a double and is not computed"

WALL_NUMBER = "(mb*p_i/sci + s)^(1 - a)"
CLOSURE = (
    "(2*(1 - nu)*(p0 - pcr)*X^(Kpsi + 1) - (1 - 2*nu)*(p0 - p_i) - (Kpsi - 1)*(1 - nu)*J)/(2*G)"
)
CLOSURE_WITHOUT_DILATION = "(2*(1 - nu)*(p0 - pcr)*X^2 - (1 - 2*nu)*(p0 - p_i))/(2*G)"


def curve_of(values: SectionValues, brittle: bool) -> HoekBrownCurve:
    """The curve of one section, as the run made it."""
    residual = None
    if brittle:
        residual = HoekBrownConstants(*arrays(values, RESIDUAL_COLUMNS).values())
    return HoekBrownCurve.of_ground(**arrays(values, COLUMNS), residual=residual)


def wall_lines(
    values: SectionValues, pressure_mpa: float, source: str, *, brittle: bool = False
) -> Sequence[SheetLine]:
    """The wall under a pressure."""
    columns = (*COLUMNS, *RESIDUAL_COLUMNS) if brittle else COLUMNS
    work = Working({**known(values, columns), "p_i": pressure_mpa}, source)
    curve = curve_of(values, brittle)
    add_stiffness(work, float(curve.shear_modulus_mpa[0]))
    add_dilation(work, float(curve.dilation[0]))
    add_critical_pressure(work, float(curve.critical_pressure_mpa[0]))
    add_wall(work, curve, pressure_mpa, RESIDUAL_NAMES if bool(curve.brittle[0]) else {})
    return work.lines


def add_stiffness(work: Working, shear_modulus_mpa: float, rename: Names | None = None) -> None:
    """G."""
    work.add("G", "shear modulus", "E/(2*(1 + nu))", shear_modulus_mpa, "MPa", "elasticity", rename)


def add_dilation(work: Working, dilation: float) -> None:
    """Kpsi of the flow rule."""
    formula = "(1 + sin(radians(psi)))/(1 - sin(radians(psi)))"
    work.add("Kpsi", "slope of the plastic strains", formula, dilation, "", FLOW_RULE)


def add_critical_pressure(work: Working, critical_mpa: float, rename: Names | None = None) -> None:
    """The pressure below which the wall yields."""
    if critical_mpa == 0:
        meaning = "pressure below which the wall yields: none, 2 p0 is within its strength sci s^a"
        formula = "max(0, 2*p0 - sci*s^a)"
    else:
        meaning = "pressure below which the wall yields, root of"
        formula = "2*(p0 - pcr) = sci*(mb*pcr/sci + s)^a"
    work.known[(rename or {}).get("pcr", "pcr")] = critical_mpa
    work.add("pcr", meaning, formula, critical_mpa, "MPa", CRITICAL, rename)


def add_wall(
    work: Working,
    curve: HoekBrownCurve,
    pressure_mpa: float,
    rename: Names,
    closure: str = "u_R",
) -> CurvePoint:
    """Plastic ratio and closure of a wall under a pressure `p_i`.

    `rename` says which constants hold in the ring, and which symbols stand for the state.
    """
    point = curve.at(row(pressure_mpa))
    names = {**rename, "u_R": closure} if closure != "u_R" else rename
    ratio, moved = float(point.plastic_ratio[0]), float(point.closure_ratio[0])
    if pressure_mpa >= float(curve.critical_pressure_mpa[0]):
        add_elastic_wall(work, ratio, moved, names)
        return point
    power = float(curve.critical_power[0])
    formula = "(mb*pcr/sci + s)^(1 - a)"
    work.add("M_cr", "N^(1-a) at the edge of the ring", formula, power, "", EQUILIBRIUM, names)
    work.add(
        "X",
        "plastic radius over the radius",
        f"exp((M_cr - {WALL_NUMBER})/((1 - a)*mb))",
        ratio,
        "",
        EQUILIBRIUM,
        names,
    )
    dilation = float(curve.dilation[0])
    if not np.isfinite(moved):
        work.add("u_R", BEYOND, "", moved, "", MOVEMENT, names)
        return point
    if dilation == 1:
        formula = CLOSURE_WITHOUT_DILATION
    else:
        formula = CLOSURE
        add_ring_integral(work, curve, float(np.log(ratio)), power, names)
    work.add("u_R", "closure over the radius", formula, moved, "", MOVEMENT, names)
    return point


def add_elastic_wall(
    work: Working, plastic_ratio: float, closure_ratio: float, names: Names
) -> None:
    """A wall that does not yield."""
    work.add("X", "plastic radius over the radius: no ring", "1", plastic_ratio, "", LAME, names)
    formula = "(p0 - p_i)/(2*G)"
    work.add("u_R", "closure over the radius", formula, closure_ratio, "", LAME, names)


def add_ring_integral(
    work: Working,
    curve: HoekBrownCurve,
    depth: float,
    edge_power: float,
    names: Names,
    brittle: bool | None = None,
) -> None:
    """J, the strength in the ring weighted with the growth of movement; `depth` is ln(Rp / R)."""
    exponent = ring_exponent(row(depth), curve.dilation)
    mean = ring_integral_mpa(
        exponent,
        np.array([True]),
        curve.intact_strength_mpa,
        curve.mb,
        curve.a,
        curve.dilation,
        row(edge_power),
        curve.brittle if brittle is None else np.array([brittle]),
    )
    formula = (
        f"integral(y, 0, ln(X), sci*({WALL_NUMBER} + (1 - a)*mb*y)^(a/(1 - a))*exp((Kpsi + 1)*y))"
    )
    result = float(mean[0] * np.exp(exponent[0]))
    work.add("J", "strength in the ring, over y = ln(r/R)", formula, result, "MPa", MOVEMENT, names)
