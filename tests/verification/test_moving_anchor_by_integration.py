"""Displacement of the ground around an opening, integrated inwards from the edge of its ring.

Independent calculation: for each section `scipy.integrate.solve_ivp` integrates equilibrium and
the flow rule from the plastic radius to the wall; the plugin finds the displacement at a depth
from the ground reaction curve alone.
"""

import numpy as np
import pytest
from scipy.integrate import solve_ivp
from tunnelcalc_rock_bolts.moving_anchor import (
    anchor_displacement_m,
    displacement_beyond_ring_m,
    moving_anchor_pressure_mpa,
    stretch_m,
    stretch_share,
    undilating_share,
)

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve

RADIUS = 5.0
ONE = np.ones(1)
GROUNDS = {
    "weak": {"p0": 5.0, "sci": 10.0, "mb": 0.7, "s": 5e-4, "a": 0.52, "e": 1000.0, "psi": 0.0},
    "dilating": {"p0": 5.0, "sci": 10.0, "mb": 0.7, "s": 5e-4, "a": 0.52, "e": 1000.0, "psi": 8.0},
    "fair": {"p0": 8.0, "sci": 40.0, "mb": 1.5, "s": 3e-3, "a": 0.506, "e": 5000.0, "psi": 4.0},
    "sound": {"p0": 2.0, "sci": 90.0, "mb": 8.0, "s": 0.1, "a": 0.501, "e": 30000.0, "psi": 0.0},
}
NU = 0.25


def curve_of(ground):
    return HoekBrownCurve.of_ground(
        in_situ_stress_mpa=ground["p0"] * ONE,
        intact_strength_mpa=ground["sci"] * ONE,
        mb=ground["mb"] * ONE,
        s=ground["s"] * ONE,
        a=ground["a"] * ONE,
        deformation_modulus_mpa=ground["e"] * ONE,
        poisson_ratio=NU * ONE,
        dilation_deg=ground["psi"] * ONE,
    )


def integrated(ground, pressure, depths):
    """Inward displacement at depths from the wall, and the plastic radius. [m]"""
    p0, sci, mb, s, a = (ground[name] for name in ("p0", "sci", "mb", "s", "a"))
    double_shear = ground["e"] / (1 + NU)
    sine = np.sin(np.radians(ground["psi"]))
    flow = (1 + sine) / (1 - sine)
    curve = curve_of(ground)
    critical = curve.critical_pressure_mpa[0]
    edge_pressure = max(critical, pressure)

    def rates(log_r, state):
        radial, u = state
        r = np.exp(log_r)
        difference = sci * (mb * radial / sci + s) ** a
        hoop = radial + difference
        elastic_radial = ((1 - NU) * (radial - p0) - NU * (hoop - p0)) / double_shear
        elastic_hoop = ((1 - NU) * (hoop - p0) - NU * (radial - p0)) / double_shear
        return [difference, r * (elastic_radial + flow * elastic_hoop) - flow * u]

    def wall_reached(log_r, state):
        return state[0] - pressure

    wall_reached.terminal = True
    if pressure >= critical:
        plastic = RADIUS
    else:
        # First the width of the ring, from a unit radius inwards; then the ring itself.
        width = solve_ivp(
            rates, (0, -20), [critical, 0], events=wall_reached, rtol=1e-11, atol=1e-13
        )
        plastic = RADIUS / np.exp(width.t[-1])
    edge = plastic * (p0 - edge_pressure) / double_shear
    found = []
    for depth in depths:
        r = RADIUS + depth
        if r >= plastic:
            found.append(edge * plastic / r)
            continue
        ring = solve_ivp(
            rates, (np.log(plastic), np.log(r)), [edge_pressure, edge], rtol=1e-11, atol=1e-13
        )
        found.append(ring.y[1, -1])
    return np.array(found), plastic


@pytest.mark.parametrize("name", GROUNDS)
@pytest.mark.parametrize("share", [0.0, 0.05, 0.3])
def test_displacement_at_depth_is_that_of_the_integrated_ring(name, share):
    ground = GROUNDS[name]
    pressure = share * ground["p0"]
    depths = (0.0, 0.7, 2.0, 4.0, 9.0)
    wanted, plastic = integrated(ground, pressure, depths)
    curve = curve_of(ground)
    found = [anchor_displacement_m(curve, pressure * ONE, RADIUS * ONE, d)[0] for d in depths]
    np.testing.assert_allclose(found, wanted, rtol=1e-9)
    wall = curve.at(pressure * ONE)
    assert wall.plastic_ratio[0] * RADIUS == pytest.approx(plastic, rel=1e-9)
    assert found[0] == pytest.approx(wall.closure_ratio[0] * RADIUS, rel=1e-12)
    beyond = [
        displacement_beyond_ring_m(
            (RADIUS + depth) * ONE,
            plastic * ONE,
            max(pressure, curve.critical_pressure_mpa[0]) * ONE,
            ground["p0"] * ONE,
            ground["e"] / (2 * (1 + NU)) * ONE,
        )[0]
        for depth in depths
    ]
    outside = RADIUS + np.array(depths) >= plastic * (1 + 1e-9)
    np.testing.assert_array_equal(np.isnan(beyond)[outside], False)
    np.testing.assert_allclose(np.array(beyond)[outside], wanted[outside], rtol=1e-9)
    inside = RADIUS + np.array(depths) < plastic * (1 - 1e-9)
    assert np.isnan(np.array(beyond)[inside]).all()


