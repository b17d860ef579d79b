"""Checks of a class as a whole by hand: weight of the plastic zone, water on the lining."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import evaluated, sections_of
from unit.pipeline.projects import BOLTS, SHOTCRETE, STEEL_SETS, element, project

from tunnelcalc.pipeline.class_evaluation import DOES_NOT_COUNT, HARDENED
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.support.adequacy import Outcome

BOLT_MPA = 0.2 / (1.5 * 2.0)
"""200 kN on 1.5 m by 2 m."""
RING_MPA = 30 / 2 * (1 - (3.9 / 4) ** 2)
"""100 mm of 30 MPa at 4 m: a thick ring yields at its inner face first."""
MIXED = {
    "both": [element("rock_bolts", BOLTS), element("shotcrete", SHOTCRETE, installed_at_m=1.0)]
}
CLASSES = {
    "bolts": [element("rock_bolts", BOLTS)],
    "ring": [element("shotcrete", SHOTCRETE, installed_at_m=1.0)],
    "rings": [
        element("shotcrete", SHOTCRETE, installed_at_m=1.0),
        element("steel_sets", STEEL_SETS, installed_at_m=1.0),
    ],
}


def of_check(sections, classes, check, element_label="class", **keys):
    """Position of a check's column, and its demand, capacity, outcome and factor."""
    made = project(classes, sections, **keys)
    lines = check_lines(plan_classes(made, load_plugins()))
    at = [
        position
        for position, line in enumerate(lines)
        if (line.check, line.element) == (check, element_label)
    ]
    found = evaluated(sections, classes, **keys)
    return found, at


class TestCrownDeadWeight:
    YES = {"crown_dead_weight": True}  # noqa: RUF012

    def test_demand_and_capacity_by_hand(self):
        sections = sections_of(2, gsi=[30.0, 20.0])
        found, (at,) = of_check(sections, MIXED, "crown_dead_weight", chosen_checks=self.YES)
        pressure = found["class_support_pressure_mpa"][:, 0]
        thickness = found["class_plastic_radius_m"][:, 0] - 4.0
        assert np.all(thickness > 0.1)
        np.testing.assert_allclose(
            found["check_demand"][:, at], pressure + 25 * thickness / 1000, rtol=1e-14
        )
        np.testing.assert_allclose(found["check_capacity"][:, at], BOLT_MPA + RING_MPA, rtol=1e-14)
        np.testing.assert_allclose(
            found["check_factor_of_safety"][:, at],
            (BOLT_MPA + RING_MPA) / (pressure + 25 * thickness / 1000),
            rtol=1e-14,
        )

    def test_in_elastic_ground_nothing_is_loose(self):
        found, (at,) = of_check(
            sections_of(gsi=80.0, intact_strength_mpa=150.0), MIXED, "crown_dead_weight"
        )
        assert found["class_plastic_radius_m"][0, 0] == 4.0
        assert found["check_demand"][0, at] == found["class_support_pressure_mpa"][0, 0]

    @pytest.mark.parametrize("said", [None, False, True])
    def test_it_is_told_always_and_counts_where_the_project_says_yes(self, said):
        chosen = {} if said is None else {"crown_dead_weight": said}
        # Bolts late in deep ground: hardly loaded, and far too weak for the weight.
        late = {
            "late": [
                element(
                    "rock_bolts",
                    {**BOLTS, "length_m": 15.0, "pattern_rules": "none"},
                    installed_at_m=40.0,
                )
            ]
        }
        sections = sections_of(gsi=25.0)
        generous = {"chosen_checks": chosen}
        found, (at,) = of_check(sections, late, "crown_dead_weight", **generous)
        assert found["check_outcome"][0, at] == Outcome.FAIL
        assert bool(found["check_counts"][0, at]) is bool(said)
        assert found["dead_weight_not_required"][0] == (said is None)
        assert found["fails_crown_dead_weight"][0]
        if said:
            assert not found["class_adequate"][0, 0]
            assert found["class_governing"][0, 0] == at
            assert found["class_factor_of_safety"][0, 0] == found["check_factor_of_safety"][0, at]

    def test_what_does_not_count_has_no_part_in_the_factor_of_the_class(self):
        sections = sections_of(gsi=20.0)
        counted, (at,) = of_check(sections, MIXED, "crown_dead_weight", chosen_checks=self.YES)
        weight = counted["check_factor_of_safety"][0, at]
        assert counted["class_factor_of_safety"][0, 0] == weight  # it is the least one
        for chosen in ({}, {"crown_dead_weight": False}):
            free = evaluated(sections, MIXED, chosen_checks=chosen)
            others = np.delete(free["check_factor_of_safety"][0], at)
            assert free["class_factor_of_safety"][0, 0] == np.nanmin(others) > weight

    @pytest.mark.parametrize("said", [True, False])
    def test_of_a_ring_that_hardens_the_row_says_that_its_final_capacity_counts(self, said):
        """The capacity is that of 28 days, as of the ring that is hard from the first."""
        young = {"ring": [element("shotcrete", SHOTCRETE | {"hardening": "meschke_1996"})]}
        keys = {"advance_m_per_day": 4.0, "chosen_checks": {"crown_dead_weight": said}}
        found, (at,) = of_check(sections_of(2, gsi=30.0), young, "crown_dead_weight", **keys)
        np.testing.assert_allclose(found["check_capacity"][:, at], RING_MPA, rtol=1e-14)
        told = HARDENED if said else f"{DOES_NOT_COUNT}; {HARDENED}"
        assert found["check_reason"][:, at].tolist() == [told] * 2
        rigid = {"ring": [element("shotcrete", SHOTCRETE)]}
        keys.pop("advance_m_per_day")
        found, (at,) = of_check(sections_of(2, gsi=30.0), rigid, "crown_dead_weight", **keys)
        assert found["check_reason"][:, at].tolist() == ["" if said else DOES_NOT_COUNT] * 2

    def test_where_the_unit_weight_is_not_known_it_is_not_evaluated(self):
        sections = sections_of(vertical_stress_mpa=5.0, unit_weight_kn_m3=np.nan, cover_m=np.nan)
        found, (at,) = of_check(sections, MIXED, "crown_dead_weight")
        assert found["check_outcome"][0, at] == Outcome.NOT_EVALUATED
        assert found["check_reason"][0, at] == "unit_weight_kn_m3 is not given"
        assert not found["check_counts"][0, at]

    def test_the_water_on_a_watertight_lining_is_part_of_the_demand(self):
        wet = sections_of(gsi=25.0, water_head_m=20.0)
        found, (at,) = of_check(
            wet, MIXED, "crown_dead_weight", chosen_checks=self.YES, drainage="watertight"
        )
        dry = sections_of(gsi=25.0, vertical_stress_mpa=5.0 - 0.1962)
        before, (at_dry,) = of_check(dry, MIXED, "crown_dead_weight", chosen_checks=self.YES)
        added = found["check_demand"][0, at] - before["check_demand"][0, at_dry]
        # 20 m of water of 9.81 kN/m3.
        assert added == pytest.approx(0.1962, rel=1e-9)


