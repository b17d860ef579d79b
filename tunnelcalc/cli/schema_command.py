"""`tunnelcalc schema`: the JSON Schema of project.yaml, for editors and other programs."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.cli.output_file import OutputFile
from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.schema import SCHEMA_ID, schema_text


def schema(out: Path | None, plugin_files: Sequence[Path] = ()) -> ExitCode:
    """Print the schema for the installed plugins, or write it."""
    registry = load_plugins(files=plugin_files)
    text = schema_text(registry)
    for failure in registry.failures:
        print(f"note: {failure}", file=sys.stderr)
    if out is None:
        sys.stdout.write(text)
    else:
        OutputFile(out, "--out", (SCHEMA_ID,)).write(text)
        print(f"written: {out}")
    return ExitCode.COMPLETE
