"""Which method each step takes, for all ground or by ground unit, and what they ask of it."""

from __future__ import annotations

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import cast

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.errors import Where
from tunnelcalc.inputs.files import PROJECT_FILE
from tunnelcalc.inputs.values import Reader
from tunnelcalc.plugin.method_contract import STRENGTH_COLUMNS, Method, StrengthMethod
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import DEFAULT_METHODS, MethodChoice
from tunnelcalc.text import few, quoted, suggestion
from tunnelcalc.vocabulary import Limits

BY_UNIT = "by_unit"
RING = {"ring_mb", "ring_s", "ring_a"}
"""What a law of the ground needs that computes a disturbed ring."""
MEASURED_MODULUS = "rock_mass_modulus_mpa"
READ_BY_CHOICE = (
    "mb",
    "s",
    "a",
    "friction_angle_deg",
    "cohesion_mpa",
    "residual_gsi",
    "residual_mb",
    "residual_s",
    "residual_a",
    "residual_friction_angle_deg",
    "residual_cohesion_mpa",
    "critical_shear_strain",
    "disturbed_thickness_m",
    "rmr89",
    "q",
)
"""Columns that only some methods read: a value that none of them reads deserves a note."""


@dataclass(frozen=True, slots=True)
class Requirement:
    """A ground column that a method cannot do without on some intervals, a mask (i,)."""

    column: str
    limits: Limits
    method: str
    rows: Array


@dataclass(frozen=True, slots=True)
class ChosenMethods:
    """The choice of each step, and the methods themselves by step and name.

    `places` says where the choice of a step stands, by step and ground unit, and by step and ""
    for all other units.
    """

    choices: Mapping[str, MethodChoice]
    methods: Mapping[tuple[str, str], Method]
    reader: Reader
    places: Mapping[tuple[str, str], Where]

    def requirements(self, ground_units: Array, measured_modulus: Array) -> Iterator[Requirement]:
        """What the methods ask of intervals of these ground units (i,).

        `measured_modulus` (i,) marks those with a measured modulus, of which no estimate is made.
        """
        for step in self.choices:
            for name, rows in self._rows(step, ground_units):
                method = self.methods[step, name]
                if step == "deformation_modulus":
                    rows = rows & ~measured_modulus
                for column, limits in method.requires.items():
                    yield Requirement(column, limits, name, rows)
        for name, rows in self._rows("strength", ground_units):
            residual = rows & self.needs_residual(ground_units)
            strength = self._strength(name)
            for column, limits in strength.requires_of_residual.items():
                yield Requirement(column, limits, name, residual)

    def numbers(self, step: str, ground_units: Array) -> Array:
        """(n,) number of each section's method among the names of a step."""
        choice = self.choices[step]
        by_unit = {u: choice.names.index(choice.of_unit(u)) for u in set(ground_units.tolist())}
        return np.array([by_unit[unit] for unit in ground_units.tolist()], dtype=np.int16)

    def check_units(self, ground_units: Sequence[str]) -> None:
        """Tell ground units that nobody has, and laws that a strength does not serve."""
        known = sorted(set(ground_units))
        for step, choice in self.choices.items():
            for unit in choice.by_unit:
                if unit not in known:
                    self._tell_unknown_unit(step, unit, known)
        # What is written once is told once, of the first ground unit that it concerns.
        pairs = {
            (
                self.choices["strength"].of_unit(u),
                self.choices["ground_reaction"].of_unit(u),
                self._place_of_pair(u),
            ): u
            for u in reversed(known)
        }
        for (strength, reaction, _), unit in pairs.items():
            law, given = self.methods["ground_reaction", reaction], self._strength(strength)
            lacking = sorted(set(law.needs) & set(STRENGTH_COLUMNS) - set(given.gives))
            if lacking:
                self._tell_misfit(reaction, strength, unit, f"needs {', '.join(lacking)}")
            elif RING.issubset(law.needs) and "mass_disturbance" not in given.needs:
                # Its ring would be as strong as the mass, whatever thickness is stated.
                self._tell_misfit(
                    reaction, strength, unit, "needs strength weakened by disturbance"
                )

    def idle_values(self, numbers: Mapping[str, Array], ground_units: Array) -> Iterator[str]:
        """Notes on values (i,) that are given where no chosen method reads them."""
        residual = self.needs_residual(ground_units)
        nowhere = []
        for column in READ_BY_CHOICE:
            if column not in numbers:
                continue
            read = self._reads(column, ground_units)
            if column.startswith("residual_"):
                read &= residual
            idle = ~np.isnan(numbers[column]) & ~read
            if np.any(idle) and not np.any(read):
                nowhere.append(column)
            elif np.any(idle):
                units = ", ".join(sorted(set(ground_units[idle].tolist())))
                yield f"{column} is given for {units}, where no chosen method reads it"
        if nowhere:
            yield f"given, but no method that the project chose reads it: {', '.join(nowhere)}"

    def _reads(self, column: str, ground_units: Array) -> Array:
        """Mask (i,) of the intervals of which some chosen method reads a column."""
        read = np.zeros(ground_units.shape, dtype=bool)
        for step in self.choices:
            for name, rows in self._rows(step, ground_units):
                if column in self.methods[step, name].needs:
                    read |= rows
        return read

    def needs_residual(self, ground_units: Array) -> Array:
        """(i,) whether the law of the ground of these units needs residual strength."""
        wants = np.zeros(ground_units.shape, dtype=bool)
        for name, rows in self._rows("ground_reaction", ground_units):
            needs = self.methods["ground_reaction", name].needs
            if any(need.startswith("residual_") for need in needs):
                wants |= rows
        return wants

    def _strength(self, name: str) -> StrengthMethod:
        return cast("StrengthMethod", self.methods["strength", name])

    def _rows(self, step: str, ground_units: Array) -> Iterator[tuple[str, Array]]:
        choice = self.choices[step]
        numbers = self.numbers(step, ground_units)
        for number, name in enumerate(choice.names):
            yield name, numbers == number

    def _place_of_pair(self, unit: str) -> Where:
        """Where law and strength of a unit are chosen: nearest to the unit, the law first."""
        for named in (unit, ""):
            for step in ("ground_reaction", "strength"):
                if (step, named) in self.places:
                    return self.places[step, named]
        return self.reader.place("methods")

    def _tell_misfit(self, reaction: str, strength: str, unit: str, what: str) -> None:
        self.reader.problems.add(
            self._place_of_pair(unit),
            f'is "{reaction}", which {what}; the strength "{strength}" does not give it '
            f"(ground unit {quoted(unit)})",
            name="the ground_reaction method",
            fix="choose a law of the ground that fits the strength, by ground unit if need be",
        )

    def _tell_unknown_unit(self, step: str, unit: str, known: Sequence[str]) -> None:
        hint = suggestion(unit, known)
        self.reader.problems.add(
            self.places[step, unit],
            f"names the ground unit {quoted(unit)}, which no interval has",
            name=f'key "methods.{step}.{BY_UNIT}"',
            allowed=few(known),
            fix=f"did you mean {quoted(hint)}?" if hint else "correct or remove the entry",
        )


