"""The command line. Heavy modules are imported by the command that needs them."""

from __future__ import annotations

import argparse
import io
import signal
import sys
import threading
from collections.abc import Iterator, Sequence
from contextlib import contextmanager
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING

import tunnelcalc
from tunnelcalc.errors import ExitCode, FolderHeldError, InputError, PluginError

if TYPE_CHECKING:
    from tunnelcalc.cli.problem_report import Report

EPILOG = (
    "An aid to, and no substitute for, licensed engineering judgement; local codes govern. "
    "Exit codes: 0 complete; 1 defect or machine failure; 2 wrong input; 3 complete, but "
    "something could not be evaluated; 4 with --strict, a section has no adequate class; "
    "5 a sheet does not agree with its run; 6 the folder was filled by another run; "
    "130 interrupted."
)


def build_parser() -> argparse.ArgumentParser:
    """The commands and their options."""
    parser = argparse.ArgumentParser(
        prog="tunnelcalc",
        description="From an alignment's ground, section by section, to a tunnel support schedule.",
        epilog=EPILOG,
    )
    parser.add_argument("--version", action="version", version=tunnelcalc.__version__)
    commands = parser.add_subparsers(dest="command", required=True, metavar="COMMAND")

    run = commands.add_parser("run", help="compute a project and write a new folder of results")
    run.add_argument("project", type=Path, metavar="PROJECT", help="folder with project.yaml")
    run.add_argument(
        "--out", type=Path, metavar="DIR", help="folder for the results; must be absent or empty"
    )
    run.add_argument(
        "--strict", action="store_true", help="exit with 4 if a section has no adequate class"
    )
    run.add_argument(
        "--chunk",
        type=_positive,
        metavar="N",
        help="sections computed together; changes memory and speed, never a result",
    )

    validate = commands.add_parser("validate", help="check a project and list every problem")
    validate.add_argument("project", type=Path, metavar="PROJECT", help="folder with project.yaml")
    for command in (run, validate):
        _add_report_options(command)

    new = commands.add_parser("new", help="write a commented starter project that runs as it is")
    new.add_argument("folder", type=Path, metavar="DIR", help="folder; must be absent or empty")

    schema = commands.add_parser(
        "schema", help="print the JSON Schema of project.yaml, by which an editor can check it"
    )
    schema.add_argument(
        "--out", type=Path, metavar="FILE", help="write it there; an earlier one is replaced"
    )

    explain = commands.add_parser(
        "explain", help="print every step of one section of a run, to be redone by hand"
    )
    explain.add_argument("run", type=Path, metavar="RUN", help="folder that `run` has written")
    explain.add_argument(
        "--at", required=True, metavar="CHAINAGE", help="as the project writes chainages"
    )
    explain.add_argument(
        "--class",
        dest="class_name",
        metavar="NAME",
        help="support class to show; without it the scheduled one",
    )
    explain.add_argument(
        "--out",
        type=Path,
        metavar="FILE",
        help="write it there, as .md, .csv or .json; an earlier sheet is replaced",
    )

    tune = commands.add_parser(
        "tune", help="find what would make a class adequate where none is, within your bounds"
    )
    tune.add_argument("project", type=Path, metavar="PROJECT", help="folder with project.yaml")
    tune.add_argument(
        "--vary",
        action="append",
        required=True,
        metavar="ELEMENT.PARAMETER=VALUES",
        help="a parameter with its bounds, as shotcrete.thickness_mm=150:500, or with words, as "
        "steel_sets.joints=rigid,sliding; installed_at_m=0.5:8 moves the whole class; may be given "
        "several times, each is varied by itself",
    )
    tune.add_argument(
        "--set",
        dest="held",
        action="append",
        default=[],
        metavar="ELEMENT.PARAMETER=VALUE",
        help="a change that holds while others are varied, as steel_sets.joint_count=3; what a "
        "word needs is stated so; may be given several times",
    )
    tune.add_argument(
        "--class", dest="class_name", metavar="NAME", help="the class; without it the heaviest"
    )
    tune.add_argument(
        "--out", type=Path, metavar="DIR", help="folder for the tables; must be absent or empty"
    )

    curves = commands.add_parser(
        "curves", help="write the curves of one section as tables and figures"
    )
    curves.add_argument("project", type=Path, metavar="PROJECT", help="folder with project.yaml")
    curves.add_argument(
        "--at", required=True, metavar="CHAINAGE", help="where, as the project writes chainages"
    )
    curves.add_argument(
        "--class", dest="class_name", metavar="NAME", help="support class; else the required one"
    )
    curves.add_argument(
        "--out", type=Path, metavar="DIR", help="folder for the files; must be absent or empty"
    )

    commands.add_parser("plugins", help="list what plugins offer, with parameters and ranges")

    commands.add_parser(
        "verification", help="compare every method with published and independent values"
    )

    stages = commands.add_parser("stages", help="explain the chain of stages of a project")
    stages.add_argument("project", type=Path, metavar="PROJECT", help="folder with project.yaml")

    for name, command in commands.choices.items():
        if name != "new":
            _add_plugin_files(command)
    return parser


