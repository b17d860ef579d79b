"""Where ground and a support class come to rest, whatever forms its elements react in."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.ground_reaction.curve import GroundCurve
from tunnelcalc.pipeline.dispatch import Chosen, closure_share
from tunnelcalc.plugin.contained_reaction import ElementResponse
from tunnelcalc.plugin.method_contract import ClosureProfileMethod
from tunnelcalc.sections import Sections
from tunnelcalc.support.advance import Advance, Begins, advance
from tunnelcalc.support.advance_step import Ageing, Constant
from tunnelcalc.support.element_reactions import (
    Brittle,
    ElementReaction,
    FunctionReaction,
    Plateau,
    Spring,
)
from tunnelcalc.support.equilibrium import equilibrium
from tunnelcalc.support.followed import Followed
from tunnelcalc.support.general_equilibrium import GeneralEquilibrium, general_equilibrium
from tunnelcalc.support.pressure_table import PressureTable, pressure_table
from tunnelcalc.support.reaction import (
    AdvanceIncrements,
    GroundRing,
    LinearSpring,
    PressureOfClosure,
    Reaction,
)

ADVANCE_STEPS = 64
"""After each element begins to act: leaves about 1e-4 of the load."""
HARD_AGE_DAYS = 28.0
"""Of strength and stiffness that a project declares: what the wall meets when it moves on later."""
SAME_AGE = 1e-9
"""Of an age: what differs by less is rounding of distance over speed."""


class PressureTables:
    """Tables of the ground's pressure by its closure, made once for all classes of a chunk."""

    def __init__(self) -> None:
        self._made: dict[int, tuple[GroundCurve, PressureTable]] = {}

    def of(
        self,
        curve: GroundCurve,
        sections: Sections,
        share: Callable[[Array], Array],
    ) -> PressureTable:
        """The table of a curve, from the closure at the face on."""
        made = self._made.get(id(curve))
        if made is None:
            count = sections.count
            radius = sections["radius_m"]
            free = curve.at(np.zeros(count)).closure_ratio * radius
            made = curve, pressure_table(curve, radius, free * share(np.zeros(count)))
            self._made[id(curve)] = made
        return made[1]


@dataclass(frozen=True, slots=True)
class AgeingPath:
    """An ageing element along the advance, at k distances of each section, (k, n) each; and how it
    goes on at the end, when it is hard: stiffness (n,) [MPa/m], capacity (n,) [MPa], age (n,)."""

    distance_m: Array
    closure_m: Array
    age_days: Array
    pressure_mpa: Array
    capacity_mpa: Array
    hard_stiffness_mpa_per_m: Array
    hard_capacity_mpa: Array
    hard_age_days: Array
    trusted_from_days: float = 0.0

    def followed(self, capacity_mpa: Array, begins_m: Array) -> Followed:
        """Its reaction, counted from a closure (n,), with a capacity (n,) in the end: while young
        it has the same share of its own."""
        share = np.divide(
            capacity_mpa,
            self.hard_capacity_mpa,
            out=np.ones_like(capacity_mpa),
            where=self.hard_capacity_mpa > 0,
        )
        return Followed.of_history(
            self.closure_m - begins_m,
            self.pressure_mpa,
            self.capacity_mpa * np.minimum(share, 1),
            self.hard_stiffness_mpa_per_m,
            capacity_mpa,
        )

    def hard_at(self, pressure_mpa: Array) -> dict[str, Array]:
        """The columns of `worst` for an element that is hard and carries a pressure (n,). [MPa]"""
        return {
            "worst_pressure_mpa": pressure_mpa,
            "worst_capacity_mpa": self.hard_capacity_mpa,
            "worst_age_days": self.hard_age_days,
            "worst_distance_m": self.distance_m[-1],
            "early_pressure_mpa": np.zeros_like(pressure_mpa),
        }

    def worst(self, water_mpa: Array) -> dict[str, Array]:
        """The state (n,) where it is used most for its capacity of the same age. Water (n,) adds
        to the pressure once the element carries any. [MPa]"""
        pressure = self._with_water_mpa(water_mpa)
        at = self.worst_state(water_mpa), np.arange(pressure.shape[1])
        return {
            "worst_pressure_mpa": pressure[at],
            "worst_capacity_mpa": self.capacity_mpa[at],
            "worst_age_days": self.age_days[at],
            "worst_distance_m": self.distance_m[at],
            "early_pressure_mpa": self.early_pressure_mpa(water_mpa),
        }

    def early_pressure_mpa(self, water_mpa: Array) -> Array:
        """(n,) with water (n,), at the age from which its capacity is trusted. [MPa]

        The load never falls while the face moves away: nothing is 0 here that was carried before.
        """
        early = self.age_days <= self.trusted_from_days * (1 + SAME_AGE)
        pressure = self._with_water_mpa(water_mpa)
        unknown = np.any(np.isnan(pressure), axis=0)
        return np.where(unknown, np.nan, np.max(np.where(early, pressure, 0), axis=0))

    def worst_state(self, water_mpa: Array) -> Array:
        """(n,) its number along the advance."""
        loaded, pressure = self.pressure_mpa > 0, self._with_water_mpa(water_mpa)
        use = np.full(loaded.shape, -1.0)
        with np.errstate(divide="ignore"):
            np.divide(pressure, self.capacity_mpa, out=use, where=loaded)
        unknown = np.isnan(pressure) | np.isnan(self.capacity_mpa)
        return np.argmax(np.where(unknown, np.inf, use), axis=0)

    def _with_water_mpa(self, water_mpa: Array) -> Array:
        return self.pressure_mpa + np.where(self.pressure_mpa > 0, water_mpa, 0)


