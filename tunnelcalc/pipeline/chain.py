"""The chain of stages of a project, in the order in which they run."""

from __future__ import annotations

from collections.abc import Sequence

from tunnelcalc.pipeline.dispatch import chosen_steps
from tunnelcalc.pipeline.disturbed_ring_stage import disturbed_ring_stage
from tunnelcalc.pipeline.flags_stage import flags_of, flags_stage
from tunnelcalc.pipeline.ground_stages import (
    deformation_modulus_stage,
    ground_reaction_stage,
    in_situ_stress_stage,
    intact_modulus_stage,
    knows_ring,
    mass_disturbance_stage,
    strength_stage,
)
from tunnelcalc.pipeline.hazard_stage import hazard_stage
from tunnelcalc.pipeline.incidents import Incidents
from tunnelcalc.pipeline.plan import PlannedClass
from tunnelcalc.pipeline.schedule_stages import zoning_stage
from tunnelcalc.pipeline.stage import Stage
from tunnelcalc.pipeline.support_stages import (
    CHECK_COLUMNS,
    STRESS_CASE,
    choice_stage,
    support_stage,
)
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project

ONLY_IN_TABLES = (
    *CHECK_COLUMNS,
    STRESS_CASE,
    "installation_closure_mm",
    "class_support_pressure_mpa",
    "class_closure_mm",
    "class_plastic_radius_m",
    "class_first_failure_pressure_mpa",
    "class_first_failure_closure_mm",
    "class_full_pressure_mpa",
    "class_full_closure_mm",
)
"""Columns that are written while their chunk lasts and not kept beyond it."""


def section_stages(
    project: Project, registry: Registry, plan: Sequence[PlannedClass]
) -> tuple[Stage, ...]:
    """The stages that look at each section by itself, with the project's methods."""
    return (*ground_alone_stages(project, registry), *class_stages(project, registry, plan))


def ground_alone_stages(project: Project, registry: Registry) -> tuple[Stage, ...]:
    """What every section needs before any support class is looked at."""
    steps = chosen_steps(project, registry)
    has_ring = any(knows_ring(method) for method in steps.ground_reaction.methods)
    laws = (steps.strength, steps.deformation_modulus, steps.ground_reaction)
    ring = [disturbed_ring_stage(*laws)] if has_ring else []
    return (
        in_situ_stress_stage(project.drainage),
        mass_disturbance_stage(steps.ground_reaction),
        strength_stage(steps.strength),
        intact_modulus_stage(),
        deformation_modulus_stage(steps.deformation_modulus),
        *ring,
        hazard_stage(),
        ground_reaction_stage(steps.ground_reaction),
    )


def class_stages(
    project: Project, registry: Registry, plan: Sequence[PlannedClass]
) -> tuple[Stage, ...]:
    """The support classes on every section, and which of them it requires."""
    steps = chosen_steps(project, registry)
    return (support_stage(plan, steps, project.criteria), choice_stage())


def build_stages(
    project: Project, registry: Registry, plan: Sequence[PlannedClass], incidents: Incidents
) -> tuple[Stage, ...]:
    """Ground, support, schedule: the job from end to end, with the project's methods.

    What a stage over the whole alignment cannot evaluate is added to `incidents`.
    """
    return (
        *section_stages(project, registry, plan),
        zoning_stage(project.schedule),
        flags_stage(flags_of(project, registry), project.flags, incidents),
    )


def kept_columns(stages: Sequence[Stage]) -> frozenset[str]:
    """Columns that outlive their chunk."""
    given = {name for stage in stages for name in stage.gives}
    return frozenset(given - set(ONLY_IN_TABLES))