def _add_plugin_files(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--plugin-file",
        type=Path,
        action="append",
        default=[],
        metavar="FILE",
        help="load this Python file as a plugin, named by its stem; it runs with your rights, so "
        "name only a file that you trust; may be given again",
    )


def _add_report_options(command: argparse.ArgumentParser) -> None:
    command.add_argument(
        "--format",
        choices=("text", "json"),
        default="text",
        help="json: one document for other programs on standard output",
    )
    command.add_argument(
        "--problems", type=Path, metavar="FILE", help="write every problem into this file too"
    )


def _positive(text: str) -> int:
    if not (text.isascii() and text.isdigit() and int(text) > 0):
        raise argparse.ArgumentTypeError(f"{text!r} is no whole number above 0")
    return int(text)


def main(arguments: Sequence[str] | None = None) -> int:
    """Run a command and return its exit code."""
    for stream in (sys.stdout, sys.stderr):
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="backslashreplace")  # a screen may lack a letter of a title
    options = build_parser().parse_args(arguments)
    try:
        with _terminated_as_interrupted():
            return int(_reported(options))
    except FolderHeldError as error:
        print(f"tunnelcalc: {error}", file=sys.stderr)
        return ExitCode.HELD
    except PluginError as error:
        print(f"tunnelcalc: {error}; report it to the maker of the plugin", file=sys.stderr)
        return ExitCode.INTERNAL
    except KeyboardInterrupt:
        print("tunnelcalc: interrupted; nothing was written", file=sys.stderr)
        return ExitCode.INTERRUPTED
    except BrokenPipeError:
        # The reader of our output has gone: nothing to tell, and nobody to tell it to.
        sys.stderr.close()
        return ExitCode.INTERNAL
    except OSError as error:
        place = f" {error.filename}:" if error.filename else ""
        why = error.strerror or str(error)
        print(f"tunnelcalc: the machine refused:{place} {why}", file=sys.stderr)
        print("  nothing was written; free the disk or correct the permission", file=sys.stderr)
        return ExitCode.INTERNAL


@contextmanager
def _terminated_as_interrupted() -> Iterator[None]:
    """Let a polite request to end clean up as an interruption from the keyboard does."""
    if threading.current_thread() is not threading.main_thread():
        yield
        return
    before = signal.signal(signal.SIGTERM, signal.default_int_handler)
    try:
        yield
    finally:
        signal.signal(signal.SIGTERM, before)


def _reported(options: argparse.Namespace) -> ExitCode:
    """Do the command, and tell the problems of its input in the form that was asked for."""
    from tunnelcalc.cli.problem_report import Report, problem_file

    report = Report(options.command, getattr(options, "format", "text") == "json")
    named: Path | None = getattr(options, "problems", None)
    try:
        if named is not None:
            file = problem_file(named)
            file.check()
            report = replace(report, file=file)
        return _command(options, report)
    except InputError as error:
        report.refused(error.problems)
        return ExitCode.INPUT


def _command(options: argparse.Namespace, report: Report) -> ExitCode:
    files: Sequence[Path] = getattr(options, "plugin_file", ())
    if options.command == "run":
        from tunnelcalc.cli.run_command import run

        return run(options.project, options.out, options.strict, options.chunk, report, files)
    if options.command == "validate":
        from tunnelcalc.cli.validate_command import validate

        return validate(options.project, report, files)
    if options.command == "new":
        from tunnelcalc.cli.new_command import new

        return new(options.folder)
    if options.command == "schema":
        from tunnelcalc.cli.schema_command import schema

        return schema(options.out, files)
    if options.command == "tune":
        from tunnelcalc.cli.tune_command import advise

        return advise(
            *(options.project, options.vary, options.held, options.class_name, options.out, files)
        )
    if options.command == "curves":
        from tunnelcalc.cli.curves_command import curves

        return curves(options.project, options.at, options.class_name, options.out, files)
    if options.command == "verification":
        from tunnelcalc.cli.verification_command import verification

        return verification(files)
    if options.command == "explain":
        from tunnelcalc.cli.explain_command import explain

        return explain(options.run, options.at, options.class_name, options.out, files)
    if options.command == "stages":
        from tunnelcalc.cli.stages_command import stages

        return stages(options.project, files)
    from tunnelcalc.cli.plugins_command import plugins

    return plugins(files)
