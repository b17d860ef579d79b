"""A project that names a kind of support which cannot be solved or is not checked is refused."""

from __future__ import annotations

import pytest
from unit.pipeline.projects import write_project
from unit.plugin.strangers import CHECKS, KINDS, Check, Kind, offering, own_points

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins

KIND_LINE = 8
"""Of project.yaml: the line with `kind: props`."""


def read(folder, *groups, kind="props", plugins=()):
    project = write_project(folder, kind, {"amount_m": 1.0}, plugins)
    points = [point for group in groups for point in group]
    return read_project(project, load_plugins([*own_points(), *points]))


def only_problem(caught):
    (problem,) = caught.value.problems
    assert (problem.where.file, problem.where.line) == ("project.yaml", KIND_LINE)
    return problem


def test_a_linear_spring_with_a_load_check_is_accepted(site, tmp_path):
    props = site.plugin("props", **{KINDS: offering(Kind()), CHECKS: offering(Check())})
    project = read(tmp_path, props)
    (element,) = project.support_classes[0].elements
    assert (element.kind, element.number("amount_m")) == ("props", 1.0)


@pytest.mark.parametrize("form", ["pressure_of_closure", "advance_increments", "ground_ring"])
def test_a_form_of_reaction_that_is_not_solved_yet_is_refused_by_name(site, tmp_path, form):
    props = site.plugin("props", **{KINDS: offering(Kind(form=form)), CHECKS: offering(Check())})
    with pytest.raises(InputError, match="is not solved yet") as caught:
        read(tmp_path, props)
    problem = only_problem(caught)
    assert '"props"' in problem.message
    assert form in problem.message
    assert "linear_spring" in problem.allowed


def test_a_form_that_is_none_of_the_four_is_refused_by_name(site, tmp_path):
    props = site.plugin("props", **{KINDS: offering(Kind(form="magic")), CHECKS: offering(Check())})
    with pytest.raises(InputError, match="magic; this form is not one of the four") as caught:
        read(tmp_path, props)
    only_problem(caught)


def test_a_kind_without_any_check_is_refused(site, tmp_path):
    with pytest.raises(InputError, match="no load check is registered") as caught:
        read(tmp_path, site.plugin("props", **{KINDS: offering(Kind())}))
    assert '"props"' in only_problem(caught).message


def test_a_kind_with_rules_alone_is_refused(site, tmp_path):
    rule = Check(carries_load=False)
    props = site.plugin("props", **{KINDS: offering(Kind()), CHECKS: offering(rule)})
    with pytest.raises(InputError, match="no load check is registered") as caught:
        read(tmp_path, props)
    only_problem(caught)


def test_a_check_of_another_plugin_counts_only_where_the_project_names_it(site, tmp_path):
    props = site.plugin("props", **{KINDS: offering(Kind())})
    other = site.plugin("other", **{CHECKS: offering(Check())})
    with pytest.raises(InputError, match="no load check is registered") as caught:
        read(tmp_path, props, other)
    assert "name under plugins:" in only_problem(caught).fix
    assert read(tmp_path, props, other, plugins=["other"]).plugins == ("other",)


def test_a_kind_that_no_plugin_offers_is_refused(tmp_path):
    with pytest.raises(InputError, match="a kind of support that no plugin handles") as caught:
        read(tmp_path)
    only_problem(caught)


def test_a_kind_that_two_plugins_offer_is_refused_and_both_are_named(site, tmp_path):
    one = site.plugin("one", **{KINDS: offering(Kind()), CHECKS: offering(Check())})
    two = site.plugin("two", **{KINDS: offering(Kind())})
    with pytest.raises(InputError, match="the plugins one and two both offer") as caught:
        read(tmp_path, one, two)
    only_problem(caught)


def test_a_kind_whose_plugin_failed_is_refused_with_the_cause(site, tmp_path):
    def failing(register):
        raise ValueError("not today")

    with pytest.raises(InputError, match="not today"):
        read(tmp_path, site.plugin("props", **{KINDS: failing}))
