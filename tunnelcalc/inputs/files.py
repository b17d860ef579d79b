"""Reads the files of a project, and only those that lie inside its folder."""

from __future__ import annotations

import os
import stat
from pathlib import Path, PurePath

from tunnelcalc.errors import Problems, Where
from tunnelcalc.project import InputFile
from tunnelcalc.text import quoted

PROJECT_FILE = "project.yaml"
LARGEST_FILE_BYTES = 512 * 1024 * 1024


class ProjectFolder:
    """Hands out the bytes of the project's files and remembers what was read."""

    def __init__(self, folder: Path, problems: Problems) -> None:
        self.folder = folder
        self.problems = problems
        self.files: dict[str, InputFile] = {}

    def read(self, path: str, named_at: Where, name: str) -> InputFile | None:
        """A file by its path relative to the project; None, with a problem, if it is unusable.

        `named_at` and `name` are the place and key by which the project names the file.
        """
        inside = self._inside(path, named_at, name)
        if inside is None:
            return None
        target, relative = inside
        if relative not in self.files:
            content = self._content(target, path, named_at, name)
            if content is None:
                return None
            self.files[relative] = InputFile(relative, content)
        return self.files[relative]

    def _inside(self, path: str, named_at: Where, name: str) -> tuple[Path, str] | None:
        """The file, and its path as named: a copy under that path repeats the run elsewhere."""
        relative = PurePath(os.path.normpath(path))
        home = self.folder.resolve(strict=True)
        target = Path(os.path.realpath(home / path))
        leaves = relative.parts[:1] == (os.pardir,) or not target.is_relative_to(home)
        if not leaves and not relative.is_absolute():
            return target, relative.as_posix()
        why = "which leaves the project folder" if leaves else "an absolute path"
        self.problems.add(
            named_at,
            f"names {quoted(path)}, {why}",
            name=name,
            allowed="a path inside the project folder, relative to it",
            fix="copy the file into the project folder and name it by its path from there",
        )
        return None

    def _content(self, target: Path, path: str, named_at: Where, name: str) -> bytes | None:
        try:
            state = target.stat()
            if not stat.S_ISREG(state.st_mode):
                why = "it is a folder" if stat.S_ISDIR(state.st_mode) else "it is no plain file"
            elif state.st_size > LARGEST_FILE_BYTES:
                why = f"it has {state.st_size / 1e6:.0f} MB, more than can be read"
            else:
                return target.read_bytes()
        except FileNotFoundError:
            why = "there is no such file"
        except OSError as error:
            why = error.strerror or type(error).__name__
        self.problems.add(
            named_at,
            f"names {quoted(path)}, which cannot be read: {why}",
            name=name,
            fix="name a readable file inside the project folder",
        )
        return None
