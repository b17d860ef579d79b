"""What a class states and nothing is computed with is told, and stops nothing."""

from __future__ import annotations

from pathlib import Path

import pytest
from end_to_end.projects import Damage, replaced
from unit.inputs.reading import read

HARDENS = "        poisson_ratio: 0.2\n        hardening: meschke_1996\n"
UNUSED = "advance_m_per_day of class heavy is used by nothing: no element of the class hardens"
BARE = "class bare has no elements: it is the opening without support"


def heavy_with_rate() -> Damage:
    head = "  - name: heavy\n"
    return replaced("project.yaml", head, head + "    advance_m_per_day: 4\n")


def bare(more: str = "") -> Damage:
    text = f"support_classes:\n  - name: bare\n{more}    elements: []\n"
    return replaced("project.yaml", "support_classes:\n", text)


def told_of_classes(folder: Path, *damages: Damage) -> list[str]:
    return [text for text in read(folder, *damages).warnings if "class " in text]


def test_a_rate_of_advance_without_an_element_that_hardens_is_told(tmp_path: Path):
    assert told_of_classes(tmp_path, heavy_with_rate()) == [UNUSED]


def test_one_that_is_used_is_not(tmp_path: Path):
    hardens = replaced("project.yaml", "        poisson_ratio: 0.2\n", HARDENS)
    assert told_of_classes(tmp_path, heavy_with_rate(), hardens) == []


def test_a_project_that_states_neither_is_told_nothing(tmp_path: Path):
    assert told_of_classes(tmp_path) == []


@pytest.mark.parametrize(
    ("more", "told"),
    [
        ("", [BARE]),
        ("    advance_m_per_day: 4\n", [BARE, UNUSED.replace("heavy", "bare")]),
    ],
)
def test_a_class_without_elements_is_remarked(tmp_path: Path, more: str, told: list[str]):
    assert told_of_classes(tmp_path, bare(more)) == told
