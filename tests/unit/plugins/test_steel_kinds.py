"""The kinds `steel_sets` and `lattice_girders` and their checks, by hand; values are invented."""

import math

import numpy as np
import pytest
from tunnelcalc_steel_sets.checks import Travel, Yield
from tunnelcalc_steel_sets.girders import LatticeGirders
from tunnelcalc_steel_sets.kind import SteelSets, blocks_of
from tunnelcalc_steel_sets.plausible import MOST_DIVISOR, SECTION, section_misfits
from tunnelcalc_steel_sets.profile import packaged_sections, section_of

from tunnelcalc.api import Element, LinearSpring, PressureOfClosure, Sections

RADIUS = np.array([2.0, 4.0])
SECTIONS = Sections({"radius_m": RADIUS})
STEEL = {
    "yield_strength_mpa": 250.0,
    "steel_modulus_gpa": 200.0,
    "spacing_m": 1.0,
    "contact": "embedded",
}
OWN = {"section_area_mm2": 4000.0, "section_inertia_mm4": 1.4e7, "section_depth_mm": 140.0}
BLOCKED = {
    "contact": "blocked",
    "block_spacing_deg": 20.0,
    "block_thickness_mm": 50.0,
    "block_width_mm": 200.0,
    "block_modulus_gpa": 10.0,
}
SLIDING = {
    "joints": "sliding",
    "joint_count": 3.0,
    "slip_load_kn": 400.0,
    "joint_travel_mm": 200.0,
}
SETS, GIRDERS = SteelSets(), LatticeGirders()


def sets(**more):
    return Element("steel_sets", "steel_sets", 1.0, {**STEEL, **OWN, **more})


def designated(name, **more):
    return Element("steel_sets", "steel_sets", 1.0, {**STEEL, "profile": name, **more})


def girders(bars="three", lower=20.0, upper=30.0, distance=130.0, **more):
    values = {
        "bars": bars,
        "lower_bar_diameter_mm": lower,
        "upper_bar_diameter_mm": upper,
        "bar_layer_distance_mm": distance,
        **{name: value for name, value in STEEL.items() if name != "contact"},
        **more,
    }
    return Element("lattice_girders", "lattice_girders", 1.0, values)


def misfits(kind, element, radius=2.0):
    return {misfit.parameter: misfit.message for misfit in kind.misfits(element, radius)}


