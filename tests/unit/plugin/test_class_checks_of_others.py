"""Checks of a class, and kinds, that others offer: what takes part, and what goes wrong."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.grounds import sections_of
from unit.pipeline.projects import SHOTCRETE, element, project
from unit.plugin.strangers import (
    CLASS_CHECKS,
    KINDS,
    ClassCheck,
    Kind,
    offering,
    own_points,
)

from tunnelcalc import api
from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.support.adequacy import Outcome

RING = {"ring": [element("shotcrete", {**SHOTCRETE, "thickness_mm": 300.0}, installed_at_m=1.0)]}
STRONG = {"gsi": 70.0, "intact_strength_mpa": 80.0}


def evaluated(site, check, *, plugins=("stranger",), classes=RING, count=3, kinds=(), **keys):
    """Sections after all stages, the lines of the checks, and the incidents."""
    hooks = {CLASS_CHECKS: offering(check)}
    if kinds:
        hooks[KINDS] = offering(*kinds)
    registry = load_plugins([*own_points(), *site.plugin("stranger", **hooks)])
    assert registry.failures == []
    made = project(classes, sections_of(count, **STRONG, **keys.pop("ground", {})), plugins, **keys)
    plan = plan_classes(made, registry)
    sections = made.ground
    for stage in section_stages(made, registry, plan):
        sections = stage(sections)
    lines = check_lines(plan)
    incidents = Incidents()
    incidents.add_chunk(sections, lines)
    return sections, {line.label: at for at, line in enumerate(lines)}, incidents.listed()


def test_it_takes_part_where_the_project_names_its_plugin(site):
    sections, lines, _ = evaluated(site, ClassCheck())
    assert sections["check_demand"][:, lines["class:whole"]].tolist() == [1.0] * 3
    assert np.all(sections["class_adequate"])


def test_it_stays_out_where_the_project_does_not_name_it(site):
    _, lines, _ = evaluated(site, ClassCheck(), plugins=())
    assert "class:whole" not in lines


def test_a_class_must_pass_it(site):
    weak = ClassCheck(
        evaluate=lambda part: api.Evaluation(np.full(part.count, 2.0), np.ones(part.count))
    )
    sections, lines, _ = evaluated(site, weak)
    assert not np.any(sections["class_adequate"])
    assert np.all(sections["class_governing"][:, 0] == lines["class:whole"])


def test_by_choice_it_counts_only_where_the_project_says_yes(site):
    def weak(part):
        return api.Evaluation(np.full(part.count, 2.0), np.ones(part.count))

    check = ClassCheck(evaluate=weak, by_choice=True)
    sections, lines, _ = evaluated(site, check, chosen_checks={"whole": False})
    assert np.all(sections["check_outcome"][:, lines["class:whole"]] == Outcome.FAIL)
    assert np.all(sections["class_adequate"])


@pytest.mark.parametrize("by_choice", [False, True])
def test_what_it_raises_costs_its_own_rows(site, by_choice):
    def raising(part):
        if np.any(part["chainage_m"] == 15.0):
            raise ValueError("not here")
        return api.Evaluation(np.ones(part.count), np.full(part.count, 2.0))

    check = ClassCheck(evaluate=raising, by_choice=by_choice)
    sections, lines, incidents = evaluated(site, check)
    at = lines["class:whole"]
    assert sections["check_outcome"][:, at].tolist() == [
        Outcome.PASS,
        Outcome.NOT_EVALUATED,
        Outcome.PASS,
    ]
    assert sections["check_reason"][1, at] == "ValueError: not here"
    # What does not count is no reason to distrust the run.
    assert sections["class_adequate"][:, 0].tolist() == [True, by_choice, True]
    assert bool(incidents) is not by_choice


def test_a_kind_that_does_not_say_whether_it_is_a_ring_carries_no_water(site):
    class Silent(Kind):
        @property
        def is_ring(self):
            raise AttributeError("is_ring")

    kind = Silent("props")
    props = {"props": [element("props", {"amount_m": 1.0})]}
    sections, lines, _ = evaluated(
        site,
        ClassCheck(),
        classes=props,
        kinds=(kind,),
        drainage="watertight",
        ground={"water_head_m": 30.0},
    )
    at = lines["class:water_on_lining"]
    assert sections["check_capacity"][:, at].tolist() == [0.0] * 3
    assert not np.any(sections["class_adequate"])


def test_a_ring_of_others_carries_water(site):
    kind = Kind("segments")
    kind.is_ring = True
    sections, lines, _ = evaluated(
        site,
        ClassCheck(),
        classes={"segments": [element("segments", {"amount_m": 1.0})]},
        kinds=(kind,),
        drainage="watertight",
        ground={"water_head_m": 30.0},
    )
    at = lines["class:water_on_lining"]
    assert sections["check_capacity"][:, at].tolist() == [1.0] * 3
    np.testing.assert_allclose(sections["check_demand"][:, at], 0.2943, rtol=1e-14)
    assert np.all(sections["class_adequate"])


def test_a_check_that_fails_in_the_case_that_is_not_told_is_marked_as_failing(site):
    """The mean stress has the lower factor and is told; the rule fails under the larger one."""

    def thin(part):
        return api.Evaluation(np.full(part.count, 100.0), part["in_situ_stress_mpa"])

    def shallow(part):
        return api.Evaluation(part["in_situ_stress_mpa"], np.full(part.count, 9.0))

    registry = load_plugins(
        [
            *own_points(),
            *site.plugin(
                "stranger",
                **{
                    CLASS_CHECKS: offering(
                        ClassCheck("thin", evaluate=thin),
                        ClassCheck("shallow", evaluate=shallow, carries_load=False),
                    )
                },
            ),
        ]
    )
    # Vertical 5 MPa, horizontal 10 MPa: mean 7.5 MPa, larger 10 MPa.
    made = project(RING, sections_of(stress_ratio=2.0, **STRONG), ("stranger",))
    sections = made.ground
    for stage in section_stages(made, registry, plan_classes(made, registry)):
        sections = stage(sections)
    labels = [line.label for line in check_lines(plan_classes(made, registry))]
    told = sections["check_outcome"][0, labels.index("class:shallow")]
    assert sections["class_stress_case"].tolist() == [[0]]
    assert told == Outcome.PASS
    assert sections["fails_shallow"].tolist() == [True]
