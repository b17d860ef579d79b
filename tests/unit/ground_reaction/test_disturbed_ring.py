"""Ground with a disturbed ring where the answer is known by hand, at its limits and its joints."""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import WEAK
from unit.ground_reaction.sound_ground import curve as homogeneous

from tunnelcalc.ground_reaction.disturbed_ring import DisturbedRingCurve

RING = {"ring_mb": 0.3, "ring_s": 0.0004, "ring_a": 0.52, "ring_modulus_mpa": 500.0}
GROUND = WEAK | RING | {"ring_ratio": 1.5}
NEVER_YIELDS = {"mb": 10.0, "s": 1.0, "a": 0.5, "intact_strength_mpa": 200.0}
ELASTIC = GROUND | NEVER_YIELDS | {"ring_mb": 10.0, "ring_s": 1.0, "ring_a": 0.5}
OF_RING = {"mb": 0.3, "s": 0.0004, "a": 0.52, "deformation_modulus_mpa": 500.0}
MASS_FIRST = GROUND | {"ring_mb": 0.9, "ring_s": 0.0015, "ring_modulus_mpa": 150.0}
"""Only softer, not weaker: it takes so little load that the mass yields before it."""
THINNER = {"ring_ratio": 1.1}
WEAKER = GROUND | {"ring_mb": 0.1, "ring_s": 1e-5, "ring_modulus_mpa": 1500.0}
"""Only weaker, not softer: it yields all over before the mass begins to."""


def curve(ground=GROUND, **values):
    columns = ground | values
    arrays = np.broadcast_arrays(*(np.atleast_1d(np.asarray(v, float)) for v in columns.values()))
    return DisturbedRingCurve.of_ground(
        **{name: a.copy() for name, a in zip(columns, arrays, strict=True)}
    )


def along(ground, pressures, **values):
    """One ground under many pressures."""
    size = np.shape(pressures)
    rows = {k: np.full(size, v) for k, v in (ground | values).items()}
    return DisturbedRingCurve.of_ground(**rows).at(np.asarray(pressures, float))


def test_elastic_ring_of_a_third_of_the_stiffness():
    """m = 1/3, nu = 0.3: w = (2/3) / 1.4 = 10/21, 1 - w = 11/21. With (r_d / R)^2 = 2.25 and
    p0 - pi = 5, D = 5 / (10/21 + 2.25 x 11/21) = 420 / 139. 2 Gd = 500 / 1.3, and
    u / R = (5 - D + m D) / (2 Gd) = (5 - 280 / 139) x 1.3 / 500."""
    found = curve(ELASTIC).at(np.zeros(1))
    assert found.closure_ratio[0] == pytest.approx((5 - 280 / 139) * 1.3 / 500, rel=1e-14)
    assert found.slope[0] == pytest.approx(-found.closure_ratio[0] / 5, rel=1e-14)
    assert found.plastic_ratio[0] == 1
    assert curve(ELASTIC).critical_pressure_mpa[0] == 0


def test_wall_of_the_soft_ring_yields_at_less_than_twice_the_released_stress():
    """Deviator at the wall 2 (Q - w D) = 2 Q (1 - (10/21) (84/139)) = 2 Q x 99/139. With s = 0,
    a = 1/2, 2 Q h = sqrt(mb sci p): for p = 1 and Q = 2, mb sci = (4 x 99/139)^2."""
    product = (4 * 99 / 139) ** 2
    ground = curve(
        in_situ_stress_mpa=3.0, s=1.0, ring_s=0.0, mb=9.0, a=0.5, ring_a=0.5, ring_mb=product / 20
    )
    assert ground.critical_pressure_mpa[0] == pytest.approx(1, rel=1e-13)


@pytest.mark.parametrize("pressure", [0.0, 0.5, 2.0, 5.0])
def test_ring_without_thickness_is_the_mass_to_the_last_bit(pressure):
    found, mass = curve(ring_ratio=1.0), homogeneous()
    assert found.critical_pressure_mpa == mass.critical_pressure_mpa
    for one, other in zip(
        found.at(np.array([pressure])), mass.at(np.array([pressure])), strict=True
    ):
        np.testing.assert_array_equal(one, other)


