"""What holds for every ground reaction curve: brittle Hoek-Brown, Mohr-Coulomb, elastic.

Values are drawn over the whole range that the inputs allow, ends included.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import assume, given
from hypothesis import strategies as st

from tunnelcalc.ground_reaction.elastic import ElasticCurve
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.rock_mass.hoek_brown import HoekBrownConstants, MohrCoulomb

ROUNDING = 1e-11
"""What rounding may leave of a closure or plastic radius in the weakest ground. [-]"""
QUADRATURE = 3e-9
"""The error of a closure that the program's quadrature may leave. [-]"""
shares = st.floats(0, 1)
PRESSURES = np.concatenate([[0, 1e-12, 1e-6], np.linspace(0, 1, 30) ** 2])
"""Shares of the in-situ stress."""


def elastic_columns(draw):
    return {
        "in_situ_stress_mpa": draw(st.floats(0.05, 100)),
        "deformation_modulus_mpa": draw(st.floats(10, 100_000)),
        "poisson_ratio": draw(st.floats(0, 0.4999) | st.sampled_from([0, 0.4999])),
    }


@st.composite
def brittle_hoek_brown(draw):
    """The class, columns of one section, and residual constants that are no stronger."""
    columns = elastic_columns(draw) | {
        "intact_strength_mpa": draw(st.floats(0.5, 1000)),
        "mb": draw(st.floats(0.01, 40)),
        "s": draw(st.floats(1e-8, 1)),
        "a": draw(st.floats(0.5, 0.66) | st.sampled_from([0.5])),
        "dilation_deg": draw(st.floats(0, 60) | st.sampled_from([0, 60])),
    }
    mb = columns["mb"] * draw(st.floats(0.05, 1))
    s = columns["s"] * draw(shares | st.sampled_from([0, 1]))
    residual = draw(st.sampled_from([None, (mb, s, columns["a"])]))
    return HoekBrownCurve, columns, residual and HoekBrownConstants(*residual)


@st.composite
def mohr_coulomb(draw):
    """The class, columns of one section, and a residual line that is nowhere higher."""
    columns = elastic_columns(draw) | {
        "cohesion_mpa": draw(st.floats(0.001, 50) | st.sampled_from([0])),
        "friction_angle_deg": draw(st.floats(0, 70) | st.sampled_from([0, 1e-9])),
        "dilation_deg": draw(st.floats(0, 60) | st.sampled_from([0, 60])),
    }
    angle = columns["friction_angle_deg"] * draw(st.floats(0.1, 1))
    cohesion = columns["cohesion_mpa"] * draw(st.floats(0.01, 1) | st.sampled_from([0, 1]))
    residual = draw(st.sampled_from([None, (angle, cohesion)]))
    return MohrCoulombCurve, columns, residual and MohrCoulomb(*residual)


@st.composite
def elastic(draw):
    return ElasticCurve, elastic_columns(draw), None


grounds = brittle_hoek_brown() | mohr_coulomb() | elastic()


def curve_of(ground, count=1, **changed):
    kind, columns, residual = ground
    arrays = {name: np.full(count, float(v)) for name, v in (columns | changed).items()}
    if residual is not None:
        arrays["residual"] = type(residual)(*(np.full(count, float(v)) for v in residual))
    return kind.of_ground(**arrays)


def along(ground, **changed):
    """The whole curve, from no pressure to the in-situ stress."""
    pressure = np.sort(PRESSURES) * ground[1]["in_situ_stress_mpa"]
    return curve_of(ground, pressure.size, **changed).at(pressure)


@given(grounds)
def test_closure_falls_and_the_ring_shrinks_as_the_pressure_rises(ground):
    found = along(ground)
    assert not np.isnan(curve_of(ground).critical_pressure_mpa).any()
    for values, error in ((found.closure_ratio, QUADRATURE), (found.plastic_ratio, ROUNDING)):
        known = values[np.isfinite(values)]
        assert known.size > 0
        assert np.all(known[1:] <= known[:-1] * (1 + error))
        # What cannot be computed lies under the smallest pressures.
        assert np.all(np.diff(np.isfinite(values).astype(int)) >= 0)


@given(grounds)
def test_ring_is_never_inside_the_wall_and_slope_never_rises_above_that_of_elastic_ground(ground):
    found = along(ground)
    assert np.all((found.plastic_ratio >= 1) | np.isnan(found.plastic_ratio))
    elastic_slope = -(1 + ground[1]["poisson_ratio"]) / ground[1]["deformation_modulus_mpa"]
    known = ~np.isnan(found.slope)
    assert np.all(found.slope[known] <= elastic_slope * (1 - 1e-8))


