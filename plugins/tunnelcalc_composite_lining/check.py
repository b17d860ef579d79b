"""The check of a class: its rings as one lining under unequal in-situ stress.

Rings may act from different distances and harden: each is checked with its own thrust and its
share of the moment, at rest and, where it hardens, while young. See the module `rings`.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

import numpy as np

from tunnelcalc import api
from tunnelcalc.api import Limits, Parameter
from tunnelcalc_composite_lining.einstein_schwartz import FULL_SLIP, NO_SLIP
from tunnelcalc_composite_lining.interaction import interaction_diagram
from tunnelcalc_composite_lining.lines import lining_lines
from tunnelcalc_composite_lining.lining import (
    Lining,
    governing_stress,
    lining_of,
    loads_of,
    parts_of,
)
from tunnelcalc_composite_lining.utilisation import CROWN_DEG, SPRINGLINE_DEG

NAME = "composite_lining"
ANGLES = 19
"""From springline to crown, every 5 degrees."""
INTERFACE, TENSION = "lining_interface", "lining_tensile_strength_mpa"
NO_FORCES = "the lining takes no thrust of the unequal stress, or an input of it is missing"


class CompositeLining:
    """Thrust and moment around the lining, and the stress of the face that is used most."""

    name = NAME
    meaning = (
        "stress of the most used face of the lining's rings, by thrust and moment at crown and "
        "springline, against its strength, at rest and of a ring that hardens also while young: "
        "each ring with its own thrust, its moment to that as in the composite of all at final "
        "stiffness, at rest no less than its share there; rings from the same distance that do not "
        "harden share as the composite. Einstein & Schwartz (1979), scaled to the thrust; "
        "Carranza-Torres & Diederichs (2009) [from memory]; a thin elastic ring, placed before the "
        "ground moves"
    )
    unit = "MPa"
    carries_load = True
    by_choice = True
    requires: Mapping[str, Limits] = {
        "poisson_ratio": Limits(0, 0.5, below=True),
        "stress_ratio": Limits(0, 10, above=True),
    }
    options = (
        Parameter(
            INTERFACE,
            "whether lining and ground slip freely along each other, or not at all",
            choices=(FULL_SLIP, NO_SLIP),
        ),
        Parameter(
            TENSION,
            "tensile strength of shotcrete in the lining; 0: it bears no tension",
            "MPa",
            Limits(0, 30),
        ),
    )

    def __init__(self, values: Mapping[str, float | str] | None = None) -> None:
        self.values = dict(values or {})

    def configured(self, values: Mapping[str, float | str]) -> api.ClassCheck:
        return CompositeLining(values)

    def concerns(self, project: api.Project) -> bool:
        return True

    def concerns_class(self, elements: tuple[api.Element, ...]) -> bool:
        """Only a class with a ring has a lining."""
        return any(element.section is not None for element in elements)

    def lining(self, sections: api.Sections, elements: tuple[api.Element, ...]) -> Lining:
        """The lining of a class; its rings must bear together all around."""
        tension = self.values[TENSION]
        assert not isinstance(tension, str)
        parts = parts_of(elements, tension, sections.count)
        loads = loads_of(sections, elements)
        return lining_of(sections, parts, loads, str(self.values[INTERFACE]))

    def evaluate(self, sections: api.Sections, elements: tuple[api.Element, ...]) -> api.Evaluation:
        alone = ring_that_acts_alone(elements)
        if alone:
            nothing = np.zeros(sections.count)
            return api.Evaluation(nothing, nothing, np.ones(sections.count, dtype=bool), alone)
        found = governing_stress(self.lining(sections, elements))
        return api.Evaluation(
            found.stress_mpa, found.strength_mpa, np.isnan(found.stress_mpa), NO_FORCES
        )

    def thrust_and_moment(
        self, sections: api.Sections, elements: tuple[api.Element, ...]
    ) -> Sequence[api.ThrustAndMoment]:
        """Forces of each ring in one section, and the limit of its own section."""
        if ring_that_acts_alone(elements):
            return ()
        angles = np.linspace(SPRINGLINE_DEG, CROWN_DEG, ANGLES)
        found = []
        for state in self.lining(sections, elements).states:
            limit = interaction_diagram([state.part], 1.0)
            thrust = state.forces.thrust_mn_per_m(angles)
            moment = state.forces.moment_mnm_per_m(angles)
            corners = limit.thrust_mn_per_m[0], limit.moment_mnm_per_m[0]
            found.append(api.ThrustAndMoment(state.part.name, angles, thrust, moment, *corners))
        return found

    def lines(
        self, values: api.SectionValues, elements: tuple[api.Element, ...]
    ) -> Sequence[api.SheetLine]:
        if ring_that_acts_alone(elements):
            return ()
        lining = self.lining(api.one_section(values), elements)
        return lining_lines(values, lining, governing_stress(lining), str(self.values[INTERFACE]))


def ring_that_acts_alone(elements: Sequence[api.Element]) -> str:
    """Why rings of a class are no composite lining; empty where they are one."""
    return "; ".join(
        f"{element.label}: {element.section.acts_alone}"
        for element in elements
        if element.section is not None and element.section.acts_alone
    )
