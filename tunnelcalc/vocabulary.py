"""The one list of quantities: name, symbol, unit, meaning, allowed range.

Readers, checks, table headers and listings take their labels from here. A name is the trade's
own term in full, followed by its unit, and is the same in input tables, project files, output
tables and code.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import Enum

import numpy as np

from tunnelcalc.arrays import Array


@dataclass(frozen=True, slots=True)
class Limits:
    """Allowed range of a number; `above` and `below` exclude the end itself."""

    minimum: float = -math.inf
    maximum: float = math.inf
    above: bool = False
    below: bool = False
    whole: bool = False

    def contain(self, values: Array) -> Array:
        """Mask of the values inside the range; NaN and infinity are not."""
        low = values > self.minimum if self.above else values >= self.minimum
        high = values < self.maximum if self.below else values <= self.maximum
        inside = low & high & np.isfinite(values)
        return inside & (values == np.floor(values)) if self.whole else inside

    def describe(self, unit: str = "") -> str:
        """The range in words: "a number above 0, at most 100, in MPa"."""
        words = []
        if math.isfinite(self.minimum):
            words.append(f"{'above' if self.above else 'at least'} {self.minimum:g}")
        if math.isfinite(self.maximum):
            words.append(f"{'below' if self.below else 'at most'} {self.maximum:g}")
        kind = "a whole number" if self.whole else "a number"
        text = f"{kind} {', '.join(words)}" if words else kind
        return f"{text}, in {unit}" if unit else text


UNLIMITED = Limits()


class Sort(Enum):
    """What a value is."""

    NUMBER = "number"
    CHOICE = "choice"
    TEXT = "text"


@dataclass(frozen=True, slots=True)
class Quantity:
    """One entry of the vocabulary.

    `used` is False for a ground column that is read, checked and carried along although no
    method of this version computes with it; a run that has such values says so.
    """

    name: str
    symbol: str
    unit: str
    meaning: str
    limits: Limits = UNLIMITED
    sort: Sort = Sort.NUMBER
    choices: tuple[str, ...] = ()
    used: bool = True

    def allowed(self) -> str:
        """The allowed values in words."""
        if self.sort is Sort.CHOICE:
            return " or ".join(self.choices)
        if self.sort is Sort.TEXT:
            return "text"
        return self.limits.describe(self.unit)


_POSITIVE = Limits(0, above=True)
_NOT_NEGATIVE = Limits(0)
_COUNT = Limits(0, 1e6, whole=True)
_NONE_OR_PRESENT = ("none", "present")


def _choice(name: str, meaning: str, *choices: str) -> Quantity:
    return Quantity(name, "", "", meaning, sort=Sort.CHOICE, choices=choices)


def _of_ground() -> tuple[Quantity, ...]:
    stress = Limits(0, 500, above=True)
    strength = Limits(0, 1000, above=True)
    modulus = Limits(0, 1e6, above=True)
    rating = Limits(0, 100)
    return (
        Quantity("cover_m", "H", "m", "height of ground over the crown", Limits(0, 10000)),
        Quantity("unit_weight_kn_m3", "gamma", "kN/m3", "unit weight of the cover", Limits(5, 60)),
        Quantity(
            "vertical_stress_mpa",
            "sv",
            "MPa",
            "vertical in-situ stress at the tunnel axis; measured, it overrides the cover",
            stress,
        ),
        Quantity(
            "stress_ratio", "k0", "", "horizontal over vertical stress", Limits(0, 10, above=True)
        ),
        Quantity(
            "intact_strength_mpa",
            "sci",
            "MPa",
            "uniaxial compressive strength of intact rock",
            strength,
        ),
        Quantity("mi", "mi", "", "constant of the intact rock", Limits(0, 60, above=True)),
        Quantity("gsi", "GSI", "", "geological strength index", Limits(0, 100, above=True)),
        Quantity("disturbance", "D", "", "disturbance factor", Limits(0, 1)),
        Quantity("poisson_ratio", "nu", "", "Poisson ratio", Limits(0, 0.5, below=True)),
        Quantity("dilation_deg", "psi", "deg", "dilation angle", Limits(0, 60)),
        Quantity("intact_modulus_mpa", "Ei", "MPa", "modulus of the intact rock", modulus),
        Quantity(
            "modulus_ratio",
            "MR",
            "",
            "intact modulus over intact strength",
            Limits(0, 10000, above=True),
        ),
        Quantity(
            "rock_mass_modulus_mpa",
            "Erm",
            "MPa",
            "measured deformation modulus of the rock mass; overrides the method",
            modulus,
        ),
        Quantity(
            "residual_gsi",
            "GSIr",
            "",
            "residual geological strength index",
            Limits(0, 100, above=True),
        ),
        *_of_entered_strength(),
        Quantity(
            "disturbed_thickness_m",
            "",
            "m",
            "thickness of the ring around the opening to which the disturbance is confined",
            Limits(0, 100, above=True),
        ),
        Quantity("rmr89", "RMR89", "", "rock mass rating, actual water", rating),
        Quantity("rmr89_dry", "RMR89'", "", "rock mass rating, dry", rating),
        Quantity("q", "Q", "", "rock mass quality Q", _POSITIVE),
        Quantity("q_prime", "Q'", "", "Q without water and stress", _POSITIVE),
        Quantity("jcond89", "JCond89", "", "joint condition rating", Limits(0, 30)),
        Quantity("rqd_pct", "RQD", "%", "rock quality designation", rating),
        Quantity("block_volume_cm3", "Vb", "cm3", "block volume", _POSITIVE),
        Quantity("joint_condition", "Jc", "", "joint condition factor", _POSITIVE),
        Quantity("point_load_mpa", "Is50", "MPa", "point load index", _POSITIVE),
        Quantity(
            "point_load_factor",
            "k",
            "",
            "intact strength over point load index",
            Limits(0, 100, above=True),
        ),
        Quantity("water_head_m", "hw", "m", "water head above the axis", _NOT_NEGATIVE),
        Quantity("inflow_l_min_10m", "", "L/min/10m", "water inflow", _NOT_NEGATIVE),
        Quantity("joint_set_count", "", "", "number of joint sets", Limits(0, 20, whole=True)),
        Quantity("joint_set_number", "Jn", "", "joint set number of the Q system", Limits(0.5, 20)),
        Quantity(
            "joint_roughness_number",
            "Jr",
            "",
            "joint roughness number of the Q system",
            Limits(0.5, 5),
        ),
        Quantity(
            "excavation_support_ratio",
            "ESR",
            "",
            "excavation support ratio of the Q system, by the use of the opening",
            Limits(0.5, 5),
        ),
        Quantity("joint_spacing_m", "", "m", "spacing of joints", _POSITIVE),
        Quantity("block_width_m", "", "m", "width of critical blocks", _POSITIVE),
        _choice("swelling_minerals", "swelling minerals", *_NONE_OR_PRESENT),
        _choice("excavation", "whether the section is driven in stages", "full_face", "staged"),
        _choice("heterogeneous_ground", "alternation of unlike rock", *_NONE_OR_PRESENT),
        _choice("creeping_ground", "ground that creeps", *_NONE_OR_PRESENT),
        _choice(
            "site_hazards", "earthquake, gas, aggressive ground, temperature", *_NONE_OR_PRESENT
        ),
        Quantity(
            "neighbour_clear_distance_m",
            "",
            "m",
            "clear distance to a neighbouring opening",
            _NOT_NEGATIVE,
        ),
        Quantity("portal_distance_m", "", "m", "distance to the portal", _NOT_NEGATIVE),
        Quantity(
            "boundary_tolerance_m",
            "",
            "m",
            "uncertainty of the interval's ends",
            _NOT_NEGATIVE,
            used=False,
        ),
        Quantity("fault_width_m", "", "m", "width of the fault zone, 0 for none", _NOT_NEGATIVE),
    )


def _of_entered_strength() -> tuple[Quantity, ...]:
    """Constants of strength criteria, where tests or back-analysis give them directly."""
    constant, exponent = Limits(0, 60, above=True), Limits(0.5, 1, below=True)
    share, cohesion = Limits(0, 1), Limits(0, 500)
    angle = Limits(0, 80)
    return (
        Quantity("mb", "mb", "", "Hoek-Brown constant of the rock mass", constant),
        Quantity("s", "s", "", "Hoek-Brown constant of the rock mass", share),
        Quantity("a", "a", "", "Hoek-Brown exponent of the rock mass", exponent),
        Quantity("friction_angle_deg", "phi", "deg", "friction angle of the rock mass", angle),
        Quantity("cohesion_mpa", "c", "MPa", "cohesion of the rock mass", cohesion),
        Quantity("residual_mb", "mb_r", "", "residual Hoek-Brown constant", constant),
        Quantity("residual_s", "s_r", "", "residual Hoek-Brown constant", share),
        Quantity("residual_a", "a_r", "", "residual Hoek-Brown exponent", exponent),
        Quantity("residual_friction_angle_deg", "phi_r", "deg", "residual friction angle", angle),
        Quantity("residual_cohesion_mpa", "c_r", "MPa", "residual cohesion", cohesion),
        Quantity(
            "critical_shear_strain",
            "eta*",
            "",
            "plastic shear strain at which the strength is residual",
            Limits(0, 1, above=True),
        ),
    )


def _of_results() -> tuple[Quantity, ...]:
    return (
        Quantity("chainage_m", "", "m", "middle of the section"),
        Quantity("from_m", "", "m", "start of the interval or section"),
        Quantity("to_m", "", "m", "end of the interval or section"),
        Quantity("span_m", "B", "m", "width of the opening"),
        Quantity("confinement_mpa", "s3max", "MPa", "upper confinement of the equivalent line"),
        Quantity("tested_confinement_mpa", "", "MPa", "greatest minor stress of triaxial tests"),
        Quantity("radius_m", "R", "m", "radius of the opening", Limits(0.5, 30)),
        Quantity("water_pressure_mpa", "uw", "MPa", "water pressure taken off the total stress"),
        Quantity("effective_vertical_stress_mpa", "sv'", "MPa", "vertical stress less water"),
        Quantity("effective_horizontal_stress_mpa", "sh'", "MPa", "k0 times the vertical one"),
        Quantity("in_situ_stress_mpa", "p0", "MPa", "mean in-plane in-situ stress, effective"),
        Quantity(
            "larger_stress_mpa",
            "",
            "MPa",
            "larger in-plane stress, with which sections far from equal stress are run too",
        ),
        Quantity("mass_disturbance", "D", "", "disturbance factor of the mass beyond the ring"),
        Quantity("rock_mass_strength_mpa", "sc", "MPa", "unconfined strength of the rock mass"),
        Quantity("tensile_strength_mpa", "st", "MPa", "tensile strength, magnitude"),
        Quantity("global_strength_mpa", "scm", "MPa", "global strength of the rock mass"),
        Quantity("deformation_modulus_mpa", "Erm", "MPa", "deformation modulus used"),
        Quantity("ring_mb", "mb_d", "", "Hoek-Brown constant of the disturbed ring"),
        Quantity("ring_s", "s_d", "", "Hoek-Brown constant of the disturbed ring"),
        Quantity("ring_a", "a_d", "", "Hoek-Brown exponent of the disturbed ring"),
        Quantity("ring_modulus_mpa", "Ed", "MPa", "deformation modulus of the disturbed ring"),
        Quantity(
            "squeezing_strength_mpa", "", "MPa", "strength in the squeezing relation, not scm"
        ),
        Quantity("squeezing_strain_pct", "", "%", "closure without support, squeezing relation"),
        Quantity("face_strain_pct", "", "%", "strain of the face without support"),
        Quantity("spalling_depth_m", "", "m", "depth of spalling were the rock massive"),
        Quantity("critical_pressure_mpa", "pcr", "MPa", "pressure below which the wall yields"),
        Quantity("plastic_radius_m", "Rp", "m", "radius of the plastic zone without support"),
        Quantity("closure_mm", "u", "mm", "closure without support, far from the face"),
        Quantity("closure_pct", "u/R", "%", "closure without support, per cent of the radius"),
        Quantity("installation_closure_mm", "ui", "mm", "closure before the first element"),
        Quantity("support_pressure_mpa", "p", "MPa", "pressure of the support at rest"),
        Quantity("supported_closure_mm", "us", "mm", "closure with support"),
        Quantity("supported_closure_pct", "us/R", "%", "closure with support"),
        Quantity("supported_plastic_radius_m", "Rps", "m", "plastic radius with support"),
        Quantity(
            "first_failure_pressure_mpa",
            "",
            "MPa",
            "of all elements, when the first is at its limit",
        ),
        Quantity(
            "first_failure_closure_mm", "", "mm", "closure at which the first is at its limit"
        ),
        Quantity(
            "full_mobilisation_pressure_mpa", "", "MPa", "greatest pressure that the class can give"
        ),
        Quantity("full_mobilisation_closure_mm", "", "mm", "closure at which it gives it"),
        Quantity(
            "missing_pressure_mpa",
            "",
            "MPa",
            "what the class lacks, with its factor, of the pressure needed at the closure limit",
        ),
        Quantity("limit_pressure_mpa", "", "MPa", "pressure that the closure limit needs"),
        Quantity("factor_of_safety", "FS", "", "least capacity over demand of the load checks"),
        Quantity("needed_pressure_mpa", "", "MPa", "pressure at which closure meets its limit"),
        Quantity("length_m", "L", "m", "length of a zone"),
        Quantity("governing_chainage_m", "", "m", "middle of the section that governs a zone"),
        Quantity("least_factor_of_safety", "", "", "least factor of a zone's scheduled class"),
        Quantity("element_pressure_mpa", "", "MPa", "wall pressure carried by one element"),
        Quantity("element_capacity_mpa", "", "MPa", "wall pressure at the element's limit"),
        *_of_curves(),
    )


def _of_curves() -> tuple[Quantity, ...]:
    """What only the curves of one section have."""
    line = "the equivalent straight line"
    return (
        Quantity("element_water_mpa", "", "MPa", "water pressure that a ring carries besides"),
        Quantity("face_distance_m", "x", "m", "distance from the face, positive behind it"),
        Quantity("profile_closure_mm", "", "mm", "closure without support, so far from the face"),
        Quantity("closure_share", "", "", "share of the closure far behind the face"),
        Quantity("springline_angle_deg", "", "deg", "angle from the springline; 90 is the crown"),
        Quantity(
            "lining_thrust_mn_per_m", "N", "MN/m", "thrust of the lining, compression positive"
        ),
        Quantity(
            "lining_moment_mnm_per_m",
            "M",
            "MN m/m",
            "moment of the lining, positive with tension at the rock side",
        ),
        Quantity("minor_stress_mpa", "s3", "MPa", "minor principal stress"),
        Quantity("major_stress_mpa", "s1", "MPa", "major principal stress at failure"),
        Quantity("line_major_stress_mpa", "", "MPa", f"major principal stress by {line}"),
        Quantity("line_difference_mpa", "", "MPa", f"major stress by {line}, less the criterion's"),
        Quantity("line_difference_pct", "", "%", "the same, per cent of the criterion's"),
        Quantity("normal_stress_mpa", "sn", "MPa", "normal stress on the plane of failure"),
        Quantity("shear_stress_mpa", "tau", "MPa", "shear stress on the plane of failure"),
        Quantity("line_shear_stress_mpa", "", "MPa", f"shear stress by {line}, same normal stress"),
        Quantity("line_shear_difference_mpa", "", "MPa", "shear stress by it, less criterion's"),
    )


GROUND = {quantity.name: quantity for quantity in _of_ground()}
"""Columns that ground and units tables may have, besides the interval's ends and unit."""

