"""The kind `shotcrete` and its checks, by hand; values are invented."""

import math

import numpy as np
import pytest
from tunnelcalc_shotcrete.checks import EarlyStrength, HoopStress, YoungHoopStress
from tunnelcalc_shotcrete.formulas import ring_capacity_mpa, ring_stiffness_mpa_per_m
from tunnelcalc_shotcrete.hardening import (
    EUROCODE_COEFFICIENTS,
    chang_stille_modulus_ratio,
    chang_stille_strength_ratio,
    eurocode_modulus_ratio,
)
from tunnelcalc_shotcrete.kind import Shotcrete
from tunnelcalc_shotcrete.laws import LAW_NAMES, continued_eurocode_modulus_ratio, hardening_law

from tunnelcalc.api import AdvanceIncrements, Element, LinearSpring, Sections

RADIUS = np.array([3.0, 5.0])
SECTIONS = Sections({"radius_m": RADIUS})
PLAIN = {
    "thickness_mm": 200.0,
    "strength_mpa": 30.0,
    "modulus_gpa": 20.0,
    "poisson_ratio": 0.2,
}
KIND = Shotcrete()


def ring(**more):
    return Element("shotcrete", "shotcrete", 1.0, {**PLAIN, **more})


def hardening(law, **more):
    cement = {"cement_class": "R"} if law == "en_1992_1_1" else {}
    return ring(hardening=law, **cement, **more)


def misfits(element, radius=3.0):
    return {misfit.parameter: misfit.message for misfit in KIND.misfits(element, radius)}


class TestWithoutNewChoices:
    def test_the_ring_is_the_thick_spring_that_it_was(self):
        element = ring()
        spring = KIND.reaction(SECTIONS, element)
        assert isinstance(spring, LinearSpring)
        assert (spring.beyond, spring.acts_from_m) == ("not_declared", 0.0)
        stiffness = ring_stiffness_mpa_per_m(RADIUS, 0.2, 20_000.0, 0.2)
        assert spring.stiffness_mpa_per_m.tobytes() == stiffness.tobytes()
        assert spring.capacity_mpa.tobytes() == ring_capacity_mpa(RADIUS, 0.2, 30.0).tobytes()
        assert [amount.item for amount in KIND.amounts(SECTIONS, element)] == ["shotcrete"]

    def test_the_defaults_say_the_same(self):
        said = {p.name: p.default for p in KIND.parameters if p.default and p.only_if is None}
        assert said == {
            "ring_theory": "thick",
            "hardening": "none",
            "closed_ring": "at_installation",
            "reinforcement": "not_declared",
        }
        spring, same = (KIND.reaction(SECTIONS, e) for e in (ring(), ring(**said)))
        assert spring.stiffness_mpa_per_m.tobytes() == same.stiffness_mpa_per_m.tobytes()


class TestThinRing:
    def test_capacity_is_strength_over_slenderness(self):
        spring = KIND.reaction(SECTIONS, ring(ring_theory="thin"))
        np.testing.assert_allclose(spring.capacity_mpa, [30 * 0.2 / 3, 30 * 0.2 / 5], rtol=1e-14)
        # Ec t / ((1 - nu^2) R (R - t/2)) for R = 5: 4000 / (0.96 x 5 x 4.9).
        assert spring.stiffness_mpa_per_m[1] == pytest.approx(4000 / (0.96 * 24.5), rel=1e-14)

    def test_its_stress_is_the_mean(self):
        at_rest = SECTIONS.with_columns({"element_pressure_mpa": np.array([0.3, 0.3])})
        found = HoopStress().evaluate(at_rest, ring(ring_theory="thin"))
        np.testing.assert_allclose(found.demand, [0.3 * 3 / 0.2, 0.3 * 5 / 0.2], rtol=1e-14)
        assert found.capacity.tolist() == [30.0, 30.0]


