"""`tunnelcalc stages`: the chain of a project in words."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.errors import ExitCode
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.pipeline.chain import build_stages
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.pipeline.stage import check_chain
from tunnelcalc.plugin.registry import load_plugins


def stages(path: Path, plugin_files: Sequence[Path] = ()) -> ExitCode:
    """Print each stage with what it needs and gives, after proving that the chain holds."""
    registry = load_plugins(files=plugin_files)
    project = read_project(path, registry)
    chain = build_stages(project, registry, plan_classes(project, registry), Incidents())
    check_chain(chain, project.ground)
    print(f"inputs give: {', '.join(project.ground)}")
    for number, stage in enumerate(chain, 1):
        scope = "whole alignment" if stage.whole_alignment else "in chunks"
        print(f"\n{number}. {stage.name} ({scope})\n   {stage.meaning}")
        print(f"   needs: {', '.join(stage.needs)}\n   gives: {', '.join(stage.gives)}")
    return ExitCode.COMPLETE
