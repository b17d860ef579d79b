"""One section of a project, computed by the stages of a run."""

from __future__ import annotations

from dataclasses import dataclass

from tunnelcalc.one_section import computed
from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.class_evaluation import Evaluated, evaluate_class
from tunnelcalc.pipeline.dispatch import Chosen, ChosenSteps, M, chosen_steps, curves
from tunnelcalc.pipeline.plan import PlannedClass, plan_classes
from tunnelcalc.pipeline.stress_cases import larger_stress
from tunnelcalc.plugin.contract import SectionValues
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project
from tunnelcalc.results import STRESS_CASES
from tunnelcalc.sections import Sections


@dataclass(frozen=True, slots=True)
class StressCase:
    """A section under one in-plane stress, without support."""

    name: str
    sections: Sections

    @property
    def values(self) -> SectionValues:
        return values_of(self.sections)


@dataclass(frozen=True, slots=True)
class ComputedSection:
    """One section with every column that the stages give it."""

    project: Project
    registry: Registry
    number: int
    given: Sections
    """the section as the inputs describe it"""
    sections: Sections
    plan: tuple[PlannedClass, ...]
    steps: ChosenSteps

    @property
    def chainage_m(self) -> float:
        return float(self.given["chainage_m"][0])

    @property
    def values(self) -> SectionValues:
        return values_of(self.sections)

    def method(self, chosen: Chosen[M]) -> M:
        """The section's own method of a step."""
        return next(method for method, _, _ in chosen.parts(self.sections))

    def cases(self) -> tuple[StressCase, ...]:
        """The mean stress, and the larger one where the section is run with it too."""
        mean, larger = STRESS_CASES
        cases = [StressCase(mean, self.sections)]
        other = larger_stress(self.steps.ground_reaction, self.sections, self.project.criteria)
        if other.positions.size:
            cases.append(StressCase(larger, other.sections))
        return tuple(cases)

    def evaluated(self, case: StressCase, planned: PlannedClass) -> Evaluated:
        """A class in a stress case."""
        curve = curves(self.steps.ground_reaction, case.sections)
        return evaluate_class(planned, curve, self.steps, case.sections, self.project.criteria)


def values_of(sections: Sections) -> dict[str, float | str]:
    """The columns of one section, numbers and texts; what has a value a class is left out."""
    return {
        name: column[0] if isinstance(column[0], str) else float(column[0])
        for name, column in sections.items()
        if column.ndim == 1
    }


def compute_section(project: Project, registry: Registry, number: int) -> ComputedSection:
    """The section of this number, alone."""
    given = project.ground.take(slice(number, number + 1))
    plan = plan_classes(project, registry)
    sections = computed(project, number, section_stages(project, registry, plan))
    steps = chosen_steps(project, registry)
    return ComputedSection(project, registry, number, given, sections, plan, steps)
