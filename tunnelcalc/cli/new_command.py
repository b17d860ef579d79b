"""`tunnelcalc new`: a commented starter project."""

from __future__ import annotations

import shlex
from pathlib import Path

from tunnelcalc.errors import ExitCode
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.starter import PROJECT_FILES, write_starter


def new(folder: Path) -> ExitCode:
    """Write the starter project and say how to go on."""
    write_starter(folder, load_plugins())
    print(f"written: {folder}: {', '.join(sorted(PROJECT_FILES))}")
    print("every value in it is invented; edit project.yaml and the tables, then")
    print(f"  tunnelcalc validate {shlex.quote(str(folder))}")
    print(f"  tunnelcalc run {shlex.quote(str(folder))}")
    return ExitCode.COMPLETE
