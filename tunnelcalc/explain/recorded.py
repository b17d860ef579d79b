"""What a run's folder says: of itself, and of one section."""

from __future__ import annotations

import csv
import hashlib
import json
from collections.abc import Iterator, Mapping
from dataclasses import asdict, dataclass
from pathlib import Path
from typing import Any

import numpy as np

import tunnelcalc
from tunnelcalc.errors import InputError, Problem, Where
from tunnelcalc.outputs.run_folder import INPUTS, MANIFEST
from tunnelcalc.plugin.registry import Registry


@dataclass(frozen=True, slots=True)
class Recorded:
    """A run's folder and its `run.json`."""

    folder: Path
    manifest: Mapping[str, Any]

    @property
    def inputs(self) -> Path:
        """The project as it was run."""
        return self.folder / INPUTS

    def rows(self, table: str, chainage_m: str) -> list[dict[str, str]]:
        """The rows of a table that stand at a chainage, as it is written there."""
        return [row for row in self.table(table) if row.get("chainage_m") == chainage_m]

    def table(self, name: str) -> Iterator[dict[str, str]]:
        """The rows of a table; none where there is no such table."""
        path = self.folder / name
        if not path.is_file():
            return
        with path.open(encoding="utf-8", newline="", errors="replace") as stream:
            yield from csv.DictReader(stream)

    def changed_files(self) -> Iterator[str]:
        """What is no longer as it was when the run ended."""
        inputs, outputs = self.manifest.get("inputs", ()), self.manifest.get("outputs", ())
        recorded = [(f"{INPUTS}/{entry['path']}", entry["sha256"]) for entry in inputs]
        recorded += [(entry["path"], entry["sha256"]) for entry in outputs]
        # The copies of the inputs stand among the outputs too.
        for name, digest in dict.fromkeys(recorded):
            path = self.folder / name
            if not path.is_file():
                yield f"{name} is missing"
            elif _digest(path) != digest:
                yield f"{name} is not as it was when the run ended: its SHA-256 differs"

    def other_versions(self, registry: Registry) -> Iterator[str]:
        """What computed the run in another version than now, or is not there any more."""
        ran = self.manifest.get("program", {}).get("version", "unknown")
        if ran != tunnelcalc.__version__:
            yield f"the run was computed by tunnelcalc {ran}, this is {tunnelcalc.__version__}"
        numpy = self.manifest.get("environment", {}).get("numpy", "unknown")
        if numpy != np.__version__:
            yield f"the run was computed with numpy {numpy}, this is {np.__version__}"
        now = {source.plugin: source for source in registry.sources}
        for plugin in self.manifest.get("plugins", ()):
            name, version = plugin["plugin"], plugin["version"]
            source = now.get(name)
            if source is None:
                yield f"plugin {name} {version} is not there any more".replace("  ", " ")
            elif source.version != version:
                yield f"plugin {name} was {version} in the run and is {source.version}"
            elif "files" in plugin and plugin["files"] != [asdict(file) for file in source.files]:
                yield f"plugin {name} consists of other files than in the run"


def read_run(folder: Path) -> Recorded:
    """The folder of a complete run. Raises `InputError` where it is none."""
    path = folder / MANIFEST
    if not path.is_file():
        what = f"holds no file {MANIFEST}" if folder.is_dir() else "is no folder of a run"
        _refuse(folder, f"{what}: it is no complete run")
    try:
        manifest = json.loads(path.read_text(encoding="utf-8"))
    except ValueError as error:
        _refuse(path, f"is not readable: {error}")
    if not isinstance(manifest, dict) or "program" not in manifest or "inputs" not in manifest:
        _refuse(path, "is not the record of a run")
    return Recorded(folder, manifest)


def _refuse(path: Path, what: str) -> None:
    problem = Problem(
        Where(str(path)),
        what,
        "name a folder that `tunnelcalc run` has written",
        name="RUN",
        allowed=f"a folder with {MANIFEST}",
    )
    raise InputError((problem,))


def _digest(path: Path) -> str:
    with path.open("rb") as stream:
        return hashlib.file_digest(stream, "sha256").hexdigest()