class TestWaterOnTheLining:
    def test_rings_share_the_water_by_stiffness_beside_what_the_ground_brings(self):
        wet = sections_of(water_head_m=20.0)
        found, _ = of_check(wet, CLASSES, "water_on_lining", drainage="watertight")
        dry = sections_of(vertical_stress_mpa=5.0 - 0.1962)
        without = evaluated(dry, CLASSES)
        made = project(CLASSES, wet, drainage="watertight")
        lines = check_lines(plan_classes(made, load_plugins()))
        names = [(line.class_name, line.element, line.check) for line in lines]
        dry_lines = check_lines(plan_classes(project(CLASSES, dry), load_plugins()))
        dry_names = [(line.class_name, line.element, line.check) for line in dry_lines]

        def added(*name):
            at, before = names.index(name), dry_names.index(name)
            return (
                found["check_demand"][0, at] / found["check_capacity"][0, at]
                - without["check_demand"][0, before] / without["check_capacity"][0, before]
            )

        # A thin ring alone carries it all: its stress rises by water over its capacity.
        np.testing.assert_allclose(
            added("ring", "shotcrete", "hoop_stress"), 0.1962 / RING_MPA, rtol=1e-9
        )
        assert added("bolts", "rock_bolts", "tension") == pytest.approx(0, abs=1e-9)
        # Two rings side by side: thick ring E/(1+nu) (R2-ri2) / (R ((1-2nu) R2 + ri2)), embedded
        # sets E A / (s R^2), written out here.
        outer, inner = 4.0, 3.9
        stiff_ring = 30_000 * (outer**2 - inner**2) / (1.25 * outer * (0.5 * outer**2 + inner**2))
        stiff_sets = 200_000 * 0.0043 / (1.5 * 4.0**2)
        share = stiff_ring / (stiff_ring + stiff_sets)
        np.testing.assert_allclose(
            added("rings", "shotcrete", "hoop_stress"), share * 0.1962 / RING_MPA, rtol=1e-9
        )

    def test_demand_and_capacity_are_the_water_and_the_rings(self):
        found, at = of_check(
            sections_of(water_head_m=20.0), CLASSES, "water_on_lining", drainage="watertight"
        )
        np.testing.assert_allclose(found["check_demand"][0, at], 0.1962, rtol=1e-14)
        assert found["check_capacity"][0, at[0]] == 0
        np.testing.assert_allclose(found["check_capacity"][0, at[1]], RING_MPA, rtol=1e-14)
        assert found["check_capacity"][0, at[2]] > RING_MPA

    def test_a_class_without_a_ring_fails_under_water_and_not_without(self):
        sections = sections_of(2, water_head_m=[20.0, 0.0], gsi=80.0, intact_strength_mpa=150.0)
        found, at = of_check(sections, CLASSES, "water_on_lining", drainage="watertight")
        outcomes = found["check_outcome"][:, at[0]].tolist()
        assert outcomes == [Outcome.FAIL, Outcome.PASS]
        assert found["class_adequate"][:, 0].tolist() == [False, True]
        assert found["class_governing"][0, 0] == at[0]

    @pytest.mark.parametrize("drainage", ["", "drained"])
    def test_it_is_not_made_where_the_lining_is_not_watertight(self, drainage):
        made = project(CLASSES, sections_of(), drainage=drainage)
        lines = check_lines(plan_classes(made, load_plugins()))
        assert {line.check for line in lines if line.element == "class"} == {"crown_dead_weight"}
