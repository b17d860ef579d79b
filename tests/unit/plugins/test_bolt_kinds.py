"""Kinds of bolts and their checks by hand."""

import math

import numpy as np
import pytest
from tunnelcalc_rock_bolts import moving_anchor
from tunnelcalc_rock_bolts.anchor_share import stretch_share_of_section
from tunnelcalc_rock_bolts.checks import PARTS, LengthBeyondPlasticZone, Tension, UsualBoltDensity
from tunnelcalc_rock_bolts.friction import FrictionBolts
from tunnelcalc_rock_bolts.grouted_demand import force_kn
from tunnelcalc_rock_bolts.grouted_kind import GroutedRockBolts
from tunnelcalc_rock_bolts.kind import RockBolts

from tunnelcalc import api
from tunnelcalc.ground_reaction.hoek_brown import HoekBrownCurve
from tunnelcalc.sections import Sections
from tunnelcalc.support.equilibrium import pressure_at_closure

PATTERN = {
    "spacing_around_m": 2.0,
    "spacing_along_m": 1.5,
    "anchorage_length_m": 1.0,
    "pattern_rules": "none",
}
BOLT = PATTERN | {
    "diameter_mm": 25.0,
    "length_m": 4.0,
    "steel_modulus_gpa": 200.0,
    "anchor_deformation_m_per_mn": 0.04,
}
OLD = BOLT | {"capacity_kn": 180.0}
FROM_PARTS = BOLT | {
    "capacity": "from_parts",
    "bar_strength_mpa": 500.0,
    "bar_strength_is": "yield",
    "plate_capacity_kn": 220.0,
    "bond": "declared",
    "bond_capacity_kn": 200.0,
    "service_factor": 0.8,
    "anchor": "still",
}
PER_METRE = {k: v for k, v in FROM_PARTS.items() if k != "bond_capacity_kn"} | {
    "bond": "per_metre",
    "bond_kn_per_m": 120.0,
    "bonded_length_m": 1.5,
}
FRICTION = PATTERN | {
    "length_m": 3.0,
    "bar_capacity_kn": 120.0,
    "plate_capacity_kn": 110.0,
    "bond_kn_per_m": 50.0,
    "deformation_m_per_mn": 0.1,
    "service_factor": 1.0,
}
GROUTED = PATTERN | {
    "diameter_mm": 25.0,
    "length_m": 4.0,
    "friction_factor": 0.6,
    "bar_strength_mpa": 500.0,
    "bar_strength_is": "yield",
    "bond_kn_per_m": 150.0,
    "service_factor": 0.9,
}
ROCK = {
    "intact_strength_mpa": 20.0,
    "mb": 0.7,
    "s": 4e-4,
    "a": 0.52,
    "support_pressure_mpa": 0.1,
}
LINE = {"friction_angle_deg": 25.0, "cohesion_mpa": 0.2, "support_pressure_mpa": 0.1}
BAR_KN = math.pi * 625 / 4 * 0.5
BY_NAME = {check.name: check for check in PARTS}


def element(kind, values):
    return api.Element(kind, kind, 1.0, values)


def rock_bolts(values):
    return element("rock_bolts", values)


def sections(**columns):
    named = {"radius_m": 5.0, "supported_plastic_radius_m": 6.0, "element_pressure_mpa": 0.05}
    return Sections({k: np.atleast_1d(float(v)) for k, v in (named | columns).items()})


GROUND = {
    "in_situ_stress_mpa": 5.0,
    "deformation_modulus_mpa": 1000.0,
    "poisson_ratio": 0.25,
    "dilation_deg": 0.0,
    "critical_pressure_mpa": 2.0,
    "plastic_radius_m": 7.0,
    "closure_mm": 70.0,
}