class TestProfile:
    def test_an_own_profile_is_the_default(self):
        assert {p.name: p.default for p in SETS.parameters if p.default} == {
            "profile": "own",
            "joints": "rigid",
            "beyond_yield": "not_declared",
        }
        spring = SETS.reaction(SECTIONS, sets())
        # 200,000 MPa x 0.004 m2 / (1 m x R^2), 250 MPa x 0.004 m2 / R
        np.testing.assert_allclose(spring.stiffness_mpa_per_m, [200.0, 50.0], rtol=1e-14)
        np.testing.assert_allclose(spring.capacity_mpa, [0.5, 0.25], rtol=1e-14)
        assert isinstance(spring, LinearSpring)
        assert spring.beyond == "not_declared"

    def test_a_designation_gives_area_inertia_depth_and_flange(self):
        """HEB 140: h 140, b 140 mm, 43.0 cm2, 1509 cm4 (EN 10365, from memory)."""
        section = section_of(designated("HEB 140"))
        assert section.area_mm2 == pytest.approx(4300, abs=5)
        assert section.inertia_mm4 == pytest.approx(1.509e7, abs=5e3)
        assert (section.depth_mm, section.flange_width_mm) == (140.0, 140.0)

    def test_a_designation_is_as_good_as_its_numbers(self):
        section = section_of(designated("HEB 140"))
        own = sets(
            section_area_mm2=section.area_mm2,
            section_inertia_mm4=section.inertia_mm4,
            section_depth_mm=section.depth_mm,
            **{**BLOCKED, "block_width_mm": 100.0},
        )
        other = designated("HEB 140", **{**BLOCKED, "block_width_mm": 100.0})
        one, two = (SETS.reaction(SECTIONS, element) for element in (own, other))
        assert one.stiffness_mpa_per_m.tolist() == two.stiffness_mpa_per_m.tolist()
        assert one.capacity_mpa.tolist() == two.capacity_mpa.tolist()

    def test_a_block_bears_no_wider_than_the_flange(self):
        assert blocks_of(designated("HEB 140", **BLOCKED)).width_m == pytest.approx(0.14)
        assert blocks_of(designated("HEB 240", **BLOCKED)).width_m == pytest.approx(0.2)
        assert blocks_of(sets(**BLOCKED)).width_m == pytest.approx(0.2)

    @pytest.mark.parametrize("name", list(packaged_sections()))
    def test_every_designation_may_be_written_and_is_heavier_than_nothing(self, name):
        assert name in {p.name: p.choices for p in SETS.parameters}["profile"]
        steel = {a.item: a for a in SETS.amounts(SECTIONS, designated(name))}["steel"]
        section = section_of(designated(name))
        axis = 2 * math.pi * (RADIUS - section.depth_mm / 2000)
        np.testing.assert_allclose(
            steel.per_metre, section.area_mm2 * 1e-6 * axis * 7850, rtol=1e-12
        )

    def test_a_profile_too_deep_for_the_opening_is_refused_by_its_own_name(self):
        assert set(misfits(SETS, designated("HEM 300"), 0.6)) == {"profile"}
        assert set(misfits(SETS, sets(), 0.25)) == {"section_depth_mm"}

    def test_blocked_sets_never_carry_more_than_sets_in_full_contact(self):
        """The capacity that is often printed does."""
        for angle in (2.0, 5.0, 20.0, 60.0):
            blocked = SETS.reaction(
                SECTIONS, designated("HEB 140", **{**BLOCKED, "block_spacing_deg": angle})
            )
            embedded = SETS.reaction(SECTIONS, designated("HEB 140"))
            assert np.all(blocked.capacity_mpa <= embedded.capacity_mpa)


class TestPlausibleSection:
    """A h^2 = 4000 x 140^2 = 78.4e6 mm4: at most a fourth of it, 19.6e6 mm4, two points; at least
    that of a rhombus, a 24th, 3.267e6 mm4 (independent calculation)."""

    @pytest.mark.parametrize("inertia", [3.27e6, 1.4e7, 1.95e7])
    def test_between_the_bounds_nothing_is_told(self, inertia):
        assert misfits(SETS, sets(section_inertia_mm4=inertia)) == {}

    @pytest.mark.parametrize(
        ("inertia", "told"), [(3.26e6, "less than a rhombus"), (1.97e7, "more than this area")]
    )
    def test_an_own_section_beyond_them_is_refused(self, inertia, told):
        found = misfits(SETS, sets(section_inertia_mm4=inertia))
        assert set(found) == {"section_inertia_mm4"}
        assert told in found["section_inertia_mm4"]

    @pytest.mark.parametrize("name", list(packaged_sections()))
    def test_a_rolled_section_is_far_from_both_about_both_axes(self, name):
        """Of a flat rectangle in place of the flanges about the weak axis: b^3 tf / 6."""
        row = packaged_sections()[name]
        assert not list(section_misfits(values(row.area_mm2, row.inertia_mm4, row.height_mm)))
        weak = row.width_mm**3 * row.flange_thickness_mm / 6
        assert not list(section_misfits(values(row.area_mm2, weak, row.width_mm)))

    def test_a_rhombus_lies_on_the_bound(self):
        """Width 2 w (1 - 2 |y| / h): integrated by strips, a solid rhombus of 100 by 200 mm."""
        y = (np.arange(200_000) + 0.5) / 200_000 * 200 - 100
        width = 100 * (1 - np.abs(y) / 100)
        area, inertia = width.sum() * 200 / y.size, (width * y**2).sum() * 200 / y.size
        assert inertia / (area * 200**2) == pytest.approx(1 / MOST_DIVISOR, rel=1e-6)


def values(area, inertia, depth):
    return dict(zip(SECTION, (area, inertia, depth), strict=True))


