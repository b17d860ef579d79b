"""Disturbance of the whole mass, or confined to a ring, by hand."""

from __future__ import annotations

import math

import numpy as np
import pytest
from unit.pipeline.grounds import all_by, evaluated, sections_of

from tunnelcalc.project import MethodChoice

RING = all_by(ground_reaction="hoek_brown_disturbed_ring")
D = 0.7


def hoek_brown(gsi: float, mi: float, disturbance: float) -> tuple[float, float, float]:
    """Hoek, Carranza-Torres & Corkum (2002), written out here."""
    return (
        mi * math.exp((gsi - 100) / (28 - 14 * disturbance)),
        math.exp((gsi - 100) / (9 - 3 * disturbance)),
        0.5 + (math.exp(-gsi / 15) - math.exp(-20 / 3)) / 6,
    )


def simplified(gsi: float, disturbance: float) -> float:
    """Hoek & Diederichs (2006) without an intact modulus. [MPa]"""
    return 1e5 * (1 - disturbance / 2) / (1 + math.exp((75 + 25 * disturbance - gsi) / 11))


def constants(sections, prefix=""):
    return [sections[f"{prefix}{name}"][0] for name in ("mb", "s", "a")]


def disturbed(**columns: float):
    return sections_of(disturbance=D, **columns)


def test_with_a_thickness_the_mass_is_undisturbed_and_the_ring_is_not():
    found = evaluated(disturbed(disturbed_thickness_m=1.5), methods=RING)
    assert found["mass_disturbance"][0] == 0
    np.testing.assert_allclose(constants(found), hoek_brown(30, 10, 0), rtol=1e-13)
    np.testing.assert_allclose(constants(found, "ring_"), hoek_brown(30, 10, D), rtol=1e-13)
    np.testing.assert_allclose(found["deformation_modulus_mpa"], simplified(30, 0), rtol=1e-13)
    np.testing.assert_allclose(found["ring_modulus_mpa"], simplified(30, D), rtol=1e-13)


def test_without_a_thickness_the_whole_mass_is_disturbed():
    found = evaluated(disturbed(), methods=RING)
    assert found["mass_disturbance"][0] == D
    np.testing.assert_allclose(constants(found), hoek_brown(30, 10, D), rtol=1e-13)
    usual = evaluated(disturbed())
    for name in ("closure_mm", "plastic_radius_m", "critical_pressure_mpa"):
        np.testing.assert_allclose(found[name], usual[name], rtol=1e-9)


def test_a_thickness_of_zero_is_undisturbed_ground():
    found = evaluated(disturbed(disturbed_thickness_m=0.0), methods=RING)
    sound = evaluated(sections_of(disturbance=0.0))
    for name in ("closure_mm", "plastic_radius_m", "critical_pressure_mpa"):
        np.testing.assert_allclose(found[name], sound[name], rtol=1e-9)


def test_closure_lies_between_that_of_undisturbed_and_of_wholly_disturbed_ground():
    whole, none = evaluated(disturbed()), evaluated(sections_of(disturbance=0.0))
    ring = evaluated(disturbed(disturbed_thickness_m=1.0), methods=RING)
    thicker = evaluated(disturbed(disturbed_thickness_m=3.0), methods=RING)
    closures = [run["closure_mm"][0] for run in (none, ring, thicker, whole)]
    assert closures == sorted(closures)
    assert len(set(closures)) == 4


def test_a_law_that_knows_no_ring_takes_the_disturbance_for_the_whole_mass():
    found = evaluated(disturbed(disturbed_thickness_m=1.5))
    assert found["mass_disturbance"][0] == D
    np.testing.assert_allclose(constants(found), hoek_brown(30, 10, D), rtol=1e-13)
    assert "ring_mb" not in found


def test_a_measured_modulus_is_lowered_in_the_ring_as_an_estimate_would_be():
    ground = disturbed(disturbed_thickness_m=1.5, rock_mass_modulus_mpa=2000.0)
    found = evaluated(ground, methods=RING)
    assert found["deformation_modulus_mpa"][0] == 2000.0
    share = simplified(30, D) / simplified(30, 0)
    np.testing.assert_allclose(found["ring_modulus_mpa"], 2000.0 * share, rtol=1e-13)


def test_a_relation_that_knows_no_disturbance_leaves_the_modulus_of_the_ring():
    ground = disturbed(disturbed_thickness_m=1.5, rmr89=30.0)
    chosen = {**RING, **all_by(deformation_modulus="serafim_pereira_1983")}
    found = evaluated(ground, methods=chosen)
    assert found["ring_modulus_mpa"][0] == found["deformation_modulus_mpa"][0]


def test_by_unit_only_the_ground_of_that_law_is_confined():
    names = ("hoek_brown_perfectly_plastic", "hoek_brown_disturbed_ring")
    ground = sections_of(2, disturbance=D, disturbed_thickness_m=1.5, ground_reaction_method=[0, 1])
    found = evaluated(ground, methods={"ground_reaction": MethodChoice(names, {"x": names[1]})})
    assert found["mass_disturbance"].tolist() == [D, 0]
    for at, alone in enumerate(
        (
            evaluated(disturbed(disturbed_thickness_m=1.5)),
            evaluated(disturbed(disturbed_thickness_m=1.5), methods=RING),
        )
    ):
        for name in ("mb", "closure_mm", "plastic_radius_m", "deformation_modulus_mpa"):
            assert found[name][at].tobytes() == alone[name][0].tobytes()


@pytest.mark.parametrize("law", ["hoek_brown_disturbed_ring", "hoek_brown_perfectly_plastic"])
def test_the_finite_strain_law_confines_as_its_own_does(law):
    ground = disturbed(disturbed_thickness_m=1.5)
    small, finite = (
        evaluated(ground, methods=all_by(ground_reaction=name))
        for name in (law, f"{law}_finite_strain")
    )
    assert finite["mass_disturbance"].tolist() == small["mass_disturbance"].tolist()
    assert finite["plastic_radius_m"][0] == small["plastic_radius_m"][0]
    assert finite["closure_mm"][0] < small["closure_mm"][0]
