"""Ground and support at rest where the answer is known by hand.

The ground is elastic unless a test says otherwise, so that everything is a straight line: with
p0 = 4 MPa and E / (1 + nu) = 1000 MPa a wall of radius 5 m moves (4 - p) x 5 / 1000 m, 20 mm
without support.
"""

import numpy as np
import pytest
from unit.ground_reaction.sound_ground import ELASTIC, curve

from tunnelcalc.support.equilibrium import equilibrium, pressure_at_closure

RADIUS = np.array([5.0])
FREE_M = 0.02


def rest(stiffness, installed, **ground):
    """Elements down, one section."""
    columns = (np.array(values, float).reshape(-1, 1) for values in (stiffness, installed))
    return equilibrium(curve(**(ELASTIC | ground)), RADIUS, *columns)


def test_no_elements_leave_the_unsupported_state():
    found = rest([], [])
    assert found.converged[0]
    assert found.support_pressure_mpa[0] == 0.0
    assert found.closure_m[0] == pytest.approx(FREE_M, rel=1e-15)
    assert found.element_pressure_mpa.shape == (0, 1)


def test_support_without_stiffness_changes_nothing():
    found = rest([0.0], [0.005])
    assert found.converged[0]
    assert (found.support_pressure_mpa[0], found.element_pressure_mpa[0, 0]) == (0.0, 0.0)
    assert found.closure_m[0] == pytest.approx(FREE_M, rel=1e-15)


@pytest.mark.parametrize("installed", [FREE_M, 0.03, 10.0])
def test_element_installed_after_all_movement_stays_unloaded(installed):
    found = rest([500.0], [installed])
    assert found.converged[0]
    assert found.support_pressure_mpa[0] == 0.0
    assert found.closure_m[0] == pytest.approx(FREE_M, rel=1e-15)


def test_one_element_in_elastic_ground():
    """Two springs: 200 MPa/m of ground, 300 MPa/m of support, 10 mm left to share.
    p = 0.01 / (1/200 + 1/300) = 1.2 MPa, and the wall stops at 10 + 4 = 14 mm."""
    found = rest([300.0], [0.01])
    assert found.support_pressure_mpa[0] == pytest.approx(1.2, rel=1e-12)
    assert found.closure_m[0] == pytest.approx(0.014, rel=1e-12)
    assert found.plastic_ratio[0] == 1.0


def test_two_elements_share_by_stiffness_and_time_of_installation():
    """Ground 200, elements 300 from 10 mm and 500 from 12 mm:
    200 (20 - u) = 300 (u - 10) + 500 (u - 12) in mm gives u = 13 mm; 0.9 and 0.5 MPa."""
    found = rest([300.0, 500.0], [0.010, 0.012])
    assert found.closure_m[0] == pytest.approx(0.013, rel=1e-12)
    np.testing.assert_allclose(found.element_pressure_mpa[:, 0], [0.9, 0.5], rtol=1e-11)


def test_second_element_that_the_wall_never_reaches_stays_unloaded():
    """The first alone stops the wall at 14 mm, as above; the second waits at 15 mm."""
    found = rest([300.0, 500.0], [0.010, 0.015])
    np.testing.assert_allclose(found.element_pressure_mpa[:, 0], [1.2, 0.0], rtol=1e-12)


def test_order_of_the_elements_does_not_matter():
    one = rest([300.0, 500.0, 10.0], [0.010, 0.012, 0.001])
    other = rest([10.0, 500.0, 300.0], [0.001, 0.012, 0.010])
    np.testing.assert_allclose(one.closure_m, other.closure_m, rtol=1e-13)
    np.testing.assert_allclose(
        one.element_pressure_mpa[::-1], other.element_pressure_mpa, rtol=1e-12
    )


@pytest.mark.parametrize("stiffness", [1e6, 1e9, 1e12])
def test_rigid_support_holds_the_wall_where_it_is_installed(stiffness):
    """p tends to that of the ground at 15 mm: 4 - 0.015 x 1000 / 5 = 1 MPa."""
    found = rest([stiffness], [0.015])
    assert found.converged[0]
    assert found.support_pressure_mpa[0] == pytest.approx(1.0, rel=1e3 / stiffness + 1e-12)
    np.testing.assert_allclose(
        found.element_pressure_mpa[0], found.support_pressure_mpa, rtol=4e-16
    )
    assert found.closure_m[0] == pytest.approx(0.015, rel=1e3 / stiffness + 1e-12)


