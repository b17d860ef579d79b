"""What is to be checked in each support class, before any number is known."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

from tunnelcalc.plugin.contract import (
    ClassCheck,
    ClassCheckWithOptions,
    SupportCheck,
    SupportKind,
)
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.plugin.ring_sections import with_section
from tunnelcalc.project import Criteria, Element, Project, SupportClass
from tunnelcalc.results import CheckLine

WHOLE_CLASS = "class"
"""What stands for the element in the lines of checks of a class as a whole."""


@dataclass(frozen=True, slots=True)
class PlannedElement:
    """An element with its kind and the checks that will be made of it."""

    element: Element
    kind: SupportKind
    checks: tuple[SupportCheck, ...]

    @property
    def is_ring(self) -> bool:
        """Whether water presses on it. A kind that does not say carries none: the check of the
        water on the lining then fails, which is on the safe side."""
        return bool(getattr(self.kind, "is_ring", False))


@dataclass(frozen=True, slots=True)
class PlannedClass:
    """A support class with all that is needed to judge it."""

    support_class: SupportClass
    elements: tuple[PlannedElement, ...]
    class_checks: tuple[ClassCheck, ...]


def plan_classes(project: Project, registry: Registry) -> tuple[PlannedClass, ...]:
    """The classes of a project, lightest first, each with its checks."""
    of_classes = tuple(
        check for check in registry.class_checks(project.plugins) if check.concerns(project)
    )
    return tuple(_planned(one, of_classes, project, registry) for one in project.support_classes)


def _planned(
    support_class: SupportClass,
    of_classes: Sequence[ClassCheck],
    project: Project,
    registry: Registry,
) -> PlannedClass:
    elements = []
    for plain in support_class.elements:
        kind = registry.support_kind(plain.kind)
        # Here and not where it is read: an element may be changed after that.
        element = with_section(kind, plain)
        checks = tuple(registry.checks_for(element, project.plugins))
        elements.append(PlannedElement(element, kind, checks))
    members = tuple(item.element for item in elements)
    class_checks = tuple(_for_class(of_classes, members, project.criteria))
    return PlannedClass(support_class, tuple(elements), class_checks)


def _for_class(
    checks: Sequence[ClassCheck], members: tuple[Element, ...], criteria: Criteria
) -> Iterator[ClassCheck]:
    """The checks of a class as a whole, those with options as the project wants them."""
    for check in checks:
        if not isinstance(check, ClassCheckWithOptions):
            yield check
        elif counts(check, criteria) and check.concerns_class(members):
            yield check.configured(criteria.options)


def check_lines(plan: Sequence[PlannedClass]) -> tuple[CheckLine, ...]:
    """The rows that every section has in `checks.csv`, in order."""
    lines = []
    for number, planned in enumerate(plan):
        of_elements: list[tuple[str, SupportCheck | ClassCheck]] = [
            (item.element.label, check) for item in planned.elements for check in item.checks
        ]
        of_class = [(WHOLE_CLASS, check) for check in planned.class_checks]
        lines += [
            CheckLine(
                number,
                planned.support_class.name,
                label,
                check.name,
                check.unit,
                check.carries_load,
            )
            for label, check in (*of_elements, *of_class)
        ]
    return tuple(lines)


def counts(check: ClassCheck, criteria: Criteria) -> bool:
    """Whether a class must pass a check of the class as a whole."""
    return not check.by_choice or criteria.chosen_checks.get(check.name, False)
