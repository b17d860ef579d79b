"""Distributions of other people: a module and its entry point, put on the path of a process."""

from __future__ import annotations

import os
from pathlib import Path

HEAD = """\
import numpy as np
from tunnelcalc import api
"""

CHECK = """
class Check:
    name = "{name}"
    meaning = "a check for tests"
    applies_to = ("shotcrete",)
    unit = "MPa"
    carries_load = {carries_load}

    def concerns(self, element):
        return True

    def evaluate(self, sections, element):
{evaluate}


@api.hookimpl
def tunnelcalc_register_support_checks(register):
    register(Check())
"""

WRITER = """
class Writer:
    name = "{name}"

    def write(self, result, folder):
{write}


@api.hookimpl
def tunnelcalc_register_report_writers(register):
    register(Writer())
"""


def indented(code: str) -> str:
    return "\n".join("        " + line for line in code.strip().splitlines())


def check_plugin(name: str, evaluate: str, carries_load: bool = True) -> str:
    """Source of a plugin with one check of shotcrete."""
    body = CHECK.format(name=name, carries_load=carries_load, evaluate=indented(evaluate))
    return HEAD + body


def writer_plugin(name: str, write: str) -> str:
    """Source of a plugin with one report writer."""
    return HEAD + WRITER.format(name=name, write=indented(write))


def install(site: Path, name: str, source: str) -> dict[str, str]:
    """Put a distribution with one plugin into a folder; the environment that finds it there."""
    information = site / f"{name}-1.0.dist-info"
    information.mkdir(parents=True)
    (site / f"{name}.py").write_text(source)
    (information / "METADATA").write_text(f"Metadata-Version: 2.1\nName: {name}\nVersion: 1.0\n")
    (information / "entry_points.txt").write_text(f"[tunnelcalc]\n{name} = {name}\n")
    return found_in(site)


def found_in(site: Path | str) -> dict[str, str]:
    """The environment of a process that finds the distributions of a folder, or of several."""
    others = os.environ.get("PYTHONPATH")
    return {"PYTHONPATH": os.pathsep.join([str(site), *([others] if others else [])])}
