"""Strength of the rock mass, line by line."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.api import SectionValues, SheetLine, Working
from tunnelcalc.builtin.methods.lines.symbols import known, number
from tunnelcalc.calculation.symbols import SYMBOLS

Formula = tuple[str, str, str, str]
"""Column, meaning, formula, unit."""

LARGER_STRESS = "max(sv_e, sh_e)"
CURVATURE = "(s + mb*s3max/sci)^(a - 1)"
WEIGHT = "((1 + a)*(2 + a))"

FROM_QUALITY: Sequence[Formula] = (
    ("mb", "Hoek-Brown constant", "mi*exp((GSI - 100)/(28 - 14*D))", ""),
    ("s", "Hoek-Brown constant", "exp((GSI - 100)/(9 - 3*D))", ""),
    ("a", "Hoek-Brown exponent", "1/2 + (exp(-GSI/15) - exp(-20/3))/6", ""),
)
RESIDUAL: Sequence[Formula] = (
    ("residual_mb", "residual constant", "mi*exp((GSI_r - 100)/(28 - 14*D))", ""),
    ("residual_s", "residual constant", "exp((GSI_r - 100)/(9 - 3*D))", ""),
    ("residual_a", "residual exponent", "1/2 + (exp(-GSI_r/15) - exp(-20/3))/6", ""),
)
DERIVED: Sequence[Formula] = (
    ("rock_mass_strength_mpa", "unconfined strength of the rock mass", "sci*s^a", "MPa"),
    ("tensile_strength_mpa", "tensile strength, magnitude", "s*sci/mb", "MPa"),
    (
        "global_strength_mpa",
        "global strength of the rock mass",
        "sci*(mb + 4*s - a*(mb - 8*s))*(mb/4 + s)^(a - 1)/(2*(1 + a)*(2 + a))",
        "MPa",
    ),
    (
        "confinement_mpa",
        "upper confinement of the equivalent line",
        f"0.47*scm*(scm/{LARGER_STRESS})^(-0.94)",
        "MPa",
    ),
    (
        "friction_angle_deg",
        "equivalent friction angle",
        f"degrees(asin(6*a*mb*{CURVATURE}/(2*{WEIGHT} + 6*a*mb*{CURVATURE})))",
        "deg",
    ),
    (
        "cohesion_mpa",
        "equivalent cohesion",
        f"sci*((1 + 2*a)*s + (1 - a)*mb*s3max/sci)*{CURVATURE}"
        f"/({WEIGHT}*sqrt(1 + 6*a*mb*{CURVATURE}/{WEIGHT}))",
        "MPa",
    ),
)
STRAIGHT: Sequence[Formula] = (
    (
        "rock_mass_strength_mpa",
        "unconfined strength of the rock mass",
        "2*c*cos(radians(phi))/(1 - sin(radians(phi)))",
        "MPa",
    ),
    ("global_strength_mpa", "global strength: the same, the line has no bend", "sc", "MPa"),
)

QUALITY = ("intact_strength_mpa", "mi", "gsi", "residual_gsi", "mass_disturbance")
STRESSES = ("effective_vertical_stress_mpa", "effective_horizontal_stress_mpa")


def of_quality(values: SectionValues, source: str) -> Sequence[SheetLine]:
    """Constants from the geological strength index, and what follows."""
    work = Working(known(values, (*QUALITY, *STRESSES)), source)
    formulas = [*FROM_QUALITY, *DERIVED]
    if number(values, "residual_gsi") == number(values, "residual_gsi"):
        formulas += RESIDUAL
    return _written(work, formulas, values)


def of_constants(values: SectionValues, source: str) -> Sequence[SheetLine]:
    """What follows from constants as entered."""
    columns = ("intact_strength_mpa", "mb", "s", "a", *STRESSES)
    return _written(Working(known(values, columns), source), DERIVED, values)


def of_straight_line(values: SectionValues, source: str) -> Sequence[SheetLine]:
    """What follows from cohesion and friction angle as entered."""
    columns = ("cohesion_mpa", "friction_angle_deg")
    return _written(Working(known(values, columns), source), STRAIGHT, values)


def _written(
    work: Working, formulas: Sequence[Formula], values: SectionValues
) -> Sequence[SheetLine]:
    for column, meaning, formula, unit in formulas:
        work.add(SYMBOLS[column], meaning, formula, number(values, column), unit)
    return work.lines