class TestProjectTable:
    ROW = {**OWN, "profile": "ARCH", "profile_source": "sections.csv:3, mill sheet"}  # noqa: RUF012

    def test_a_row_is_as_good_as_an_own_section_and_names_its_source(self):
        element = designated("ARCH", **self.ROW)
        section, own = section_of(element), section_of(sets())
        assert section.source == "ARCH: sections.csv:3, mill sheet"
        assert own.source == "project"
        assert (section.area_mm2, section.inertia_mm4, section.depth_mm) == tuple(OWN.values())
        lines = {line.symbol: line for line in SETS.lines({"radius_m": 4.0}, element)}
        assert lines["As"].source == "ARCH: sections.csv:3, mill sheet"

    def test_one_too_deep_for_the_opening_is_refused_by_its_name(self):
        assert set(misfits(SETS, designated("ARCH", **self.ROW), 0.25)) == {"profile"}


class TestBeyondYield:
    def test_a_yielding_set_says_so(self):
        spring = SETS.reaction(SECTIONS, sets(beyond_yield="yields"))
        assert spring.beyond == "yields"

    def test_a_sliding_set_that_yields_gives_no_more_than_its_capacity(self):
        element = sets(beyond_yield="yields", **SLIDING)
        reaction = SETS.reaction(SECTIONS, element)
        pressure, slope = reaction.pressure_and_slope(np.full(2, 1.0))
        assert pressure.tolist() == reaction.capacity_mpa.tolist()
        assert slope.tolist() == [0.0, 0.0]
        beyond, _ = SETS.reaction(SECTIONS, sets(**SLIDING)).pressure_and_slope(np.full(2, 1.0))
        assert np.all(beyond > reaction.capacity_mpa)


class TestSlidingJoints:
    """400 kN, sets 1 m apart: 0.2 and 0.1 MPa; three joints of 200 mm: 600 / (2 pi) = 95.5 mm."""

    def test_pressure_stands_still_while_they_slide(self):
        reaction = SETS.reaction(SECTIONS, sets(**SLIDING))
        assert isinstance(reaction, PressureOfClosure)
        assert SETS.reaction_form(sets(**SLIDING)) == PressureOfClosure.form
        # Elastic up to 0.2 / 200 and 0.1 / 50, that is 1 mm and 2 mm.
        for moved, expected, rises in (
            (0.0005, [0.1, 0.025], True),
            (0.05, [0.2, 0.1], False),
            (0.6 / (2 * math.pi) + 0.0022, [0.44, 0.11], True),
        ):
            pressure, slope = reaction.pressure_and_slope(np.full(2, moved))
            np.testing.assert_allclose(pressure, expected, rtol=1e-9)
            np.testing.assert_allclose(slope, np.array([200.0, 50.0]) * rises, rtol=1e-14)

    def test_blocked_sets_slide_at_the_same_thrust_with_their_own_stiffness(self):
        element = sets(**{**SLIDING, **BLOCKED, "slip_load_kn": 20.0})
        reaction = SETS.reaction(SECTIONS, element)
        spring = SETS.reaction(SECTIONS, sets(**BLOCKED))
        assert reaction.capacity_mpa.tolist() == spring.capacity_mpa.tolist()
        _, slope = reaction.pressure_and_slope(np.full(2, 1e-6))
        assert slope.tolist() == spring.stiffness_mpa_per_m.tolist()
        pressure, _ = reaction.pressure_and_slope(np.full(2, 0.05))
        np.testing.assert_allclose(pressure, [0.01, 0.005], rtol=1e-12)

    def test_joints_stronger_than_the_profile_are_refused(self):
        """250 MPa x 4000 mm2 = 1000 kN."""
        found = misfits(SETS, sets(**{**SLIDING, "slip_load_kn": 1000.0}))
        text = "is 1000 kN; the profile yields in thrust at 1000 kN, before the joints slide"
        assert found == {"slip_load_kn": text}
        assert misfits(SETS, sets(**{**SLIDING, "slip_load_kn": 999.0})) == {}

    def test_joints_are_counted(self):
        amounts = {a.item: a.per_metre for a in SETS.amounts(SECTIONS, sets(**SLIDING))}
        assert amounts["sliding_joints"].tolist() == [3.0, 3.0]
        assert "sliding_joints" not in {a.item for a in SETS.amounts(SECTIONS, sets())}

    def test_travel_is_what_the_closure_asks_of_a_joint(self):
        """R = 2: 51 mm of closure, 1 mm of it elastic: 2 pi 50 / 3. R = 4: nothing has slid."""
        check = Travel()
        moved = SECTIONS.with_columns({"element_moved_mm": np.array([51.0, 1.9])})
        found = check.evaluate(moved, sets(**SLIDING))
        np.testing.assert_allclose(found.demand, [2 * math.pi * 50 / 3, 0.0], rtol=1e-12)
        assert found.capacity.tolist() == [200.0, 200.0]
        assert (check.concerns(sets(**SLIDING)), check.concerns(sets())) == (True, False)

    def test_travel_is_used_up_where_the_reaction_begins_to_rise_again(self):
        end = 1000 * (0.6 / (2 * math.pi) + np.array([0.001, 0.002]))
        for share, within in ((1 - 1e-6, True), (1 + 1e-6, False)):
            moved = SECTIONS.with_columns({"element_moved_mm": end * share})
            found = Travel().evaluate(moved, sets(**SLIDING))
            assert np.all((found.demand <= found.capacity) == within)
            _, slope = SETS.reaction(SECTIONS, sets(**SLIDING)).pressure_and_slope(
                end * share / 1000
            )
            assert np.all((slope == 0) == within)


