"""What holds for the quantities and zones of every schedule."""

from __future__ import annotations

import math
from itertools import pairwise

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st
from unit.pipeline.projects import along, project, three_classes

from tunnelcalc.pipeline.collect import item_totals, zones
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.sections import Sections
from tunnelcalc.validity import Level, is_raised

REGISTRY = load_plugins()
CLASS_COUNT = len(three_classes())


@st.composite
def scheduled_sections(draw):
    """Sections with a schedule, and with what the table of zones tells about them."""
    count = draw(st.integers(1, 25))

    def column(strategy):
        return draw(st.lists(strategy, min_size=count, max_size=count))

    columns = along(column(st.floats(0.1, 200)))
    shift = np.cumsum(column(st.sampled_from([0.0, 0.0, 0.0, 5.0])))
    columns = {name: values + shift for name, values in columns.items()}
    factors = column(st.sampled_from([math.nan, 1.5, 2.0]))
    return Sections(
        columns
        | {
            "radius_m": np.array(column(st.floats(2.0, 8.0))),
            "scheduled_class": np.array(
                column(st.sampled_from([*range(CLASS_COUNT), NONE_ADEQUATE])), dtype=np.int32
            ),
            "needed_pressure_mpa": np.array(column(st.floats(0.0, 5.0))),
            "class_factor_of_safety": np.repeat(np.array(factors)[:, None], CLASS_COUNT, axis=1),
            "class_closure_pct": np.repeat(
                np.array(column(st.floats(0.0, 1.0)))[:, None], CLASS_COUNT, axis=1
            ),
            "class_governing": np.zeros((count, CLASS_COUNT), dtype=np.int32),
            "flag_level": np.array(column(st.sampled_from(list(Level))), dtype=np.int8)[:, None],
            "ground_unit": np.array(column(st.sampled_from(["", "a", "b"])), dtype=object),
        }
    )


def quantities(sections):
    made = project(three_classes(), sections)
    incidents = Incidents()
    found = item_totals(made, plan_classes(made, REGISTRY), sections, incidents)
    assert incidents.listed() == ()
    return found


def of_item(found, item):
    return math.fsum(total.amount for total in found if total.item == item)


@given(scheduled_sections())
@settings(max_examples=100, deadline=None)
def test_lengths_and_excavation_over_all_classes_make_up_the_whole_tunnel(sections):
    found = quantities(sections)
    length = sections["to_m"] - sections["from_m"]
    np.testing.assert_allclose(of_item(found, "length"), math.fsum(length), rtol=1e-12)
    volume = math.fsum(math.pi * sections["radius_m"] ** 2 * length)
    np.testing.assert_allclose(of_item(found, "excavation"), volume, rtol=1e-12)


@given(scheduled_sections())
@settings(max_examples=50, deadline=None)
def test_each_class_and_item_stands_once_and_no_amount_is_negative(sections):
    found = quantities(sections)
    keys = [(total.support_class, total.item) for total in found]
    assert len(keys) == len(set(keys))
    assert all(total.amount >= 0 for total in found)


@given(scheduled_sections(), st.integers(0, 24))
@settings(max_examples=50, deadline=None)
def test_cutting_a_section_in_two_changes_no_quantity(sections, position):
    position %= sections.count
    rows = np.insert(np.arange(sections.count), position, position)
    middle = sections["chainage_m"][position]
    cut = sections.take(rows)
    from_m, to_m = cut["from_m"].copy(), cut["to_m"].copy()
    to_m[position], from_m[position + 1] = middle, middle
    before = quantities(sections)
    after = quantities(cut.with_columns({"from_m": from_m, "to_m": to_m}))
    assert [total.item for total in before] == [total.item for total in after]
    np.testing.assert_allclose(
        [total.amount for total in after], [total.amount for total in before], rtol=1e-9
    )


@given(scheduled_sections())
@settings(max_examples=100, deadline=None)
def test_the_zones_cover_the_alignment_without_a_hole(sections):
    made = project(three_classes(), sections)
    lines = check_lines(plan_classes(made, REGISTRY))
    found = zones(made, sections, lines, ["flag"])
    assert found[0].first == 0
    assert found[-1].last == sections.count - 1
    assert all(before.last + 1 == after.first for before, after in pairwise(found))
    assert [zone.from_m for zone in found] == sections["from_m"][[z.first for z in found]].tolist()
    assert [zone.to_m for zone in found] == sections["to_m"][[z.last for z in found]].tolist()
    np.testing.assert_allclose(
        math.fsum(zone.length_m for zone in found),
        math.fsum(sections["to_m"] - sections["from_m"]),
        rtol=1e-9,
    )


@given(scheduled_sections())
@settings(max_examples=100, deadline=None)
def test_a_zone_tells_the_worst_of_its_sections(sections):
    made = project(three_classes(), sections)
    lines = check_lines(plan_classes(made, REGISTRY))
    for zone in zones(made, sections, lines, ["flag"]):
        rows = range(zone.first, zone.last + 1)
        number = int(sections["scheduled_class"][zone.first])
        assert {int(sections["scheduled_class"][row]) for row in rows} == {number}
        units = {sections["ground_unit"][row] for row in rows} - {""}
        assert zone.ground_units == tuple(sorted(units))
        assert zone.flags == (
            ("flag",) if any(is_raised(sections["flag_level"][list(rows), 0])) else ()
        )
        if number == NONE_ADEQUATE:
            assert zone.needed_pressure_mpa == max(
                float(sections["needed_pressure_mpa"][row]) for row in rows
            )
            assert math.isnan(zone.least_factor_of_safety)
            continue
        assert math.isnan(zone.needed_pressure_mpa)
        factors = [float(sections["class_factor_of_safety"][row, number]) for row in rows]
        known = [factor for factor in factors if not math.isnan(factor)]
        if known:
            assert zone.least_factor_of_safety == min(known)
        else:
            assert math.isnan(zone.least_factor_of_safety)
