"""Invented plugins of invented distributions, as entry points find them."""

from __future__ import annotations

import sys
from collections.abc import Callable, Iterable, Mapping
from importlib.metadata import Distribution, EntryPoint, entry_points
from pathlib import Path
from types import ModuleType
from typing import Any

import numpy as np
import pytest

from tunnelcalc import api
from tunnelcalc.plugin.hooks import ENTRY_POINT_GROUP

KINDS = "tunnelcalc_register_support_kinds"
CHECKS = "tunnelcalc_register_support_checks"
CLASS_CHECKS = "tunnelcalc_register_class_checks"
FLAGS = "tunnelcalc_register_validity_flags"
READERS = "tunnelcalc_register_ground_readers"
WRITERS = "tunnelcalc_register_report_writers"

Hook = Callable[[Callable[[Any], None]], None]


def own_points() -> list[EntryPoint]:
    """Entry points of this distribution alone, whatever else is installed."""
    points = entry_points(group=ENTRY_POINT_GROUP)
    return [point for point in points if point.dist is not None and point.dist.name == "tunnelcalc"]


class Site:
    """A folder of installed distributions, and modules that can be imported."""

    def __init__(self, folder: Path, monkeypatch: pytest.MonkeyPatch) -> None:
        self.folder = folder
        self.monkeypatch = monkeypatch

    def module(self, name: str, **hooks: Hook) -> ModuleType:
        """A module with these functions, each marked as a hook implementation."""
        made = ModuleType(name)
        for hook, function in hooks.items():
            setattr(made, hook, api.hookimpl(function))
        self.monkeypatch.setitem(sys.modules, name, made)
        return made

    def source(self, name: str, text: str) -> None:
        """A module that is read from a file when it is imported."""
        (self.folder / f"{name}.py").write_text(text, encoding="utf-8")
        self.monkeypatch.syspath_prepend(self.folder)

    def distribution(
        self, name: str, plugins: Mapping[str, str], version: str = "1.0"
    ) -> list[EntryPoint]:
        """Entry points of an installed distribution: plugin name to module name."""
        metadata = self.folder / f"{name}-{version}.dist-info"
        metadata.mkdir()
        (metadata / "METADATA").write_text(
            f"Metadata-Version: 2.1\nName: {name}\nVersion: {version}\n", encoding="utf-8"
        )
        lines = "".join(f"{plugin} = {module}\n" for plugin, module in plugins.items())
        text = f"[{ENTRY_POINT_GROUP}]\n{lines}"
        (metadata / "entry_points.txt").write_text(text, encoding="utf-8")
        return list(Distribution.at(metadata).entry_points)

    def plugin(self, name: str, **hooks: Hook) -> list[EntryPoint]:
        """A distribution with one plugin, in one go."""
        self.module(f"{name}_module", **hooks)
        return self.distribution(f"{name}-distribution", {name: f"{name}_module"})


def offering(*things: object) -> Hook:
    """A hook implementation that offers these things."""

    def hook(register: Callable[[Any], None]) -> None:
        for thing in things:
            register(thing)

    return hook


def spring(stiffness_mpa_per_m: float = 100.0, capacity_mpa: float = 1.0) -> Any:
    """A reaction: the same linear spring on every section."""
    return lambda sections, element: api.LinearSpring(
        np.full(sections.count, stiffness_mpa_per_m), np.full(sections.count, capacity_mpa)
    )


class Kind:
    """A kind of support with one parameter."""

    meaning = "invented"
    is_ring = False
    parameters = (api.Parameter("amount_m", "invented", "m", api.Limits(0, 10)),)

    def __init__(
        self,
        name: str = "props",
        form: str = api.LinearSpring.form,
        reaction: Any = None,
        amounts: Any = None,
    ) -> None:
        self.name = name
        self.form = form
        self._reaction = reaction or spring()
        self._amounts = amounts or (lambda sections, element: ())

    def misfits(self, element: api.Element, smallest_radius_m: float) -> Iterable[api.Misfit]:
        return ()

    def reaction_form(self, element: api.Element) -> str:
        return self.form

    def reaction(self, sections: api.Sections, element: api.Element) -> Any:
        return self._reaction(sections, element)

    def amounts(self, sections: api.Sections, element: api.Element) -> Iterable[api.Amount]:
        return self._amounts(sections, element)


class Check:
    """A check; `evaluate(sections)` gives its evaluation."""

    meaning = "invented"
    unit = "MPa"

    def __init__(
        self,
        name: str = "buckling",
        applies_to: tuple[str, ...] = ("props",),
        evaluate: Any = None,
        carries_load: bool = True,
    ) -> None:
        self.name = name
        self.applies_to = applies_to
        self.carries_load = carries_load
        self._evaluate = evaluate or (
            lambda sections: api.Evaluation(np.ones(sections.count), np.full(sections.count, 2.0))
        )

    def concerns(self, element: api.Element) -> bool:
        return True

    def evaluate(self, sections: api.Sections, element: api.Element) -> api.Evaluation:
        return self._evaluate(sections)


class ClassCheck:
    """A check of a class as a whole; `evaluate(sections)` gives its evaluation."""

    meaning = "invented"
    unit = "MPa"
    requires: Mapping[str, api.Limits] = {}

    def __init__(
        self,
        name: str = "whole",
        evaluate: Any = None,
        carries_load: bool = True,
        by_choice: bool = False,
    ) -> None:
        self.name = name
        self.carries_load = carries_load
        self.by_choice = by_choice
        self._evaluate = evaluate or (
            lambda sections: api.Evaluation(np.ones(sections.count), np.full(sections.count, 2.0))
        )

    def concerns(self, project: api.Project) -> bool:
        return True

    def evaluate(self, sections: api.Sections, elements: tuple[api.Element, ...]) -> api.Evaluation:
        return self._evaluate(sections)


class Flag:
    """A flag that is never raised."""

    meaning = remedy = quantity = "invented"
    unit = ""
    thresholds = (api.Threshold(api.Level.ADVISORY, api.Side.ABOVE, 1.0, "invented"),)
    needs: tuple[str, ...] = ()
    may_be_missing: tuple[str, ...] = ()
    applies = outside_applies = None

    def __init__(self, name: str) -> None:
        self.name = name

    def value(self, sections: api.Sections) -> api.Array:
        return np.zeros(sections.count)


class Reader:
    """Reads nothing."""

    def __init__(self, name: str, *suffixes: str) -> None:
        self.name = name
        self.suffixes = suffixes

    def read(self, name: str, content: bytes) -> api.RawTable:
        raise NotImplementedError


class Writer:
    """Writes nothing."""

    def __init__(self, name: str) -> None:
        self.name = name

    def write(self, result: api.RunResult, folder: Path) -> Iterable[str]:
        return ()