QUANTITIES = GROUND | {quantity.name: quantity for quantity in _of_results()}
"""Every quantity by name."""

WORDS = {
    "chainage": "middle of the section, as the project writes chainages",
    "from_chainage": "start, as the project writes chainages",
    "to_chainage": "end, as the project writes chainages",
    "governing_chainage": "middle of the governing section, as the project writes chainages",
    "profile": "name of the opening's profile",
    "quantity": "a ground quantity, or what a flag compares",
    "value": "in the unit of its row, or yes or no",
    "origin": "table, unit, estimated, levels or assumed",
    "method": "by which method or rule, empty for a value as written",
    "tests": "number of tests",
    "r_squared": "coefficient of determination of the regression",
    "outliers": "specimens that stand apart, joined by a semicolon; none is left out",
    "ground_unit": "name of the ground unit",
    "ground_units": "ground units of a zone, joined by a semicolon",
    "support_class": "name of the class, or none_adequate",
    "stress_case": "which in-plane stress governs the row: mean, or larger",
    "strength": "whose strength: peak or residual of the mass, or of the disturbed ring",
    "point": "what is special about a point of a curve, joined by a semicolon",
    "required_class": "first class that meets every criterion, or none_adequate",
    "scheduled_class": "class after zoning, or none_adequate",
    "adequate": "whether the class meets every criterion: yes, no, or, of what was tried, "
    "not_evaluated",
    "governing_check": "element:check that governs, or closure",
    "improved_ring": "whether the ground is that with the ring that the class improves: yes or no",
    "element": "support element of the class; empty for what concerns the whole class",
    "parameter": "parameter that is varied",
    "parameter_value": "value or word that is tried, in the unit of its row",
    "value_now": "what the project states, in the unit of its row",
    "lowest_tried": "least value that was tried, in the unit of its row",
    "highest_tried": "greatest value that was tried, in the unit of its row",
    "words_tried": "words that were tried, joined by a semicolon",
    "held": "what else was changed meanwhile, as ELEMENT.PARAMETER=VALUE, joined by a semicolon",
    "adequate_from": "least value of the first stretch that is adequate, in the unit of its row",
    "adequate_to": "greatest value of that stretch, in the unit of its row",
    "adequate_words": "words that are adequate, joined by a semicolon",
    "verdict": "whether anything that was tried makes the class adequate",
    "check": "check of the element",
    "demand": "in the unit of its row",
    "capacity": "in the unit of its row",
    "unit": "unit of the row's numbers",
    "outcome": "pass, fail or not_evaluated",
    "reason": "why a check was not evaluated, what a flag lacks, or why it was accepted",
    "item": "item of the quantities",
    "amount": "in the unit of its row",
    "flags": "names of flags at advisory, outside or overridden, sorted, joined by a semicolon",
    "flag": "name of a flag on validity",
    "level": "clear, advisory, outside, not_assessed or overridden",
    "threshold": "where the levels of a flag begin",
    "numbers": "the numbers behind the value of a flag, at chainage_m",
    "threshold_source": "publication, common practice or project setting",
    "meaning": "what a raised flag means",
    "remedy": "what to do about it",
    "person": "who accepted the flag",
}
"""Columns of the outputs that hold words, or numbers whose unit stands in the row."""