class TestReinforcement:
    def test_mesh_is_told_as_the_area_of_a_layer(self):
        amounts = {a.item: a for a in KIND.amounts(SECTIONS, ring(reinforcement="mesh"))}
        assert list(amounts) == ["shotcrete", "mesh_per_layer"]
        assert amounts["mesh_per_layer"].per_metre[0] == pytest.approx(2 * math.pi * 2.9)

    def test_fibre_shotcrete_is_an_item_of_its_own(self):
        (amount,) = KIND.amounts(SECTIONS, ring(reinforcement="fibre"))
        (plain,) = KIND.amounts(SECTIONS, ring(reinforcement="none"))
        assert (amount.item, plain.item) == ("fibre_shotcrete", "shotcrete")
        assert amount.per_metre.tolist() == plain.per_metre.tolist()

    @pytest.mark.parametrize("word", ["none", "mesh", "fibre"])
    def test_it_adds_nothing_to_the_ring(self, word):
        plain, with_it = (KIND.reaction(SECTIONS, e) for e in (ring(), ring(reinforcement=word)))
        assert plain.stiffness_mpa_per_m.tolist() == with_it.stiffness_mpa_per_m.tolist()
        assert plain.capacity_mpa.tolist() == with_it.capacity_mpa.tolist()


class TestClosedRing:
    @pytest.mark.parametrize("law", ["none", "chang_stille_1993"])
    def test_a_ring_reacts_from_where_it_is_closed(self, law):
        element = hardening(law, closed_ring="from_distance", closed_at_m=12.0)
        assert KIND.reaction(SECTIONS, element).acts_from_m == 12.0
        assert misfits(element) == {}

    def test_a_ring_is_not_closed_before_it_is_sprayed(self):
        element = ring(closed_ring="from_distance", closed_at_m=0.5)
        assert misfits(element) == {"closed_at_m": "is 0.5 m, before the installation at 1 m"}


class TestHardening:
    def test_stiffness_and_capacity_are_those_of_the_age(self):
        """At one day: 0.680 of the stiffness, 0.526 of the strength, Chang & Stille (1993)."""
        reaction = KIND.reaction(SECTIONS, hardening("chang_stille_1993"))
        assert isinstance(reaction, AdvanceIncrements)
        stiffness, capacity = reaction.at_age(np.array([1.0, 1.0]))
        final = KIND.reaction(SECTIONS, ring())
        np.testing.assert_allclose(stiffness / final.stiffness_mpa_per_m, 0.680, atol=5e-4)
        np.testing.assert_allclose(capacity / final.capacity_mpa, 0.526, atol=5e-4)

    @pytest.mark.parametrize("theory", ["thick", "thin"])
    @pytest.mark.parametrize("law", LAW_NAMES)
    def test_it_ends_as_the_hard_ring(self, law, theory):
        reaction = KIND.reaction(SECTIONS, hardening(law, ring_theory=theory))
        hard = KIND.reaction(SECTIONS, ring(ring_theory=theory))
        for age in (28.0 * (1 + 1e-3), 1e6, np.inf):
            stiffness, capacity = reaction.at_age(np.full(2, age))
            np.testing.assert_allclose(stiffness, hard.stiffness_mpa_per_m, rtol=3e-4)
            np.testing.assert_allclose(capacity, hard.capacity_mpa, rtol=1e-14)
        assert reaction.final_capacity_mpa.tolist() == hard.capacity_mpa.tolist()

    @pytest.mark.parametrize("law", LAW_NAMES)
    def test_at_age_0_there_is_no_stiffness_but_a_capacity(self, law):
        """A capacity of 0 beside a pressure of 0 would have no factor."""
        reaction = KIND.reaction(SECTIONS, hardening(law))
        stiffness, capacity = reaction.at_age(np.zeros(2))
        first = hardening_law(hardening(law)).first_age_days
        assert stiffness.tolist() == [0.0, 0.0]
        assert np.all(capacity > 0)
        assert capacity.tolist() == reaction.at_age(np.full(2, first))[1].tolist()
        assert np.all(capacity < reaction.at_age(np.full(2, 1.1 * first))[1])

    def test_an_age_that_is_not_known_stays_so_and_spoils_no_other(self):
        reaction = KIND.reaction(SECTIONS, hardening("meschke_1996"))
        for array in reaction.at_age(np.array([np.nan, 2.0])):
            assert np.isnan(array[0])
            assert array[1] > 0

    def test_cement_that_hardens_slowly_is_weaker_while_young(self):
        three = []
        for cement in ("R", "N", "S"):
            element = ring(hardening="en_1992_1_1", cement_class=cement)
            three.append(KIND.reaction(SECTIONS, element).at_age(np.full(2, 5.0))[1][0])
        assert three[0] > three[1] > three[2]

    def test_the_stiffness_of_the_code_is_continued_below_three_days(self):
        s, ages = EUROCODE_COEFFICIENTS["R"], np.array([3.0, 7.0, 28.0])
        np.testing.assert_allclose(
            continued_eurocode_modulus_ratio(ages, s), eurocode_modulus_ratio(ages, s), rtol=1e-14
        )
        young = continued_eurocode_modulus_ratio(np.array([0.0, 1e-6, 1.0, -1.0]), s)
        # exp(0.3 x 0.2 (1 - sqrt 28)) at one day
        assert young[:3] == pytest.approx([0.0, 0.0, 0.773], abs=5e-4)
        assert np.isnan(young[3])