@given(grounds, shares)
def test_closure_is_never_less_than_that_of_elastic_ground(ground, share):
    p0, modulus = ground[1]["in_situ_stress_mpa"], ground[1]["deformation_modulus_mpa"]
    closure = curve_of(ground).at(np.array([share * p0])).closure_ratio[0]
    assume(np.isfinite(closure))
    elastic_closure = (p0 - share * p0) * (1 + ground[1]["poisson_ratio"]) / modulus
    assert closure >= elastic_closure * (1 - QUADRATURE)


@given(grounds, st.sampled_from([1 / 64, 0.5, 8]))
def test_closure_goes_with_one_over_the_modulus(ground, factor):
    """Factors are powers of 2, so that not a bit may differ."""
    found = along(ground)
    modulus = ground[1]["deformation_modulus_mpa"]
    softer = along(ground, deformation_modulus_mpa=modulus * factor)
    np.testing.assert_array_equal(softer.plastic_ratio, found.plastic_ratio)
    np.testing.assert_array_equal(softer.closure_ratio * factor, found.closure_ratio)


@given(grounds)
def test_closure_and_radius_in_radii_do_not_change_where_all_stresses_double(ground):
    """Stress, strength and modulus in another unit; there is no length in the curve at all."""
    kind, columns, residual = ground
    names = ("in_situ_stress_mpa", "intact_strength_mpa", "cohesion_mpa", "deformation_modulus_mpa")
    doubled = columns | {name: 2 * columns[name] for name in names if name in columns}
    if isinstance(residual, MohrCoulomb):
        residual = residual._replace(cohesion_mpa=2 * residual.cohesion_mpa)
    found, expected = along((kind, doubled, residual)), along(ground)
    np.testing.assert_array_equal(found.plastic_ratio, expected.plastic_ratio)
    np.testing.assert_array_equal(found.closure_ratio, expected.closure_ratio)


@given(grounds, st.integers(0, 32))
def test_section_does_not_depend_on_what_is_computed_beside_it(ground, section):
    pressure = np.sort(PRESSURES) * ground[1]["in_situ_stress_mpa"]
    every = curve_of(ground, pressure.size)
    row = np.array([section])
    for together, taken, alone in zip(
        every.at(pressure),
        every.take(row).at(pressure[row]),
        curve_of(ground).at(pressure[row]),
        strict=True,
    ):
        np.testing.assert_array_equal(together[row], taken)
        np.testing.assert_array_equal(alone, taken)


@given(brittle_hoek_brown() | mohr_coulomb(), shares)
def test_brittle_ground_moves_no_less_than_ground_that_keeps_its_strength(ground, share):
    kind, columns, residual = ground
    assume(residual is not None)
    pressure = np.array([share * columns["in_situ_stress_mpa"]])
    found, kept = curve_of(ground).at(pressure), curve_of((kind, columns, None)).at(pressure)
    for lost, other in zip(found[:2], kept[:2], strict=True):
        assert lost[0] >= other[0] * (1 - QUADRATURE) or not np.isfinite(lost[0])


@pytest.mark.parametrize("angle", [0.0, 20.0])
def test_sections_broadcast_with_pressures(angle):
    """Sections down, pressures across."""
    stress = np.array([[2.0], [5.0], [9.0]])
    pressure = np.linspace(0, 2, 7)
    given_ground = {
        "cohesion_mpa": np.array([[0.2], [0.5], [0.3]]),
        "friction_angle_deg": np.full((3, 1), angle),
        "deformation_modulus_mpa": np.full((3, 1), 800.0),
        "poisson_ratio": np.full((3, 1), 0.25),
        "dilation_deg": np.full((3, 1), 7.0),
    }
    table = MohrCoulombCurve.of_ground(in_situ_stress_mpa=stress, **given_ground).at(pressure)
    for row in range(3):
        one = {name: np.full(7, values[row, 0]) for name, values in given_ground.items()}
        curve = MohrCoulombCurve.of_ground(in_situ_stress_mpa=np.full(7, stress[row, 0]), **one)
        for values, expected in zip(table, curve.at(pressure), strict=True):
            np.testing.assert_array_equal(values[row], expected)