class TestEndAnchored:
    def test_without_the_new_words_all_is_as_before(self):
        """K of bar and anchor in series, 180 kN over 3 m2, one check of tension."""
        bolts = rock_bolts(OLD)
        found = RockBolts().reaction(sections(), bolts)
        stretch = 4 / (200_000 * math.pi * 0.0125**2) + 0.04
        assert found.stiffness_mpa_per_m[0] == pytest.approx(1 / 3 / stretch, rel=1e-14)
        assert found.capacity_mpa[0] == pytest.approx(0.06, rel=1e-14)
        assert Tension().concerns(bolts)
        assert not any(check.concerns(bolts) for check in PARTS)
        said = rock_bolts(OLD | {"capacity": "declared", "anchor": "still"})
        same = RockBolts().reaction(sections(), said)
        assert same.stiffness_mpa_per_m == found.stiffness_mpa_per_m

    def test_choices_have_the_words_that_mean_as_before(self):
        defaults = {p.name: p.default for p in RockBolts.parameters if p.default}
        assert defaults == {"capacity": "declared", "anchor": "still"}

    def test_bar_plate_and_bond_are_limits_of_their_own_and_the_least_makes_the_capacity(self):
        """0.05 MPa over 3 m2 is 150 kN, against 0.8 of 245.4, 220 and 200 kN."""
        bolts, section = rock_bolts(FROM_PARTS), sections()
        for name, limit in (("bar", BAR_KN), ("plate", 220.0), ("bond", 200.0)):
            found = BY_NAME[name].evaluate(section, bolts)
            assert BY_NAME[name].concerns(bolts)
            assert found.demand[0] == pytest.approx(150.0, rel=1e-14)
            assert found.capacity[0] == pytest.approx(0.8 * limit, rel=1e-14)
        assert not Tension().concerns(bolts)
        capacity = RockBolts().reaction(section, bolts).capacity_mpa[0]
        assert capacity == pytest.approx(0.16 / 3, rel=1e-14)

    @pytest.mark.parametrize(("plastic", "length"), [(5.0, 1.5), (7.5, 1.5), (8.0, 1.0), (9.5, 0)])
    def test_bond_a_metre_counts_where_the_anchor_lies_beyond_the_plastic_zone(
        self, plastic, length
    ):
        found = BY_NAME["bond"].evaluate(
            sections(supported_plastic_radius_m=plastic), rock_bolts(PER_METRE)
        )
        assert found.capacity[0] == pytest.approx(0.8 * 120 * length, rel=1e-14)

    def test_a_bonded_length_does_not_stretch(self):
        whole = RockBolts().reaction(sections(), rock_bolts(FROM_PARTS)).stiffness_mpa_per_m[0]
        bonded = RockBolts().reaction(sections(), rock_bolts(PER_METRE)).stiffness_mpa_per_m[0]
        area = 200_000 * math.pi * 0.0125**2
        assert whole / bonded == pytest.approx((2.5 / area + 0.04) / (4 / area + 0.04), rel=1e-13)

    def test_an_anchor_longer_than_the_bolt_does_not_fit(self):
        found = list(RockBolts().misfits(rock_bolts(PER_METRE | {"bonded_length_m": 4.0}), 5.0))
        assert [misfit.parameter for misfit in found] == ["bonded_length_m"]


