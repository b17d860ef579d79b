"""What holds for every ground: of moduli, straight lines, envelopes, squeezing and spalling.

Values are drawn over the whole range that the inputs allow, ends included.
"""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tunnelcalc.rock_mass import (
    brittle_failure,
    dead_weight,
    deformation_modulus,
    envelope,
    mohr_coulomb,
    squeezing,
    water,
)
from tunnelcalc.rock_mass.hoek_brown import (
    equivalent_mohr_coulomb,
    global_strength_mpa,
    hoek_brown_constants,
    tunnel_confinement_mpa,
)

STRENGTH, STRESS, MODULUS = (1e-3, 1000), (1e-3, 500), (1e-3, 1e6)
GSI, MI, SHARE, RATING = (1e-3, 100), (1e-3, 60), (0, 1), (0, 100)
ANGLE, COHESION, HEAD = (0, 80), (0, 500), (0, 1e4)
MB, EXPONENT, RADIUS = (1e-3, 60), (0.5, 0.99), (0.5, 30)


def critical_strain_pct(modulus):
    return squeezing.critical_strain_pct(modulus, squeezing.WarningLevel.SECOND)


FUNCTIONS = {
    deformation_modulus.hoek_2002_mpa: (GSI, SHARE, STRENGTH),
    deformation_modulus.serafim_pereira_1983_mpa: (RATING,),
    deformation_modulus.bieniawski_1978_mpa: (RATING,),
    deformation_modulus.barton_2002_mpa: ((1e-3, 1e3), STRENGTH),
    mohr_coulomb.unconfined_strength_mpa: (COHESION, ANGLE),
    mohr_coulomb.slope: (ANGLE,),
    mohr_coulomb.strength_difference_mpa: ((-10, 500), COHESION, ANGLE),
    mohr_coulomb.shear_strength_mpa: ((-10, 500), COHESION, ANGLE),
    envelope.principal_envelope: ((-10, 500), STRENGTH, MB, SHARE, EXPONENT),
    envelope.hoek_brown_gradient: ((-10, 500), STRENGTH, MB, SHARE, EXPONENT),
    envelope.straight_envelope: ((-10, 500), COHESION, ANGLE),
    envelope.normal_and_shear: ((-10, 500), (-10, 1000), (0, 100)),
    envelope.tangent_angle_deg: ((0, 100),),
    envelope.line_error: (STRENGTH, MB, SHARE, EXPONENT, STRESS, COHESION, ANGLE),
    squeezing.squeezing_strength_mpa: (STRENGTH, MI, GSI),
    squeezing.squeezing_strain_pct: (STRENGTH, STRESS),
    squeezing.squeezing_band: ((0, 100),),
    squeezing.supported_strain_pct: (STRENGTH, STRESS, STRESS),
    squeezing.face_strain_pct: (STRENGTH, STRESS, STRESS),
    squeezing.plastic_radius_ratio_1999: (STRENGTH, STRESS, STRESS),
    squeezing.closure_ratio_1999: (STRENGTH, STRESS, STRESS),
    critical_strain_pct: (MODULUS,),
    brittle_failure.spalling_depth_m: (STRESS, STRENGTH, RADIUS),
    brittle_failure.burst_ratio: (STRENGTH, STRESS),
    dead_weight.plastic_zone_weight_mpa: ((5, 60), (0.5, 300), RADIUS),
    water.water_pressure_mpa: (HEAD,),
    water.effective_stresses_mpa: (STRESS, (1e-3, 10), (0, 100)),
}
"""Each relation with the ranges of its columns."""
NOT_NEEDED_BY_ALL = {water.effective_stresses_mpa}
"""The vertical stress does not need the ratio: a missing ratio leaves it."""
fewer = settings(max_examples=40, deadline=None)
by_name = pytest.mark.parametrize("function", FUNCTIONS, ids=lambda f: f.__name__)


