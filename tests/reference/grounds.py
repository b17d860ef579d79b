"""The ground of one section: stresses, strength, modulus, and the curve for what follows."""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from typing import Any

from reference import rock_mass
from reference.ground_curve import (
    GroundCurve,
    Strength,
    StrengthCurve,
    hoek_brown_strength,
    mohr_coulomb_strength,
)
from reference.rock_mass import Criterion

Row = Mapping[str, Any]
DEFAULT_METHODS = {
    "strength": "hoek_brown_2002",
    "deformation_modulus": "hoek_diederichs_2006",
    "ground_reaction": "hoek_brown_perfectly_plastic",
    "closure_profile": "vlachopoulos_diederichs_2009",
}
LAWS = (
    "hoek_brown_perfectly_plastic",
    "hoek_brown_brittle",
    "mohr_coulomb_perfectly_plastic",
    "mohr_coulomb_brittle",
)
NAN = math.nan


def number(row: Row, name: str) -> float | None:
    """The value of a column, or None where it is absent, empty or NaN."""
    value = row.get(name)
    if value is None or (isinstance(value, str) and not value.strip()):
        return None
    known = float(value)
    return None if math.isnan(known) else known


def needed(row: Row, name: str) -> float:
    value = number(row, name)
    if value is None:
        raise KeyError(f"the section has no {name}")
    return value


def method(row: Row, project: Mapping[str, Any], step: str) -> str:
    """The method of this section's ground unit."""
    chosen = (project.get("methods") or {}).get(step, DEFAULT_METHODS[step])
    if isinstance(chosen, str):
        return chosen
    default = chosen.get("default", DEFAULT_METHODS[step])
    return str(chosen["by_unit"].get(row.get("ground_unit"), default))


def ground_of(
    row: Row, radius: float, project: Mapping[str, Any]
) -> tuple[dict[str, float | str], GroundCurve]:
    """The computed columns of `sections.csv` without classes, and the curve of the mean stress."""
    for step in ("deformation_modulus", "closure_profile"):
        if method(row, project, step) != DEFAULT_METHODS[step]:
            raise NotImplementedError(f"only the default {step} is known here")
    stresses = _stresses(row, radius, project)
    vertical, horizontal = (
        stresses[f"effective_{n}_stress_mpa"] for n in ("vertical", "horizontal")
    )
    strength, peak, ring = _strength(row, project, max(vertical, horizontal))
    modulus = number(row, "rock_mass_modulus_mpa")
    if modulus is None:
        modulus = rock_mass.deformation_modulus(
            needed(row, "gsi"), needed(row, "disturbance"), _intact_modulus(row)
        )
    common = (modulus, needed(row, "poisson_ratio"), number(row, "dilation_deg") or 0.0)
    p0 = stresses["in_situ_stress_mpa"]
    if isinstance(peak, Criterion):
        curve = GroundCurve(p0, *peak, *common)
    else:
        curve = StrengthCurve.of_strength(p0, peak, ring or peak, *common)
    plastic_ratio, closure_ratio = curve.unsupported
    return {
        "radius_m": radius,
        **stresses,
        **strength,
        "deformation_modulus_mpa": modulus,
        "critical_pressure_mpa": curve.critical_pressure,
        "plastic_radius_m": plastic_ratio * radius,
        "closure_mm": closure_ratio * radius * 1000,
        "closure_pct": closure_ratio * 100,
        **_hazards(row, radius, p0, max(vertical, horizontal), min(vertical, horizontal)),
    }, curve


def _stresses(row: Row, radius: float, project: Mapping[str, Any]) -> dict[str, float]:
    """Total less water where drainage is stated; the ratio is one of effective stresses."""
    total = number(row, "vertical_stress_mpa")
    if total is None:
        total = needed(row, "unit_weight_kn_m3") * (needed(row, "cover_m") + radius) / 1000
    stated = project["ground"].get("drainage")
    water = 9.81 * (number(row, "water_head_m") or 0.0) / 1000 if stated else 0.0
    ratio = 1.0 if (given := number(row, "stress_ratio")) is None else given
    vertical = total - water
    horizontal = ratio * vertical
    return {
        "water_pressure_mpa": water,
        "effective_vertical_stress_mpa": vertical,
        "effective_horizontal_stress_mpa": horizontal,
        "in_situ_stress_mpa": (vertical + horizontal) / 2,
        "larger_stress_mpa": NAN if 0.8 <= ratio <= 1.25 else max(vertical, horizontal),
    }