class TestLatticeGirders:
    def test_three_bars(self):
        """Two of 20 mm and one of 30 mm: pi (2 x 100 + 225) mm2."""
        area = 425 * math.pi * 1e-6
        spring = GIRDERS.reaction(SECTIONS, girders())
        np.testing.assert_allclose(
            spring.stiffness_mpa_per_m, 200_000 * area / RADIUS**2, rtol=1e-14
        )
        np.testing.assert_allclose(spring.capacity_mpa, 250 * area / RADIUS, rtol=1e-14)
        assert section_of(girders()).depth_mm == 155.0

    def test_four_bars_have_one_more(self):
        three, four = (section_of(girders(bars)).area_mm2 for bars in ("three", "four"))
        assert four - three == pytest.approx(225 * math.pi, rel=1e-12)

    def test_amounts_are_those_of_the_longitudinal_bars(self):
        amounts = {a.item: a.per_metre for a in GIRDERS.amounts(SECTIONS, girders(spacing_m=2.0))}
        assert amounts["lattice_girders"].tolist() == [0.5, 0.5]
        mass = 0.5 * 425 * math.pi * 1e-6 * 7850 * 2 * math.pi * (RADIUS - 0.0775)
        np.testing.assert_allclose(amounts["longitudinal_bars"], mass, rtol=1e-12)

    def test_bars_that_touch_and_girders_too_deep_are_refused(self):
        assert misfits(GIRDERS, girders(distance=25.0)) == {
            "bar_layer_distance_mm": "is not more than the 25 mm at which the bars touch"
        }
        assert set(misfits(GIRDERS, girders(distance=500.0), 1.0)) == {"bar_layer_distance_mm"}
        assert misfits(GIRDERS, girders()) == {}

    def test_they_may_yield(self):
        assert GIRDERS.reaction(SECTIONS, girders(beyond_yield="yields")).beyond == "yields"


@pytest.mark.parametrize("element", [sets(), sets(**SLIDING), girders()], ids=lambda e: e.kind)
def test_yield_compares_pressure_and_capacity(element):
    assert Yield().concerns(element)
    assert element.kind in Yield.applies_to
    columns = {"element_pressure_mpa": [0.1, 0.2], "element_capacity_mpa": [0.5, 0.25]}
    at_rest = SECTIONS.with_columns({name: np.array(v) for name, v in columns.items()})
    found = Yield().evaluate(at_rest, element)
    assert (found.demand.tolist(), found.capacity.tolist()) == ([0.1, 0.2], [0.5, 0.25])