def results(function, columns):
    """All columns that a relation gives, (k, n)."""
    return np.atleast_2d(np.array(function(*columns)))


@by_name
@given(data=st.data())
@fewer
def test_sections_keep_every_bit_whoever_stands_beside_them(function, data):
    count = data.draw(st.integers(2, 40))
    rng = np.random.default_rng(data.draw(st.integers(0, 2**32)))
    columns = [rng.uniform(*ends, count) for ends in FUNCTIONS[function]]
    whole = results(function, columns)
    order = rng.permutation(count)
    np.testing.assert_array_equal(
        results(function, [column[order] for column in columns]), whole[:, order]
    )
    cut = data.draw(st.integers(1, count - 1))
    parts = [results(function, [c[piece] for c in columns]) for piece in (np.s_[:cut], np.s_[cut:])]
    np.testing.assert_array_equal(np.concatenate(parts, axis=1), whole)


@by_name
@given(data=st.data())
@fewer
def test_a_missing_value_leaves_its_row_empty_and_no_other(function, data):
    ends = FUNCTIONS[function]
    values = [data.draw(st.floats(*pair)) for pair in ends]
    columns = [np.full(3, value) for value in values]
    alone = results(function, [column[:1] for column in columns])[:, 0]
    place = data.draw(st.integers(0, len(ends) - 1))
    columns[place][1] = np.nan
    found = results(function, columns)
    np.testing.assert_array_equal(found[:, 0], alone)
    np.testing.assert_array_equal(found[:, 2], alone)
    if function not in NOT_NEEDED_BY_ALL:
        assert np.isnan(found[:, 1]).all()


@by_name
@given(data=st.data())
@fewer
def test_no_value_whatever_raises_a_warning_or_gives_a_wrong_shape(function, data):
    """Warnings are errors here. Values lie in and beyond the ranges, on both sides of 0."""
    anything = st.sampled_from([np.nan, -1.0, 0.0, 50.0, 90.0, 100.0, 1e4, -1e4])
    columns = [
        np.array(data.draw(st.lists(anything | st.floats(*pair), min_size=4, max_size=4)))
        for pair in FUNCTIONS[function]
    ]
    assert results(function, columns).shape[1] == 4


RISING = [
    (deformation_modulus.hoek_2002_mpa, (1, -1, 1)),
    (deformation_modulus.serafim_pereira_1983_mpa, (1,)),
    (deformation_modulus.bieniawski_1978_mpa, (1,)),
    (deformation_modulus.barton_2002_mpa, (1, 1)),
    (mohr_coulomb.unconfined_strength_mpa, (1, 1)),
    (mohr_coulomb.slope, (1,)),
    (envelope.tangent_angle_deg, (1,)),
    (envelope.principal_envelope, (1, 0, 0, 1, 0)),
    (envelope.hoek_brown_gradient, (-1, 0, 0, -1, 0)),
    (squeezing.squeezing_strength_mpa, (1, 0, 1)),
    (squeezing.squeezing_strain_pct, (-1, 1)),
    (squeezing.squeezing_band, (1,)),
    (squeezing.supported_strain_pct, (-1, 0, 0)),
    (squeezing.face_strain_pct, (-1, 0, 0)),
    (squeezing.plastic_radius_ratio_1999, (-1, 0, 0)),
    (squeezing.closure_ratio_1999, (-1, 0, 0)),
    (critical_strain_pct, (-1,)),
    (brittle_failure.spalling_depth_m, (1, -1, 1)),
    (brittle_failure.burst_ratio, (1, -1)),
    (dead_weight.plastic_zone_weight_mpa, (1, 1, -1)),
    (water.water_pressure_mpa, (1,)),
]
"""Which way a relation goes as each of its columns rises; 0 where it may go either way."""


