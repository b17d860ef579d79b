"""What takes part in a run follows from the project, not from what happens to be installed."""

from __future__ import annotations

import pytest
from unit.pipeline.projects import BOLTS, element
from unit.plugin.strangers import (
    CHECKS,
    FLAGS,
    KINDS,
    READERS,
    WRITERS,
    Check,
    Flag,
    Kind,
    Reader,
    Writer,
    offering,
    own_points,
)

from tunnelcalc.plugin.registry import load_plugins


@pytest.fixture
def registry(site):
    """Our plugins, and one of a stranger who offers a bit of everything."""
    stranger = site.plugin(
        "stranger",
        **{
            KINDS: offering(Kind("props")),
            CHECKS: offering(
                Check("buckling", ("props",)), Check("a_check", ("rock_bolts", "props"))
            ),
            FLAGS: offering(Flag("a_flag")),
            READERS: offering(Reader("a_reader", ".csv", ".xyz")),
            WRITERS: offering(Writer("a_writer")),
        },
    )
    loaded = load_plugins([*own_points(), *stranger])
    assert loaded.failures == []
    return loaded


def names(things):
    return [thing.name for thing in things]


def test_a_strangers_check_of_our_kind_runs_only_where_the_project_names_its_plugin(registry):
    bolts = element("rock_bolts", BOLTS)
    assert "a_check" not in names(registry.checks_for(bolts, ()))
    assert "a_check" in names(registry.checks_for(bolts, ("stranger",)))


def test_a_kinds_own_plugin_always_checks_it(registry):
    props = element("props", {"amount_m": 1.0})
    assert names(registry.checks_for(props, ())) == ["a_check", "buckling"]
    assert {"tension", "length_beyond_plastic_zone"} <= set(
        names(registry.checks_for(element("rock_bolts", BOLTS), ()))
    )


def test_a_check_runs_for_the_kinds_that_it_names_alone(registry):
    bolts = element("rock_bolts", BOLTS)
    assert "buckling" not in names(registry.checks_for(bolts, ("stranger",)))


def test_a_check_that_does_not_concern_an_element_is_not_made(registry):
    without = element("rock_bolts", {**BOLTS, "pattern_rules": "none"})
    assert names(registry.checks_for(without, ())) == ["length_beyond_plastic_zone", "tension"]


def test_checks_come_by_name(registry):
    found = names(registry.checks_for(element("rock_bolts", BOLTS), ("stranger",)))
    assert found == sorted(found)


def test_a_strangers_flag_runs_only_where_the_project_names_its_plugin(registry):
    assert "a_flag" not in names(registry.flags(()))
    assert "a_flag" in names(registry.flags(("stranger",)))
    assert set(names(registry.flags(()))) < set(names(registry.flags(("stranger",))))


def test_our_own_flags_run_without_being_named(registry):
    assert {"shallow_cover", "stress_ratio", "spalling"} <= set(names(registry.flags(())))


def test_a_strangers_writer_writes_only_where_the_project_names_its_plugin(registry):
    assert names(registry.report_writers(())) == ["schedule_tables"]
    assert names(registry.report_writers(("stranger",))) == ["a_writer", "schedule_tables"]


def test_a_strangers_reader_does_not_take_over_a_format_that_we_read(registry):
    assert registry.ground_reader(".csv").name == "csv"
    assert registry.ground_reader(".CSV").name == "csv"


def test_a_strangers_reader_reads_a_format_of_its_own(registry):
    assert registry.ground_reader(".xyz").name == "a_reader"
    assert registry.ground_reader(".other") is None
