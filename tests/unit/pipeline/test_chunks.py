"""How an alignment is cut into chunks changes no bit of a result."""

from __future__ import annotations

import numpy as np
import pytest
from unit.pipeline.projects import project, random_ground, three_classes

from tunnelcalc.pipeline.chain import ONLY_IN_TABLES, build_stages, kept_columns
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.pipeline.stage import check_chain, run_stages
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.sections import joined
from tunnelcalc.support.adequacy import Outcome
from tunnelcalc.validity import Level

COUNT = 61


def run(chunk_sections):
    """Kept columns, columns of the chunks, and incidents."""
    ground = random_ground(COUNT, seed=20)
    made = project(three_classes(), ground)
    registry = load_plugins()
    plan = plan_classes(made, registry)
    chunks, incidents, lines = [], Incidents(), check_lines(plan)
    stages = build_stages(made, registry, plan, incidents)

    def each_chunk(chunk):
        chunks.append(chunk)
        incidents.add_chunk(chunk, lines)

    whole = run_stages(stages, ground, chunk_sections, kept_columns(stages), each_chunk)
    return whole, joined(chunks), incidents.listed()


@pytest.fixture(scope="module")
def at_once():
    return run(COUNT)


def assert_same_bits(one, other):
    assert set(one) == set(other)
    for name in one:
        assert one[name].dtype == other[name].dtype, name
        assert one[name].shape == other[name].shape, name
        if one[name].dtype == object:
            assert one[name].tolist() == other[name].tolist(), name
        else:
            assert one[name].tobytes() == other[name].tobytes(), name


@pytest.mark.parametrize("chunk_sections", [1, 2, 7, 60, 1000])
def test_chunks_of_any_size_give_the_same_bits(at_once, chunk_sections):
    whole, chunks, incidents = run(chunk_sections)
    assert_same_bits(whole, at_once[0])
    assert_same_bits(chunks, at_once[1])
    assert incidents == at_once[2]


def test_the_invented_ground_has_a_bit_of_everything(at_once):
    """Else the test above would compare little."""
    whole, chunks, incidents = at_once
    assert incidents
    assert set(whole["required_class"].tolist()) == {-1, 0, 1, 2}
    assert np.any(whole["scheduled_class"] != whole["required_class"])
    assert set(np.unique(chunks["check_outcome"])) == set(Outcome)
    found = set(np.unique(whole["flag_level"]).tolist())
    assert found >= {Level.CLEAR, Level.ADVISORY, Level.OUTSIDE, Level.NOT_ASSESSED}


def test_the_chain_of_a_project_holds():
    ground = random_ground(3, seed=1)
    made = project(three_classes(), ground)
    registry = load_plugins()
    stages = build_stages(made, registry, plan_classes(made, registry), Incidents())
    check_chain(stages, ground)
    assert [stage.name for stage in stages][-2:] == ["zoning", "flags"]


def test_what_only_the_tables_need_does_not_outlive_its_chunk(at_once):
    whole, chunks, _ = at_once
    assert not set(ONLY_IN_TABLES) & set(whole)
    assert set(ONLY_IN_TABLES) <= set(chunks)
