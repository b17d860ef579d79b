"""One invented ground after another through the stages of a project, and its classes by hand."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np
from unit.pipeline.projects import along, project, three_classes, with_absent

from tunnelcalc.pipeline.chain import section_stages
from tunnelcalc.pipeline.plan import plan_classes
from tunnelcalc.plugin.registry import load_plugins
from tunnelcalc.project import Element, MethodChoice, Project
from tunnelcalc.sections import Sections

REGISTRY = load_plugins()
RADIUS_M = 4.0
COMMON = {
    "cover_m": 196.0,
    "unit_weight_kn_m3": 25.0,
    "stress_ratio": 1.0,
    "intact_strength_mpa": 20.0,
    "mi": 10.0,
    "gsi": 30.0,
    "disturbance": 0.0,
    "poisson_ratio": 0.3,
    "dilation_deg": 0.0,
    "radius_m": RADIUS_M,
    "span_m": 2 * RADIUS_M,
    "height_m": 2 * RADIUS_M,
}
"""Vertical stress 25 (196 + 4) / 1000 = 5 MPa."""


def sections_of(count: int = 1, **columns: float | Sequence[float]) -> Sections:
    """Sections of 10 m; each column is one value or one for each section."""
    values = {
        name: np.broadcast_to(np.asarray(value, dtype=float), count).copy()
        for name, value in {**COMMON, **columns}.items()
    }
    words = {
        "ground_unit": np.array(["invented"] * count, dtype=object),
        "profile": np.array([""] * count, dtype=object),
    }
    marks = ("stress_ratio_assumed", "dilation_assumed", "equivalent_radius", "estimates_differ")
    return Sections(
        with_absent(
            {
                **along([10.0] * count),
                **words,
                **{name: np.zeros(count, dtype=bool) for name in marks},
                "tested_confinement_mpa": np.full(count, np.inf),
                **values,
            },
            count,
        )
    )


def evaluated(
    sections: Sections,
    classes: Mapping[str, Sequence[Element]] | None = None,
    **keys: object,
) -> Sections:
    """The sections after every stage that looks at each by itself."""
    made = project(classes or three_classes(), sections, **keys)  # type: ignore[arg-type]
    return through(made)


def through(made: Project) -> Sections:
    sections = made.ground
    for stage in section_stages(made, REGISTRY, plan_classes(made, REGISTRY)):
        sections = stage(sections)
    return sections


def all_by(**steps: str) -> dict[str, MethodChoice]:
    """One method a step for all ground."""
    return {step: MethodChoice((name,)) for step, name in steps.items()}