def _strength(
    row: Row, project: Mapping[str, Any], largest_stress: float
) -> tuple[dict[str, float], Criterion | Strength, Strength | None]:
    """Columns of the strength; the peak as its law takes it; what holds in the plastic ring."""
    law = method(row, project, "ground_reaction")
    if law not in LAWS:
        raise NotImplementedError(f"{law} is not known here")
    brittle = law.endswith("brittle")
    if method(row, project, "strength") == "mohr_coulomb":
        phi, cohesion = needed(row, "friction_angle_deg"), needed(row, "cohesion_mpa")
        residual = ("residual_friction_angle_deg", "residual_cohesion_mpa")
        ring = mohr_coulomb_strength(*(needed(row, n) for n in residual)) if brittle else None
        sine = math.sin(math.radians(phi))
        unconfined = 2 * cohesion * math.cos(math.radians(phi)) / (1 - sine)
        columns = {
            **dict.fromkeys(("mb", "s", "a", "tensile_strength_mpa"), NAN),
            **dict.fromkeys(("rock_mass_strength_mpa", "global_strength_mpa"), unconfined),
            "friction_angle_deg": phi,
            "cohesion_mpa": cohesion,
        }
        return columns, mohr_coulomb_strength(phi, cohesion), ring
    rock, residual_rock = _hoek_brown(row, project, brittle)
    line = rock_mass.tunnel_line(rock, largest_stress)
    columns = {
        **{name: getattr(rock, name) for name in ("mb", "s", "a")},
        "rock_mass_strength_mpa": rock.deviator(0.0),
        "tensile_strength_mpa": rock.tensile_strength,
        "global_strength_mpa": rock_mass.global_strength(rock),
        "friction_angle_deg": line.friction_angle_deg,
        "cohesion_mpa": line.cohesion,
    }
    if law.startswith("mohr_coulomb"):
        return columns, mohr_coulomb_strength(line.friction_angle_deg, line.cohesion), None
    if residual_rock is None:
        return columns, rock, None
    return columns, hoek_brown_strength(*rock), hoek_brown_strength(*residual_rock)


def _hoek_brown(
    row: Row, project: Mapping[str, Any], brittle: bool
) -> tuple[Criterion, Criterion | None]:
    sci = needed(row, "intact_strength_mpa")
    make: Callable[[str], Criterion]
    if method(row, project, "strength") == "hoek_brown_constants":

        def make(prefix: str) -> Criterion:
            return Criterion(sci, *(needed(row, f"{prefix}{name}") for name in ("mb", "s", "a")))
    else:

        def make(prefix: str) -> Criterion:
            index, mi = needed(row, f"{prefix}gsi"), needed(row, "mi")
            return rock_mass.criterion(sci, mi, index, needed(row, "disturbance"))

    return make(""), make("residual_") if brittle else None


def _intact_modulus(row: Row) -> float | None:
    given, ratio = number(row, "intact_modulus_mpa"), number(row, "modulus_ratio")
    if given is None and ratio is not None:
        return ratio * needed(row, "intact_strength_mpa")
    return given


def _hazards(
    row: Row, radius: float, p0: float, largest: float, smallest: float
) -> dict[str, float]:
    """Hoek & Marinos (2000) for squeezing and face, Martin, Kaiser & McCreath (1999)."""
    sci, mi, gsi = (number(row, name) for name in ("intact_strength_mpa", "mi", "gsi"))
    depth = NAN
    if sci is not None:
        depth = max(radius * (1.25 * (3 * largest - smallest) / sci - 0.51), 0.0)
    strength = NAN
    if sci is not None and mi is not None and gsi is not None:
        strength = 0.0034 * mi**0.8 * sci * (1.029 + 0.025 * math.exp(-0.1 * mi)) ** gsi
    return {
        "squeezing_strength_mpa": strength,
        "squeezing_strain_pct": 0.2 * (strength / p0) ** -2,
        "face_strain_pct": 0.1 * (strength / p0) ** (-1 / 0.54),
        "spalling_depth_m": depth,
    }