def share_of(ground, length, installed, now):
    curve = curve_of(ground)
    walls, anchors = [], []
    for share in (installed, now):
        pressure = share * ground["p0"] * ONE
        walls.append(curve.at(pressure).closure_ratio * RADIUS)
        anchors.append(anchor_displacement_m(curve, pressure, RADIUS * ONE, length))
    stretch = stretch_m(walls[1], anchors[1], walls[0], anchors[0])
    return stretch_share(stretch, walls[1] - walls[0])[0]


@pytest.mark.parametrize("name", ["weak", "dilating"])
@pytest.mark.parametrize("length", [4.0, 5.0])
def test_in_yielding_ground_the_stretch_is_half_to_seven_tenths_of_the_closure(name, length):
    """Bolts put in when the ground has relaxed to 40 % of the stress, now at 15 %, R 5 m."""
    assert 0.5 < share_of(GROUNDS[name], length, 0.4, 0.15) < 0.7


@pytest.mark.parametrize("length", [4.0, 5.0])
def test_in_ground_that_hardly_yields_the_share_lies_between_the_two_limits(length):
    """Elastic: l / (R + l)."""
    share = share_of(GROUNDS["fair"], length, 0.4, 0.15)
    upper = undilating_share(NU * ONE, RADIUS * ONE, length)[0]
    assert length / (RADIUS + length) < share < upper


def test_without_dilation_the_share_tends_to_its_limit():
    """1 - 5 / (2 x 0.75 x 9) = 0.6296; the share lies below by (1 - 2 nu) of an elastic part."""
    limit = undilating_share(NU * ONE, RADIUS * ONE, 4.0)[0]
    assert limit == pytest.approx(1 - 5 / 13.5, rel=1e-14)
    shares = [share_of(GROUNDS["weak"], 4.0, 0.4, now) for now in (0.3, 0.2, 0.15)]
    assert shares == sorted(shares)
    assert limit - 0.05 < shares[-1] < limit


def test_in_elastic_ground_the_share_is_length_over_anchor_radius():
    assert share_of(GROUNDS["sound"], 3.0, 0.5, 0.1) == pytest.approx(3 / 8, rel=1e-12)


def test_a_still_anchor_overstates_the_pressure_by_one_over_the_share():
    stiffness, movement = 12.0, 0.02 * ONE
    moved = moving_anchor_pressure_mpa(0.6 * movement, stiffness)
    np.testing.assert_allclose(moved / (stiffness * movement), 0.6, rtol=1e-15)
    assert moving_anchor_pressure_mpa(-movement, stiffness)[0] == 0.0


def test_where_the_wall_has_not_moved_there_is_no_share():
    assert np.isnan(stretch_share(np.zeros(1), np.zeros(1))[0])


def test_sections_do_not_touch_each_other():
    """Each row alone and beside others, one of them NaN, to the last bit."""
    columns = [
        [ground[n] for ground in GROUNDS.values()]
        for n in ("p0", "sci", "mb", "s", "a", "e", "psi")
    ]
    columns[0][1] = np.nan
    p0, sci, mb, s, a, modulus, psi = (np.array(c) for c in columns)
    curve = HoekBrownCurve.of_ground(
        in_situ_stress_mpa=p0,
        intact_strength_mpa=sci,
        mb=mb,
        s=s,
        a=a,
        deformation_modulus_mpa=modulus,
        poisson_ratio=np.full(4, NU),
        dilation_deg=psi,
    )
    pressure, radius = 0.05 * p0, np.full(4, RADIUS)
    together = anchor_displacement_m(curve, pressure, radius, 1.0)
    np.testing.assert_array_equal(np.isnan(together), [False, True, False, False])
    for row in range(4):
        index = np.array([row])
        alone = anchor_displacement_m(curve.take(index), pressure[index], radius[index], 1.0)
        np.testing.assert_array_equal(alone, together[index])
