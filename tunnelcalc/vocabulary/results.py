"""Quantities that a run finds, or that the curves of one section have."""

from __future__ import annotations

from tunnelcalc.vocabulary.quantity import Limits, Quantity


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


RESULTS = {quantity.name: quantity for quantity in _of_results()}
"""Every quantity that is computed, by name."""