class TestYoungStress:
    CHECK = YoungHoopStress()

    def worst(self, pressure, age, early=(0.0, 0.0)):
        columns = {
            "worst_pressure_mpa": pressure,
            "worst_age_days": age,
            "early_pressure_mpa": early,
        }
        return SECTIONS.with_columns({name: np.array(v) for name, v in columns.items()})

    def test_only_hardening_shotcrete_is_checked_while_young(self):
        assert not self.CHECK.concerns(ring())
        assert not self.CHECK.concerns(ring(hardening="none"))
        assert all(self.CHECK.concerns(hardening(law)) for law in LAW_NAMES)

    def test_stress_is_compared_with_the_strength_of_that_age(self):
        element = hardening("chang_stille_1993", ring_theory="thin")
        found = self.CHECK.evaluate(self.worst([0.2, 0.2], [1.0, 7.0]), element)
        np.testing.assert_allclose(found.demand, [3.0, 5.0], rtol=1e-14)
        np.testing.assert_allclose(found.capacity, [30 * 0.526, 30 * 0.914], atol=0.016)

    def test_before_the_first_age_the_strength_is_that_of_the_first_age(self):
        element = hardening("chang_stille_1993")
        found = self.CHECK.evaluate(self.worst([0.2, 0.2], [0.0, 0.25]), element)
        assert found.capacity[0] == found.capacity[1] == pytest.approx(30 * 0.156, abs=0.016)

    def test_load_before_the_age_from_which_the_code_holds_is_not_evaluated(self):
        """EN 1992-1-1:2004, 3.1.2(5): strengths up to 3 days are based on tests."""
        given = self.worst([0.2, 0.2], [3.0, 7.0], [1e-9, 0.0])
        found = self.CHECK.evaluate(given, hardening("en_1992_1_1"))
        assert found.left_out.tolist() == [True, False]
        assert "carries load before 3 days" in found.left_out_reason

    @pytest.mark.parametrize(
        ("law", "first"), [("chang_stille_1993", "6 h"), ("meschke_1996", "6 min")]
    )
    def test_laws_from_hours_on_tell_what_is_not_compared(self, law, first):
        found = self.CHECK.evaluate(self.worst([0.2, 0.2], [1, 1], [0.1, 0.0]), hardening(law))
        assert not np.any(found.left_out)
        assert f"compared from {first} on" in found.note

    def test_demand_over_capacity_is_that_of_the_reaction(self):
        """Check and reaction speak of the same limit at every age."""
        element = hardening("meschke_1996")
        reaction = KIND.reaction(SECTIONS, element)
        for age in (0.0, 0.3, 5.0):
            capacity = reaction.at_age(np.full(2, age))[1]
            found = self.CHECK.evaluate(self.worst(capacity, [age, age]), element)
            np.testing.assert_allclose(found.demand, found.capacity, rtol=1e-12)

    def test_a_ring_that_carries_nothing_has_its_final_strength(self):
        found = self.CHECK.evaluate(
            self.worst([0.0, 0.1], [np.nan, np.nan]), hardening("meschke_1996")
        )
        assert (found.demand[0], found.capacity[0]) == (0.0, 30.0)
        assert np.isnan(found.capacity[1])


