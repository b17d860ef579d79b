"""The chain of stages of a project, in the order in which they run."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.pipeline.ground_stages import (
    deformation_modulus_stage,
    ground_reaction_stage,
    in_situ_stress_stage,
    intact_modulus_stage,
    strength_stage,
)
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.schedule_stages import flags_stage, zoning_stage
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.pipeline.support_stages import (
    CHECK_COLUMNS,
    PlannedClass,
    choice_stage,
    support_stage,
)
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project

ONLY_IN_TABLES = (
    *CHECK_COLUMNS,
    "installation_closure_mm",
    "class_support_pressure_mpa",
    "class_closure_mm",
    "class_plastic_radius_m",
)
"""Columns that are written while their chunk lasts and not kept beyond it."""


def build_stages(
    project: Project, registry: Registry, plan: Sequence[PlannedClass], incidents: Incidents
) -> tuple[Stage, ...]:
    """Ground, support, schedule: the job from end to end, with the project's methods.

    What a stage over the whole alignment cannot evaluate is added to `incidents`.
    """
    reaction = registry.ground_reaction(project.methods["ground_reaction"])
    return (
        in_situ_stress_stage(),
        strength_stage(registry.strength(project.methods["strength"])),
        intact_modulus_stage(),
        deformation_modulus_stage(
            registry.deformation_modulus(project.methods["deformation_modulus"])
        ),
        ground_reaction_stage(reaction),
        support_stage(
            plan,
            reaction,
            registry.closure_profile(project.methods["closure_profile"]),
            project.criteria,
        ),
        choice_stage(reaction, project.criteria),
        zoning_stage(project.schedule),
        flags_stage(registry.flags(project.plugins), incidents),
    )


def kept_columns(stages: Sequence[Stage]) -> frozenset[str]:
    """Columns that outlive their chunk."""
    given = {name for stage in stages for name in stage.gives}
    return frozenset(given - set(ONLY_IN_TABLES))
