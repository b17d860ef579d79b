"""`tunnelcalc explain`: the calculation sheet of one section of a run."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

from tunnelcalc.cli.output_file import OutputFile
from tunnelcalc.errors import ExitCode, InputError, Problem, Where
from tunnelcalc.explain.sheet import explain as explained
from tunnelcalc.one_section import OPTIONS
from tunnelcalc.outputs.run_folder import INPUTS, MANIFEST
from tunnelcalc.outputs.sheet_text import FORMS, MARKS, sheet_text
from tunnelcalc.plugin.registry import load_plugins


def explain(
    run: Path,
    at: str,
    class_name: str | None,
    out: Path | None,
    plugin_files: Sequence[Path] = (),
) -> ExitCode:
    """Print the sheet, or write it. Ends with 5 where it does not agree with the run."""
    file = None if out is None else _file(out)
    try:
        sheet = explained(run, at, class_name, load_plugins(files=plugin_files))
    except InputError as error:
        raise InputError(tuple(_in_run(run, problem) for problem in error.problems)) from error
    if file is None:
        sys.stdout.write(sheet_text(sheet))
    else:
        file.write(FORMS[file.path.suffix.lower()](sheet))
        print(f"written: {out}")
        for difference in sheet.differences:
            print(f"difference: {difference}", file=sys.stderr)
    return ExitCode.DIFFERENCE if sheet.differences else ExitCode.COMPLETE


def _in_run(run: Path, problem: Problem) -> Problem:
    """A problem of the inputs that the run kept, with the run's path before the file."""
    own = {OPTIONS.file, *(str(path) for path in (run, run / MANIFEST, run / INPUTS))}
    where = problem.where
    if where.file in own:
        return problem
    return replace(problem, where=replace(where, file=str(run / INPUTS / where.file)))


def _file(path: Path) -> OutputFile:
    """The file of `--out`, whose ending says the form. Raises InputError."""
    if path.suffix.lower() not in FORMS:
        problem = Problem(
            Where(str(path)),
            "has an ending that says no form",
            "give the file one of these endings",
            name="--out",
            allowed=" or ".join(FORMS),
        )
        raise InputError((problem,))
    file = OutputFile(path, "--out", MARKS)
    file.check()
    return file
