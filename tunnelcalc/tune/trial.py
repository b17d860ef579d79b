"""A class on the sections that no class satisfies, tried with other values."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.pipeline.chain import class_stages, ground_alone_stages
from tunnelcalc.pipeline.plan import check_lines, plan_classes
from tunnelcalc.pipeline.stage import Stage, check_chain
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Project, SupportClass
from tunnelcalc.results import governing_labels
from tunnelcalc.schedule.selection import NONE_ADEQUATE
from tunnelcalc.sections import Sections
from tunnelcalc.support.adequacy import Outcome
from tunnelcalc.trade_off import TradeOff
from tunnelcalc.tune.changes import (
    ADVANCE_RATE,
    INSTALLED,
    Change,
    Value,
    Variation,
    changed,
    installed_first_m,
)


@dataclass(frozen=True, slots=True)
class Trial:
    """A class of a project on its failing sections, whose ground alone is computed already."""

    project: Project
    registry: Registry
    chosen: SupportClass
    ground: Sections

    def adequate(self, changes: Sequence[Change], row: int) -> bool:
        """Whether the class with these changes does on one section."""
        found, _ = self._computed(changes, self.ground.take(np.array([row])))
        return bool(found["class_adequate"][0, 0])

    def trade_off(self, variation: Variation, held: Sequence[Change]) -> TradeOff:
        """Every value of a variation on every section."""
        tables = [self._table((*held, variation.change(one))) for one in variation.values]
        factor, closure, missing, governing, adequate, evaluated = (
            np.stack(column) for column in zip(*tables, strict=True)
        )
        criteria = self.project.criteria
        return TradeOff(
            title=self.project.title,
            support_class=self.chosen.name,
            element=variation.element,
            parameter=variation.parameter,
            unit=variation.unit,
            tried=variation.values,
            now=_now(self.chosen, variation),
            held=tuple(change.text for change in held),
            required_factor=criteria.factor_of_safety,
            closure_limit_pct=criteria.closure_pct,
            length_m=self.ground["to_m"] - self.ground["from_m"],
            factor_of_safety=factor,
            closure_pct=closure,
            missing_pressure_mpa=missing,
            governing=governing,
            adequate=adequate,
            evaluated=evaluated,
        )

    def _table(self, changes: Sequence[Change]) -> tuple[Array, ...]:
        """Factor, closure, missing pressure, governing check, adequate, evaluated: (n,) each."""
        found, labels = self._computed(changes, self.ground)
        unknown = (found["check_outcome"] == Outcome.NOT_EVALUATED) & found["check_counts"]
        return (
            found["class_factor_of_safety"][:, 0],
            found["class_closure_pct"][:, 0],
            found["class_missing_pressure_mpa"][:, 0],
            np.array(labels, dtype=object)[found["class_governing"][:, 0].astype(np.intp)],
            found["class_adequate"][:, 0],
            ~np.any(unknown, axis=1) & np.isfinite(found["class_closure_pct"][:, 0]),
        )

    def _computed(
        self, changes: Sequence[Change], ground: Sections
    ) -> tuple[Sections, Sequence[str]]:
        tried, _ = changed(self.chosen, changes, self.registry, self.project.words)
        project = replace(self.project, support_classes=(tried,))
        plan = plan_classes(project, self.registry)
        stages = class_stages(project, self.registry, plan)
        return computed(ground, stages), governing_labels(check_lines(plan), 0)


def failing(project: Project, registry: Registry) -> Sections:
    """The sections that no class of the project satisfies, with the columns of the ground alone."""
    ground = computed(project.ground, ground_alone_stages(project, registry))
    plan = plan_classes(project, registry)
    required = computed(ground, class_stages(project, registry, plan))["required_class"]
    return ground.take(np.flatnonzero(required == NONE_ADEQUATE))


def computed(ground: Sections, stages: Sequence[Stage]) -> Sections:
    """Sections with every column of the stages."""
    check_chain(stages, ground)
    for stage in stages:
        ground = stage(ground)
    return ground


def _now(chosen: SupportClass, variation: Variation) -> Value | None:
    """What the project states; None where it states nothing."""
    if not variation.element:
        if variation.parameter != ADVANCE_RATE:
            return installed_first_m(chosen)
        rate = chosen.advance_m_per_day
        return rate if rate == rate else None
    (element,) = [one for one in chosen.elements if one.label == variation.element]
    if variation.parameter == INSTALLED:
        return element.installed_at_m
    return element.values.get(variation.parameter)