TESTS_SUFFIX = "_tests"
UNIT_SUFFIXES = ("_mean", TESTS_SUFFIX, "_probable", "_cautious")
"""What a units table may say of a quantity besides the value and its deviation."""

DEVIATION_SUFFIX = "_sd"
"""NAME_sd is the standard deviation of the ground column NAME."""
_DEVIATION_USED = ("intact_strength_mpa",)
"""Ground columns whose deviation the flags look at."""


def ground_quantity(name: str) -> Quantity | None:
    """The quantity of a ground column, what is said of it included; None if unknown."""
    if name in GROUND:
        return GROUND[name]
    for suffix in (DEVIATION_SUFFIX, *UNIT_SUFFIXES):
        base = GROUND.get(name.removesuffix(suffix)) if name.endswith(suffix) else None
        if base is None or base.sort is not Sort.NUMBER:
            continue
        if suffix == DEVIATION_SUFFIX:
            meaning = f"standard deviation of {base.name}"
            used = base.name in _DEVIATION_USED
            return Quantity(name, "", base.unit, meaning, _NOT_NEGATIVE, used=used)
        if suffix == TESTS_SUFFIX:
            return Quantity(name, "", "", f"number of tests of {base.name}", _COUNT)
        word = suffix.removeprefix("_")
        return Quantity(name, "", base.unit, f"{word} value of {base.name}", base.limits)
    return None