@dataclass(frozen=True, slots=True)
class Advanced:
    """A class along the advance, and the table of the ground's pressure that it was followed by."""

    states: Advance
    table: PressureTable


@dataclass(frozen=True, slots=True)
class RestingState:
    """Ground and class at rest on n sections.

    (n,): `support_pressure_mpa`, `closure_m`, `plastic_ratio`, `converged`; (e, n):
    `element_pressure_mpa`, `element_moved_m`, and `acting_m`, the closure from which each
    element counts its movement.
    """

    support_pressure_mpa: Array
    closure_m: Array
    plastic_ratio: Array
    element_pressure_mpa: Array
    element_moved_m: Array
    acting_m: Array
    converged: Array
    state: GeneralEquilibrium
    paths: dict[int, AgeingPath]
    """By the position of each element that ages."""
    advanced: Advanced | None = None
    """How elements that age came to rest; None without them."""


def acting_from_m(installed_at_m: float, reaction: Reaction) -> float:
    """Distance behind the face from which an element acts. [m]"""
    if isinstance(reaction, GroundRing):
        return installed_at_m
    return max(installed_at_m, reaction.acts_from_m)


def at_rest(
    curve: GroundCurve,
    sections: Sections,
    profile: Chosen[ClosureProfileMethod],
    responses: Sequence[ElementResponse],
    installed_at_m: Sequence[float],
    acting_m: Array,
    advance_m_per_day: float,
    tables: PressureTables,
) -> RestingState:
    """The state at rest of a class.

    `acting_m` (e, n) is the unsupported closure where each element begins to act [m],
    `installed_at_m` the distance at which each is installed [m].
    """
    reactions = [response.reaction for response in responses]
    if any(isinstance(reaction, AdvanceIncrements) for reaction in reactions):
        return _of_advance(
            curve, sections, profile, reactions, installed_at_m, advance_m_per_day, tables
        )
    return _of_constant(curve, sections["radius_m"], reactions, acting_m)


def _of_constant(
    curve: GroundCurve, radius_m: Array, reactions: Sequence[Reaction], acting_m: Array
) -> RestingState:
    """Elements that do not age: in the usual case all are springs, which has its own fast way."""
    elements = [element_of(reaction, radius_m) for reaction in reactions]
    if all(_is_plain_spring(reaction) for reaction in reactions):
        stiffness = [r.stiffness_mpa_per_m for r in reactions if isinstance(r, LinearSpring)]
        plain = equilibrium(curve, radius_m, np.array(stiffness).reshape(acting_m.shape), acting_m)
        moved = plain.closure_m - acting_m
        rest = GeneralEquilibrium(
            plain.support_pressure_mpa,
            plain.closure_m,
            plain.plastic_ratio,
            plain.element_pressure_mpa,
            np.zeros(moved.shape, dtype=np.int8),
            moved,
            plain.converged,
        )
    else:
        rest = general_equilibrium(curve, radius_m, elements, acting_m)
    return _resting(rest, acting_m, {})


