"""Calls into plugins: what goes wrong inside one costs its own rows, never the run.

A plugin that raises, or returns arrays of the wrong shape or values that are not finite, gives
NaN rows with a reason. Our own bugs outside these calls are not caught here.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from typing import NamedTuple

import numpy as np

from tunnelcalc.arrays import Array
from tunnelcalc.plugin.contract import Amount, ClassCheck, Evaluation, SupportCheck, SupportKind
from tunnelcalc.plugin.registry import describe
from tunnelcalc.project import Element
from tunnelcalc.sections import Sections

NO_REASON = ""
FEW_SECTIONS = 8


class Contained(NamedTuple):
    """What a plugin returned: values (k, n), NaN where `reason` (n,) is not empty."""

    values: Array
    reason: Array


def contained(
    call: Callable[[Sections], Sequence[Array]],
    sections: Sections,
    names: Sequence[str],
    any_value: bool = False,
) -> Contained:
    """Arrays of values not below 0 from a plugin, one for each of `names`.

    `any_value`: values below 0 or not finite are as good.

    Where the call raises or returns no such arrays, the sections are halved until the offending
    ones stand alone: the outcome of a section never depends on the others that are computed
    with it. Few sections are called once more with one of them repeated, since an array of a
    fixed length may happen to fit them.
    """
    count = sections.count
    if count == 0:
        return Contained(np.empty((len(names), 0)), np.empty(0, dtype=object))
    values, fault = _called(call, sections, names)
    if not fault and count <= FEW_SECTIONS:
        _, fault = _called(call, sections.take(np.arange(-1, count) % count), names)
    if fault and count > 1:
        half = count // 2
        parts = [
            contained(call, sections.take(piece), names, any_value)
            for piece in (slice(None, half), slice(half, None))
        ]
        return Contained(
            np.concatenate([part.values for part in parts], axis=1),
            np.concatenate([part.reason for part in parts]),
        )
    if any_value and not fault:
        return Contained(values, np.broadcast_to(np.array(NO_REASON, dtype=object), count))
    reason = np.full(count, fault, dtype=object)
    if not fault:
        for name, row in zip(names, values, strict=True):
            reason[~np.isfinite(row)] = f"{name} is not finite"
            reason[row < 0] = f"{name} is below 0"
    values[:, reason != NO_REASON] = np.nan
    return Contained(values, reason)


def _called(
    call: Callable[[Sections], Sequence[Array]], sections: Sections, names: Sequence[str]
) -> tuple[Array, str]:
    """What a call returned, (k, n), and what is wrong with it as a whole."""
    values = np.full((len(names), sections.count), np.nan)
    try:
        returned = call(sections)
    except (Exception, SystemExit) as error:
        return values, describe(error)
    for row, (name, array) in enumerate(zip(names, returned, strict=True)):
        fault = _misshapen(name, array, sections.count)
        if fault:
            return values, fault
        values[row] = array
    return values, NO_REASON


def contained_evaluation(
    check: SupportCheck, sections: Sections, element: Element
) -> tuple[Contained, Array]:
    """Demand and capacity of a check, and the mask of sections that a rule leaves out.

    A row that is left out is NaN and carries the check's own reason, others its note. Only
    rules may leave rows out: in a load check they stay marked as faults.
    """

    return _contained_check(
        lambda part: check.evaluate(part, element), sections, check.carries_load
    )


def contained_class_evaluation(
    check: ClassCheck, sections: Sections, elements: tuple[Element, ...]
) -> tuple[Contained, Array]:
    """The same for a check of a class as a whole."""
    return _contained_check(
        lambda part: check.evaluate(part, elements), sections, check.carries_load
    )


def _contained_check(
    evaluate: Callable[[Sections], Evaluation], sections: Sections, carries_load: bool
) -> tuple[Contained, Array]:
    def call(part: Sections) -> Sequence[Array]:
        evaluation = evaluate(part)
        notes.append(str(evaluation.note))
        if evaluation.left_out is None:
            return (evaluation.demand, evaluation.capacity, np.zeros(part.count))
        left_out = np.asarray(evaluation.left_out, dtype=float)
        if np.any(left_out):
            reasons.append(str(evaluation.left_out_reason or "left out by the check"))
        return (
            _zero_where(left_out, evaluation.demand),
            _zero_where(left_out, evaluation.capacity),
            left_out,
        )

    reasons: list[str] = []
    notes: list[str] = []
    found = contained(call, sections, ("demand", "capacity", "left_out"))
    left_out = found.values[2] > 0
    values, reason = found.values[:2], found.reason
    if np.any(left_out):
        values[:, left_out] = np.nan
        reason[left_out] = reasons[0]
    if any(notes):
        reason = np.where(reason == NO_REASON, notes[-1], reason).astype(object)
    return Contained(values, reason), left_out & (not carries_load)


def contained_amounts(
    kind: SupportKind, sections: Sections, element: Element
) -> tuple[tuple[Amount, ...], str]:
    """Amounts of an element a metre, and what went wrong: on any fault, no amounts."""
    try:
        amounts = tuple(kind.amounts(sections, element))
        for amount in amounts:
            fault = _misshapen(amount.item, amount.per_metre, sections.count)
            if not fault and not np.all(np.isfinite(amount.per_metre)):
                fault = f"{amount.item} is not finite"
            if not fault and np.any(amount.per_metre < 0):
                fault = f"{amount.item} is below 0"
            if fault:
                return (), fault
    except (Exception, SystemExit) as error:
        return (), describe(error)
    return amounts, NO_REASON


def _zero_where(left_out: Array, values: Array) -> Array:
    """What a check returned for sections that it leaves out need not be finite."""
    if np.shape(values) != np.shape(left_out):
        return values  # told as a wrong shape
    return np.where(left_out > 0, 0.0, values)


def _misshapen(name: str, array: Array, count: int) -> str:
    # A masked array would lose its mask: what is hidden under it would count as a number.
    if not isinstance(array, np.ndarray) or isinstance(array, np.ma.MaskedArray):
        return f"{name} is a {type(array).__name__}, not an array"
    if array.shape != (count,):
        return f"{name} has a wrong shape, not one value a section"
    if array.dtype.kind not in "fiub":
        return f"{name} holds {array.dtype}, not numbers"
    return ""
