"""Quantities that ground and units tables may have, and what may be said of each."""

from __future__ import annotations

from tunnelcalc.vocabulary.quantity import Limits, Quantity, Sort

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


GROUND = {quantity.name: quantity for quantity in _of_ground()}
"""Columns that ground and units tables may have, besides the interval's ends and unit."""

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
