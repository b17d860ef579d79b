"""Each plugin is loaded by itself: one that fails is reported and harms no other."""

from __future__ import annotations

import pytest
from unit.plugin.strangers import FLAGS, KINDS, Flag, Kind, offering, own_points

from tunnelcalc import api
from tunnelcalc.plugin.registry import load_plugins

OWN_KINDS = (
    "friction_bolts",
    "grouted_rock_bolts",
    "lattice_girders",
    "rock_bolts",
    "shotcrete",
    "steel_sets",
)


def load(*groups):
    return load_plugins([*own_points(), *(point for group in groups for point in group)])


def only_failure(registry):
    (failure,) = registry.failures
    return failure


def test_without_strangers_nothing_fails():
    registry = load()
    assert registry.failures == []
    assert registry.disputed == {}
    assert registry.names("support_kind") == OWN_KINDS
    assert {source.distribution for source in registry.sources} == {"tunnelcalc"}


def test_a_stranger_offers_through_the_same_door(site):
    registry = load(site.plugin("props", **{KINDS: offering(Kind("props"))}))
    assert registry.failures == []
    assert registry.names("support_kind") == tuple(sorted(("props", *OWN_KINDS)))
    (offer,) = [o for o in registry.of_sort("support_kind") if o.name == "props"]
    assert str(offer.source) == "props (props-distribution 1.0)"


@pytest.mark.parametrize(
    ("text", "cause"),
    [
        pytest.param("import nowhere_to_be_found", "ModuleNotFoundError", id="missing-module"),
        pytest.param("raise RuntimeError('not today')", "RuntimeError: not today", id="raises"),
        pytest.param("raise SystemExit(3)", "SystemExit: 3", id="wants-to-end-the-program"),
        pytest.param("def broken(:", "SyntaxError", id="no-python"),
    ],
)
def test_a_plugin_that_fails_to_import_is_reported_with_cause_and_remedy(site, text, cause):
    site.source("failing_module", text)
    registry = load(
        site.distribution("failing-distribution", {"failing": "failing_module"}, version="0.3"),
        site.plugin("other", **{KINDS: offering(Kind("props"))}),
    )
    failure = only_failure(registry)
    assert str(failure.source) == "failing (failing-distribution 0.3)"
    assert cause in failure.cause
    assert failure.remedy
    assert all(part in str(failure) for part in ("failing", cause, failure.remedy))
    assert registry.names("support_kind") == tuple(sorted(("props", *OWN_KINDS)))


def test_a_plugin_whose_module_is_missing_is_reported(site):
    registry = load(site.distribution("d", {"lost": "a_module_that_is_not_there"}))
    assert "ModuleNotFoundError" in only_failure(registry).cause


def test_a_misspelt_hook_is_an_error_and_nothing_of_the_plugin_is_used(site):
    registry = load(
        site.plugin(
            "careless",
            tunnelcalc_register_support_kind=offering(Kind("props")),
            **{FLAGS: offering(Flag("careless_flag"))},
        )
    )
    assert "unknown hook 'tunnelcalc_register_support_kind'" in only_failure(registry).cause
    assert "careless_flag" not in registry.names("validity_flag")
    assert registry.names("support_kind") == OWN_KINDS


def test_a_misspelt_hook_does_not_trouble_the_plugins_after_it(site):
    registry = load(
        site.plugin("a_first", tunnelcalc_register_flags=offering(Flag("lost"))),
        site.plugin("z_last", **{FLAGS: offering(Flag("found"))}),
    )
    assert [failure.source.plugin for failure in registry.failures] == ["a_first"]
    assert "found" in registry.names("validity_flag")


def test_a_hook_that_asks_for_what_is_not_offered_is_an_error(site):
    def hook(register, project):
        """The hook has no project to give."""

    registry = load(site.plugin("greedy", **{KINDS: hook}))
    assert "{'project'} are declared" in only_failure(registry).cause
    assert registry.names("support_kind") == OWN_KINDS


@pytest.mark.parametrize(
    "error",
    [
        pytest.param(ValueError("halfway"), id="exception"),
        pytest.param(SystemExit("halfway"), id="wants-to-end-the-program"),
    ],
)
def test_of_a_plugin_that_fails_while_it_registers_nothing_is_kept(site, error):
    def half(register):
        register(Kind("props"))
        raise error

    registry = load(site.plugin("halfway", **{KINDS: half, FLAGS: offering(Flag("kept"))}))
    assert "halfway" in only_failure(registry).cause
    assert registry.names("support_kind") == OWN_KINDS
    assert "kept" not in registry.names("validity_flag")
    assert "halfway" not in [source.plugin for source in registry.sources]


@pytest.mark.parametrize("name", [None, 5, "", b"props"])
def test_a_thing_without_a_name_that_is_text_is_refused(site, name):
    registry = load(site.plugin("nameless", **{KINDS: offering(Kind(name))}))
    assert "is no text" in only_failure(registry).cause
    assert registry.names("support_kind") == OWN_KINDS


def test_a_thing_that_has_no_name_at_all_is_refused(site):
    registry = load(site.plugin("nameless", **{KINDS: offering(object())}))
    assert "AttributeError" in only_failure(registry).cause
    assert registry.names("support_kind") == OWN_KINDS


def test_an_unmarked_function_is_no_hook(site):
    module = site.module("plain_module")
    setattr(module, KINDS, offering(Kind("props")))
    registry = load(site.distribution("plain-distribution", {"plain": "plain_module"}))
    assert registry.failures == []
    assert registry.names("support_kind") == OWN_KINDS


def test_a_user_who_stops_the_program_is_obeyed(site):
    def hook(register):
        raise KeyboardInterrupt

    with pytest.raises(KeyboardInterrupt):
        load(site.plugin("slow", **{KINDS: hook}))


def test_a_failure_is_told_in_one_printable_line(site):
    def hook(register):
        raise ValueError("first line\x1b[31m\nsecond line")

    failure = only_failure(load(site.plugin("loud", **{KINDS: hook})))
    assert failure.cause == "ValueError: first line?[31m second line"
    assert str(failure).isprintable()


def test_every_registry_has_its_own_plugins(site):
    first = load(site.plugin("props", **{KINDS: offering(Kind("props"))}))
    second = load()
    assert first.find("support_kind", "props") is not None
    assert second.find("support_kind", "props") is None


def test_what_a_plugin_may_import_is_listed_and_there():
    assert api.__all__ == sorted(api.__all__, key=lambda name: (not name.isupper(), name))
    assert all(hasattr(api, name) for name in api.__all__)
