"""`tunnelcalc explain`: lines that plugins do not offer, or that say another number."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest

from tunnelcalc.calculation.line import SheetLine
from tunnelcalc.explain.sheet import explain
from tunnelcalc.plugin.registry import Registry


class Bare:
    """A thing of a plugin without its lines, or with lines of a test."""

    def __init__(self, thing: Any, lines: Any = None) -> None:
        self._thing = thing
        if lines is not None:
            self.lines = lines

    def __getattr__(self, name: str) -> Any:
        if name == "lines":
            raise AttributeError(name)
        return getattr(self._thing, name)


def with_lines(registry: Registry, lines: Any, *keys: tuple[str, str]) -> Registry:
    """The registry with other lines for some things, or none."""
    offers = dict(registry.offers)
    for key in keys:
        offers[key] = replace(offers[key], thing=Bare(offers[key].thing, lines))
    return replace(registry, offers=offers)


EVERYTHING = (
    ("strength", "hoek_brown_2002"),
    ("deformation_modulus", "hoek_diederichs_2006"),
    ("ground_reaction", "hoek_brown_perfectly_plastic"),
    ("closure_profile", "vlachopoulos_diederichs_2009"),
    ("support_kind", "shotcrete"),
    ("support_check", "hoop_stress"),
    ("class_check", "crown_dead_weight"),
)


def failing(*_: Any) -> Any:
    raise ZeroDivisionError("invented")


NONE = "which shows no formula"
WITHOUT = [pytest.param(key, None, NONE, id=key[0]) for key in EVERYTHING]
WITHOUT += [
    pytest.param(
        EVERYTHING[4], failing, "whose lines failed: ZeroDivisionError: invented", id="raising"
    ),
    pytest.param(
        EVERYTHING[2], lambda *_: ["text"], "whose lines are no lines of a sheet", id="nonsense"
    ),
]


@pytest.fixture(scope="module")
def movements(whole, registry) -> set[float]:
    """Every closure that the sheet of a class shows."""
    sheet = explain(whole, "30", "heavy", registry)
    return {line.result for block in sheet.blocks for line in block.lines if line.unit == "mm"}


@pytest.mark.parametrize(("key", "lines", "told"), WITHOUT)
def test_what_shows_no_formula_is_printed_by_its_result(
    key, lines, told, whole, registry, movements
):
    sheet = explain(whole, "30", "heavy", with_lines(registry, lines, key))
    assert sheet.differences == ()
    notes = [note for block in sheet.blocks for note in block.notes if told in note]
    plugin = registry.offers[key].source.plugin
    assert notes
    assert all(note.startswith(f"given by plugin {plugin}, ") for note in notes)
    assert movements <= {line.result for block in sheet.blocks for line in block.lines}


@pytest.mark.parametrize(
    ("key", "symbol"),
    [
        pytest.param(("support_kind", "shotcrete"), "K", id="stiffness"),
        pytest.param(("support_kind", "shotcrete"), "pmax", id="capacity"),
        pytest.param(("support_check", "hoop_stress"), "demand", id="demand"),
        pytest.param(("class_check", "crown_dead_weight"), "capacity", id="capacity-of-class"),
        pytest.param(("ground_reaction", "hoek_brown_perfectly_plastic"), "u_R", id="closure"),
        pytest.param(("ground_reaction", "hoek_brown_perfectly_plastic"), "pcr", id="critical"),
        pytest.param(("closure_profile", "vlachopoulos_diederichs_2009"), "share", id="share"),
        pytest.param(("deformation_modulus", "hoek_diederichs_2006"), "E_est", id="modulus"),
        pytest.param(("strength", "hoek_brown_2002"), "mb", id="strength"),
    ],
)
@pytest.mark.parametrize("with_formula", [True, False])
def test_lines_that_say_another_number_than_the_run_are_told(
    key, symbol, with_formula, whole, registry
):
    thing = registry.offers[key].thing

    def lines(*arguments: Any) -> list[SheetLine]:
        return [
            replace(
                line,
                result=line.result * (1 + 1e-6),
                formula=line.formula if with_formula else "",
            )
            if line.symbol == symbol
            else line
            for line in thing.lines(*arguments)
        ]

    sheet = explain(whole, "30", "heavy", with_lines(registry, lines, key))
    assert any(symbol in difference for difference in sheet.differences)
