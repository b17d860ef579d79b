"""What every figure of a section keeps to, ours and a stranger's: it is handed plain curves."""

from __future__ import annotations

import dataclasses
from xml.etree import ElementTree

import numpy as np
import pytest
from end_to_end.projects import replaced, write_project
from unit.plugin.strangers import own_points

from tunnelcalc.curves import curves_at
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins

REGISTRY = load_plugins(own_points())
FIGURES = [pytest.param(o.thing, id=o.name) for o in REGISTRY.of_sort("section_figure")]
PNG = b"\x89PNG\r\n\x1a\n"


@pytest.fixture(scope="module")
def curves(tmp_path_factory):
    folder = write_project(tmp_path_factory.mktemp("figures") / "project")
    replaced("units.csv", "siltstone,25.5,0.9", "siltstone,25.5,1.6")(folder)
    lining = (
        "  closure_pct: 1.0\n  composite_lining: yes\n  lining_interface: no_slip\n"
        "  lining_tensile_strength_mpa: 2\n"
    )
    replaced("project.yaml", "  closure_pct: 1.0\n", lining)(folder)
    replaced("units.csv", "gouge,22,,", "gouge,22,1,")(folder)
    return curves_at(read_project(folder, REGISTRY), REGISTRY, "57")


@pytest.mark.parametrize("figure", FIGURES)
def test_a_figure_writes_the_files_that_it_names_and_the_same_bytes_twice(figure, curves, tmp_path):
    folders = [tmp_path / "one", tmp_path / "two"]
    for folder in folders:
        folder.mkdir()
        names = tuple(figure.draw(curves, folder))
        assert sorted(path.name for path in folder.iterdir()) == sorted(names)
        assert {name.rpartition(".")[2] for name in names} == {"svg", "png"}
        assert all(name.rpartition(".")[0] == figure.name for name in names)
    for name in names:
        one, two = ((folder / name).read_bytes() for folder in folders)
        assert one == two
        if name.endswith("svg"):
            ElementTree.fromstring(one)
            assert b"<dc:date>" not in one
        else:
            assert one.startswith(PNG)


@pytest.mark.parametrize("figure", FIGURES)
def test_a_figure_of_nothing_is_not_drawn_or_says_so(figure, curves, tmp_path):
    nothing = []
    for case in curves.cases:
        ground, profile = (
            dataclasses.replace(part, **{name: np.full_like(getattr(part, name), np.nan)})
            for part, name in ((case.ground, "closure_mm"), (case.profile, "closure_mm"))
        )
        nothing.append(dataclasses.replace(case, ground=ground, profile=profile, lining=()))
    empty = dataclasses.replace(curves, cases=tuple(nothing), envelopes=())
    names = tuple(figure.draw(empty, tmp_path))
    assert sorted(path.name for path in tmp_path.iterdir()) == sorted(names)
    for name in names:
        if name.endswith("svg"):
            text = (tmp_path / name).read_text(encoding="utf-8")
            assert "So there is " in " ".join(text.split())
            assert "unknown" not in text


@pytest.mark.parametrize("figure", FIGURES)
def test_a_figure_prints_any_name_as_it_is(figure, curves, tmp_path):
    odd = (
        "=1+1 $x_{$ <script>alert(1)</script> [bold] \u05d0\u05d1 \u96a7\u9053 \\ & " + 60 * "long "
    )
    named = dataclasses.replace(curves, title=odd, ground_unit=odd, support_class=odd)
    for name in figure.draw(named, tmp_path):
        if name.endswith("svg"):
            text = (tmp_path / name).read_text(encoding="utf-8")
            ElementTree.fromstring(text)
            assert "<script" not in text
