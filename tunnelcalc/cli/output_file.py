"""Files that a command writes where the user says: whole or not at all, over nothing of his."""

from __future__ import annotations

import os
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path

from tunnelcalc.errors import InputError, Problem, Where

HEAD_BYTES = 400
"""Within this many bytes a file of ours shows its mark."""


@dataclass(frozen=True, slots=True)
class OutputFile:
    """A file named by an option. What an earlier command wrote there is replaced: it bears one
    of `marks` at its head."""

    path: Path
    option: str
    marks: Sequence[str]

    def check(self) -> None:
        """Raise InputError where the file must not or cannot be written."""
        what = self._hindrance()
        if what:
            problem = Problem(
                Where(str(self.path)),
                what,
                "name another file",
                name=self.option,
                allowed="a file that is absent, empty, or written by this option before",
            )
            raise InputError((problem,))

    def _hindrance(self) -> str:
        if self.path.is_dir():
            return "is a folder"
        if not self.path.resolve().parent.is_dir():
            return "lies in a folder that does not exist"
        if not self.path.is_file():
            return ""  # absent, or a device
        with self.path.open("rb") as stream:
            head = stream.read(HEAD_BYTES).decode("utf-8", errors="replace")
        ours = not head or any(mark in head for mark in self.marks)
        return "" if ours else "holds something else, which is not overwritten"

    def write(self, text: str) -> None:
        """Write beside the place and put it there when it is complete."""
        self.check()
        path = self.path.resolve()
        if path.exists() and not path.is_file():
            path.write_text(text, encoding="utf-8", errors="backslashreplace")
            return
        part = path.with_name(f".{path.name}.{os.getpid()}.part")
        try:
            with part.open("w", encoding="utf-8", errors="backslashreplace", newline="") as stream:
                stream.write(text)
                stream.flush()
                os.fsync(stream.fileno())
            part.replace(path)
        finally:
            part.unlink(missing_ok=True)