@pytest.mark.parametrize("left", [1e-6, 1e-9, 1e-12, 1e-15])
def test_element_installed_when_hardly_any_movement_is_left(left):
    """As far as doubles tell the two closures apart, here to some 1e-18 m, the springs of ground
    and element share what is left. Such an element is nearly unloaded, which is no reason to
    call the section impossible to compute."""
    installed = FREE_M * (1 - left)
    found = rest([3000.0], [installed])
    expected = (FREE_M - installed) / (1 / 200 + 1 / 3000)
    assert found.converged[0]
    assert found.support_pressure_mpa[0] == pytest.approx(expected, rel=1e-9, abs=1e-14)


def test_closure_beyond_a_double_is_marked_and_never_a_number():
    """Very weak ground under great stress: the unsupported closure has no double."""
    ground = {
        "in_situ_stress_mpa": 500.0,
        "intact_strength_mpa": 0.5,
        "mb": 8e-4,
        "s": 6.3e-8,
        "a": 0.66,
        "dilation_deg": 60.0,
    }
    found = rest([100.0], [0.0], **ground)
    assert not found.converged[0]
    for values in (found.support_pressure_mpa, found.closure_m, found.element_pressure_mpa[0]):
        assert np.isnan(values[0])


def test_largest_closures_that_are_computed_can_be_multiplied_with_the_stiffest_support():
    """Dilation angles that raise the closure from 1e200 to beyond 1e300 radii: on the way there no
    product leaves the range of a double, which would be a warning and so an error here."""
    weak = {"in_situ_stress_mpa": 50.0, "intact_strength_mpa": 0.5, "mb": 1e-2, "s": 6.3e-8}
    depth = np.log(curve(**weak).at(np.zeros(1)).plastic_ratio[0])
    slope = np.linspace(460, 720, 400) / depth - 1
    angle = np.degrees(np.arcsin((slope - 1) / (slope + 1)))
    ground = curve(**weak, dilation_deg=angle, deformation_modulus_mpa=1.0)
    free = ground.at(np.zeros(400)).closure_ratio
    assert np.nanmax(free) > 1e250
    assert np.isnan(free).any()
    found = equilibrium(ground, np.full(400, 30.0), np.full((1, 400), 1e9), np.zeros((1, 400)))
    np.testing.assert_array_equal(found.converged, np.isfinite(free))


def test_section_that_cannot_be_computed_spoils_no_other():
    stress = np.array([4.0, np.nan, 4.0])
    three = equilibrium(
        curve(**(ELASTIC | {"in_situ_stress_mpa": stress})),
        np.full(3, 5.0),
        np.full((1, 3), 300.0),
        np.full((1, 3), 0.01),
    )
    alone = rest([300.0], [0.01])
    np.testing.assert_array_equal(three.converged, [True, False, True])
    np.testing.assert_array_equal(np.isnan(three.closure_m), [False, True, False])
    assert np.all(three.support_pressure_mpa[[0, 2]] == alone.support_pressure_mpa[0])


def test_unknown_stiffness_is_marked():
    found = rest([np.nan, 300.0], [0.01, 0.01])
    assert not found.converged[0]
    assert np.isnan(found.support_pressure_mpa[0])
    assert np.isnan(found.element_pressure_mpa[:, 0]).all()


def test_needed_pressure_of_elastic_ground():
    """5 mm are 4 - 0.005 x 1000 / 5 = 3 MPa; 20 mm and more need nothing."""
    for closure, expected in ((0.005, 3.0), (0.02, 0.0), (0.5, 0.0)):
        found = pressure_at_closure(curve(**ELASTIC), RADIUS, np.array([closure]))
        assert found[0] == pytest.approx(expected, rel=1e-12)


def test_needed_pressure_where_the_unsupported_closure_has_no_double():
    """Far more than 1 per cent of the radius, with no support and with half the stress: the
    pressure is found all the same, and holds the ground at the limit."""
    ground = curve(
        in_situ_stress_mpa=100.0,
        intact_strength_mpa=0.5,
        mb=8.2e-4,
        s=6.3e-8,
        a=0.66,
        dilation_deg=60.0,
    )
    assert np.isnan(ground.at(np.array([50.0])).closure_ratio[0])
    found = pressure_at_closure(ground, RADIUS, np.array([0.05]))
    assert 50 < found[0] < 100
    assert ground.at(found).closure_ratio[0] == pytest.approx(0.01, rel=1e-6)


@pytest.mark.parametrize("spoiled", ["in_situ_stress_mpa", "deformation_modulus_mpa", "mb"])
def test_needed_pressure_of_unknown_ground_is_unknown(spoiled):
    ground = curve(**{spoiled: np.nan})
    assert np.isnan(pressure_at_closure(ground, RADIUS, np.array([0.05]))[0])
