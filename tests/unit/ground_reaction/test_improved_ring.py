"""Ground strengthened in a ring where the answer is known, at its limits and its joints."""

import numpy as np
import pytest
from reference.improved_ring import random_hoek_brown, random_mohr_coulomb
from unit.ground_reaction.sound_ground import WEAK

from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.ground_reaction.improved_ring import (
    DERIVED_LAWS,
    ImprovedRingCurve,
    improved_curve,
)
from tunnelcalc.ground_reaction.later_ring import LaterRingCurve
from tunnelcalc.ground_reaction.mohr_coulomb import MohrCoulombCurve
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.support.equilibrium import equilibrium

COUNT = 200
LAWS = {
    "hoek-brown": (
        random_hoek_brown(COUNT, 3),
        ImprovedRingCurve.of_hoek_brown,
        HoekBrownCurve.of_ground,
        ("mb", "s", "a"),
    ),
    "mohr-coulomb": (
        random_mohr_coulomb(COUNT, 3),
        ImprovedRingCurve.of_mohr_coulomb,
        MohrCoulombCurve.of_ground,
        ("friction_angle_deg", "cohesion_mpa"),
    ),
}
BY_LAW = pytest.mark.parametrize("law", LAWS)


def plain(law, which=""):
    """Ground that is all mass, or all ring."""
    ground, _, of_ground, strength = LAWS[law]
    shared = {k: v for k, v in ground.items() if not k.startswith("ring_") and k not in strength}
    return of_ground(**shared, **{name: ground[which + name] for name in strength})


def improved(law, **changed):
    ground, of, _, _ = LAWS[law]
    return of(**{**ground, **changed})


def stronger(law):
    """Rows whose ring is nowhere weaker than the mass at stresses up to p0."""
    ground = LAWS[law][0]
    if law == "mohr-coulomb":
        return ground["ring_cohesion_mpa"] >= ground["cohesion_mpa"]
    same = ground["ring_a"] == ground["a"]
    return same & (ground["ring_mb"] >= ground["mb"])


@BY_LAW
@pytest.mark.parametrize("share", [0.0, 0.1, 0.6])
def test_a_ring_like_the_mass_or_without_thickness_changes_nothing(law, share):
    ground, strength = LAWS[law][0], LAWS[law][3]
    pressure = share * ground["in_situ_stress_mpa"]
    mass = plain(law).at(pressure)
    for changed in (
        {f"ring_{name}": ground[name] for name in strength},
        {"ring_ratio": np.ones(COUNT)},
    ):
        found = improved(law, **changed).at(pressure)
        for one, other in zip(found, mass, strict=True):
            np.testing.assert_allclose(one, other, rtol=1e-8, atol=1e-17)


@BY_LAW
def test_a_ring_far_thicker_than_the_plastic_zone_is_ground_of_its_own(law):
    pressure = 0.3 * LAWS[law][0]["in_situ_stress_mpa"]
    found = improved(law, ring_ratio=np.full(COUNT, 1e4)).at(pressure)
    ring = plain(law, "ring_").at(pressure)
    inside = ring.plastic_ratio < 100
    assert inside.sum() > COUNT / 2
    for one, other in zip(found, ring, strict=True):
        np.testing.assert_allclose(one[inside], other[inside], rtol=1e-9)


@BY_LAW
@pytest.mark.parametrize("share", [0.0, 0.1, 0.4])
def test_closure_lies_between_that_of_all_ring_and_that_of_all_mass(law, share):
    rows, pressure = stronger(law), share * LAWS[law][0]["in_situ_stress_mpa"]
    found = improved(law).at(pressure).closure_ratio[rows]
    least, most = (c.at(pressure).closure_ratio[rows] for c in (plain(law, "ring_"), plain(law)))
    assert rows.sum() > COUNT / 3
    assert np.all(found <= most * (1 + 1e-8))
    assert np.all(found >= least * (1 - 1e-8))
    assert np.any(found < 0.8 * most)


@BY_LAW
def test_slope_is_the_derivative_of_the_closure(law):
    """Central differences, but where the step holds a kink."""
    p0 = LAWS[law][0]["in_situ_stress_mpa"]
    pressure, h = 0.03 * p0, 1e-6 * p0
    low, middle, high = (improved(law).at(pressure + d) for d in (-h, 0 * h, h))
    measured = (high.closure_ratio - low.closure_ratio) / (2 * h)
    smooth = np.abs(low.slope / high.slope - 1) < 1e-3
    assert smooth.sum() > 0.95 * COUNT
    np.testing.assert_allclose(middle.slope[smooth], measured[smooth], rtol=2e-5)
    assert np.all(middle.slope < 0)