def _resting(
    state: GeneralEquilibrium,
    acting_m: Array,
    paths: dict[int, AgeingPath],
    advanced: Advanced | None = None,
) -> RestingState:
    return RestingState(
        state.support_pressure_mpa,
        state.closure_m,
        state.plastic_ratio,
        state.element_pressure_mpa,
        state.element_moved_m,
        acting_m,
        state.converged,
        state,
        paths,
        advanced,
    )


def _is_plain_spring(reaction: Reaction) -> bool:
    return isinstance(reaction, LinearSpring) and reaction.beyond == "not_declared"


def element_of(reaction: Reaction, radius_m: Array) -> ElementReaction:
    """A reaction that does not age, as the equilibrium needs to know it."""
    if isinstance(reaction, LinearSpring):
        stiffness, capacity = reaction.stiffness_mpa_per_m, reaction.capacity_mpa
        if reaction.beyond == "yields":
            return Plateau(stiffness, capacity)
        if reaction.beyond == "breaks":
            return Brittle(stiffness, capacity)
        return Spring(stiffness, capacity)
    if isinstance(reaction, PressureOfClosure):
        return FunctionReaction.of_function(
            reaction.pressure_and_slope, reaction.capacity_mpa, radius_m
        )
    # A change of the ground carries nothing at the wall.
    nothing = np.zeros_like(radius_m)
    return Spring(nothing, np.full_like(radius_m, np.inf))


def _of_advance(
    curve: GroundCurve,
    sections: Sections,
    profile: Chosen[ClosureProfileMethod],
    reactions: Sequence[Reaction],
    installed_at_m: Sequence[float],
    advance_m_per_day: float,
    tables: PressureTables,
) -> RestingState:
    """Elements of which some age while the face moves on.

    Each counts from the supported wall where it begins to act: a ring that is closed late behind
    stiff elements would otherwise be taken to begin at a closure that the wall never reaches.
    """
    radius = sections["radius_m"]
    count = radius.size

    def share(distance_m: Array) -> Array:
        return closure_share(profile, sections, distance_m)

    elements: list[Ageing | Constant] = []
    for reaction, installed in zip(reactions, installed_at_m, strict=True):
        acts = np.full(count, acting_from_m(installed, reaction))
        if isinstance(reaction, AdvanceIncrements):
            trusted = reaction.trusted_from_days
            elements.append(
                Ageing(_stiffness_of(reaction), np.full(count, float(installed)), acts, trusted)
            )
        else:
            elements.append(Constant(element_of(reaction, radius), acts))
    table = tables.of(curve, sections, share)
    rate = np.full(count, advance_m_per_day)
    found = advance(curve, radius, table, share, elements, rate, Begins.WALL, ADVANCE_STEPS)
    closure = np.where(found.converged, found.closure_m[-1], np.nan)
    moved = closure - found.begins_at_m
    state = GeneralEquilibrium(
        found.support_pressure_mpa,
        closure,
        found.plastic_ratio,
        found.element_pressure_mpa[:, -1],
        np.zeros(moved.shape, dtype=np.int8),
        moved,
        found.converged,
    )
    paths = {
        position: _path(found, position, reaction)
        for position, reaction in enumerate(reactions)
        if isinstance(reaction, AdvanceIncrements)
    }
    return _resting(state, found.begins_at_m, paths, Advanced(found, table))


def _stiffness_of(reaction: AdvanceIncrements) -> Callable[[Array], Array]:
    return lambda age_days: reaction.at_age(age_days)[0]


def _path(found: Advance, position: int, reaction: AdvanceIncrements) -> AgeingPath:
    capacity = np.stack([reaction.at_age(age)[1] for age in found.age_days[position]])
    hard_age = np.maximum(found.age_days[position, -1], HARD_AGE_DAYS)
    return AgeingPath(
        found.distance_m,
        found.closure_m,
        found.age_days[position],
        found.element_pressure_mpa[position],
        capacity,
        reaction.at_age(hard_age)[0],
        reaction.final_capacity_mpa,
        hard_age,
        reaction.trusted_from_days,
    )
