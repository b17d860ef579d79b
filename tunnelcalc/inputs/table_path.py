"""How a project names a table: a path and, of a file with several tables, the one that is meant."""

from __future__ import annotations

from tunnelcalc.plugin.contract import SheetReader
from tunnelcalc.plugin.registry import Registry

SHEET_MARK = "#"


def suffix_of(path: str) -> str:
    """The ending of a file name, in lower case, with its dot."""
    return "." + path.rpartition(".")[2].lower() if "." in path else ""


def path_and_sheet(path: str, registry: Registry) -> tuple[str, str | None]:
    """`geology.xlsx#Intervals` in its two parts; a mark elsewhere in a path is part of it."""
    for place, character in enumerate(path):
        if character != SHEET_MARK:
            continue
        file = path[:place].rstrip()
        if isinstance(registry.ground_reader(suffix_of(file)), SheetReader):
            return file, path[place + 1 :].strip()
    return path, None