@BY_LAW
def test_a_row_that_is_unknown_is_nan_and_spoils_no_other(law):
    ground = LAWS[law][0]
    pressure = 0.05 * ground["in_situ_stress_mpa"]
    whole = improved(law)
    for name, values in ground.items():
        holed = values.copy()
        holed[7] = np.nan
        found = improved(law, **{name: holed})
        others = np.arange(COUNT) != 7
        assert np.isnan(found.critical_pressure_mpa[7])
        for one, other in zip(found.at(pressure), whole.at(pressure), strict=True):
            assert np.isnan(one[7])
            np.testing.assert_array_equal(one[others], other[others])
    ratio = ground["ring_ratio"].copy()
    ratio[7] = 0.99
    assert np.isnan(improved(law, ring_ratio=ratio).critical_pressure_mpa[7])


@BY_LAW
def test_taken_sections_are_those_of_the_whole(law):
    index = np.array([5, 1, 90])
    pressure = 0.05 * LAWS[law][0]["in_situ_stress_mpa"]
    whole, part = improved(law).at(pressure), improved(law).take(index).at(pressure[index])
    for one, other in zip(whole, part, strict=True):
        np.testing.assert_array_equal(one[index], other)


def sections(**more):
    """Weak ground with everything that any law asks for."""
    values = WEAK | {"radius_m": 5.0, "friction_angle_deg": 25.0, "cohesion_mpa": 0.3} | more
    return {name: np.array([float(value)]) for name, value in values.items()}


CHANGED = {
    "mb": np.array([1.2]),
    "s": np.array([0.002]),
    "friction_angle_deg": np.array([28.0]),
    "cohesion_mpa": np.array([0.4]),
}


class TestByLaw:
    def test_the_laws_are_laws_of_the_program(self):
        assert set(DERIVED_LAWS) <= set(load_plugins().names("ground_reaction"))

    def test_thickness_and_changed_constants_are_put_where_they_belong(self):
        found = improved_curve(
            "hoek_brown_perfectly_plastic", sections(), np.array([2.5]), CHANGED
        ).at(np.zeros(1))
        own = WEAK | {"ring_mb": 1.2, "ring_s": 0.002, "ring_a": WEAK["a"], "ring_ratio": 1.5}
        expected = ImprovedRingCurve.of_hoek_brown(
            **{name: np.array([float(v)]) for name, v in own.items()}
        ).at(np.zeros(1))
        for one, other in zip(found, expected, strict=True):
            np.testing.assert_array_equal(one, other)

    @pytest.mark.parametrize("law", [law for law in DERIVED_LAWS if law != "elastic"])
    def test_a_stronger_ring_moves_less_under_every_derived_law(self, law):
        given, zero = sections(disturbed_thickness_m=0), np.zeros(1)
        with_ring, without = (
            improved_curve(law, given, np.array([t]), CHANGED).at(zero).closure_ratio[0]
            for t in (2.0, 0.0)
        )
        assert 0 < with_ring < 0.97 * without

    def test_the_ring_does_nothing_to_elastic_ground(self):
        found = improved_curve("elastic", sections(), np.array([2.0]), CHANGED).at(np.zeros(1))
        expected = WEAK["in_situ_stress_mpa"] * 1.3 / WEAK["deformation_modulus_mpa"]
        assert found.closure_ratio[0] == pytest.approx(expected, rel=1e-14)

    @pytest.mark.parametrize(
        "law",
        ["hoek_brown_brittle", "hoek_brown_softening_finite_strain", "mohr_coulomb_brittle", "?"],
    )
    def test_a_law_for_which_it_is_not_derived_gives_nan(self, law):
        found = improved_curve(law, sections(), np.array([2.0]), CHANGED)
        assert np.isnan(found.critical_pressure_mpa).all()
        assert all(np.isnan(column).all() for column in found.at(np.zeros(1)))

    def test_constants_of_another_law_give_nan(self):
        line = {name: CHANGED[name] for name in ("friction_angle_deg", "cohesion_mpa")}
        found = improved_curve(
            "hoek_brown_perfectly_plastic", sections(), np.array([2.0]), line
        ).at(np.zeros(1))
        assert np.isnan(found.closure_ratio).all()

    def test_a_section_with_a_disturbed_ring_is_nan(self):
        law, given = "hoek_brown_disturbed_ring", sections(disturbed_thickness_m=1.0)
        found = improved_curve(law, given, np.array([2.0]), CHANGED).at(np.zeros(1))
        assert np.isnan(found.closure_ratio).all()


