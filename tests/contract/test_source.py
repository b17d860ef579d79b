"""The readers of the source, on invented source: the contract tests stand on them."""

from __future__ import annotations

import pytest
from contract.source import (
    circles,
    described_parameters,
    imports_of,
    parts_of,
    plugin_folders,
    product_files,
    within,
)


@pytest.mark.parametrize(
    ("text", "found"),
    [
        pytest.param("import a.b", {"a.b"}, id="import"),
        pytest.param("import a.b as c, d", {"a.b", "d"}, id="two-with-an-alias"),
        pytest.param("from a import b", {"a", "a.b"}, id="from"),
        pytest.param("def f():\n    from a import b", {"a", "a.b"}, id="inside-a-function"),
        pytest.param(
            "from typing import TYPE_CHECKING\nif TYPE_CHECKING:\n    import a",
            {"typing", "typing.TYPE_CHECKING", "a"},
            id="for-types-alone",
        ),
        pytest.param("from . import b", {"x.y", "x.y.b"}, id="relative"),
        pytest.param("from ..b import c", {"x.b", "x.b.c"}, id="relative-to-the-parent"),
        pytest.param("importlib.import_module('a.b')", {"a.b"}, id="dynamic"),
        pytest.param("__import__('a')", {"a"}, id="built-in"),
    ],
)
def test_imports_are_found_wherever_they_stand(text, found):
    assert imports_of("x.y.z", text) == found


def test_a_package_is_its_own_parent():
    assert imports_of("x.y", "from . import b", is_package=True) == {"x.y", "x.y.b"}


def test_an_imported_name_counts_as_its_module():
    modules = {"a", "a.b", "a.b.c"}
    assert within({"a.b", "a.b.NAME"}, modules) == {"a.b"}
    assert within({"a", "a.b"}, modules) == {"a.b"}
    assert within({"a", "a.NAME"}, modules) == {"a"}
    assert within({"numpy", "numpy.array"}, modules) == set()


def test_circles_are_found():
    assert circles({"a": {"b"}, "b": {"c"}, "c": set()}) == []
    assert circles({"a": {"b"}, "b": {"c"}, "c": {"b"}}) == [["b", "c"]]
    assert circles({"a": {"a"}}) == [["a"]]


def test_parts_and_parameters_of_a_docstring_are_read():
    docstring = (
        "One line.\n\nParameters\n----------\none, other : (n,) what it is. [m]\n"
        "third : goes on\n    in a second line. [-]\n\nAll broadcast.\n\n"
        "Source\n------\nInvented.\n"
    )
    parts = parts_of(docstring)
    assert set(parts) == {"Parameters", "Source"}
    assert described_parameters(parts["Parameters"]) == {
        "one": "(n,) what it is. [m]",
        "other": "(n,) what it is. [m]",
        "third": "goes on in a second line. [-]",
    }


def test_the_source_is_where_it_is_looked_for():
    files = product_files()
    assert {"tunnelcalc", "tunnelcalc.run", "tunnelcalc.schedule.zoning"} <= set(files)
    assert {folder.name for folder in plugin_folders()} >= {
        "tunnelcalc_rock_bolts",
        "tunnelcalc_shotcrete",
        "tunnelcalc_steel_sets",
    }
