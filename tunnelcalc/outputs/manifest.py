"""The record of a folder, written last: what was run, on what, with what, and what came out."""

from __future__ import annotations

import hashlib
import json
import platform
from collections.abc import Iterable, Mapping
from dataclasses import asdict
from datetime import datetime
from pathlib import Path
from typing import Any

import numpy as np

import tunnelcalc
from tunnelcalc.limits_statement import LIMITS
from tunnelcalc.outputs.run_folder import MANIFEST, write_bytes
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project
from tunnelcalc.results import RunResult
from tunnelcalc.validity import FlagSettings

HASH_BLOCK = 1 << 20


def write_manifest(
    folder: Path,
    result: RunResult,
    registry: Registry,
    options: Mapping[str, Any],
    started: datetime,
    finished: datetime,
    exit_code: int,
) -> None:
    """Write `run.json` into a folder in which every other file of the run stands."""
    project = result.project
    what = {
        "finished": finished.isoformat(timespec="seconds"),
        "exit_code": exit_code,
        "options": dict(options),
        "schedule": asdict(project.schedule),
        "counts": {
            "sections": result.sections.count,
            "support_classes": len(project.support_classes),
            "checks_a_section": len(result.checks),
            "zones": len(result.zones),
            "sections_without_adequate_class": result.without_adequate_class,
            "not_evaluated": sum(incident.sections for incident in result.incidents),
        },
        "flag_settings": _flag_settings(project.flags),
        "flags": [asdict(flag) for flag in result.flags],
        "gaps": [asdict(gap) for gap in project.gaps],
        "warnings": list(result.warnings),
        "not_evaluated": [asdict(incident) for incident in result.incidents],
    }
    write_record(folder, MANIFEST, project, registry, result.methods, started, what)


def write_record(
    folder: Path,
    name: str,
    project: Project,
    registry: Registry,
    methods: Mapping[str, str],
    started: datetime,
    what: Mapping[str, Any],
) -> None:
    """Write a record into a folder in which every other file stands: versions and project, then
    `what` is its own, then inputs and outputs with their hashes, and the statement of limits."""
    record = {
        "program": {"name": "tunnelcalc", "version": tunnelcalc.__version__},
        "environment": {"python": platform.python_version(), "numpy": np.__version__},
        "plugins": [asdict(source) for source in sorted(registry.sources, key=str)],
        "title": project.title,
        "started": started.isoformat(timespec="seconds"),
        "methods": dict(methods),
        "drainage": project.drainage or "not stated",
        "criteria": asdict(project.criteria),
        **what,
        "inputs": [
            {"path": file.path, "sha256": hashlib.sha256(file.content).hexdigest()}
            for file in project.files
        ],
        "outputs": list(_hashed(folder, name)),
        "limits": list(LIMITS),
    }
    text = json.dumps(record, indent=2, ensure_ascii=False, allow_nan=False) + "\n"
    write_bytes(folder / name, text.encode())


def _flag_settings(settings: FlagSettings) -> dict[str, Any]:
    """What the project says of the flags."""
    return {
        "not_assessed": settings.not_assessed,
        "thresholds": [
            {
                "flag": setting.flag,
                "level": setting.level.word,
                "side": setting.side.value,
                "value": setting.value,
                "origin": setting.origin,
            }
            for setting in settings.thresholds
        ],
        "overrides": [asdict(override) for override in settings.overrides],
    }


def _hashed(folder: Path, record: str) -> Iterable[dict[str, str]]:
    for path in sorted(folder.rglob("*")):
        if path.is_file() and path != folder / record:
            digest = hashlib.sha256()
            with path.open("rb") as stream:
                while block := stream.read(HASH_BLOCK):
                    digest.update(block)
            relative = path.relative_to(folder).as_posix()
            yield {"path": relative, "sha256": digest.hexdigest()}
