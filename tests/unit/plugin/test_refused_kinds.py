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


@pytest.mark.parametrize("form", ["pressure_of_closure", "ground_ring"])
def test_the_forms_that_need_nothing_of_the_class_are_accepted(site, tmp_path, form):
    props = site.plugin("props", **{KINDS: offering(Kind(form=form)), CHECKS: offering(Check())})
    (element,) = read(tmp_path, props).support_classes[0].elements
    assert element.kind == "props"


def ageing(site):
    kind = Kind(form="advance_increments")
    return site.plugin("props", **{KINDS: offering(kind), CHECKS: offering(Check())})


def test_an_element_that_ages_asks_the_class_for_its_rate_of_advance(site, tmp_path):
    with pytest.raises(InputError) as caught:
        read(tmp_path, ageing(site))
    (problem,) = caught.value.problems
    assert problem.name == 'key "support_classes[1].advance_m_per_day"'
    assert problem.message == "is missing: props hardens while the face moves on"
    assert problem.allowed == "a number above 0, at most 100, in m/day"


def test_with_a_rate_of_advance_an_element_that_ages_is_accepted(site, tmp_path):
    project = write_project(tmp_path, "props", {"amount_m": 1.0})
    file = project / "project.yaml"
    stated = "    installed_at_m: 1.0\n"
    file.write_text(file.read_text().replace(stated, f"{stated}    advance_m_per_day: 3\n"))
    read_class = read_project(project, load_plugins([*own_points(), *ageing(site)]))
    (made,) = read_class.support_classes
    assert (made.advance_m_per_day, made.elements[0].kind) == (3.0, "props")


def test_two_rings_of_changed_ground_in_a_class_are_refused(site, tmp_path):
    kind = Kind(form="ground_ring")
    props = site.plugin("props", **{KINDS: offering(kind), CHECKS: offering(Check())})
    project = write_project(tmp_path, "props", {"amount_m": 1.0})
    file = project / "project.yaml"
    one = "      - kind: props\n        amount_m: 1.0\n"
    text = file.read_text()
    assert text.count(one) == 1
    file.write_text(text.replace(one, one + one))
    with pytest.raises(InputError, match="props and props_2, which each change") as caught:
        read_project(project, load_plugins([*own_points(), *props]))
    (problem,) = caught.value.problems
    assert problem.name == 'key "support_classes[1].elements"'


def test_a_form_that_is_none_of_the_four_is_refused_by_name(site, tmp_path):
    props = site.plugin("props", **{KINDS: offering(Kind(form="magic")), CHECKS: offering(Check())})
    with pytest.raises(InputError, match="that is not one of the four forms") as caught:
        read(tmp_path, props)
    problem = only_problem(caught)
    assert problem.message.startswith('names "props", which reacts as magic;')
    assert problem.allowed == (
        "an element that reacts as linear_spring or pressure_of_closure or advance_increments "
        "or ground_ring"
    )


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