@pytest.mark.parametrize("dilation", [0.0, 5.0, 30.0])
def test_ring_of_hardly_any_thickness_moves_as_the_mass(dilation):
    pressure = np.linspace(0, 5, 21)
    found = along(GROUND, pressure, ring_ratio=1 + 1e-9, dilation_deg=dilation)
    mass = homogeneous(in_situ_stress_mpa=np.full(21, 5.0), dilation_deg=dilation).at(pressure)
    np.testing.assert_allclose(found.closure_ratio, mass.closure_ratio, rtol=1e-6, atol=1e-16)
    np.testing.assert_allclose(found.slope, mass.slope, rtol=1e-6)


@pytest.mark.parametrize("ratio", [1e9, 1e200, np.inf])
@pytest.mark.parametrize("dilation", [0.0, 5.0, 30.0])
def test_ring_without_end_is_ground_of_its_own(ratio, dilation):
    pressure = np.linspace(0, 5, 21)
    found = along(GROUND, pressure, ring_ratio=ratio, dilation_deg=dilation)
    same = OF_RING | {"in_situ_stress_mpa": np.full(21, 5.0), "dilation_deg": dilation}
    for one, other in zip(found, homogeneous(**same).at(pressure), strict=True):
        np.testing.assert_allclose(one, other, rtol=1e-12, atol=1e-17)
    critical = curve(ring_ratio=ratio, dilation_deg=dilation).critical_pressure_mpa
    expected = homogeneous(**OF_RING, dilation_deg=dilation).critical_pressure_mpa
    np.testing.assert_allclose(critical, expected, rtol=1e-13)


@pytest.mark.parametrize("ratio", [1.02, 1.5, 4.0])
def test_ring_like_the_mass_changes_nothing(ratio):
    pressure = np.linspace(0, 5, 21)
    like = {f"ring_{name}": WEAK[name] for name in ("mb", "s", "a")}
    like |= {"ring_modulus_mpa": WEAK["deformation_modulus_mpa"], "ring_ratio": ratio}
    found = along(GROUND | like, pressure)
    mass = homogeneous(in_situ_stress_mpa=np.full(21, 5.0)).at(pressure)
    for one, other in zip(found, mass, strict=True):
        np.testing.assert_allclose(one, other, rtol=1e-9, atol=1e-17)


JOINTS = pytest.mark.parametrize(
    "ground",
    [GROUND, MASS_FIRST, MASS_FIRST | THINNER, WEAKER, WEAKER | {"dilation_deg": 30.0}],
    ids=["weaker-and-softer", "softer", "softer-thin", "weaker", "weaker-dilating"],
)


@JOINTS
def test_closure_has_no_step_where_the_state_of_a_zone_changes(ground):
    """In each small step of the pressure the closure grows as the two slopes at its ends say:
    more than the lesser, less than the greater."""
    pressure = np.linspace(0, 5, 20_001)
    found = along(ground, pressure)
    rise = -np.diff(found.closure_ratio) / np.diff(pressure)
    steeper, flatter = -found.slope[:-1], -found.slope[1:]
    noise = 1e-9 * steeper.max()
    assert np.all(rise <= steeper + noise)
    assert np.all(rise >= flatter - noise)
    assert np.all(found.slope < 0)


def test_mass_may_yield_while_the_wall_is_elastic():
    """Just above the wall's own critical pressure the outermost yielded ground lies beyond the
    ring. The mass begins where the radial stress at the interface is its critical pressure."""
    ground = MASS_FIRST | THINNER
    critical = curve(ground).critical_pressure_mpa
    found = curve(ground).at(critical * 1.001)
    assert found.plastic_ratio[0] > 1.1
    mass = homogeneous().critical_pressure_mpa[0]
    softness = 0.9 / 1.4
    begins = 5 - (5 - mass) * (softness + (1 - softness) * 1.21)
    assert begins > critical[0] * 1.05
    before, after = along(ground, [begins * (1 + 1e-9), begins * (1 - 1e-9)]).plastic_ratio
    assert before == 1
    assert after == pytest.approx(1.1, rel=1e-6)


