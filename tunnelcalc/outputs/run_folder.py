"""The folder of a run: built beside its place, renamed into it when complete."""

from __future__ import annotations

import os
import shutil
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path

from tunnelcalc.errors import FolderHeldError, InputError, Problem, Where
from tunnelcalc.project import InputFile

RUNS = "runs"
MANIFEST = "run.json"
INPUTS = "inputs"
PART_SUFFIX = ".part"


@dataclass(slots=True)
class Target:
    """Where a run goes: a numbered folder of the project, or one that the user named.

    `by_option` is False where the program chose the folder `out` and not the user; `numbered` is
    the project's folder in which those without a name are counted.
    """

    project_folder: Path
    out: Path | None
    by_option: bool = True
    numbered: str = RUNS

    def __post_init__(self) -> None:
        if self.out is not None:
            self.out = self.out.resolve()  # what a link points at is filled, not the link

    @property
    def parent(self) -> Path:
        return self.project_folder / self.numbered if self.out is None else self.out.parent

    def check(self) -> None:
        """Raise InputError unless the folder is absent or empty."""
        what = ""
        if self.out is None:
            return
        if self.out.is_dir():
            what = "is not empty" if any(self.out.iterdir()) else ""
        elif self.out.exists() or any(above.is_file() for above in self.out.parents):
            what = "is not a folder"
        if what:
            fix, name = "name another folder: a run never overwrites anything", "--out"
            if not self.by_option:
                fix, name = "remove it, or name another folder with --out", "the folder to write"
            problem = Problem(
                Where(str(self.out)),
                what,
                fix,
                name=name,
                allowed="a folder that is absent or empty",
            )
            raise InputError((problem,))

    def place(self, part: Path) -> Path:
        """Move a finished folder to its place, in one step, and say where that is."""
        if self.out is not None:
            try:
                part.rename(self.out)
            except OSError as error:
                if self.out.exists():
                    raise FolderHeldError(
                        f"{self.out} was filled while the run was computed; run again with "
                        "another --out"
                    ) from error
                raise
            return self.out
        number = self._next_number()
        while True:
            placed = self.parent / f"{number:04d}"
            # A rename onto an empty folder succeeds on POSIX: never take one that stands.
            if not placed.exists():
                try:
                    part.rename(placed)
                except OSError:
                    if not placed.exists():
                        raise
                else:
                    return placed
            number += 1

    def _next_number(self) -> int:
        taken = [
            int(entry.name)
            for entry in self.parent.iterdir()
            if entry.name.isascii() and entry.name.isdigit()
        ]
        return max(taken, default=0) + 1


@contextmanager
def part_folder(target: Target) -> Iterator[Path]:
    """A new folder beside the target's place. What is left of it at the end is removed."""
    target.check()
    target.parent.mkdir(parents=True, exist_ok=True)
    part = Path(tempfile.mkdtemp(prefix=".run-", suffix=PART_SUFFIX, dir=target.parent))
    try:
        part.chmod(0o777 & ~_umask())
        yield part
    finally:
        shutil.rmtree(part, ignore_errors=True)


def copy_inputs(folder: Path, files: tuple[InputFile, ...]) -> None:
    """Copy what was read, byte for byte, so that the run can be repeated from its folder."""
    for file in files:
        path = folder / INPUTS / file.path
        path.parent.mkdir(parents=True, exist_ok=True)
        write_bytes(path, file.content)


def write_bytes(path: Path, content: bytes) -> None:
    """Write a file and make sure that it is on the disk."""
    with path.open("wb") as stream:
        stream.write(content)
        stream.flush()
        os.fsync(stream.fileno())


def sync_folder(folder: Path) -> None:
    """Make sure that the names in a folder are on the disk."""
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)


def _umask() -> int:
    mask = os.umask(0)
    os.umask(mask)
    return mask