class TestARingThatComesLater:
    @staticmethod
    def later(share):
        """Rows whose ring is stronger; installed at a share of p0."""
        rows = np.flatnonzero(stronger("hoek-brown"))
        before = plain("hoek-brown").take(rows)
        own = improved("hoek-brown").take(rows)
        return LaterRingCurve.of_curves(before, own, share * before.in_situ_stress_mpa)

    def test_before_installation_the_ground_is_as_it_was(self):
        curve = self.later(0.2)
        pressure = 0.3 * curve.in_situ_stress_mpa
        for one, other in zip(curve.at(pressure), curve.before.at(pressure), strict=True):
            np.testing.assert_array_equal(one, other)

    def test_after_it_the_ground_moves_on_as_improved_ground_does(self):
        curve = self.later(0.2)
        p0 = curve.in_situ_stress_mpa
        moved = curve.at(0.05 * p0).closure_ratio - curve.at(0.2 * p0).closure_ratio
        own = curve.improved
        alone = own.at(0.05 * p0).closure_ratio - own.at(0.2 * p0).closure_ratio
        scale = curve.before.at(0.05 * p0).closure_ratio
        assert np.all(np.abs(moved - alone) <= 1e-12 * scale)

    @pytest.mark.parametrize("share", [0.02, 0.2, 0.5])
    def test_closure_and_plastic_zone_lie_between_those_with_and_without_the_ring(self, share):
        curve = self.later(share)
        for now in (0.0, 0.1, 0.4):
            pressure = now * curve.in_situ_stress_mpa
            found = curve.at(pressure)
            least, most = curve.improved.at(pressure), curve.before.at(pressure)
            for column in ("closure_ratio", "plastic_ratio"):
                value, low, high = (getattr(p, column) for p in (found, least, most))
                assert np.all(value >= low * (1 - 1e-8))
                assert np.all(value <= high * (1 + 1e-8))

    def test_the_closure_has_no_step_at_installation(self):
        curve = self.later(0.2)
        p0 = curve.in_situ_stress_mpa
        above, below = (curve.at(0.2 * p0 * f).closure_ratio for f in (1 + 1e-12, 1 - 1e-12))
        np.testing.assert_allclose(above, below, rtol=1e-8)

    def test_a_ring_put_in_before_any_movement_is_there_from_the_beginning(self):
        curve = self.later(1.0)
        pressure = 0.1 * curve.in_situ_stress_mpa
        for one, other in zip(curve.at(pressure), curve.improved.at(pressure), strict=True):
            np.testing.assert_allclose(one, other, rtol=1e-13)
        np.testing.assert_array_equal(
            curve.critical_pressure_mpa, curve.improved.critical_pressure_mpa
        )

    def test_springs_come_to_rest_on_it_under_less_pressure(self):
        curve = self.later(0.2)
        count = curve.in_situ_stress_mpa.size
        radius = np.full(count, 5.0)
        installed = (curve.installed.closure_ratio * radius)[None]
        stiffness = np.full((1, count), 100.0)
        with_ring, without = (
            equilibrium(c, radius, stiffness, installed) for c in (curve, curve.before)
        )
        assert with_ring.converged.all()
        assert np.all(with_ring.support_pressure_mpa <= without.support_pressure_mpa * (1 + 1e-9))
        assert np.any(with_ring.support_pressure_mpa < 0.8 * without.support_pressure_mpa)

    def test_unknown_rows_stay_alone_and_sections_can_be_taken(self):
        curve = self.later(0.2)
        at = curve.installation_pressure_mpa.copy()
        at[3] = np.nan
        holed = LaterRingCurve.of_curves(curve.before, curve.improved, at)
        pressure = 0.05 * curve.in_situ_stress_mpa
        index = np.array([4, 3, 0])
        for one, other, part in zip(
            holed.at(pressure),
            curve.at(pressure),
            holed.take(index).at(pressure[index]),
            strict=True,
        ):
            assert np.isnan(one[3])
            np.testing.assert_array_equal(np.delete(one, 3), np.delete(other, 3))
            np.testing.assert_array_equal(part, one[index])