def read_methods(reader: Reader, registry: Registry) -> ChosenMethods | None:
    """The key `methods`; None, with problems, where a method is not there."""
    chosen = reader.table_of("methods", required=False)
    choices = {}
    places: dict[tuple[str, str], Where] = {}
    for step, default in DEFAULT_METHODS.items():
        choices[step] = _choice(chosen, step, default, registry, places)
    if chosen is not None:
        chosen.finish()
    methods: dict[tuple[str, str], Method] = {}
    for step, choice in choices.items():
        for name in choice.names:
            method = registry.find(step, name)
            if method is not None:
                methods[step, name] = method
                continue
            reader.problems.add(
                Where(PROJECT_FILE),
                f'"{name}" is offered by no plugin',
                name=f"the {step} method",
                allowed=" or ".join(registry.names(step)) or "none is installed",
                fix="; ".join(str(failure) for failure in registry.failures)
                or "install the plugin that offers it, or name another method",
            )
    complete = len(methods) == sum(len(choice.names) for choice in choices.values())
    return ChosenMethods(choices, methods, reader, places) if complete else None


def _choice(
    chosen: Reader | None,
    step: str,
    default: str,
    registry: Registry,
    places: dict[tuple[str, str], Where],
) -> MethodChoice:
    """A name, or `default` with `by_unit`; adds where each is written to `places`."""
    if chosen is None or not chosen.has(step):
        if chosen is not None:
            chosen.choice(step, registry.names(step), required=False)
        return MethodChoice((default,))
    names = registry.names(step)
    places[step, ""] = chosen.place(step)
    if not chosen.is_table(step):
        return MethodChoice((chosen.choice(step, names) or default,))
    table = chosen.table_of(step)
    assert table is not None
    first = table.choice("default", names, required=False) or default
    if table.has("default"):
        places[step, ""] = table.place("default")
    units = table.table_of(BY_UNIT)
    by_unit: dict[str, str] = {}
    for unit in units.table.entries if units is not None else ():
        assert units is not None
        name = units.choice(unit, names)
        if name is not None:
            by_unit[unit] = name
            places[step, unit] = units.place(unit)
    table.finish()
    return MethodChoice(tuple(dict.fromkeys([first, *by_unit.values()])), by_unit)
