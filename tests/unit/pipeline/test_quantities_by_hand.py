"""Each quantity for one case, with the arithmetic written out.

Two sections of 10 m and 12.5 m, L = 22.5 m, in a circle of R = 5.2 m.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from unit.pipeline.projects import BOLTS, SHOTCRETE, STEEL_SETS, along, element, project

from tunnelcalc.pipeline.collect import item_totals
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.sections import Sections

PI = math.pi

BY_HAND = [
    # pi R^2 L: 5.2^2 = 27.04; 27.04 x 22.5 = 608.4
    pytest.param("excavation", "m3", 608.4 * PI, id="excavation"),
    # 2 pi R L / (around x along): 2 x 5.2 x 22.5 = 234; 1.5 x 2.0 = 3; 234 / 3 = 78
    pytest.param("bolts", "no", 78 * PI, id="bolts"),
    # bolts of 4 m: 78 x 4 = 312
    pytest.param("bolt_length", "m", 312 * PI, id="bolt_length"),
    # pi (R^2 - (R - t)^2) L: 27.04 - 5.1^2 = 27.04 - 26.01 = 1.03; 1.03 x 22.5 = 23.175
    pytest.param("shotcrete", "m3", 23.175 * PI, id="shotcrete"),
    # L / spacing: 22.5 / 1.5 = 15
    pytest.param("steel_sets", "no", 15.0, id="steel_sets"),
    # no x area x 2 pi (R - depth/2) x density: 15 x 0.0043 = 0.0645; 2 x (5.2 - 0.07) = 10.26;
    # 0.0645 x 10.26 = 0.66177; 0.66177 x 7850 = 5194.8945
    pytest.param("steel", "kg", 5194.8945 * PI, id="steel"),
    pytest.param("length", "m", 22.5, id="length"),
]


def totals(scheduled, lengths_m=(10.0, 12.5)):
    ground = Sections(
        along(list(lengths_m))
        | {
            "radius_m": np.full(len(lengths_m), 5.2),
            "scheduled_class": np.array(scheduled, dtype=np.int32),
        }
    )
    everything = [
        element("rock_bolts", BOLTS),
        element("shotcrete", SHOTCRETE),
        element("steel_sets", STEEL_SETS),
    ]
    second_ring = element("shotcrete", SHOTCRETE, "shotcrete_2")
    made = project({"all": everything, "two_rings": [everything[1], second_ring]}, ground)
    incidents = Incidents()
    found = item_totals(made, plan_classes(made, load_plugins()), ground, incidents)
    assert incidents.listed() == ()
    return {(total.support_class, total.item): total for total in found}


@pytest.mark.parametrize(("item", "unit", "amount"), BY_HAND)
def test_a_quantity_is_what_a_hand_calculation_gives(item, unit, amount):
    total = totals([0, 0])["all", item]
    assert total.unit == unit
    np.testing.assert_allclose(total.amount, amount, rtol=1e-14)  # closed form: rounding only


def test_there_are_no_other_items():
    found = {item for name, item in totals([0, 0]) if name == "all"}
    assert found == {case.values[0] for case in BY_HAND}


def test_two_elements_that_give_one_item_are_added_up():
    np.testing.assert_allclose(
        totals([1, 1])["two_rings", "shotcrete"].amount, 2 * 23.175 * PI, rtol=1e-14
    )


def test_sections_without_an_adequate_class_count_as_length_and_excavation_alone():
    found = totals([NONE_ADEQUATE, 0])
    assert found["none_adequate", "length"].amount == 10.0
    np.testing.assert_allclose(
        found["none_adequate", "excavation"].amount, 27.04 * 10 * PI, rtol=1e-14
    )
    assert [item for name, item in found if name == "none_adequate"] == ["length", "excavation"]


def test_a_class_that_is_scheduled_nowhere_has_amounts_of_0():
    found = totals([0, 0])
    assert found["two_rings", "length"].amount == 0.0
    assert found["two_rings", "shotcrete"].amount == 0.0
