"""The use case "show one section": from a project to the section's curves, data and figures."""

from __future__ import annotations

import re
from dataclasses import dataclass
from pathlib import Path

from tunnelcalc.errors import ExitCode
from tunnelcalc.inputs.project_file import project_folder, read_project
from tunnelcalc.one_section import class_number, computed, position_at
from tunnelcalc.outputs.curve_tables import write_curves
from tunnelcalc.outputs.figures import draw_all
from tunnelcalc.outputs.run_folder import Target, part_folder, sync_folder
from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.dispatch import chosen_steps
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.pipeline.section_curves import section_curves
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project
from tunnelcalc.section_curves import SectionCurves

CURVES = "curves"
LONGEST_NAME = 80
UNSAFE = re.compile(r"[^\w+.@-]+")


@dataclass(frozen=True, slots=True)
class Shown:
    """Where the curves of a section are, what they hold, and what is missing of them."""

    folder: Path
    files: tuple[str, ...]
    curves: SectionCurves
    missing: tuple[tuple[str, str], ...]
    without_figures: bool
    exit_code: ExitCode


def show_section(
    path: Path,
    registry: Registry,
    at: str,
    *,
    class_name: str | None = None,
    out: Path | None = None,
) -> Shown:
    """Compute one section and write its curves into a new folder.

    Without a class name the class is the one that the section requires, or the heaviest where
    none is adequate. Raises `InputError` before anything is written where the input is wrong.
    What could not be computed is left out and told.
    """
    project = read_project(path, registry)
    curves = curves_at(project, registry, at, class_name)
    place = _own_place(project_folder(path), curves, class_name) if out is None else out
    target = Target(project_folder(path), place, by_option=out is not None)
    figures = registry.section_figures(project.plugins)
    with part_folder(target) as part:
        tables = write_curves(part, curves)
        drawn = draw_all(figures, curves, part)
        sync_folder(part)
        folder = target.place(part)
        sync_folder(target.parent)
    files, missing = (*tables, *drawn.files), (*curves.unknown, *drawn.missing)
    ending = ExitCode.NOT_EVALUATED if missing else ExitCode.COMPLETE
    return Shown(folder, files, curves, missing, not figures, ending)


def curves_at(
    project: Project, registry: Registry, at: str, class_name: str | None = None
) -> SectionCurves:
    """The curves of the section at a chainage, with a class. Raises `InputError`."""
    position = position_at(project, at)
    chosen = None if class_name is None else class_number(project, class_name)
    plan = plan_classes(project, registry)
    section = computed(project, position, section_stages(project, registry, plan))
    required = int(section["required_class"][0])
    if chosen is None:
        chosen = required if required >= 0 else len(plan) - 1
    return section_curves(project, chosen_steps(project, registry), plan, section, chosen)


def _own_place(folder: Path, curves: SectionCurves, class_name: str | None) -> Path:
    """The folder of a section in its project; of a class that was asked for, its own."""
    name = curves.chainage if class_name is None else f"{curves.chainage}_{class_name}"
    return folder / CURVES / UNSAFE.sub("_", name)[:LONGEST_NAME].lstrip(".")
