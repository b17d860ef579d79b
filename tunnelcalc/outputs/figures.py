"""Figures that plugins draw into a folder; one that fails costs its own files alone."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from pathlib import Path
from typing import NamedTuple, Protocol, TypeVar

from tunnelcalc.plugin.registry import describe

T = TypeVar("T", contravariant=True)


class Figure(Protocol[T]):
    """What draws things of one sort."""

    @property
    def name(self) -> str: ...

    def draw(self, thing: T, folder: Path, /) -> Iterable[str]: ...


class Drawn(NamedTuple):
    """Files that were written, and figures that were not, with the reason."""

    files: tuple[str, ...]
    missing: tuple[tuple[str, str], ...]


def draw_all(figures: Sequence[Figure[T]], thing: T, folder: Path) -> Drawn:
    """Let every figure draw a thing. Raises `OSError`: that is the disk and not the plugin."""
    files: list[str] = []
    missing: list[tuple[str, str]] = []
    for figure in figures:
        try:
            files.extend(map(str, figure.draw(thing, folder)))
        except OSError:
            raise
        except (Exception, SystemExit) as error:
            missing.append((f"figure {figure.name}", describe(error)))
    return Drawn(tuple(files), tuple(missing))
