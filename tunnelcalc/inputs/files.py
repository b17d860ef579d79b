"""Reads the files of a project, and only those that lie inside its folder."""

from __future__ import annotations

import os
from pathlib import Path

from tunnelcalc.errors import Problems, Where
from tunnelcalc.project import InputFile

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
        fix = "copy the file into the project folder and name it by its path from there"
        if not path.strip() or "\0" in path:
            self.problems.add(named_at, f'holds "{path!r}", which is no path', name=name, fix=fix)
            return None
        try:
            home = self.folder.resolve(strict=True)
            target = (home / path).resolve()
        except (OSError, RuntimeError) as error:
            message = f'names "{path}", which cannot be followed ({_why(error)})'
            self.problems.add(named_at, message, name=name, fix=fix)
            return None
        if not target.is_relative_to(home):
            message = f'names "{path}", which leaves the project folder'
            self.problems.add(
                named_at, message, name=name, allowed="a path inside the project folder", fix=fix
            )
            return None
        return target, target.relative_to(home).as_posix()

    def _content(self, target: Path, path: str, named_at: Where, name: str) -> bytes | None:
        try:
            if target.is_dir():
                raise IsADirectoryError(21, "it is a folder")
            if not target.is_file():
                raise FileNotFoundError(2, "there is no such file")
            size = target.stat().st_size
            if size > LARGEST_FILE_BYTES:
                raise OSError(27, f"it has {size / 1e6:.0f} MB, more than can be read")
            return target.read_bytes()
        except OSError as error:
            self.problems.add(
                named_at,
                f'names "{path}", which cannot be read: {_why(error)}',
                name=name,
                fix="name a readable file inside the project folder",
            )
            return None


def _why(error: BaseException) -> str:
    if isinstance(error, OSError) and error.errno is not None:
        return error.strerror or os.strerror(error.errno)
    return str(error) or type(error).__name__
