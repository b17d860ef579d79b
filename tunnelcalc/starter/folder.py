"""Writes the starter project into a new or empty folder: whole, or not at all."""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterator
from contextlib import contextmanager
from importlib.resources import files
from pathlib import Path

from tunnelcalc.errors import InputError, Problem, Where
from tunnelcalc.outputs.run_folder import PART_SUFFIX, sync_folder, write_bytes
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.schema import schema_text

SCHEMA_FILE = "project.schema.json"
TEMPLATE = ("ground.csv", "units.csv", "project.yaml")
PROJECT_FILES = (SCHEMA_FILE, *TEMPLATE)
"""In the order in which they are put in place: a folder without project.yaml is no project."""


def write_starter(folder: Path, registry: Registry) -> None:
    """Write the starter project, with the schema of the installed plugins beside it.

    Raises `InputError` unless the folder is absent or empty.
    """
    _check(folder)
    contents = {SCHEMA_FILE: schema_text(registry).encode()}
    template = files("tunnelcalc.starter") / "template"
    contents |= {name: (template / name).read_bytes() for name in TEMPLATE}
    place = folder.resolve()
    stands = place.is_dir()
    with _part_folder(place if stands else place.parent) as part:
        for name in PROJECT_FILES:
            write_bytes(part / name, contents[name])
        sync_folder(part)
        if stands:
            _move_in(part, place)
        else:
            part.rename(place)


def _check(folder: Path) -> None:
    what = ""
    if folder.is_dir():
        what = "is not empty" if any(folder.iterdir()) else ""
    elif folder.exists() or folder.is_symlink():
        what = "is not a folder"
    elif any(above.is_file() for above in folder.resolve().parents):
        what = "lies in a file, not in a folder"
    if what:
        problem = Problem(
            Where(str(folder)),
            what,
            "name another folder: nothing is overwritten",
            allowed="a folder that is absent or empty",
        )
        raise InputError((problem,))


@contextmanager
def _part_folder(parent: Path) -> Iterator[Path]:
    """A new hidden folder on the same disk. What is left of it at the end is removed."""
    part = parent / f".new-{os.getpid()}{PART_SUFFIX}"
    part.mkdir(parents=True)
    try:
        yield part
    finally:
        shutil.rmtree(part, ignore_errors=True)


def _move_in(part: Path, place: Path) -> None:
    """Fill a folder that stands, which may be where the user's shell is: it is not replaced."""
    moved: list[Path] = []
    try:
        for name in PROJECT_FILES:
            moved.append((part / name).rename(place / name))
    except BaseException:
        for path in moved:
            path.unlink(missing_ok=True)
        raise
