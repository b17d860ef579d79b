"""The sheet of one section: blocks in order, and every difference that was found."""

from __future__ import annotations

from pathlib import Path

import tunnelcalc
from tunnelcalc.calculation.line import Sheet, SheetBlock
from tunnelcalc.explain.class_blocks import CaseBlocks
from tunnelcalc.explain.ground_blocks import ground_blocks, strength_differences
from tunnelcalc.explain.recorded import Recorded, read_run
from tunnelcalc.explain.screen import flag_differences, screened
from tunnelcalc.explain.section import ComputedSection, compute_section
from tunnelcalc.explain.tables import differences, section_row
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.limits_statement import LIMITS
from tunnelcalc.one_section import class_number, position_at
from tunnelcalc.outputs.cells import number_text
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.plugin.method_contract import Method
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.results import STRESS_CASES

MEAN, LARGER = STRESS_CASES
LARGER_TITLE = ", larger in-plane stress"


def explain(run_folder: Path, at: str, class_name: str | None, registry: Registry) -> Sheet:
    """The calculation sheet of the section at a chainage.

    `class_name` is the support class that is shown: without it the scheduled one, or the heaviest
    where none is adequate. Raises `InputError` for a folder that holds no run, a chainage
    outside the alignment, or a class that the project does not have.
    """
    run = read_run(run_folder)
    project = read_project(run.inputs, registry)
    section = compute_section(project, registry, position_at(project, at))
    planned = _planned(section, run, class_name)
    found = [*run.changed_files(), *differences(run, section), *strength_differences(section)]
    blocks = [_identification(run, section, planned, registry), *ground_blocks(section)]
    for case in section.cases():
        title = LARGER_TITLE if case.name == LARGER else ""
        written = CaseBlocks(section, case, title)
        blocks += [written.ground(), *written.blocks(planned)]
        found += written.differences
    screen = screened(run, section)
    found += flag_differences(run, section, screen)
    blocks += [screen.block(), _methods(section), SheetBlock("Limits", notes=LIMITS)]
    blocks.append(SheetBlock("Signatures", notes=("prepared:", "checked:", "approved:")))
    found += [
        f"{block.title}: {line.symbol} is not what its formula {line.formula} gives"
        for block in blocks
        for line in block.disagreements
    ]
    chainage = _written(section)
    title = f"Calculation sheet: {project.title}, section at {chainage}"
    return Sheet(title, tuple(blocks), tuple(found))


def _written(section: ComputedSection) -> str:
    return section.project.notation.written(section.given["chainage_m"])[0]


def _planned(section: ComputedSection, run: Recorded, class_name: str | None) -> PlannedClass:
    """The class to show."""
    names = section.project.class_names
    if class_name is None:
        scheduled = section_row(run, section).get("scheduled_class", "")
        class_name = scheduled if scheduled in names else names[-1]
    return section.plan[class_number(section.project, class_name)]


def _identification(
    run: Recorded, section: ComputedSection, planned: PlannedClass, registry: Registry
) -> SheetBlock:
    project, row = section.project, section_row(run, section)
    from_m, to_m = (float(section.given[name][0]) for name in ("from_m", "to_m"))
    unit, profile = section.values["ground_unit"], section.values.get("profile", "")
    ends = " to ".join(project.notation.ends(from_m, to_m))
    manifest = run.manifest
    notes = [
        f"project: {project.title}",
        f"run: {run.folder.name}, finished {manifest.get('finished', 'unknown')}",
        f"section: {ends}, middle {_written(section)} ({number_text(section.chainage_m)} m)",
        *([f"profile: {profile}"] if profile else []),
        *([f"ground unit: {unit}"] if unit else []),
        f"class shown: {planned.support_class.name}; "
        f"required {row.get('required_class', 'unknown')}, "
        f"scheduled {row.get('scheduled_class', 'unknown')}",
        f"run by tunnelcalc {manifest['program'].get('version', 'unknown')}, "
        f"this sheet by tunnelcalc {tunnelcalc.__version__}",
        *run.other_versions(registry),
    ]
    notes += [f"input {entry['path']}: SHA-256 {entry['sha256']}" for entry in manifest["inputs"]]
    return SheetBlock("Identification", notes=tuple(notes))


def _methods(section: ComputedSection) -> SheetBlock:
    steps = section.steps
    methods: dict[str, Method] = {
        "strength": section.method(steps.strength),
        "deformation_modulus": section.method(steps.deformation_modulus),
        "ground_reaction": section.method(steps.ground_reaction),
        "closure_profile": section.method(steps.closure_profile),
    }
    notes = [f"{step}: {method.name}, {method.source}" for step, method in methods.items()]
    return SheetBlock("Methods of this section", notes=tuple(notes))
