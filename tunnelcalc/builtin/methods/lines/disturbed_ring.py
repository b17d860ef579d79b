"""Ground reaction with a ring of other ground, line by line: it depends on what has yielded.

Symbols with _d belong to the ring, those without to the mass beyond it; _w to the state in which
the wall just yields, _c to the edge of the plastic part of the ring.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc.api import SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines import hoek_brown
from tunnelcalc.builtin.methods.lines.hoek_brown import FLOW_RULE, LAME, MOVEMENT
from tunnelcalc.builtin.methods.lines.ring_laws import (
    OF_MASS,
    HoekBrownRing,
    PlasticPart,
    RingLines,
)
from tunnelcalc.builtin.methods.lines.symbols import known, row
from tunnelcalc.ground_reaction.disturbed_ring import DisturbedRingCurve, RingCurve
from tunnelcalc.ground_reaction.ring_zones import (
    AnyZones,
    drop_beside_yielded_mass,
    elastic_drop,
)

RING_COLUMNS = ("ring_mb", "ring_s", "ring_a", "ring_modulus_mpa", "disturbed_thickness_m")
OF_RING = {"E": "E_d", "G": "G_d"}
AT_YIELD = {name: f"{name}_w" for name in ("D", "p_d", "X_u", "V", "M_u", "J_u")}

DEVIATOR = "(2*G_d*V + (1 - 2*nu)*D)/(2*(1 - nu))"
"""Half of st - sr of an elastic ring at its outer edge, from the movement of the mass."""


def wall_lines(
    values: SectionValues, pressure_mpa: float, source: str, curve: DisturbedRingCurve
) -> Sequence[SheetLine]:
    """The wall under a pressure; `curve` is that of the one section."""
    of_ring = known(values, RING_COLUMNS)
    return layered_lines(HoekBrownRing(), values, of_ring, pressure_mpa, source, curve)


def layered_lines(
    law: RingLines,
    values: SectionValues,
    of_ring: Mapping[str, float],
    pressure_mpa: float,
    source: str,
    curve: RingCurve,
) -> Sequence[SheetLine]:
    """The wall of a ring of any strength under a pressure.

    `of_ring` holds thickness t_d and what differs from the mass, by symbols with _d.
    """
    zones = curve.zones
    if not float(zones.log_ratio[0]) > 0:
        return law.without_ring(values, pressure_mpa, source)
    columns = (*law.columns, "radius_m")
    work = Working({**known(values, columns), **of_ring, "p_i": pressure_mpa}, source)
    _add_constants(work, law, zones)
    _add_critical(work, law, curve)
    moved = float(curve.at(row(pressure_mpa)).closure_ratio[0])
    if not np.isfinite(moved):
        work.add("u_R", hoek_brown.BEYOND, "", moved, "", MOVEMENT)
    elif pressure_mpa >= float(curve.critical_pressure_mpa[0]):
        _add_elastic_ring(work, law, zones, pressure_mpa, curve)
    else:
        _add_yielded_ring(work, law, zones, pressure_mpa, curve)
    return work.lines


def _add_constants(work: Working, law: RingLines, zones: AnyZones) -> None:
    hoek_brown.add_stiffness(work, float(zones.mass.shear_modulus_mpa[0]))
    hoek_brown.add_stiffness(work, float(zones.ring.shear_modulus_mpa[0]), OF_RING)
    formula = "(1 + sin(radians(psi)))/(1 - sin(radians(psi)))"
    dilation = float(zones.ring.dilation[0])
    work.add("Kpsi", "slope of the plastic strains", formula, dilation, "", FLOW_RULE)
    ratio = float(np.exp(zones.log_ratio[0]))
    radius = work.known["R"] * ratio
    work.add("r_d", "outer radius of the ring", "R + t_d", radius, "m", "geometry")
    work.add("k_d", "square of R over r_d", "(R/r_d)^2", ratio**-2, "", "geometry")
    law.add_critical(work, zones)


def _add_critical(work: Working, law: RingLines, curve: RingCurve) -> None:
    """The pressure below which the wall yields, with the mass as it then is."""
    zones, critical = curve.zones, float(curve.critical_pressure_mpa[0])
    if not critical > 0:
        why = "it does not" if critical == 0 else "not computed, this is no disturbed ring"
        work.add("pcr", f"pressure below which the wall yields: {why}", "", critical, "MPa", LAME)
        return
    work.known["pcr"] = critical
    edge = zones.edge(zones.wall_place(row(critical)), row(0.0))
    strength, formula = float(edge.half_strength[0]), f"{law.strength_at_yield}/2"
    work.add("T_w", "half the strength at the wall", formula, strength, "MPa", law.criterion)
    formula = "p0 - pcr - T_w*(1 - k_d)"
    drop = float(edge.drop_mpa[0])
    work.add("D_w", "fall of radial stress at r_d", formula, drop, "MPa", LAME)
    _add_mass(work, law, zones, drop, AT_YIELD)
    formula = f"k_d*{law.strength_at_yield}/2 = (2*G_d*V_w + (1 - 2*nu)*D_w)/(2*(1 - nu))"
    work.add("pcr", "pressure below which the wall yields, root of", formula, critical, "MPa", LAME)


def _add_mass(
    work: Working,
    law: RingLines,
    zones: AnyZones,
    drop_mpa: float,
    more: Mapping[str, str] | None = None,
) -> None:
    """p_d and the movement V of the mass at r_d under it."""
    names = {short: (more or {}).get(long, long) for short, long in OF_MASS.items()}
    pressure = float(zones.mass.in_situ_stress_mpa[0]) - drop_mpa
    drop = (more or {}).get("D", "D")
    meaning = "radial stress at r_d"
    work.add(names["p_i"], meaning, f"p0 - {drop}", pressure, "MPa", "equilibrium")
    law.add_mass(work, zones, pressure, names)


def _add_elastic_ring(
    work: Working, law: RingLines, zones: AnyZones, pressure_mpa: float, curve: RingCurve
) -> None:
    released = row(float(zones.ring.in_situ_stress_mpa[0]) - pressure_mpa)
    drop, _ = elastic_drop(zones, released)
    yielded = bool((zones.ring.in_situ_stress_mpa - drop < zones.mass.critical_pressure_mpa)[0])
    meaning = "fall of radial stress at r_d"
    if yielded:
        fall = float(drop_beside_yielded_mass(zones, released)[0])
        work.known["D"] = fall
    else:
        fall = float(drop[0])
        formula = "(p0 - p_i)*k_d/(k_d + (1 - (1 - G_d/G)/(2*(1 - nu)))*(1 - k_d))"
        work.add("D", meaning, formula, fall, "MPa", LAME)
    _add_mass(work, law, zones, fall)
    if yielded:
        formula = f"k_d*D + (1 - k_d)*{DEVIATOR} = k_d*(p0 - p_i)"
        work.add("D", f"{meaning}, root of", formula, fall, "MPa", LAME)
    point = curve.at(row(pressure_mpa))
    formula = "r_d/R*X_u" if yielded else "1"
    _add_ratio(work, formula, float(point.plastic_ratio[0]))
    closure = float(point.closure_ratio[0])
    formula = "(p0 - p_i - D)/(2*G_d) + V"
    work.add("u_R", "closure over the radius", formula, closure, "", LAME)


def _add_yielded_ring(
    work: Working, law: RingLines, zones: AnyZones, pressure_mpa: float, curve: RingCurve
) -> None:
    point = curve.at(row(pressure_mpa))
    part = PlasticPart.of_zones(zones, row(pressure_mpa))
    edge, depth = part.edge, float(part.depth[0])
    _add_edge(work, law, zones, part)
    interface = zones.interface(edge.drop_mpa)
    _add_mass(work, law, zones, float(edge.drop_mpa[0]))
    if not part.wholly:
        formula = f"exp(2*(y_c - ln(r_d/R)))*T_c = {DEVIATOR}"
        work.add(
            "y_c", "ln(c/R), c the edge of the plastic part, root of", formula, depth, "", LAME
        )
    strength, relief = float(edge.half_strength[0]), float(edge.relief[0])
    double = 2 * float(zones.ring.shear_modulus_mpa[0])
    at_edge = strength * (1 - relief) / double + float(interface.mass.closure_ratio[0])
    formula = "T_c*(1 - k_c)/(2*G_d) + V"
    work.add("u_c", "movement of the edge over its radius", formula, at_edge, "", LAME)
    work.add("X_c", "edge over the radius", "exp(y_c)", float(np.exp(depth)), "", "geometry")
    dilating = ""
    if float(zones.ring.dilation[0]) != 1:
        law.add_integral(work, zones, part)
        dilating = " - (Kpsi - 1)*(1 - nu)*J"
    outside = part.wholly or float(interface.mass.plastic_ratio[0]) > 1
    _add_ratio(work, "r_d/R*X_u" if outside else "X_c", float(point.plastic_ratio[0]))
    formula = (
        "(X_c^(Kpsi + 1)*(2*G_d*u_c + (1 - 2*nu)*(p0 - sr_c)) - (1 - 2*nu)*(p0 - p_i)"
        f"{dilating})/(2*G_d)"
    )
    work.add("u_R", "closure over the radius", formula, float(point.closure_ratio[0]), "", MOVEMENT)


def _add_edge(work: Working, law: RingLines, zones: AnyZones, part: PlasticPart) -> None:
    """The edge of the ring's plastic part."""
    law.add_edge(work, zones, part)
    formula = "exp(2*(y_c - ln(r_d/R)))"
    relief = float(part.edge.relief[0])
    work.add("k_c", "square of c over r_d", formula, relief, "", "geometry")
    formula = "p0 - sr_c - T_c*(1 - k_c)"
    drop = float(part.edge.drop_mpa[0])
    work.add("D", "fall of radial stress at r_d", formula, drop, "MPa", LAME)


def _add_ratio(work: Working, formula: str, ratio: float) -> None:
    meaning = "radius of the outermost yielded ground over the radius"
    work.add("X", meaning, formula, ratio, "", "geometry")