class TestMovingAnchor:
    def test_in_elastic_ground_the_share_is_length_over_anchor_radius(self):
        bolts = rock_bolts(OLD | {"anchor": "moving"})
        still = RockBolts().reaction(sections(), rock_bolts(OLD)).stiffness_mpa_per_m[0]
        elastic = GROUND | {"plastic_radius_m": 5.0, "closure_mm": 31.25}
        found = RockBolts().reaction(sections(**elastic), bolts)
        assert found.stiffness_mpa_per_m[0] == pytest.approx(still * 4 / 9, rel=1e-13)
        assert found.capacity_mpa[0] == pytest.approx(0.06, rel=1e-14)

    def test_beyond_a_plastic_zone_the_anchor_moves_as_elastic_ground_does(self):
        """(5 - 2) 49 x 1.25 / (1000 x 9) m = 20.42 mm of 70 mm."""
        bolts = rock_bolts(OLD | {"anchor": "moving"})
        still = RockBolts().reaction(sections(), rock_bolts(OLD)).stiffness_mpa_per_m[0]
        found = RockBolts().reaction(sections(**GROUND), bolts).stiffness_mpa_per_m[0]
        assert found / still == pytest.approx(1 - 3 * 49 * 1.25 / 9 / 70, rel=1e-13)

    def test_the_sheet_shows_both_stiffnesses_and_their_difference(self):
        bolts = rock_bolts(OLD | {"anchor": "moving"})
        values = {k: float(v[0]) for k, v in sections(**GROUND).items()}
        lines = {line.symbol: line for line in RockBolts().lines(values, bolts)}
        assert not any(line.disagrees() for line in lines.values())
        both = lines["K"].result + lines["dK"].result
        assert both == pytest.approx(lines["K_still"].result, rel=1e-14)
        assert 0.6 < lines["share_a"].result < 0.8

    def test_rows_stay_alone(self):
        columns = {k: np.full(3, v) for k, v in GROUND.items()}
        columns["closure_mm"] = np.array([70.0, np.nan, 70.0])
        found = stretch_share_of_section(radius_m=np.full(3, 5.0), free_length_m=4.0, **columns)
        assert np.isnan(found).tolist() == [False, True, False]

    def test_it_is_about_the_share_that_the_curve_gives(self):
        """Anchors beyond the plastic zone, movement from 0.3 to 0.6 or 0.5 to 0.8 of the closure:
        never far off, while a still anchor is."""
        draw, count = np.random.default_rng(4), 60
        ground = {
            "in_situ_stress_mpa": draw.uniform(2, 15, count),
            "intact_strength_mpa": draw.uniform(10, 60, count),
            "mb": draw.uniform(0.5, 2, count),
            "s": draw.uniform(1e-4, 3e-3, count),
            "a": np.full(count, 0.51),
            "deformation_modulus_mpa": draw.uniform(500, 5000, count),
            "poisson_ratio": draw.uniform(0.2, 0.35, count),
            "dilation_deg": draw.uniform(0, 12, count),
        }
        curve, radius = HoekBrownCurve.of_ground(**ground), np.full(count, 5.0)
        free = curve.at(np.zeros(count))
        inside = (free.plastic_ratio > 1) & (free.plastic_ratio < 1.8)
        assert inside.sum() > 15
        shared = ("in_situ_stress_mpa", "deformation_modulus_mpa", "poisson_ratio", "dilation_deg")
        share = stretch_share_of_section(
            radius_m=radius,
            free_length_m=4.0,
            critical_pressure_mpa=curve.critical_pressure_mpa,
            plastic_radius_m=free.plastic_ratio * 5,
            closure_mm=free.closure_ratio * 5000,
            **{name: ground[name] for name in shared},
        )
        for before, after in ((0.3, 0.6), (0.5, 0.8)):
            walls, anchors = [], []
            for part in (before, after):
                pressure = pressure_at_closure(curve, radius, free.closure_ratio * 5 * part)
                walls.append(curve.at(pressure).closure_ratio * 5)
                anchors.append(moving_anchor.anchor_displacement_m(curve, pressure, radius, 4.0))
            stretch = moving_anchor.stretch_m(walls[1], anchors[1], walls[0], anchors[0])
            exact = moving_anchor.stretch_share(stretch, walls[1] - walls[0])[inside]
            ratio = share[inside] / exact
            assert 0.84 < ratio.min() <= ratio.max() < 1.22
            assert (1 / exact).min() > 1.25


class TestFriction:
    def test_stiffness_and_capacity(self):
        """1 / (3 m2 x 0.1 m/MN); least of 120, 110 and 50 x 3 kN over 3 m2."""
        bolts = element("friction_bolts", FRICTION)
        found = FrictionBolts().reaction(sections(), bolts)
        assert found.stiffness_mpa_per_m[0] == pytest.approx(1 / 0.3, rel=1e-14)
        assert found.capacity_mpa[0] == pytest.approx(0.11 / 3, rel=1e-14)

    @pytest.mark.parametrize(("plastic", "length"), [(5.0, 3.0), (6.0, 2.0), (8.0, 0.0)])
    def test_bond_acts_beyond_the_plastic_zone(self, plastic, length):
        bolts = element("friction_bolts", FRICTION)
        found = BY_NAME["bond"].evaluate(sections(supported_plastic_radius_m=plastic), bolts)
        assert found.capacity[0] == pytest.approx(50 * length, rel=1e-14)
        assert found.demand[0] == pytest.approx(150.0, rel=1e-14)


