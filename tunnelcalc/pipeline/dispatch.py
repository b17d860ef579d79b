"""The methods of one step, and which sections each of them computes."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Generic, TypeVar

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.ground_reaction.mixed import MixedCurve
from tunnelcalc.plugin.method_contract import (
    ClosureProfileMethod,
    GroundReactionMethod,
    Method,
    ModulusMethod,
    StrengthMethod,
)
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import MethodChoice, Project, method_column
from tunnelcalc.sections import Sections

M = TypeVar("M", bound=Method)


@dataclass(frozen=True, slots=True)
class Chosen(Generic[M]):
    """The methods that a project chose for one step, in the order of their numbers."""

    step: str
    methods: tuple[M, ...]

    @property
    def needs(self) -> tuple[str, ...]:
        """Columns that any of the methods reads, and the one that says which is whose."""
        own = [need for method in self.methods for need in method.needs]
        return tuple(dict.fromkeys([*own, *self.which]))

    @property
    def which(self) -> tuple[str, ...]:
        """The column that says whose each section is; none where there is one method."""
        return (method_column(self.step),) if len(self.methods) > 1 else ()

    @property
    def names(self) -> str:
        return ", ".join(f"{method.name}: {method.source}" for method in self.methods)

    def positions(self, sections: Sections) -> Iterator[tuple[M, Array]]:
        """Each method with the positions of its sections."""
        if len(self.methods) == 1 or not sections.count:
            yield self.methods[0], np.arange(sections.count)
            return
        numbers = sections[method_column(self.step)]
        for number, method in enumerate(self.methods):
            positions = np.flatnonzero(numbers == number)
            if positions.size:
                yield method, positions

    def parts(self, sections: Sections) -> Iterator[tuple[M, Array, Sections]]:
        """Each method with the positions of its sections, and those sections."""
        for method, positions in self.positions(sections):
            if positions.size == sections.count:
                yield method, positions, sections
            else:
                yield method, positions, sections.only(method.needs).take(positions)


def curves(chosen: Chosen[GroundReactionMethod], sections: Sections) -> GroundCurve:
    """Ground reaction curves of the sections, each by its own law."""
    return MixedCurve.of_parts(
        [(method.curve(part), positions) for method, positions, part in chosen.parts(sections)]
    )


def closure_share(
    chosen: Chosen[ClosureProfileMethod], sections: Sections, distance_m: Array
) -> Array:
    """(n,) share of the final closure at a distance (n,) behind the face. [-]"""
    share = np.full(sections.count, np.nan)
    for method, positions, part in chosen.parts(sections):
        share[positions] = method.share(part, distance_m[positions])
    return share


@dataclass(frozen=True, slots=True)
class ChosenSteps:
    """What a project computes with, step by step."""

    strength: Chosen[StrengthMethod]
    deformation_modulus: Chosen[ModulusMethod]
    ground_reaction: Chosen[GroundReactionMethod]
    closure_profile: Chosen[ClosureProfileMethod]


def chosen_steps(project: Project, registry: Registry) -> ChosenSteps:
    """The methods that a checked project names."""

    def of(step: str) -> Chosen[Method]:
        names = project.methods[step].names
        return Chosen(step, tuple(registry.method(step, name) for name in names))

    return ChosenSteps(
        strength=of("strength"),  # type: ignore[arg-type]
        deformation_modulus=of("deformation_modulus"),  # type: ignore[arg-type]
        ground_reaction=of("ground_reaction"),  # type: ignore[arg-type]
        closure_profile=of("closure_profile"),  # type: ignore[arg-type]
    )


def method_sources(project: Project, registry: Registry) -> Mapping[str, str]:
    """The methods of every step, each with its source."""
    return {
        step: "; ".join(_described(registry, step, choice, name) for name in choice.names)
        for step, choice in project.methods.items()
    }


def _described(registry: Registry, step: str, choice: MethodChoice, name: str) -> str:
    """A method with its source, and the ground units that it is for where they are named."""
    units = [unit for unit, method in choice.by_unit.items() if method == name]
    others = ["all other ground"] if len(choice.names) > 1 and name == choice.names[0] else []
    where = f" ({', '.join((*units, *others))})" if units or others else ""
    return f"{name}{where}: {registry.method(step, name).source}"
