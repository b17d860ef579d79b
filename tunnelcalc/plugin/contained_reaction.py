"""How an element reacts, taken from its plugin so that a fault costs its own sections alone."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.plugin.isolation import NO_REASON, contained
from tunnelcalc.plugin.registry import describe
from tunnelcalc.project import Element
from tunnelcalc.sections import Sections
from tunnelcalc.support.reaction import (
    AdvanceIncrements,
    GroundRing,
    LinearSpring,
    PressureOfClosure,
    Reaction,
)

PairOfArrays = Callable[[Array], tuple[Array, Array]]
TRIAL_AGE_DAYS = 28.0


@dataclass(frozen=True, slots=True)
class ElementResponse:
    """The reaction of an element on n sections.

    `reaction` holds arrays (n,), NaN where `reason` (n,) is not empty. `stiffness_mpa_per_m` (n,)
    is NaN where the element is no linear spring.
    """

    reaction: Reaction
    capacity_mpa: Array
    stiffness_mpa_per_m: Array
    reason: Array


def contained_reaction(kind: SupportKind, sections: Sections, element: Element) -> ElementResponse:
    """The reaction that a kind gives to an element."""
    form = kind.reaction_form(element)

    def call(part: Sections) -> Sequence[Array]:
        reaction = kind.reaction(part, element)
        if reaction.form != form:
            raise TypeError(f"the reaction is a {reaction.form}, not the {form} that was announced")
        return [values(reaction, part.count) for _, values in PARTS[form]]

    names = [name for name, _ in PARTS[form]]
    found = contained(call, sections, names)
    by_name = dict(zip(names, found.values, strict=True))
    nothing = np.full(sections.count, np.nan)
    try:
        whole = _whole(kind, sections, element, by_name)
    except (Exception, SystemExit) as error:
        reason = np.where(found.reason == NO_REASON, describe(error), found.reason).astype(object)
        return ElementResponse(LinearSpring(nothing, nothing), nothing, nothing, reason)
    return ElementResponse(
        whole, by_name["capacity"], by_name.get("stiffness", nothing), found.reason
    )


def _trial(function: PairOfArrays, at: float, which: int) -> Callable[[int], Array]:
    return lambda count: function(np.full(count, at))[which]


PARTS: dict[str, list[tuple[str, Callable[[Reaction, int], Array]]]] = {
    LinearSpring.form: [
        ("stiffness", lambda r, n: r.stiffness_mpa_per_m),  # type: ignore[union-attr]
        ("capacity", lambda r, n: r.capacity_mpa),  # type: ignore[union-attr]
    ],
    PressureOfClosure.form: [
        ("capacity", lambda r, n: r.capacity_mpa),  # type: ignore[union-attr]
        ("pressure", lambda r, n: _trial(r.pressure_and_slope, 0.0, 0)(n)),  # type: ignore[union-attr]
        ("slope", lambda r, n: _trial(r.pressure_and_slope, 0.0, 1)(n)),  # type: ignore[union-attr]
    ],
    AdvanceIncrements.form: [
        ("capacity", lambda r, n: r.final_capacity_mpa),  # type: ignore[union-attr]
        ("stiffness at 28 days", lambda r, n: _trial(r.at_age, TRIAL_AGE_DAYS, 0)(n)),  # type: ignore[union-attr]
        ("capacity at 28 days", lambda r, n: _trial(r.at_age, TRIAL_AGE_DAYS, 1)(n)),  # type: ignore[union-attr]
    ],
    GroundRing.form: [
        ("capacity", lambda r, n: r.capacity_mpa),  # type: ignore[union-attr]
        ("thickness", lambda r, n: r.thickness_m),  # type: ignore[union-attr]
    ],
}
"""What is looked at of each form, section by section."""


def _whole(
    kind: SupportKind, sections: Sections, element: Element, by_name: dict[str, Array]
) -> Reaction:
    """The reaction on all sections; where single ones failed, with NaN in their place."""
    sound = ~np.isnan(by_name["capacity"])
    if not np.any(sound):
        unknown = np.full(sections.count, np.nan)
        return LinearSpring(unknown, unknown)
    try:
        reaction = kind.reaction(sections, element)
    except (Exception, SystemExit):
        # Some sections fail: only those that do not are asked, and put back in their places.
        reaction = kind.reaction(sections.take(np.flatnonzero(sound)), element)
        return _spread(reaction, np.flatnonzero(sound), sections.count)
    if isinstance(reaction, LinearSpring):
        return replace(
            reaction,
            stiffness_mpa_per_m=by_name["stiffness"],
            capacity_mpa=by_name["capacity"],
        )
    if isinstance(reaction, PressureOfClosure):
        function = _guarded(reaction.pressure_and_slope, sections.count)
        return replace(reaction, pressure_and_slope=function, capacity_mpa=by_name["capacity"])
    if isinstance(reaction, AdvanceIncrements):
        function = _guarded(reaction.at_age, sections.count)
        return replace(reaction, at_age=function, final_capacity_mpa=by_name["capacity"])
    return replace(reaction, thickness_m=by_name["thickness"], capacity_mpa=by_name["capacity"])


def _guarded(function: PairOfArrays, count: int) -> PairOfArrays:
    """The function; whatever goes wrong inside it gives NaN."""

    def guarded(values: Array) -> tuple[Array, Array]:
        nothing = np.full(count, np.nan)
        try:
            first, second = (np.asarray(values, dtype=float) for values in function(values))
        except (Exception, SystemExit):
            return nothing, nothing
        sound = first.shape == second.shape == (count,)
        return (first, second) if sound else (nothing, nothing)

    return guarded


def _spread(reaction: Reaction, rows: Array, count: int) -> Reaction:
    """The reaction of some sections among all `count`, NaN for the others."""

    def spread(values: Array) -> Array:
        whole = np.full(count, np.nan)
        whole[rows] = values
        return whole

    def spread_function(function: PairOfArrays) -> PairOfArrays:
        def on_all(values: Array) -> tuple[Array, Array]:
            first, second = function(values[rows])
            return spread(first), spread(second)

        return _guarded(on_all, count)

    if isinstance(reaction, LinearSpring):
        return replace(
            reaction,
            stiffness_mpa_per_m=spread(reaction.stiffness_mpa_per_m),
            capacity_mpa=spread(reaction.capacity_mpa),
        )
    if isinstance(reaction, PressureOfClosure):
        return replace(
            reaction,
            pressure_and_slope=spread_function(reaction.pressure_and_slope),
            capacity_mpa=spread(reaction.capacity_mpa),
            turns={name: spread(values) for name, values in reaction.turns.items()},
        )
    if isinstance(reaction, AdvanceIncrements):
        return replace(
            reaction,
            at_age=spread_function(reaction.at_age),
            final_capacity_mpa=spread(reaction.final_capacity_mpa),
        )
    return replace(
        reaction,
        thickness_m=spread(reaction.thickness_m),
        changed={name: spread(values) for name, values in reaction.changed.items()},
        capacity_mpa=spread(reaction.capacity_mpa),
    )
