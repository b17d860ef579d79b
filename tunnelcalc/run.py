"""The use case "run a project": from its folder to a folder of results."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

from tunnelcalc.errors import ExitCode
from tunnelcalc.inputs.project_file import project_folder, read_project
from tunnelcalc.outputs.flags_table import write_flags
from tunnelcalc.outputs.manifest import write_manifest
from tunnelcalc.outputs.provenance import write_provenance
from tunnelcalc.outputs.run_folder import Target, copy_inputs, part_folder, sync_folder
from tunnelcalc.outputs.tables import ChunkTables, write_sections
from tunnelcalc.pipeline.chain import build_stages, kept_columns
from tunnelcalc.pipeline.collect import item_totals, zones
from tunnelcalc.pipeline.dispatch import method_sources
from tunnelcalc.pipeline.flags_stage import (
    flag_counts,
    flag_numbers,
    flag_value,
    flags_of,
    screening_lines,
)
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.pipeline.stage import check_chain, run_stages
from tunnelcalc.plugin.registry import Registry, describe
from tunnelcalc.project import Project
from tunnelcalc.results import RunResult
from tunnelcalc.sections import Sections

CHUNK_SECTIONS = 2048
"""Sections computed together: arrays of this length stay in the processor's cache."""

Progress = Callable[[int, int], None]
"""Told the number of sections done, and of all."""


@dataclass(frozen=True, slots=True)
class Finished:
    """A complete run: where it is, what it found, and how it ends."""

    folder: Path
    result: RunResult
    exit_code: ExitCode


def run_project(
    path: Path,
    registry: Registry,
    *,
    out: Path | None = None,
    strict: bool = False,
    chunk_sections: int = CHUNK_SECTIONS,
    progress: Progress = lambda done, total: None,
) -> Finished:
    """Read a project, compute every section, and write a new folder of results.

    Raises `InputError` before anything is written where the input is wrong. What is on the disk
    already is never touched: the folder appears whole, or not at all.
    """
    started = datetime.now(UTC)
    project = read_project(path, registry)
    target = Target(project_folder(path), out)
    with part_folder(target) as part:
        result = compute(project, registry, part, chunk_sections, progress)
        exit_code = ending(result, strict)
        options = {"strict": strict, "chunk_sections": chunk_sections}
        finished = datetime.now(UTC)
        write_manifest(part, result, registry, options, started, finished, exit_code)
        sync_folder(part)
        folder = target.place(part)
        sync_folder(target.parent)
    return Finished(folder, result, exit_code)


def compute(
    project: Project,
    registry: Registry,
    folder: Path,
    chunk_sections: int,
    progress: Progress,
) -> RunResult:
    """Compute a checked project and write its tables into an empty folder."""
    copy_inputs(folder, project.files)
    plan = plan_classes(project, registry)
    flags = flags_of(project, registry)
    lines = screening_lines(flags, project.flags)
    flag_names = [flag.name for flag in flags]
    incidents = Incidents()
    stages = build_stages(project, registry, plan, incidents)
    check_chain(stages, project.ground)
    checks = check_lines(plan)
    tables = ChunkTables(folder, project, checks)
    done = 0

    def each_chunk(chunk: Sections) -> None:
        nonlocal done
        tables.write(chunk)
        incidents.add_chunk(chunk, checks)
        done += chunk.count
        progress(done, project.ground.count)

    try:
        sections = run_stages(
            stages, project.ground, chunk_sections, kept_columns(stages), each_chunk
        )
        tables.close()
    finally:
        tables.abandon()
    write_sections(folder, project, sections, flag_names)
    write_flags(
        folder,
        project,
        sections,
        lines,
        lambda k: flag_value(flags[k], sections),
        lambda k: flag_numbers(flags[k], sections),
    )
    write_provenance(folder, project)
    quantities = item_totals(project, plan, sections, incidents)
    return write_reports(
        RunResult(
            project=project,
            sections=sections,
            checks=checks,
            zones=zones(project, sections, checks, flag_names),
            quantities=quantities,
            flags=flag_counts(lines, sections),
            incidents=incidents.listed(),
            warnings=project.warnings,
            methods=method_sources(project, registry),
        ),
        registry,
        folder,
        incidents,
    )


def write_reports(
    result: RunResult, registry: Registry, folder: Path, incidents: Incidents
) -> RunResult:
    """Let every report writer write; what a writer fails to write is an incident."""
    for writer in registry.report_writers(result.project.plugins):
        try:
            tuple(writer.write(result, folder))
        except OSError:
            raise  # the disk, not the writer
        except (Exception, SystemExit) as error:
            incidents.add(f"report {writer.name}", describe(error), result.sections["chainage_m"])
    return result.with_incidents(incidents.listed())


def ending(result: RunResult, strict: bool) -> ExitCode:
    """How the run ends: something not evaluated goes before a section without a class."""
    if result.incidents:
        return ExitCode.NOT_EVALUATED
    if strict and result.without_adequate_class:
        return ExitCode.NO_ADEQUATE_CLASS
    return ExitCode.COMPLETE
