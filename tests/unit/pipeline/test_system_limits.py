"""Limits of classes with elements that age or change the ground."""

from __future__ import annotations

import numpy as np
import pytest
from scipy.optimize import brentq
from unit.pipeline.grounds import evaluated, sections_of
from unit.pipeline.projects import SHOTCRETE, element, project
from unit.pipeline.test_credited_capacity import RING_MPA
from unit.pipeline.test_resting_state import GROUTED, YOUNG

from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.plugin.registry import load_plugins

COLUMNS = (
    "class_first_failure_pressure_mpa",
    "class_first_failure_closure_mm",
    "class_full_pressure_mpa",
    "class_full_closure_mm",
    "class_missing_pressure_mpa",
)
GSI = [22.0, 45.0, 60.0]


def limits(elements, advance_m_per_day=4.0, **ground):
    sections = sections_of(len(GSI), **{"gsi": GSI, **ground})
    found = evaluated(sections, {"only": elements}, advance_m_per_day=advance_m_per_day)
    return np.stack([found[name][:, 0] for name in COLUMNS]), found


def test_slowly_advanced_the_ring_has_nearly_the_limits_of_a_hard_one():
    """It is loaded with 28 days of age and more, at which the law is capped at the end value."""
    hard, _ = limits([element("shotcrete", SHOTCRETE)])
    slow, _ = limits([element("shotcrete", YOUNG)], advance_m_per_day=1e-4)
    np.testing.assert_allclose(slow, hard, rtol=1e-4, atol=1e-6)


def test_the_faster_the_advance_the_later_a_sound_ring_is_at_its_limit():
    """It has carried less by the time it is hard."""
    firm = {"gsi": [35.0, 45.0, 60.0]}
    slow, _ = limits([element("shotcrete", YOUNG)], advance_m_per_day=1.0, **firm)
    fast, _ = limits([element("shotcrete", YOUNG)], advance_m_per_day=8.0, **firm)
    assert np.all(fast[1] > slow[1])
    np.testing.assert_allclose([slow[0], fast[0]], RING_MPA, rtol=1e-9)


def test_a_ring_overloaded_while_young_is_at_its_limit_there_and_counts_whole_when_hard():
    weak = {"gsi": 25.0, "cover_m": 596.0}
    thick = YOUNG | {"strength_mpa": 3.0, "modulus_gpa": 30.0}
    told, found = limits([element("shotcrete", thick)], **weak)
    made = project({"only": [element("shotcrete", thick)]}, found, advance_m_per_day=4.0)
    (young,) = [
        at
        for at, line in enumerate(check_lines(plan_classes(made, load_plugins())))
        if line.check == "young_hoop_stress"
    ]
    assert np.all(found["check_factor_of_safety"][:, young] < 1)
    assert np.all(told[0] < RING_MPA / 10)
    assert np.all(told[1] < found["class_closure_mm"][:, 0])
    np.testing.assert_allclose(found["class_capacity_mpa"][:, 0], RING_MPA / 10, rtol=1e-9)


@pytest.mark.parametrize("kind", [SHOTCRETE, YOUNG])
def test_bolts_without_friction_change_nothing(kind):
    without, _ = limits([element("shotcrete", kind)])
    idle = GROUTED | {"friction_factor": 1e-13, "bond_kn_per_m": 1e6}
    with_bolts, _ = limits([element("shotcrete", kind), element("grouted_rock_bolts", idle)])
    # A thick plastic zone leaves no bond: there the check of the bolts says so at once.
    holds = with_bolts[0] > 0
    assert np.sum(holds) >= 2
    np.testing.assert_allclose(with_bolts[:, holds], without[:, holds], rtol=1e-7, atol=1e-9)
    np.testing.assert_allclose(with_bolts[4], without[4], rtol=1e-7, atol=1e-9)


def test_bolts_that_change_the_ground_are_at_their_limit_where_their_check_is():
    """The thickness of a ring is sought with which the class rests just at the bolts' limit."""
    sections = sections_of(gsi=62.0)

    def run(thickness_mm):
        ring = element("shotcrete", SHOTCRETE | {"thickness_mm": thickness_mm})
        classes = {"only": [element("grouted_rock_bolts", GROUTED), ring]}
        found = evaluated(sections, classes)
        lines = check_lines(plan_classes(project(classes, sections), load_plugins()))
        of_bolts = [
            found["check_factor_of_safety"][0, at]
            for at, line in enumerate(lines)
            if line.check in ("bar", "bond")
        ]
        return min(of_bolts), found

    thickness = brentq(lambda t: run(t)[0] - 1, 20, 400, xtol=1e-9)
    _, found = run(thickness)
    assert found["class_plastic_radius_m"][0, 0] > 4
    for ours, rest in (
        ("class_first_failure_closure_mm", "class_closure_mm"),
        ("class_first_failure_pressure_mpa", "class_support_pressure_mpa"),
        ("class_full_closure_mm", "class_closure_mm"),
    ):
        assert found[ours][0, 0] == pytest.approx(found[rest][0, 0], rel=1e-7)
    assert run(thickness * 1.1)[1]["class_first_failure_closure_mm"][0, 0] == pytest.approx(
        found["class_first_failure_closure_mm"][0, 0], rel=1e-7
    )


def test_the_limit_of_the_ground_is_on_its_improved_line():
    """Bolts lower the pressure that the ground needs at the closure limit."""
    weak = {"gsi": [22.0, 23.0, 24.0]}
    without, _ = limits([element("shotcrete", YOUNG)], **weak)
    bolts = element("grouted_rock_bolts", GROUTED, installed_at_m=0.0)
    with_bolts, _ = limits([element("shotcrete", YOUNG), bolts], **weak)
    assert np.all(with_bolts[4] < 0.99 * without[4])