class TestGrouted:
    def test_it_is_a_change_of_the_ground_and_no_spring(self):
        bolts = element("grouted_rock_bolts", GROUTED)
        kind = GroutedRockBolts()
        assert kind.reaction_form(bolts) == "ground_ring"
        found = kind.reaction(sections(**ROCK), bolts)
        beta = math.pi * 0.025 * 0.6 * 5 / 3
        assert found.changed["mb"][0] == pytest.approx(0.7 * (1 + beta), rel=1e-13)
        assert found.thickness_m[0] == pytest.approx(4 / math.log(1.8) - 5, rel=1e-13)
        assert found.capacity_mpa[0] == pytest.approx(0.9 * BAR_KN / 3000, rel=1e-13)

    def test_force_against_bar_and_against_bond_beyond_neutral_point_and_plastic_zone(self):
        bolts, section = element("grouted_rock_bolts", GROUTED), sections(**ROCK)
        bar, bond = (BY_NAME[name].evaluate(section, bolts) for name in ("bar", "bond"))
        assert bar.demand[0] == bond.demand[0] > 1
        assert bar.capacity[0] == pytest.approx(0.9 * BAR_KN, rel=1e-14)
        neutral = 4 / math.log(1.8)
        assert bond.capacity[0] == pytest.approx(0.9 * 150 * (9 - neutral), rel=1e-13)
        deeper = sections(**ROCK, supported_plastic_radius_m=8.0)
        assert BY_NAME["bond"].evaluate(deeper, bolts).capacity[0] == pytest.approx(135.0)

    def test_where_both_strengths_are_known_the_larger_force_counts(self):
        bolts = element("grouted_rock_bolts", GROUTED)
        one, other, both = (
            force_kn(sections(**given), bolts)[0] for given in (ROCK, LINE, ROCK | LINE)
        )
        assert both == max(one, other)

    def test_ground_that_has_not_yielded_loads_no_bolt(self):
        bolts = element("grouted_rock_bolts", GROUTED)
        section = sections(**ROCK, supported_plastic_radius_m=5.0)
        assert force_kn(section, bolts)[0] == 0

    @pytest.mark.parametrize("given", ["ROCK", "LINE", "both"])
    @pytest.mark.parametrize("plastic", [5.0, 5.2, 6.0, 9.0])
    def test_the_sheet_agrees(self, given, plastic):
        columns = ROCK | LINE if given == "both" else {"ROCK": ROCK, "LINE": LINE}[given]
        section = sections(**columns, supported_plastic_radius_m=plastic)
        values = {k: float(v[0]) for k, v in section.items()}
        bolts = element("grouted_rock_bolts", GROUTED)
        for check in (BY_NAME["bar"], BY_NAME["bond"], UsualBoltDensity(), GroutedRockBolts()):
            lines = check.lines(values, bolts)
            assert lines
            assert [line for line in lines if line.disagrees()] == []

    def test_denser_bolts_than_in_use_break_the_rule(self):
        dense = GROUTED | {"spacing_around_m": 0.8, "spacing_along_m": 0.8}
        found = UsualBoltDensity().evaluate(sections(), element("grouted_rock_bolts", dense))
        assert found.demand[0] > found.capacity[0] == 0.2

    def test_length_beyond_the_plastic_zone_is_a_rule_here_too(self):
        found = LengthBeyondPlasticZone().evaluate(
            sections(), element("grouted_rock_bolts", GROUTED)
        )
        assert (found.demand[0], found.capacity[0]) == (2.0, 4.0)