class TestEarlyStrength:
    CHECK = EarlyStrength()
    TWO = {  # noqa: RUF012
        "early_strength": "at_two_ages",
        "early_age_1_hours": 6.0,
        "early_strength_1_mpa": 2.0,
        "early_age_2_hours": 24.0,
        "early_strength_2_mpa": 10.0,
    }

    def test_it_is_asked_only_where_it_is_required_and_a_law_is_named(self):
        assert self.CHECK.concerns(hardening("meschke_1996", **self.TWO))
        assert not self.CHECK.concerns(hardening("meschke_1996"))
        assert not self.CHECK.concerns(hardening("meschke_1996", early_strength="not_required"))
        assert not self.CHECK.concerns(ring())

    def test_the_ordinate_that_is_exceeded_by_least_is_told(self):
        """Chang & Stille, 30 MPa: 0.156 x 30 = 4.7 of 2 MPa at 6 h, 0.526 x 30 = 15.8 of 10 at
        24 h; the second is the nearer. With 12 MPa at 24 h it would still pass, with 16 not."""
        element = hardening("chang_stille_1993", **self.TWO)
        found = self.CHECK.evaluate(SECTIONS, element)
        assert found.demand.tolist() == [10.0, 10.0]
        ratio = chang_stille_strength_ratio(np.array([1.0]))[0]
        assert found.capacity.tolist() == [30.0 * ratio] * 2
        more = hardening("chang_stille_1993", **{**self.TWO, "early_strength_1_mpa": 4.0})
        assert self.CHECK.evaluate(SECTIONS, more).demand.tolist() == [4.0, 4.0]

    def test_an_age_before_the_law_is_trusted_is_refused(self):
        early = {**self.TWO, "early_age_1_hours": 1.0, "early_strength_1_mpa": 0.5}
        found = misfits(hardening("chang_stille_1993", **early))
        text = "is 1 h; chang_stille_1993 is trusted from 6 h on"
        assert found == {"early_age_1_hours": text}
        assert misfits(hardening("meschke_1996", **early)) == {}
        assert set(misfits(hardening("en_1992_1_1", **early))) == {
            "early_age_1_hours",
            "early_age_2_hours",
        }

    def test_a_later_age_that_requires_less_is_refused(self):
        falling = {**self.TWO, "early_strength_2_mpa": 1.0}
        found = misfits(hardening("meschke_1996", **falling))
        assert found == {"early_strength_2_mpa": "is 1 MPa, less than the 2 MPa of an earlier age"}

    @pytest.mark.parametrize("strength", [2.0, 10.0])
    def test_an_age_that_is_stated_twice_is_refused(self, strength):
        twice = {**self.TWO, "early_age_2_hours": 6.0, "early_strength_2_mpa": strength}
        found = misfits(hardening("meschke_1996", **twice))
        text = "is 6 h, for which a strength is required already"
        assert found == {"early_age_2_hours": text}

    def test_ages_may_stand_in_any_order_and_strength_may_stay(self):
        turned = {**self.TWO, "early_age_1_hours": 24.0, "early_age_2_hours": 6.0}
        falling = {"early_strength_1_mpa": "is 2 MPa, less than the 10 MPa of an earlier age"}
        assert misfits(hardening("meschke_1996", **turned)) == falling
        level = {**self.TWO, "early_strength_2_mpa": 2.0}
        assert misfits(hardening("meschke_1996", **level)) == {}

    def test_modulus_and_strength_of_a_law_are_its_own(self):
        law = hardening_law(hardening("chang_stille_1993"))
        ages = np.array([0.5, 3.0])
        assert law.modulus_ratio(ages).tolist() == chang_stille_modulus_ratio(ages).tolist()
        assert law.strength_ratio(ages).tolist() == chang_stille_strength_ratio(ages).tolist()