@pytest.mark.parametrize(("function", "ways"), RISING, ids=lambda v: getattr(v, "__name__", ""))
@given(data=st.data())
@fewer
def test_a_relation_goes_one_way(function, ways, data):
    ends = FUNCTIONS[function]
    place = data.draw(st.sampled_from([i for i, way in enumerate(ways) if way]))
    columns = [np.full(2, data.draw(st.floats(*pair))) for pair in ends]
    columns[place] = np.sort([columns[place][0], data.draw(st.floats(*ends[place]))])
    low, high = function(*columns)
    if np.isfinite([low, high]).all():
        assert (high - low) * ways[place] >= -1e-12 * max(abs(low), abs(high))


@st.composite
def rocks(draw):
    """sci, mb, s, a, s3max of one section."""
    constants = hoek_brown_constants(
        *(np.array([draw(st.floats(*ends))]) for ends in ((5, 100), (1, 40), (0, 1)))
    )
    sci = np.array([draw(st.floats(0.5, 300))])
    whole = global_strength_mpa(sci, *constants)
    stress = np.array([draw(st.floats(0.1, 100))])
    return (sci, *constants, tunnel_confinement_mpa(whole, stress))


@given(rocks(), st.floats(0, 1))
@fewer
def test_no_point_of_the_range_differs_by_more_than_the_line_error(rock, share):
    sci, mb, s, a, top = rock
    fit = equivalent_mohr_coulomb(*rock)
    c, phi = fit.cohesion_mpa, fit.friction_angle_deg
    found = envelope.line_error(*rock, c, phi)
    tip = s * sci / mb
    for low, largest, over in ((-tip, found.difference_mpa, 0), (0 * tip, found.relative, 1)):
        minor = np.minimum(low + share * (top - low), top)
        criterion = envelope.principal_envelope(minor, sci, mb, s, a)
        line = mohr_coulomb.unconfined_strength_mpa(c, phi) + mohr_coulomb.slope(phi) * minor
        error = (line - criterion) / (criterion if over else 1)
        scale = 1 if over else np.abs(criterion) + sci * s**a + tip
        assert np.all(np.abs(error) <= np.abs(largest) + 1e-8 * scale)


@given(rocks(), st.floats(1e-3, 1e3))
@fewer
def test_stresses_in_another_unit_scale_the_line_error(rock, factor):
    sci, mb, s, a, top = rock
    fit = equivalent_mohr_coulomb(*rock)
    c, phi = fit.cohesion_mpa, fit.friction_angle_deg
    one = envelope.line_error(sci, mb, s, a, top, c, phi)
    other = envelope.line_error(sci * factor, mb, s, a, top * factor, c * factor, phi)
    np.testing.assert_allclose(other.difference_mpa, one.difference_mpa * factor, rtol=1e-8)
    np.testing.assert_allclose(other.relative, one.relative, rtol=1e-8)


@given(st.floats(*STRENGTH), st.floats(*STRESS), st.floats(0, 1))
@fewer
def test_the_face_moves_by_two_thirds_of_the_tunnel(strength, stress, share):
    columns = np.array([strength]), np.array([stress]), np.array([share * stress])
    face, tunnel = squeezing.face_strain_pct(*columns), squeezing.supported_strain_pct(*columns)
    np.testing.assert_allclose(face, tunnel * 2 / 3, rtol=1e-14)


@given(st.floats(*ANGLE), st.floats(*COHESION), st.floats(-10, 500))
@fewer
def test_the_straight_line_touches_its_circles(angle, cohesion, minor):
    """The distance of the line from the centre of a circle at failure is the circle's radius."""
    columns = np.array([cohesion]), np.array([angle])
    radius = mohr_coulomb.strength_difference_mpa(np.array([minor]), *columns) / 2
    phi = np.radians(angle)
    distance = (minor + radius) * np.sin(phi) + cohesion * np.cos(phi)
    scale = abs(minor) + np.abs(radius) + cohesion
    np.testing.assert_array_less(np.abs(distance - radius), 1e-13 * scale + 1e-300)
