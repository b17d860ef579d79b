"""The files that plugins come from: their digests, and a single file loaded because it was named.

A file is loaded only where whoever starts the program names it. What a project says, and what
lies in its folder, loads nothing.
"""

from __future__ import annotations

import hashlib
import sys
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path
from types import ModuleType

from tunnelcalc.errors import InputError, Problem, Where

OPTION = "--plugin-file"
MODULE_PREFIX = "tunnelcalc_plugin_file_"
"""Before the name of the module that a file becomes, so that it hides no other module."""


@dataclass(frozen=True, slots=True)
class HashedFile:
    """A file that a plugin consists of, and the SHA-256 of its content."""

    path: str
    sha256: str


def files_of(module: object) -> tuple[HashedFile, ...]:
    """The files of a module, or of a package with all that lies in it; none where it has none.

    Paths are relative to the folder that the module was found in.
    """
    spec = getattr(module, "__spec__", None)
    origin = getattr(spec, "origin", None)
    folders = getattr(spec, "submodule_search_locations", None)
    if folders is not None:
        roots = [Path(folder) for folder in folders]
        found = {path: root.parent for root in roots for path in _inside(root)}
    else:
        found = {Path(origin): Path(origin).parent} if isinstance(origin, str) else {}
    named = ((path.relative_to(base).as_posix(), path) for path, base in found.items())
    return tuple(
        HashedFile(name, _digest(path.read_bytes()))
        for name, path in sorted(named)
        if path.is_file()
    )


def load_file(path: Path) -> tuple[ModuleType, HashedFile]:
    """Run a file as a module. The digest is that of the very bytes that ran.

    The file's folder does not become a place to import from. Raises `InputError` where there is
    no such file, or its stem is no name; whatever the file raises goes through.
    """
    stem = path.stem
    if path.suffix != ".py" or not stem.isidentifier():
        raise refusal(
            path, "is no plugin file", "give it a name of letters, digits and _, ending in .py"
        )
    try:
        content = path.read_bytes()
    except OSError as error:
        message = f"cannot be read: {error.strerror}"
        raise refusal(path, message, "name a file that can be read") from error
    module = ModuleType(MODULE_PREFIX + stem)
    module.__file__ = str(path)
    sys.modules[module.__name__] = module  # dataclasses and pickles look their module up there
    try:
        exec(compile(content, str(path), "exec"), module.__dict__)
    except BaseException:
        del sys.modules[module.__name__]
        raise
    return module, HashedFile(str(path), _digest(content))


def refusal(path: Path, message: str, fix: str) -> InputError:
    """A plugin file that was named and cannot be used."""
    return InputError((Problem(Where(str(path)), message, fix, name=OPTION),))


def _inside(root: Path) -> Iterator[Path]:
    paths: Iterable[Path] = root.rglob("*")
    return (path for path in paths if "__pycache__" not in path.parts)


def _digest(content: bytes) -> str:
    return hashlib.sha256(content).hexdigest()