def test_weaker_ring_yields_all_over_before_the_mass_does():
    """Then the edge of the yielded ground stays at the interface for a range of pressures."""
    ratio = along(WEAKER | THINNER, np.linspace(0, 5, 2001)).plastic_ratio
    stays = np.isclose(ratio, 1.1, rtol=1e-12)
    assert stays.sum() > 20
    assert ratio[stays].max() == pytest.approx(1.1, rel=1e-14)
    assert np.all(np.diff(ratio) <= 1e-12)
    assert ratio[0] > 1.2
    assert ratio[-1] == 1


@JOINTS
def test_slope_is_the_derivative_of_the_closure(ground):
    """Central differences, but for the steps that hold a kink."""
    pressure, h = np.linspace(0.013, 4.987, 300), 1e-5
    low, middle, high = (along(ground, pressure + d) for d in (-h, 0, h))
    measured = (high.closure_ratio - low.closure_ratio) / (2 * h)
    smooth = np.abs(low.slope / high.slope - 1) < 1e-3
    assert smooth.sum() > 290
    np.testing.assert_allclose(middle.slope[smooth], measured[smooth], rtol=1e-5)


@pytest.mark.parametrize(
    "change",
    [
        *({name: np.nan} for name in GROUND),
        {"ring_ratio": 0.999},
        {"ring_modulus_mpa": 1501.0},
        {"ring_mb": 0.91},
        {"ring_s": 0.0016},
        {"ring_a": 0.4},
    ],
    ids=lambda change: "{}={}".format(*next(iter(change.items()))),
)
def test_what_is_unknown_or_no_disturbed_ring_is_nan_and_spoils_no_other(change):
    (name, value), pressure = *change.items(), np.zeros(3)
    alone = curve().at(np.zeros(1))
    together = curve(**{name: np.array([GROUND[name], value, GROUND[name]])})
    assert np.isnan(together.critical_pressure_mpa).tolist() == [False, True, False]
    for one, many in zip(alone, together.at(pressure), strict=True):
        assert np.isnan(many[1])
        np.testing.assert_array_equal(many[[0, 2]], np.repeat(one, 2))


def test_ring_stronger_only_at_middling_stress_is_no_disturbed_ring():
    """At no stress and at p0 = sci the ring is the weaker: 0.01^0.5 = 0.1 against
    0.04^0.6 = 0.145, and 1.01^0.5 = 1.005 against 1.04^0.6 = 1.02; at a tenth of sci the stronger:
    0.11^0.5 = 0.332 against 0.14^0.6 = 0.307."""
    change = {"s": 0.04, "mb": 1.0, "a": 0.6, "ring_s": 0.01, "ring_mb": 1.0, "ring_a": 0.5}
    found = curve(**change, in_situ_stress_mpa=20.0, intact_strength_mpa=20.0)
    assert np.isnan(found.critical_pressure_mpa[0])


def test_unknown_pressure_gives_nan_for_its_section_alone():
    found = curve(poisson_ratio=np.full(2, 0.3)).at(np.array([np.nan, 0.0]))
    for values in found:
        assert np.isnan(values).tolist() == [True, False]


def test_closure_beyond_the_range_of_a_double_is_nan():
    """Yielded ground without end, by way of the ring and by way of the mass."""
    hopeless = {"intact_strength_mpa": 0.5, "in_situ_stress_mpa": 100.0, "dilation_deg": 60.0}
    weak = {"mb": 0.02, "s": 1e-6, "ring_mb": 0.01, "ring_s": 1e-7, "ring_ratio": [1.2, 1e100]}
    ground = curve(**hopeless, **weak)
    assert np.all(ground.critical_pressure_mpa > 0)
    assert np.isnan(ground.at(np.zeros(2)).closure_ratio).all()
    assert np.isfinite(ground.at(np.full(2, 99.9)).closure_ratio).all()


def test_taken_sections_are_those_of_the_whole():
    ground = curve(ring_ratio=[1.0, 1.2, 1.5, 3.0])
    pressure = np.array([0.0, 0.3, 0.1, 1.0])
    index = np.array([3, 1])
    for whole, taken in zip(
        ground.at(pressure), ground.take(index).at(pressure[index]), strict=True
    ):
        np.testing.assert_array_equal(whole[index], taken)
