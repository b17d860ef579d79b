"""The same ground, written another way, gives the same sections."""

from __future__ import annotations

import csv
import io
from collections.abc import Sequence
from itertools import pairwise
from pathlib import Path

import numpy as np
import pytest
from end_to_end.projects import GROUND, content, replaced, write_project
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from unit.inputs.arriving import ground_key, observed, project_key
from unit.inputs.reading import REGISTRY

from tunnelcalc.chainage import KM_PLUS_M, METRES, Equation, Notation
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.project import Project
from tunnelcalc.run import run_project

EXAMPLES = settings(
    max_examples=25, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
COMPUTED = ("gsi", "cover_m", "vertical_stress_mpa", "intact_strength_mpa", "mi", "radius_m")


def read(folder: Path, *damages) -> Project:
    project = write_project(folder)
    for damage in damages:
        damage(project)
    return read_project(project, REGISTRY)


@pytest.fixture(scope="module")
def fresh(tmp_path_factory: pytest.TempPathFactory):
    """Names of new folders."""
    return lambda: tmp_path_factory.mktemp("round") / "project"


def in_notation(notation: Notation):
    """The ground table of the small project, with its chainages written."""
    table = list(csv.reader(io.StringIO(GROUND)))
    for row in table[1:]:
        row[:2] = notation.written(np.array([float(end) for end in row[:2]]))
    return content("ground.csv", "\n".join(map(",".join, table)).encode())


def declared(notation: Notation):
    """The project's key for a notation."""
    equations = ", ".join(f"{{back: {e.back}, ahead: {e.ahead}}}" for e in notation.equations)
    prefix = f"prefix: '{notation.prefix}', " if notation.prefix else ""
    direction = "descending" if notation.direction < 0 else "ascending"
    return project_key(
        f"chainage: {{notation: {notation.form}, {prefix}"
        f"direction: {direction}, start: {notation.start}, equations: [{equations}]}}\n"
    )


@st.composite
def notations(draw: st.DrawFn) -> Notation:
    """Chainages in whole centimetres, so that writing loses nothing."""
    direction = draw(st.sampled_from([1, -1]))
    start = draw(st.integers(-50_000, 500_000)) / 100
    equations: Sequence[Equation] = ()
    if draw(st.booleans()):
        back = round(start + direction * draw(st.integers(1, 200)), 2)
        ahead = round(back + draw(st.integers(-9000, 9000)) / 100, 2)
        equations = (Equation(back, ahead),)
    form = draw(st.sampled_from([KM_PLUS_M, METRES]))
    return Notation(form, draw(st.sampled_from(["", "K ", "km"])), direction, start, equations)


@EXAMPLES
@given(notation=notations())
def test_chainage_as_it_is_written_gives_the_sections_of_plain_metres(fresh, notation: Notation):
    plain = read(fresh())
    other = read(fresh(), in_notation(notation), declared(notation))
    assert other.ground.count == plain.ground.count
    for name in ("from_m", "to_m", "chainage_m"):
        np.testing.assert_allclose(other.ground[name], plain.ground[name], rtol=0, atol=1e-6)
    for name in COMPUTED:
        np.testing.assert_array_equal(other.ground[name], plain.ground[name])


def without(table: Path, names: Sequence[str]) -> list[dict[str, str]]:
    with table.open(encoding="utf-8", newline="") as stream:
        return [
            {name: cell for name, cell in row.items() if name not in names}
            for row in csv.DictReader(stream)
        ]


def test_every_computed_column_of_a_run_is_the_same_in_falling_chainage(tmp_path: Path):
    """From K 5+000, whole metres: the axis metres are the same to the last bit."""
    notation = Notation(KM_PLUS_M, "K ", -1, 5000.0, (Equation(4950.0, 4900.0),))
    plain, other = write_project(tmp_path / "plain"), write_project(tmp_path / "other")
    for damage in (in_notation(notation), declared(notation)):
        damage(other)
    first, second = (run_project(project, REGISTRY).folder for project in (plain, other))
    written = ("chainage", "from_chainage", "to_chainage", "governing_chainage")
    for name in ("sections.csv", "classes.csv", "checks.csv", "schedule.csv", "ground_values.csv"):
        assert without(second / name, written) == without(first / name, written)
    assert (second / "quantities.csv").read_bytes() == (first / "quantities.csv").read_bytes()


@EXAMPLES
@given(
    agreeing=st.lists(st.integers(4, 40).map(lambda joints: joints / 2), min_size=4, max_size=4),
    order=st.permutations(["measured", "jcond89_rqd", "rmr89_dry"]),
)
def test_the_order_of_sources_that_agree_changes_nothing(fresh, agreeing, order):
    """JCond89 and RQD that give GSI 1.5 J + 30, RMR89 5 above it, and the same stated."""
    cells = [f"{1.5 * j + 30},{j},60,{1.5 * j + 35}" for j in agreeing]
    table = observed("gsi,jcond89,rqd_pct,rmr89_dry", *cells)
    usual, other = (
        read(fresh(), table, ground_key(f"  estimates: {{gsi: [{', '.join(names)}]}}\n"))
        for names in (order, order[::-1])
    )
    np.testing.assert_array_equal(usual.ground["gsi"], other.ground["gsi"])
    assert set(usual.ground["gsi_spread"].tolist()) == {0}
    assert not usual.ground["estimates_differ"].any()
    assert not other.ground["estimates_differ"].any()


@EXAMPLES
@given(cuts=st.lists(st.integers(1, 149), min_size=1, max_size=6, unique=True))
def test_profiles_that_are_alike_give_what_one_profile_gives(fresh, cuts):
    """But for more sections: every property is that of the interval."""
    ends = [0, *sorted(cuts), 150]
    entries = "".join(
        f"    - {{name: p{n}, from_m: {a}, to_m: {b}, radius_m: 3.0}}\n"
        for n, (a, b) in enumerate(pairwise(ends))
    )
    many = read(fresh(), replaced("project.yaml", "  radius_m: 3.0\n", "  profiles:\n" + entries))
    one = read(fresh())
    assert set(many.ground["from_m"]) >= set(map(float, ends[:-1]))
    interval = np.searchsorted(one.ground["from_m"], many.ground["chainage_m"], side="right") - 1
    for name in COMPUTED:
        np.testing.assert_array_equal(many.ground[name], one.ground[name][interval])
    assert np.sum(many.ground["to_m"] - many.ground["from_m"]) == pytest.approx(150)
